"""How fast the reader is, as ratios to what plain libraries take for the same file in the same run.

Run as `python tests/benchmarks/bench_extract.py`. All times are processor seconds, for the clock is shared. Goals: a
sheet's words and cells within 1.2 times of pdfplumber's own words, its whole read within 1.5 times, a catalogue of 300
pages, 30 of them about crystals, within 5 times of pypdfium2's plain text, 20 000 rows of CSV or XLSX within 4 s and
250 MB.
"""

from __future__ import annotations

import io
import random
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from statistics import median

from bench_compare import write_list

SAMPLES = Path(__file__).parents[2] / "sample_specs"
ONE_PAGE = ("brindlewick_bwk21_26mhz.pdf", "ormeval_serie_orv25_fr.pdf", "tamsquith_tqf32_32khz.pdf")
PAGES, CRYSTAL_PAGES, ROWS = 300, 30, 20_000
EXTRACT = """
import resource, sys
from compare.command import main
status = main(["extract", sys.argv[1], "--json"])
used = resource.getrusage(resource.RUSAGE_SELF)
# The peak of this program alone: ru_maxrss would count what the process that started it held.
peak = next(line for line in open("/proc/self/status") if line.startswith("VmHWM"))
print(used.ru_utime + used.ru_stime, int(peak.split()[1]) / 1024, file=sys.stderr)
raise SystemExit(status)
"""


@dataclass(frozen=True)
class Cost:
    """Of one fresh process: processor seconds and peak memory in MB; `printed` is what it wrote."""

    processor_s: float
    memory_mb: float
    printed: str


def seconds(work: Callable[[], object], runs: int = 5) -> float:
    """Processor seconds of the quickest of some runs, after one that fills caches and imports."""
    work()
    best = float("inf")
    for _ in range(runs):
        start = time.process_time()
        work()
        best = min(best, time.process_time() - start)
    return best


def plain_words(data: bytes) -> int:
    """The words of every page by pdfplumber, and nothing else."""
    import pdfplumber

    with pdfplumber.open(io.BytesIO(data)) as document:
        return sum(len(page.extract_words()) for page in document.pages)


def plain_text(data: bytes) -> int:
    """The text of every page by pypdfium2, and nothing else."""
    import pypdfium2

    document = pypdfium2.PdfDocument(data)
    length = 0
    for number in range(len(document)):
        page = document[number]
        text = page.get_textpage()
        length += len(text.get_text_range())
        text.close()
        page.close()
    document.close()
    return length


def cells_ratio(data: bytes, runs: int = 5) -> float:
    """Words, lines and table cells of a sheet against pdfplumber's words."""
    from extract.documents import pdf

    return seconds(lambda: pdf.read(data), runs) / seconds(lambda: plain_words(data), runs)


def whole_ratio(data: bytes, runs: int = 5) -> float:
    """The whole read of a sheet against pdfplumber's words; nothing is known from an earlier run."""
    from extract import read_sheet

    def read() -> object:
        forget()
        return read_sheet(data, "sheet.pdf")

    return seconds(read, runs) / seconds(lambda: plain_words(data), runs)


def catalogue_ratio(data: bytes, runs: int = 1) -> float:
    """The whole read of a catalogue against pypdfium2's text of it."""
    from extract import read_sheet

    return seconds(lambda: read_sheet(data, "catalogue.pdf"), runs) / seconds(lambda: plain_text(data), runs)


def forget() -> None:
    """Empty the caches of texts, so that each run reads as the first one does; the vocabulary stays loaded."""
    kept = {"vocabulary", "kinds", "fields", "kind_of", "limits", "identity_words"}
    for module in [module for name, module in sys.modules.items() if name.startswith("extract.")]:
        for name, value in vars(module).items():
            limit = getattr(value, "cache_parameters", None)
            if limit is not None and limit()["maxsize"] is not None and name not in kept:
                value.cache_clear()


def extract_cost(sheet: Path) -> Cost:
    """`quartzfolio extract SHEET --json` in a process of its own."""
    done = subprocess.run([sys.executable, "-c", EXTRACT, str(sheet)], capture_output=True, check=True)
    processor, memory = done.stderr.decode().split()[-2:]
    return Cost(float(processor), float(memory), done.stdout.decode())


# --- what is read


def made_catalogue(pages: int = PAGES, crystals: int = CRYSTAL_PAGES) -> bytes:
    """A catalogue of relays, resistors and connectors with many numbers; `crystals` pages in a row list crystals."""
    from reportlab.pdfgen.canvas import Canvas

    rng = random.Random(1)  # noqa: S311 - made-up data
    buffer = io.BytesIO()
    paper = Canvas(buffer, pagesize=(595, 842), pageCompression=1)
    first = pages // 2
    for number in range(pages):
        paper.setFont("Helvetica", 9)
        paper.drawString(60, 800, "Pippinstow Components, main catalogue")
        if first <= number < first + crystals:
            _crystal_page(paper, number, rng)
        else:
            _other_page(paper, number, rng)
        paper.drawString(280, 30, f"page {number + 1}")
        paper.showPage()
    paper.save()
    return buffer.getvalue()


def _other_page(paper: object, number: int, rng: random.Random) -> None:
    what = ("Power relay", "Wirewound resistor", "Board connector")[number % 3]
    rows = [("Type", "Rated voltage (V)", "Rated current (A)", "Resistance (ohm)", "Weight (g)")]
    rows += [(f"PX{number:03d}-{row:02d}", *(f"{rng.uniform(1, 400):.1f}" for _ in range(4))) for row in range(30)]
    _ruled(paper, f"{what} series PX{number:03d}", rows)


def _crystal_page(paper: object, number: int, rng: random.Random) -> None:
    rows = [("Part number", "Frequency (MHz)", "Load capacitance (pF)", "ESR max (ohm)", "C0 max (pF)")]
    rows += [
        (f"PQ{number:03d}-{row:02d}", f"{rng.uniform(12, 50):.3f}", rng.choice("68"), f"{rng.randint(30, 90)}", "2.0")
        for row in range(30)
    ]
    _ruled(paper, f"Quartz crystals series PQ{number:03d}", rows)


def _ruled(paper: object, title: str, rows: list[tuple[str, ...]]) -> None:
    paper.drawString(60, 770, title)  # type: ignore[attr-defined]
    for index, row in enumerate(rows):
        for column, text in enumerate(row):
            paper.drawString(64 + 95 * column, 746 - 22 * index, text)  # type: ignore[attr-defined]
    ys = [760 - 22 * index for index in range(len(rows) + 1)]
    paper.grid([60 + 95 * column for column in range(len(rows[0]) + 1)], ys)  # type: ignore[attr-defined]


def write_book(path: Path, rows: int) -> None:
    """The list of `write_list` as a workbook, numbers as numbers."""
    import csv

    from openpyxl import Workbook

    plain = path.with_suffix(".csv")
    write_list(plain, rows)
    book = Workbook(write_only=True)
    sheet = book.create_sheet("Stock")
    with plain.open(newline="", encoding="utf-8") as file:
        for texts in csv.reader(file):
            sheet.append([float(text) if text.replace(".", "").isdecimal() else text for text in texts])
    book.save(path)


def say(line: str) -> None:
    """Each figure as soon as it is there, for the whole takes a minute."""
    sys.stdout.write(f"{line}\n")
    sys.stdout.flush()


def main() -> None:
    """Print every figure beside its goal."""
    for name in ONE_PAGE:
        data = (SAMPLES / name).read_bytes()
        say(f"{name}: cells {cells_ratio(data):.2f} (goal 1.2), whole read {whole_ratio(data):.2f} (goal 1.5)")
    sheets = [(SAMPLES / name).read_bytes() for name in ONE_PAGE]
    say(f"median: cells {median(map(cells_ratio, sheets)):.2f}, whole read {median(map(whole_ratio, sheets)):.2f}")
    catalogue = made_catalogue()
    say(f"catalogue of {PAGES} pages: {catalogue_ratio(catalogue):.2f} times its plain text (goal 5)")
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "catalogue.pdf"
        path.write_bytes(catalogue)
        cost = extract_cost(path)
        say(f"catalogue, fresh process: {cost.processor_s:.2f} s, {cost.memory_mb:.0f} MB (goal 600)")
        write_list(Path(folder) / "list.csv", ROWS)
        write_book(Path(folder) / "book.xlsx", ROWS)
        for kind, name in (("CSV", "list.csv"), ("XLSX", "book.xlsx")):
            cost = extract_cost(Path(folder) / name)
            say(f"{ROWS} rows of {kind}: {cost.processor_s:.2f} s (goal 4), {cost.memory_mb:.0f} MB (goal 250)")


if __name__ == "__main__":
    main()
