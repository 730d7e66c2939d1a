"""How long a buyer waits for the substitutes in a list of 20 000 rows: `python tests/benchmarks/bench_substitute.py`.

A fresh process each time; the best of three, its processor time, and the most memory it held.
"""

from __future__ import annotations

import random
import resource
import subprocess
import sys
import tempfile
import time
from pathlib import Path

ROOT = Path(__file__).parents[2]
RADIO = ROOT / "sample_specs" / "radio_26mhz.toml"
COMMAND = [sys.executable, "-c", "from compare.command import main; raise SystemExit(main())"]
ROWS, MOST_SECONDS, MOST_MEGABYTES = 20_000, 3.0, 300
HEAD = (
    "Part number,Manufacturer,Frequency (MHz),Mode,Package,Load capacitance (pF),ESR max (Ohm),C0 (pF),C1 (fF),"
    "Tolerance (ppm),Stability (ppm),Ageing (ppm/year),Operating temperature (C),Drive level max (uW)"
)
INCUMBENT = "QX-BOARD,Orchardline,26.000,fundamental,2.5 x 2.0,8,52,1.0,4.0,+/-10,+/-15,+/-2,-40 to +85,100"


def make_list(rows: int, seed: int = 4, *, alike: bool = False) -> str:
    """An invented seller's list: eight frequencies, four packages, the usual choices of everything else.

    `alike`: all of the incumbent's frequency and package, so that none can be told by those alone.
    """
    draw = random.Random(seed)  # noqa: S311
    lines = [HEAD]
    for number in range(rows):
        cells = (
            f"QX{number:05d}",
            "Orchardline",
            f"{26.0 if alike else draw.choice([12.0, 16.0, 24.0, 25.0, 26.0, 32.0, 38.4, 40.0]):.3f}",
            "fundamental",
            "2.5 x 2.0" if alike else draw.choice(["2.5 x 2.0", "2.0 x 1.6", "3.2 x 2.5", "1.6 x 1.2"]),
            draw.choice(["6", "7", "8", "9", "10", "12", "18"]),
            str(draw.randint(20, 90)),
            draw.choice(["0.8", "1.0", "1.2", "1.5"]),
            draw.choice(["2.2", "3.1", "4.0"]),
            f"+/-{draw.choice([7, 10, 15, 20, 30])}",
            f"+/-{draw.choice([10, 15, 20, 30])}",
            f"+/-{draw.choice([1, 2, 3])}",
            f"-40 to +{draw.choice([85, 105])}",
            draw.choice(["50", "100", "200"]),
        )
        lines.append(",".join(cells))
    return "\n".join(lines)


def write_book(text: str, path: Path) -> None:
    """The list as a workbook, its numbers as numbers."""
    import openpyxl

    book = openpyxl.Workbook(write_only=True)
    sheet = book.create_sheet("parts")
    for line in text.splitlines():
        sheet.append([float(cell) if cell.replace(".", "", 1).isdigit() else cell for cell in line.split(",")])
    book.save(path)


def run(folder: Path, *more: str, listed: str = "list.csv") -> tuple[float, float]:
    """Seconds on the clock and seconds of the processor, of one fresh process."""
    before = resource.getrusage(resource.RUSAGE_CHILDREN)
    start = time.perf_counter()
    names = [str(folder / "incumbent.csv"), str(folder / listed)]
    done = subprocess.run([*COMMAND, "substitute", *names, *more], cwd=ROOT, capture_output=True, check=False)
    clock, after = time.perf_counter() - start, resource.getrusage(resource.RUSAGE_CHILDREN)
    if done.returncode not in (0, 1):
        raise RuntimeError(done.stderr.decode())
    return clock, after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime


def write_all(folder: Path, rows: int) -> None:
    """The incumbent, a list of all kinds and one of parts alike in frequency and package, both as CSV and as XLSX."""
    (folder / "incumbent.csv").write_text(f"{HEAD}\n{INCUMBENT}\n", encoding="utf-8")
    for name, alike in (("list", False), ("alike", True)):
        text = make_list(rows, alike=alike)
        (folder / f"{name}.csv").write_text(text, encoding="utf-8")
        write_book(text, folder / f"{name}.xlsx")


def main() -> int:
    """Print the figures; 1 where they are above what a buyer should wait for."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        write_all(folder, ROWS)
        worst = 0.0
        for listed in ("list.csv", "alike.csv", "list.xlsx", "alike.xlsx"):
            for more in ((), ("--bench", str(RADIO)), ("--bench", str(RADIO), "--json")):
                clock, cpu = min(run(folder, *more, listed=listed) for _ in range(3))
                worst = max(worst, clock)
                how = " ".join(more[:1] + more[2:]) or "without a bench"
                print(f"{ROWS} rows, {listed}, {how}: {clock:.2f} s, CPU {cpu:.2f} s")  # noqa: T201
    megabytes = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss / 1024
    print(f"most memory held: {megabytes:.0f} MB")  # noqa: T201
    return 0 if worst <= MOST_SECONDS and megabytes <= MOST_MEGABYTES else 1


if __name__ == "__main__":
    sys.exit(main())
