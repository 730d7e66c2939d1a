"""README's examples are what the program prints, its commands are complete, and it begins by stating the job."""

import re
import shlex
from pathlib import Path

import pytest

from compare.command import main

ROOT = Path(__file__).parents[2]
README = (ROOT / "README.md").read_text(encoding="utf-8")
EXAMPLES = re.findall(r"```text\n\$ quartzfolio (.*?)\n```", README, re.DOTALL)


def words(text: str) -> str:
    return " ".join(text.split())


def parted(example: str) -> tuple[list[str], list[str]]:
    """The command's arguments, and the pieces of output shown, each up to the dots that stand for the rest."""
    command, _, shown = example.replace("\\\n", " ").partition("\n")
    pieces = [words(piece) for line in shown.splitlines() for piece in line.split("...")]
    return shlex.split(command), [piece for piece in pieces if piece]


@pytest.mark.ocr
@pytest.mark.parametrize("example", EXAMPLES, ids=[example.split()[0] for example in EXAMPLES])
def test_an_example_shows_what_is_printed(example, capsys, monkeypatch):
    if "rank" in example:
        pytest.importorskip("rapidocr", reason="the list of samples holds scans: pip install 'quartzfolio[ocr]'")
    monkeypatch.chdir(ROOT)
    arguments, pieces = parted(example)
    main(arguments)
    printed = words(capsys.readouterr().out)
    assert pieces
    assert [piece for piece in pieces if piece not in printed] == []


def test_every_command_is_shown():
    assert {example.split()[0] for example in EXAMPLES} == {"extract", "rank", "review", "substitute"}


def test_the_first_paragraph_names_the_three_people_and_what_each_gets():
    first = README.split("\n\n")[1]
    for person in ("engineer choosing", "buyer checking", "reviewer confirming margin"):
        assert person in first
