"""A wording file for a language that the program does not ship makes its sheets readable, with no line of code."""

import json
import subprocess
import sys
from pathlib import Path

import pytest

from extract.vocabulary import WordingError, add_wordings

DATA = Path(__file__).parent / "data"
SHEET, WORDINGS = DATA / "kwartskristal_nl.txt", DATA / "wordings_nl"
# Read off the sheet by hand: field -> (min, typ, max).
STATED = {
    "frequency_mhz": (None, 26.0, None),
    "frequency_tolerance_ppm": (-10.0, None, 10.0),
    "frequency_stability_ppm": (-15.0, None, 15.0),
    "ageing_ppm": (-2.0, None, 2.0),
    "operating_temperature_c": (-40.0, None, 85.0),
    "storage_temperature_c": (-55.0, None, 125.0),
    "load_capacitance_pf": (None, 8.0, None),
    "esr_ohm": (None, None, 60.0),
    "shunt_capacitance_pf": (None, None, 1.2),
    "drive_level_uw": (None, 10.0, 100.0),
    "insulation_resistance_megohm": (500.0, None, None),
}
# Wordings must be there before the first sheet is read, hence in a process of its own.
SCRIPT = """
import sys
from pathlib import Path
from extract import read_sheet
from extract.vocabulary import add_wordings
if sys.argv[2]:
    add_wordings(Path(sys.argv[2]))
print(read_sheet(Path(sys.argv[1]).read_bytes(), sys.argv[1]).model_dump_json())
"""


def read_afresh(wordings: str) -> list[dict]:
    command = [sys.executable, "-c", SCRIPT, str(SHEET), wordings]
    done = subprocess.run(command, capture_output=True, check=True, encoding="utf-8")
    return json.loads(done.stdout)["parts"]


def test_a_sheet_in_a_new_language_is_read_whole_with_its_wording_file():
    (part,) = read_afresh(str(WORDINGS))
    read = {each["field"]: (each["min"], each["typ"], each["max"]) for each in part["readings"]}
    assert read == STATED
    assert len(part["readings"]) == len(STATED)
    assert [each["check"] for each in part["readings"]] == [None] * len(STATED)
    assert (part["part_number"], part["maker"]) == ("VPK20-26M000-08", "Veenplas Kristallen")
    assert part["mode"] == "fundamental"
    conditions = {each["field"]: each["when"] for each in part["readings"] if each["when"]}
    assert conditions == {
        "frequency_stability_ppm": {"temperature_c": [-40.0, 85.0]},
        "ageing_ppm": {"years": 1.0},
    }


def test_without_the_wording_file_its_labels_are_unknown():
    """The test above would hold for nothing if the sheet were readable anyway."""
    read = {each["field"] for part in read_afresh("") for each in part["readings"]}
    assert read.isdisjoint({"esr_ohm", "load_capacitance_pf", "shunt_capacitance_pf", "drive_level_uw"})


def test_wordings_added_after_a_sheet_was_read_are_refused():
    from extract.wording import read_label

    read_label("Load capacitance")
    with pytest.raises(WordingError, match="must be added before the first sheet is read"):
        add_wordings(WORDINGS)


@pytest.mark.parametrize(
    ("content", "told"),
    [
        (None, "no folder with wording files"),
        ('[labels]\nesr_ohm = ["belasting"\n', "no TOML in UTF-8"),
        ('[labels]\nesr_ohm = ["load capacitance"]\n', "is claimed by load_capacitance_pf and esr_ohm"),
    ],
)
def test_a_faulty_wording_folder_is_a_wrong_call_that_says_why(tmp_path, content, told):
    if content is not None:
        (tmp_path / "xx.toml").write_text(content, encoding="utf-8")
    script = "import sys; from compare.command import main; raise SystemExit(main(sys.argv[1:]))"
    command = [sys.executable, "-c", script, "extract", str(SHEET), "--wordings", str(tmp_path)]
    done = subprocess.run(command, capture_output=True, check=False, encoding="utf-8")
    assert (done.returncode, done.stdout) == (2, "")
    assert told in done.stderr
    assert len(done.stderr.splitlines()) == 1
