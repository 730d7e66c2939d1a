"""Powers of ten by name, so that a formula's last line reads like its source."""

MEGA = 1e6
KILO = 1e3
MILLI = 1e-3
MICRO = 1e-6
PICO = 1e-12
FEMTO = 1e-15
PPM = 1e-6
