"""What holds for all tests."""

from hypothesis import settings

# How long an example takes says more about what else the machine does than about the code; tests/benchmarks measure.
settings.register_profile("shared machine", deadline=None)
settings.load_profile("shared machine")
