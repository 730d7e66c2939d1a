"""How long a person waits, in fresh processes. The best of a few runs, since other work may share the machine."""

import subprocess
import sys
import time
from pathlib import Path

SAMPLES = Path(__file__).parents[2] / "sample_specs"
COMMAND = [sys.executable, "-c", "from compare.command import main; raise SystemExit(main())"]


def seconds(*command: str, runs: int, allowed: tuple[int, ...] = (0,)) -> float:
    best = float("inf")
    for _ in range(runs):
        start = time.perf_counter()
        done = subprocess.run(command, capture_output=True, check=False)
        best = min(best, time.perf_counter() - start)
        assert done.returncode in allowed, done.stderr.decode()
    return best


def test_help_takes_at_most_five_times_a_bare_interpreter():
    bare = seconds(sys.executable, "-c", "pass", runs=7)
    assert seconds(*COMMAND, "--help", runs=7) <= 5 * bare


def test_one_text_sheet_is_read_within_six_tenths_of_a_second():
    sheet = next(iter(sorted(SAMPLES.glob("*.txt"))))
    assert seconds(*COMMAND, "extract", str(sheet), "--json", runs=5) <= 0.6


def test_the_samples_are_ranked_within_ten_seconds(tmp_path):
    """Pictures aside: reading one takes seconds of its own."""
    sheets = [str(path) for path in sorted(SAMPLES.iterdir()) if "scan" not in path.name and path.suffix not in SKIPPED]
    bench = str(SAMPLES / "radio_26mhz.toml")
    assert seconds(*COMMAND, "rank", *sheets, "--bench", bench, runs=1, allowed=(0, 1)) <= 10


SKIPPED = (".json", ".toml", ".png", ".jpg")
