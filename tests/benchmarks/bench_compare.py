"""How fast a long list is: a CSV of 20 000 parts to the ranked list in a fresh process, and draws of all its parts.

Run as `python tests/benchmarks/bench_compare.py`. Prints seconds on the clock and of the processor, peak memory, and
what `csv.reader` alone takes. Other work on the machine lengthens the clock, the processor's seconds hardly.
"""

from __future__ import annotations

import csv
import os
import random
import subprocess
import sys
import tempfile
import time
from dataclasses import dataclass
from pathlib import Path

ROWS = 20_000
BOARDS = 1_000
BENCH = """
[requirement]
frequency_mhz = 26.0
total_ppm = 60.0
temperature_c = [-40.0, 85.0]
startup_ms = 5.0

[circuit]
transconductance_ms = [8.0, 14.0]
input_capacitor_pf = 12.0
output_capacitor_pf = 12.0
input_stray_pf = 3.0
output_stray_pf = 3.0
across_stray_pf = 0.5
feedback_resistor_kohm = 1000.0
swing_v = 0.6
"""
HEADINGS = (
    "Part number",
    "Frequency (MHz)",
    "Load capacitance (pF)",
    "ESR max (ohm)",
    "C0 max (pF)",
    "C1 typ (fF)",
    "Frequency tolerance (±ppm)",
    "Frequency stability (±ppm)",
    "Operating temperature (°C)",
    "Drive level max (µW)",
    "Ageing first year (±ppm)",
    "Mode",
    "Package",
)
RANK = [sys.executable, "-c", "from compare.command import main; raise SystemExit(main())", "rank"]
DRAW = """
import sys, time, resource
from pathlib import Path
from compare.bench import read_bench
from compare.draws import draw
from compare.reckoning import choose_loads
from compare.columns import make_columns
from compare.find import find_offers
from extract import read_sheet
sheet = Path(sys.argv[1])
bench = read_bench(Path(sys.argv[2]).read_text(encoding="utf-8"), "bench.toml")
offers = find_offers([read_sheet(sheet.read_bytes(), sheet.name)], bench).offers
columns = make_columns(choose_loads(offers, bench), bench)
clock, processor = time.perf_counter(), time.process_time()
found = draw(columns, bench, boards=int(sys.argv[3]))
print(len(columns), found.boards, time.perf_counter() - clock, time.process_time() - processor)
"""


@dataclass(frozen=True)
class Cost:
    """Of one process: seconds on the clock and of the processor, peak memory in MB."""

    clock_s: float
    processor_s: float
    memory_mb: float


def write_list(path: Path, rows: int = ROWS, seed: int = 1) -> None:
    """A list of invented parts, all at 26 MHz, their values spread as real lists spread them."""
    rng = random.Random(seed)  # noqa: S311 - made-up data
    with path.open("w", newline="", encoding="utf-8") as file:
        writer = csv.writer(file)
        writer.writerow(HEADINGS)
        for number in range(rows):
            low, high = rng.choice([(-40, 85), (-20, 70), (-40, 105)])
            writer.writerow(
                [
                    f"OR{number:05d}",
                    "26",
                    rng.choice(["6", "8", "9", "10", "12"]),
                    rng.choice(["30", "40", "50", "60", "80"]),
                    f"{rng.uniform(0.8, 3.0):.2f}",
                    f"{rng.uniform(2.0, 6.0):.2f}",
                    rng.choice(["7", "10", "15", "20"]),
                    rng.choice(["10", "15", "20", "30"]),
                    f"{low} to {high}",
                    rng.choice(["100", "200", "300"]),
                    rng.choice(["1", "2", "3"]),
                    "Fundamental",
                    rng.choice(["3225", "2520", "2016"]),
                ]
            )


def cost_of(command: list[str], allowed: tuple[int, ...] = (0,)) -> tuple[Cost, str]:
    """Run a command in a process of its own; what it took and what it printed."""
    with tempfile.TemporaryFile() as out:
        start = time.perf_counter()
        process = subprocess.Popen(command, stdout=out)
        _, status, used = os.wait4(process.pid, 0)
        clock = time.perf_counter() - start
        code = os.waitstatus_to_exitcode(status)
        process.returncode = code
        if code not in allowed:
            raise SystemExit(f"{command[:4]} ended with {code}")
        out.seek(0)
        text = out.read().decode("utf-8")
    # Linux counts ru_maxrss in KiB, macOS in bytes.
    unit = 1024 * 1024 if sys.platform == "darwin" else 1024
    return Cost(clock, used.ru_utime + used.ru_stime, used.ru_maxrss / unit), text


def rank_cost(sheet: Path, bench: Path) -> tuple[Cost, int]:
    """Of ranking the list, and how many rows came out."""
    cost, text = cost_of([*RANK, str(sheet), "--bench", str(bench), "--json"], allowed=(0, 1))
    return cost, text.count('"place"')


def csv_seconds(sheet: Path, runs: int = 7) -> float:
    """Processor seconds in which `csv.reader` reads the file, the best of some runs."""
    best = float("inf")
    for _ in range(runs):
        start = time.process_time()
        with sheet.open(newline="", encoding="utf-8") as file:
            rows = sum(1 for _ in csv.reader(file))
        best = min(best, time.process_time() - start)
    if rows < 2:
        raise SystemExit(f"{sheet} holds no rows")
    return best


def draw_cost(sheet: Path, bench: Path, boards: int = BOARDS) -> tuple[int, float, float]:
    """(parts, seconds on the clock, of the processor) of drawing boards for the whole list, reading it not counted."""
    _, text = cost_of([sys.executable, "-c", DRAW, str(sheet), str(bench), str(boards)])
    parts, drawn, clock, processor = text.split()
    if int(drawn) != boards:
        raise SystemExit(f"{drawn} boards drawn of {boards}")
    return int(parts), float(clock), float(processor)


def made(folder: Path, rows: int = ROWS) -> tuple[Path, Path]:
    """A list and a bench in a folder."""
    sheet, bench = folder / "list.csv", folder / "bench.toml"
    write_list(sheet, rows)
    bench.write_text(BENCH, encoding="utf-8")
    return sheet, bench


def report() -> None:
    with tempfile.TemporaryDirectory() as name:
        sheet, bench = made(Path(name))
        plain = csv_seconds(sheet)
        cost, rows = rank_cost(sheet, bench)
        parts, clock, processor = draw_cost(sheet, bench)
    lines = [
        f"csv.reader alone        {plain:6.3f} s of the processor",
        f"ranked list, {rows} rows {cost.clock_s:6.2f} s on the clock, {cost.processor_s:.2f} s of the processor "
        f"({cost.processor_s / plain:.0f} times csv.reader), {cost.memory_mb:.0f} MB",
        f"{BOARDS} boards x {parts} parts {clock:6.2f} s on the clock, {processor:.2f} s of the processor",
    ]
    sys.stdout.write("\n".join(lines) + "\n")


if __name__ == "__main__":
    report()
