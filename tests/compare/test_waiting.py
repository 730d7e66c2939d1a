import io
import json

from compare import intake, waiting
from compare.command import main
from compare.intake import read_sheets
from compare.report import WIDTH
from compare.waiting import ProgressLine
from extract.progress import Progress

SHEET = "Crystal {}\nNominal frequency: 26 MHz\nLoad capacitance: 8 pF\nESR: 60 ohm max\n"


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


class Recorded(Progress):
    """Keeps what it is told, and breaks the read off at a given file or page."""

    def __init__(self, *, break_at: tuple[str, int] | None = None) -> None:
        super().__init__()
        self.told: list[tuple[object, ...]] = []
        self.break_at = break_at

    def file(self, number, count, name):
        self._tell("file", number, count)

    def page(self, number, count):
        self._tell("page", number, count)

    def _tell(self, what, number, count):
        self.told.append((what, number, count))
        if (what, number) == self.break_at:
            raise KeyboardInterrupt


def sheets(folder, count):
    for number in range(count):
        (folder / f"{number}.txt").write_text(SHEET.format(f"QV-2{number}"), encoding="utf-8")
    return [str(folder / f"{number}.txt") for number in range(count)]


def pdf_of(path, pages):
    from reportlab.pdfgen.canvas import Canvas

    paper = Canvas(str(path), pagesize=(400, 400))
    for number in range(pages):
        for row, line in enumerate(SHEET.format(f"QV-2{number}").splitlines()):
            paper.drawString(40, 340 - 20 * row, line)
        paper.showPage()
    paper.save()
    return str(path)


def test_each_file_and_each_page_is_told_before_it_is_read(tmp_path):
    progress = Recorded()
    read_sheets([*sheets(tmp_path, 2), pdf_of(tmp_path / "p.pdf", 3)], progress=progress)
    assert progress.told == [
        ("file", 1, 3), ("file", 2, 3), ("file", 3, 3), ("page", 1, 3), ("page", 2, 3), ("page", 3, 3),
    ]  # fmt: skip


def test_files_finished_before_a_stop_are_kept_and_the_note_says_how_many(tmp_path):
    got = read_sheets(sheets(tmp_path, 3), progress=Recorded(break_at=("file", 3)))
    assert [sheet.parts[0].part_number for sheet in got.sheets] == ["QV-20", "QV-21"]
    assert got.stopped
    assert got.notes[-1].message == "stopped: 2 of 3 files were read, the last of them perhaps in part"


def test_pages_finished_before_a_stop_are_kept_and_the_sheet_says_which(tmp_path):
    got = read_sheets([pdf_of(tmp_path / "p.pdf", 3), *sheets(tmp_path, 1)], progress=Recorded(break_at=("page", 3)))
    (sheet,) = got.sheets
    assert {reading.where.page for part in sheet.parts for reading in part.readings} <= {1, 2}
    assert sheet.parts
    assert "Stopped: only pages 1 to 2 of 3 were read." in [note.message for note in sheet.notes]
    assert got.stopped


def test_a_stopped_command_prints_what_is_finished_and_one_line_and_exits_with_130(tmp_path, capsys, monkeypatch):
    names = sheets(tmp_path, 3)

    def interrupted(name, progress):
        if name == names[2]:
            raise KeyboardInterrupt
        return read_one(name, progress)

    read_one = intake._read_one
    monkeypatch.setattr(intake, "_read_one", interrupted)
    assert main(["extract", *names, "--json"]) == 130
    printed = capsys.readouterr()
    assert [sheet["parts"][0]["part_number"] for sheet in json.loads(printed.out)["sheets"]] == ["QV-20", "QV-21"]
    assert printed.err == "quartzfolio: stopped: 2 of 3 files were read, the last of them perhaps in part\n"


def test_a_terminal_shows_file_and_page_and_the_line_is_gone_at_the_end(monkeypatch):
    monkeypatch.setattr(waiting, "SHOWN_AFTER_S", 0.0)
    monkeypatch.setattr(waiting, "EVERY_S", 0.0)
    stream = Terminal()
    line = ProgressLine(stream)
    line.file(2, 5, "catalogue.pdf")
    line.page(17, 300)
    assert stream.getvalue().split("\r")[-1].rstrip() == "file 2 of 5, page 17 of 300: catalogue.pdf"
    line.done()
    assert stream.getvalue().split("\r")[-2:] == [" " * (WIDTH - 1), ""]


def test_a_short_read_shows_nothing():
    stream = Terminal()
    line = ProgressLine(stream)
    line.file(1, 1, "a.txt")
    line.done()
    assert stream.getvalue() == ""


def test_a_pipe_and_a_json_run_get_no_progress(monkeypatch):
    monkeypatch.setattr(waiting, "SHOWN_AFTER_S", 0.0)
    pipe, quiet = io.StringIO(), Terminal()
    for line in (ProgressLine(pipe), ProgressLine(quiet, quiet=True)):
        line.file(1, 2, "a.txt")
        line.done()
    assert pipe.getvalue() == quiet.getvalue() == ""
