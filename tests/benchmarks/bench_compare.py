"""How fast a long list is: a CSV of 20 000 parts to the ranked list in a fresh process, and draws of all its parts.

Run as `python tests/benchmarks/bench_compare.py`. Prints seconds on the clock and of the processor, peak memory, what a
fresh process takes that runs `csv.reader` alone, and the goals; ends with 1 where one of them is missed. Other work on
the machine lengthens the clock by as much, the processor's seconds by half at the worst.
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
MOST_PROCESSOR_S, MOST_MEMORY_MB, MOST_TIMES_CSV = 2.0, 250, 20
MOST_DRAWING_S = 5.0
"""1 000 boards of each of 20 000 parts, on the clock of two cores."""
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
CSV_ALONE = """
import csv, sys
with open(sys.argv[1], newline="", encoding="utf-8") as file:
    print(sum(1 for _ in csv.reader(file)))
"""
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
        peak_mb = None
        while not (ended := os.wait4(process.pid, os.WNOHANG))[0]:
            peak_mb = peak_of(process.pid)
            time.sleep(0.005)
        _, status, used = ended
        clock = time.perf_counter() - start
        code = os.waitstatus_to_exitcode(status)
        process.returncode = code
        if code not in allowed:
            raise SystemExit(f"{command[:4]} ended with {code}")
        out.seek(0)
        text = out.read().decode("utf-8")
    # macOS counts ru_maxrss in bytes.
    memory_mb = used.ru_maxrss / (1024 * 1024) if peak_mb is None else peak_mb
    return Cost(clock, used.ru_utime + used.ru_stime, memory_mb), text


def peak_of(pid: int) -> float | None:
    """The most memory in MB that a running program held so far; None where the system does not tell.

    Linux's ru_maxrss would count what the process that started it held as well.
    """
    try:
        lines = Path(f"/proc/{pid}/status").read_text(encoding="ascii").splitlines()
    except OSError:
        return None
    return next((int(line.split()[1]) / 1024 for line in lines if line.startswith("VmHWM")), None)


def rank_cost(sheet: Path, bench: Path) -> tuple[Cost, str]:
    """Of ranking the list, and the text that came out."""
    return cost_of([*RANK, str(sheet), "--bench", str(bench)])


def json_cost(sheet: Path, bench: Path) -> tuple[Cost, int]:
    """The same with every row as JSON, and how many there are."""
    cost, text = cost_of([*RANK, str(sheet), "--bench", str(bench), "--json"])
    return cost, text.count('"place"')


def csv_cost(sheet: Path, runs: int = 5) -> Cost:
    """Of a fresh process in which `csv.reader` reads the file; the best of some."""
    costs = [cost_of([sys.executable, "-c", CSV_ALONE, str(sheet)])[0] for _ in range(runs)]
    return min(costs, key=lambda cost: cost.processor_s)


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


def report() -> int:
    """Print the figures beside the goals; 1 where a goal is missed."""
    with tempfile.TemporaryDirectory() as name:
        sheet, bench = made(Path(name))
        plain = csv_cost(sheet).processor_s
        cost, _ = min((rank_cost(sheet, bench) for _ in range(3)), key=lambda found: found[0].processor_s)
        whole, rows = json_cost(sheet, bench)
        parts, clock, processor = draw_cost(sheet, bench)
    ratio = cost.processor_s / plain
    lines = [
        f"csv.reader alone, fresh process {plain:6.3f} s of the processor",
        f"{ROWS} rows to the ranked list {cost.clock_s:7.2f} s on the clock, {cost.processor_s:.2f} s of the processor "
        f"(goal {MOST_PROCESSOR_S:g}), {ratio:.0f} times csv.reader (goal {MOST_TIMES_CSV}), "
        f"{cost.memory_mb:.0f} MB (goal {MOST_MEMORY_MB})",
        f"{rows} rows as JSON {whole.clock_s:18.2f} s on the clock, {whole.processor_s:.2f} s of the processor, "
        f"{whole.memory_mb:.0f} MB",
        f"{BOARDS} boards x {parts} parts {clock:11.2f} s on the clock (goal {MOST_DRAWING_S:g}), {processor:.2f} s of "
        "the processor",
    ]
    sys.stdout.write("\n".join(lines) + "\n")
    met = cost.processor_s <= MOST_PROCESSOR_S and ratio <= MOST_TIMES_CSV and clock <= MOST_DRAWING_S
    return 0 if met and max(cost.memory_mb, whole.memory_mb) <= MOST_MEMORY_MB else 1


if __name__ == "__main__":
    sys.exit(report())
