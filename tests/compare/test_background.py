"""Sheets read in the background: in order, told page by page, stopped at once, one failure stopping no other."""

import threading
import time

import hand_made
import pytest
from reportlab.pdfgen.canvas import Canvas

from compare import background
from compare.background import Reader, Reading
from compare.read_apart import Apart
from extract.model import SpecSheet

MAIL = hand_made.MAIL.encode()


def pdf(path, pages=1):
    canvas = Canvas(str(path))
    for _ in range(pages):
        for row, line in enumerate(hand_made.MAIL.splitlines()):
            canvas.drawString(72, 760 - 18 * row, line.replace("Ω", "ohm").replace("µ", "u").replace("±", "+/-"))
        canvas.showPage()
    canvas.save()
    return path.read_bytes()


def finished(reader, seconds=60):
    assert reader.wait(seconds)
    return [one.sheet for one in reader.take()]


def test_files_are_read_in_order_and_taken_once():
    reader = Reader()
    reader.add([("a.txt", MAIL), ("b.txt", MAIL)])
    assert [(sheet.file, len(sheet.parts)) for sheet in finished(reader)] == [("a.txt", 1), ("b.txt", 1)]
    assert (reader.take(), reader.now, reader.left) == ([], None, [])


def test_a_pdf_is_read_like_the_command_reads_it_and_its_pages_are_told(tmp_path):
    from compare.intake import read_bytes

    data, told = pdf(tmp_path / "offer.pdf", pages=3), []
    apart = Apart()
    try:
        sheet = apart.read("offer.pdf", data, lambda number, count: told.append((number, count)))
    finally:
        apart.end()
    assert sheet == read_bytes(data, "offer.pdf")
    assert told == [(1, 3), (2, 3), (3, 3)]


def test_a_damaged_file_is_told_and_the_next_one_is_read(tmp_path):
    reader = Reader()
    reader.add([("bad.pdf", b"%PDF-1.7 broken"), ("gone.txt", None), ("offer.pdf", pdf(tmp_path / "offer.pdf"))])
    bad, gone, good = finished(reader)
    assert (bad.parts, gone.parts, len(good.parts)) == ((), (), 1)
    assert "damaged" in bad.notes[0].message
    assert gone.notes[0].message == "no such file; check the name"


def test_a_file_by_name_and_its_part_are_read(tmp_path):
    (tmp_path / "offer.txt").write_bytes(MAIL)
    reader = Reader()
    reader.add([(str(tmp_path / "offer.txt"), None), (f"{tmp_path / 'offer.txt'}#NONE-1", None)])
    whole, none = finished(reader)
    assert [part.part_number for part in whole.parts] == ["ABX-26"]
    assert none.notes[-1].message == "no part NONE-1 in this sheet; it has ABX-26"


def held(reader):
    """A read of two files whose first one waits for the event that is returned."""
    go = threading.Event()

    def read(file, apart, page):
        page(1, 9)
        go.wait(30)
        return None if reader[0].stopping else SpecSheet(file=file[0], sha256=None, kind="text")

    reader.append(Reader(read))
    reader[0].add([("a.pdf", b"x"), ("b.pdf", b"x"), ("c.pdf", b"x")])
    while reader[0].now is None or not reader[0].now.page:
        time.sleep(0.005)
    return go


def test_what_is_being_read_is_said_with_file_and_page():
    reader = []
    go = held(reader)
    assert reader[0].now.said() == "Reading 1 of 3: a.pdf, page 1 of 9"
    go.set()
    assert reader[0].wait(30)
    assert Reading("x/y.pdf", 3, 7, 2, 3, 4.2).said() == "Reading 3 of 7: y.pdf, page 2 of 3, 4 s"


def test_stopped_what_is_unread_is_left_and_can_be_read_later():
    reader = []
    go = held(reader)
    reader[0].stop()
    go.set()
    assert reader[0].wait(30)
    assert reader[0].take() == []
    assert [name for name, _ in reader[0].left] == ["a.pdf", "b.pdf", "c.pdf"]
    assert reader[0].stopped_sentence == "Stopped. 0 of 3 were read; the rest can be read later."
    reader[0].add(reader[0].left)
    assert [sheet.file for sheet in finished(reader[0])] == ["a.pdf", "b.pdf", "c.pdf"]
    assert (reader[0].left, reader[0].stopped_sentence) == ([], "")


@pytest.mark.ocr
def test_a_scan_that_is_being_read_is_broken_off_at_once(tmp_path):
    from PIL import Image

    Image.new("RGB", (2400, 3200), "white").save(tmp_path / "scan.png")
    reader = Reader()
    reader.add([("scan.png", (tmp_path / "scan.png").read_bytes()), ("a.txt", MAIL)])
    time.sleep(0.3)
    began = time.monotonic()
    reader.stop()
    assert reader.wait(5)
    assert time.monotonic() - began < 2
    assert [name for name, _ in reader.left] == ["scan.png", "a.txt"]


def test_a_reader_that_ends_without_an_answer_is_a_failure_of_that_file_alone(tmp_path, monkeypatch):
    def killed(self, name, data, page):
        self.kill()

    monkeypatch.setattr(background.Apart, "read", killed)
    reader = Reader()
    reader.add([("offer.pdf", pdf(tmp_path / "offer.pdf")), ("a.txt", MAIL)])
    failed, good = finished(reader)
    assert failed.notes[0].message.startswith("the reader ended without an answer")
    assert len(good.parts) == 1


def test_the_same_file_is_not_read_twice(monkeypatch):
    count = []
    monkeypatch.setattr(background, "read_bytes", lambda data, name: count.append(name) or read(data, name))
    from compare.intake import read_bytes as read

    text = MAIL.replace(b"ABX-26", b"ABX-27")
    for _ in range(2):
        reader = Reader()
        reader.add([("once.txt", text)])
        finished(reader)
    assert count == ["once.txt"]
