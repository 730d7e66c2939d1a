from compare.command import main
from compare.explain_text import explain_text
from compare.report import WIDTH, display_width
from extract import read_sheet
from extract.trace import tracing

TABLE = """| Parameter | Condition | Max | Unit |
|---|---|---|---|
| Crystal QV-20 | | | |
| Nominal frequency | | 26 | MHz |
| ESR | 24 to 40 MHz | 60 | Ω |
| Shunt capacitance (pF) | | 3 | |
| Load capacitance | | 8 pF | |
| Soldering temperature | | 260 | °C |
"""


def explained(text: str, name: str = "sheet.md") -> str:
    with tracing() as trace:
        sheet = read_sheet(text.encode(), name)
    return explain_text(sheet, trace)


def section(text: str, title: str) -> str:
    """The lines of one reading, run together."""
    lines = text.splitlines()
    start = next(index for index, line in enumerate(lines) if line.startswith(f"    {title}"))
    own = [lines[start]]
    for line in lines[start + 1 :]:
        if not line.startswith("      "):
            break
        own.append(line.strip())
    return " ".join(" ".join(own).split())


def test_a_unit_column_a_condition_and_a_symbol_are_named_as_sources():
    esr = section(explained(TABLE), "equivalent series resistance")
    assert "max 60 Ω" in esr
    assert "'ESR' is a symbol of equivalent series resistance" in esr
    assert "unit 'Ω' in the unit column" in esr
    assert "band 24 to 40 MHz, from a condition '24 to 40 MHz'" in esr


def test_a_unit_in_the_label_and_one_behind_the_number_are_told_apart():
    text = explained(TABLE)
    assert "unit 'pF' in the label" in section(text, "shunt capacitance")
    assert "unit printed behind the number" in section(text, "load capacitance")


def test_a_label_that_only_resembles_a_wording_is_said_to():
    found = section(explained(TABLE.replace("Load capacitance", "Load capacitence")), "load capacitance")
    assert "only holds or resembles a wording of load capacitance" in found


def test_a_check_is_shown_with_its_reason():
    found = section(explained("Crystal QV-20\nFrequency: 26 MHz\nESR: 60 mOhm max\nESR: 80 ohm max\n", "a.txt"), "equ")
    assert " look " in found


def test_what_was_left_out_stands_below_with_its_rule():
    text = explained(TABLE)
    below = " ".join(text.partition("left out: ")[2].split())
    assert "Soldering temperature 260 °C why the label is no property of the crystal: soldering" in below


def test_no_line_is_wider_than_the_terminal():
    text = explained(
        TABLE + "| Load capacitance of the part in question, as measured by us | | " + "9 pF " * 40 + "| |\n"
    )
    assert max(display_width(line) for line in text.splitlines()) <= WIDTH


def test_the_command_prints_the_explanation_and_refuses_it_as_json(tmp_path, capsys):
    path = tmp_path / "sheet.md"
    path.write_text(TABLE, encoding="utf-8")
    assert main(["extract", str(path), "--explain"]) == 0
    assert "'ESR' is a symbol of" in capsys.readouterr().out
    assert main(["extract", str(path), "--explain", "--json"]) == 2
    assert capsys.readouterr().err == (
        "quartzfolio: extract: --explain is text for a person; leave out --json or --explain\n"
    )


def test_a_value_without_a_label_says_how_it_was_known():
    prose = "Crystal QV-20 for 26 MHz, ESR 60 ohm max, load capacitance 8 pF, tolerance 10 ppm, -40 to +85 °C.\n"
    found = section(explained(prose, "a.txt"), "nominal frequency")
    assert "label none: the unit and the size of the number tell what it is" in found
