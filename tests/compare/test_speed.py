"""How much work a start takes, in fresh processes: processor time, since other work may share the machine."""

import os
import resource
import subprocess
import sys
import tempfile
from pathlib import Path

SAMPLES = Path(__file__).parents[2] / "sample_specs"
COMMAND = [sys.executable, "-c", "from compare.command import main; raise SystemExit(main())"]
COMPILED = tempfile.TemporaryDirectory()
SKIPPED = (".json", ".toml", ".png", ".jpg")


def seconds(*command: str, runs: int, allowed: tuple[int, ...] = (0,)) -> float:
    """Processor time of the command, user and system, the least of some runs, its modules compiled by the first."""
    best = float("inf")
    env = {name: text for name, text in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
    env["PYTHONPYCACHEPREFIX"] = COMPILED.name
    for _ in range(runs):
        before = resource.getrusage(resource.RUSAGE_CHILDREN)
        done = subprocess.run(command, capture_output=True, check=False, env=env)
        after = resource.getrusage(resource.RUSAGE_CHILDREN)
        best = min(best, after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime)
        assert done.returncode in allowed, done.stderr.decode()
    return best


def test_help_takes_at_most_five_times_a_bare_interpreter():
    bare = seconds(sys.executable, "-c", "pass", runs=7)
    assert seconds(*COMMAND, "--help", runs=7) <= 5 * bare


def test_one_text_sheet_is_read_within_six_tenths_of_a_second():
    sheet = next(iter(sorted(SAMPLES.glob("*.txt"))))
    assert seconds(*COMMAND, "extract", str(sheet), "--json", runs=5) <= 0.6


def test_a_text_sheet_loads_no_library_of_other_kinds_of_file():
    sheet = next(iter(sorted(SAMPLES.glob("*.txt"))))
    script = (
        "import sys; from compare.command import main; main(['extract', sys.argv[1], '--json']); "
        "print([name for name in ('lxml', 'numpy', 'pdfplumber', 'python_calamine', 'openpyxl', 'pandas') "
        "if name in sys.modules], file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", script, str(sheet)], capture_output=True, check=True)
    assert done.stderr.decode().strip() == "[]"


def test_the_samples_are_ranked_within_ten_seconds():
    """Pictures aside: reading one takes seconds of its own."""
    sheets = [str(path) for path in sorted(SAMPLES.iterdir()) if "scan" not in path.name and path.suffix not in SKIPPED]
    bench = str(SAMPLES / "radio_26mhz.toml")
    assert seconds(*COMMAND, "rank", *sheets, "--bench", bench, runs=1, allowed=(0, 1)) <= 10
