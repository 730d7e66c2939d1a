"""Whole sheets through the one door: what the contract promises of every file."""

import time

import pytest
from building import bounds, only_part

from extract import read_sheet

SHEET = """ABQ32-16.000-9
Quartz crystal 3.2 x 2.5 mm, AT-cut, fundamental mode, by Able Timing Ltd

PARAMETER                SYMBOL   MIN     TYP     MAX     UNIT
--------------------------------------------------------------
Nominal frequency        f0               16.000          MHz
Frequency tolerance      df/f     -10             +10     ppm
Operating temperature    Topr     -40             +85     C
Load capacitance         CL               9               pF
Motional resistance      R1               30      60      ohm
Shunt capacitance        C0                       2.0     pF
Drive level              DL               10      100     uW
Ageing, first year       df/f     -2              +2      ppm
"""


def test_a_sheet_is_read_from_its_bytes_to_its_readings():
    sheet = read_sheet(SHEET.encode(), "sheet.txt")
    part = only_part(sheet)
    assert (sheet.kind, part.part_number, part.maker, part.mode, part.cut) == (
        "text", "ABQ32-16.000-9", "Able Timing Ltd", "fundamental", "AT",
    )  # fmt: skip
    assert bounds(part, "esr_ohm") == [(None, 30.0, 60.0)]
    assert bounds(part, "ageing_ppm") == [(-2.0, None, 2.0)]
    assert all(reading.check is None and reading.status == "stated" for reading in part.readings)


def test_every_reading_has_the_place_and_the_text_it_came_from():
    lines = SHEET.splitlines()
    for reading in only_part(read_sheet(SHEET.encode(), "sheet.txt")).readings:
        printed = lines[(reading.where.line or 0) - 1].split()
        assert all(word in printed for word in reading.raw.split())


def test_the_hash_is_that_of_the_bytes():
    # "abc", from FIPS 180-4 (NIST example vectors).
    assert read_sheet(b"abc", "x.txt").sha256 == "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"


@pytest.mark.parametrize(
    "data",
    [b"", b"%PDF-1.7 broken", b"PK\x03\x04 broken", b"\xd0\xcf\x11\xe0 broken", b"\x00\x01\x02\x03" * 50],
)
def test_a_file_that_cannot_be_read_gives_a_note_and_no_exception(data):
    sheet = read_sheet(data, "sheet.pdf")
    assert sheet.parts == ()
    assert {note.level for note in sheet.notes} & {"error", "warning"}


@pytest.mark.parametrize("text", ["Dear all, lunch is at noon.", "a,b,c\n1,2,3\n", "|x|y|\n|-|-|\n|1|2|\n"])
def test_a_file_without_a_crystal_gives_a_warning(text):
    sheet = read_sheet(text.encode(), "note.txt")
    assert sheet.parts == ()
    assert [note.message for note in sheet.notes if note.level == "warning"] == ["no crystal found in this file"]


@pytest.mark.parametrize(
    "text",
    [
        "ESR: ESR: ESR: 60 Ω", "Frequency: MHz", "CL = = 8 pF", "P/N: \nP/N: ", "Frequency 1e999 MHz",
        "ESR: ∞ Ω", "Load: ∞", "Ageing: ±±± ppm", "Part number | Frequency\n | \n | ", "* * *\n(1)\n*2",
        "Frequency\tESR\n\t\n\t\t\t",
    ],
)  # fmt: skip
def test_odd_content_meets_no_fault_of_the_reader(text, caplog):
    """A fault of the reader's own would be logged, and told in a note."""
    sheet = read_sheet(text.encode(), "odd.txt")
    assert caplog.records == []
    assert [note.message for note in sheet.notes if note.level == "error"] == []


def test_a_fault_of_the_readers_own_is_told_and_logged(monkeypatch, caplog):
    def fail(document):
        raise KeyError("a bug")

    monkeypatch.setattr("extract.blocks.read_blocks", fail)
    sheet = read_sheet(b"ESR: 60 ohm", "x.txt")
    assert [note.level for note in sheet.notes] == ["error"]
    assert "KeyError: 'a bug'" in sheet.notes[0].message
    assert caplog.records[0].exc_info is not None


def test_a_file_that_cannot_be_read_keeps_the_kind_that_its_name_says():
    assert read_sheet(b"", "sheet.pdf").kind == "pdf"


def test_a_part_without_a_frequency_is_warned_of():
    text = "ABQ32-16M-9\nLoad capacitance: 9 pF\nESR: 60 Ω max.\nDrive level: 100 µW max.\n"
    notes = read_sheet(text.encode(), "x.txt").notes
    assert [note.message for note in notes] == ["no frequency is stated for ABQ32-16M-9"]


def test_a_contradiction_between_two_places_is_flagged():
    text = "ABQ32-16\nNominal frequency: 16 MHz\nESR: 50 Ω max.\nLoad capacitance: 9 pF\n\nInspection\nESR: 70 Ω max.\n"
    (esr,) = [each for each in only_part(read_sheet(text.encode(), "x.txt")).readings if each.field == "esr_ohm"]
    assert esr.max == 50.0
    assert esr.check == "line 7 says otherwise: ESR 70 Ω max."


def test_a_missing_frequency_is_not_made_up_from_the_part_number():
    text = "ABQ32-16M-9\nLoad capacitance: 9 pF\nESR: 60 Ω max.\nDrive level: 100 µW max.\n"
    assert bounds(only_part(read_sheet(text.encode(), "x.txt")), "frequency_mhz") == []


def test_a_mail_is_read_without_the_request_that_it_quotes():
    text = (
        "We can offer our ABQ32-16.000-9 crystal with 16 MHz in a 3.2 x 2.5 mm case with a load\n"
        "capacitance of 9 pF, ±10 ppm tolerance at 25 °C and ±15 ppm over -40 to +85 °C.\n\n"
        "> we need CL = 12 pF and +/-20 ppm\n"
    )
    part = only_part(read_sheet(text.encode(), "mail.txt"))
    assert bounds(part, "load_capacitance_pf") == [(None, 9.0, None)]
    assert bounds(part, "frequency_tolerance_ppm") == [(-10.0, None, 10.0)]
    assert bounds(part, "frequency_stability_ppm") == [(-15.0, None, 15.0)]


def test_a_long_list_is_read_in_the_time_of_its_distinct_cells():
    head = "Part number;Frequency [MHz];Load capacitance [pF];Tolerance [±ppm];ESR max. [Ω];C0 max. [pF]\n"
    rows = [f"ABQ32-{number:05d};16,000;9,0;10;60;1,8\n" for number in range(2000)]
    begin = time.perf_counter()
    sheet = read_sheet((head + "".join(rows)).encode(), "list.csv")
    assert len(sheet.parts) == 2000
    # 10 000 readings; reading each cell by itself took twenty times as long on the slowest machine at hand.
    assert time.perf_counter() - begin < 10
