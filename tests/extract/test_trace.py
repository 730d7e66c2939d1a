from extract import read_sheet
from extract.trace import asked, tracing

SHEET = """Crystal QV-20

| Parameter | Value |
|---|---|
| Nominal frequency | 26 MHz |
| Load capacitance | 8 pF |
| ESR | 60 ohm max |
| Fluffiness | 12 kg |
| Drive level dependency | 10 % |
"""


def traced(text: str):
    with tracing() as trace:
        sheet = read_sheet(text.encode(), "sheet.md")
    return sheet, trace


def test_a_trace_changes_nothing_that_is_read():
    assert traced(SHEET)[0] == read_sheet(SHEET.encode(), "sheet.md")


def test_outside_a_trace_nothing_is_asked_for():
    with tracing() as trace:
        assert asked()
    read_sheet(SHEET.encode(), "sheet.md")
    assert not asked()
    assert (trace.seen, trace.dropped, trace.taken) == ([], [], [])


def test_every_reading_is_reported_beside_the_candidate_it_was_written_from():
    sheet, trace = traced(SHEET)
    assert [one.reading for one in trace.taken] == list(sheet.parts[0].readings)
    assert all(one.reading.field == one.candidate.field for one in trace.taken)


def test_the_origin_of_a_reading_holds_its_label_as_printed():
    _, trace = traced(SHEET)
    esr = next(one.candidate for one in trace.taken if one.reading.field == "esr_ohm")
    seen = trace.origin(esr, "sheet.md")
    assert seen is not None
    assert (seen.printed_label, seen.label.field, seen.label.symbol) == ("ESR", "esr_ohm", True)
    assert trace.origin(esr, "another.txt") is None


def test_rows_without_a_reading_are_reported_with_the_rule_that_passed_them_over():
    _, trace = traced(SHEET)
    rules = {one.raw: one.rule for one in trace.left_out("sheet.md")}
    assert rules["Fluffiness 12 kg"] == "the label is in no wording file"
    assert "drive level dependency" in rules["Drive level dependency 10 %"]


def test_of_two_places_that_contradict_the_second_is_reported_with_the_first():
    _, trace = traced(SHEET + "| ESR | 80 ohm max |\n")
    told = [one.rule for one in trace.left_out("sheet.md") if one.field == "esr_ohm"]
    assert told == ["contradicts line 7, which comes first and carries a check: ESR 60 ohm max"]


def test_files_read_in_one_trace_are_kept_apart():
    with tracing() as trace:
        read_sheet(SHEET.encode(), "one.md")
        read_sheet(SHEET.replace("Fluffiness", "Softness").encode(), "two.md")
    assert [one.raw for one in trace.left_out("two.md") if "kg" in one.raw] == ["Softness 12 kg"]
