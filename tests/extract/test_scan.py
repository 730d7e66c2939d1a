"""Pictures of sheets. The pictures are drawn here, so that it is known what stands where."""

from __future__ import annotations

import io
import socket
import sys

import pytest
from PIL import Image, ImageDraw, ImageFont, ImageOps

from extract.documents import scan
from extract.documents.model import Document, DocumentError, Line, Table

pytestmark = pytest.mark.ocr

ROWS = [
    ("Nominal frequency", "16.000 MHz"),
    ("Load capacitance", "8 pF"),
    ("Equivalent series resistance", "60 ohm max."),
    ("Operating temperature", "-40 to +85 C"),
]
SIZE = 30
COLUMNS = (80, 640)


def drawn(*, ruled: bool = True) -> Image.Image:
    image = Image.new("RGB", (1100, 520), "white")
    draw = ImageDraw.Draw(image)
    font = ImageFont.load_default(SIZE)
    for row, texts in enumerate(ROWS):
        for x, text in zip(COLUMNS, texts, strict=True):
            draw.text((x, 70 + 80 * row), text, font=font, fill="black")
    if ruled:
        for y in range(45, 400, 80):
            draw.line((60, y, 1040, y), fill="black", width=2)
        for x in (60, 615, 1040):
            draw.line((x, 45, x, 365), fill="black", width=2)
    return image


def saved(image: Image.Image, form: str = "PNG", **options: object) -> bytes:
    target = io.BytesIO()
    image.save(target, form, **options)
    return target.getvalue()


def cells(document: Document) -> list[tuple[str, ...]]:
    (table,) = (block for block in document.blocks if isinstance(block, Table))
    return [tuple(cell.text if cell else "" for cell in row) for row in table.grid()]


@pytest.fixture(scope="module", autouse=True)
def _recogniser() -> None:
    pytest.importorskip("rapidocr")


@pytest.mark.parametrize("ruled", [True, False])
def test_rows_and_columns_are_read(*, ruled: bool) -> None:
    document = scan.read(saved(drawn(ruled=ruled)))
    assert cells(document) == ROWS
    assert (document.kind, document.scan) == ("image", True)


def test_a_cell_has_its_box_in_the_picture_and_a_confidence() -> None:
    (table,) = scan.read(saved(drawn(ruled=False))).blocks
    assert isinstance(table, Table)
    cell = next(cell for cell in table.cells if cell.text == "8 pF")
    assert cell.where.page == 1
    assert cell.where.box is not None
    # Drawn with its top left corner at 640, 150; the rows are 80 apart.
    x0, top, x1, bottom = cell.where.box
    assert (x0 <= 645, 700 <= x1 <= 1100, 110 <= top <= 160, 180 <= bottom <= 230) == (True, True, True, True)
    assert 0.5 < cell.confidence <= 1.0


@pytest.mark.parametrize("turn", [180, 270, 2])
def test_a_page_that_lies_askew_or_on_its_side_is_put_upright(turn: int) -> None:
    turned = drawn().rotate(turn, expand=True, fillcolor="white", resample=Image.Resampling.BICUBIC)
    assert cells(scan.read(saved(turned))) == ROWS


def test_a_turned_page_gives_boxes_in_the_picture_as_it_is() -> None:
    (table,) = (block for block in scan.read(saved(drawn().rotate(90, expand=True))).blocks if isinstance(block, Table))
    box = next(cell.where.box for cell in table.cells if cell.text == "8 pF")
    assert box is not None
    # The cell at x 615 to 1040, y 125 to 205 of a page 1100 wide, turned anticlockwise.
    assert box == pytest.approx((125, 60, 205, 485), abs=15)


def test_the_words_of_a_page_come_with_their_boxes() -> None:
    words = {word.text: word for word in scan.read_page(drawn())}
    assert words["16.000 MHz"].x0 == pytest.approx(COLUMNS[1], abs=8)


def test_every_page_of_a_tiff_is_read() -> None:
    data = saved(drawn(), "TIFF", save_all=True, append_images=[drawn(ruled=False)])
    assert {block.where.page for block in scan.read(data).blocks} == {1, 2}


def test_transparent_paper_is_white() -> None:
    image = Image.new("RGBA", (1100, 520), "black")
    image.putalpha(ImageOps.invert(drawn(ruled=False).convert("L")))
    assert cells(scan.read(saved(image))) == ROWS


def test_a_blank_picture_is_refused() -> None:
    with pytest.raises(DocumentError, match="^No text can be made out in the picture"):
        scan.read(saved(Image.new("RGB", (900, 600), "white")))


def test_nothing_is_fetched(monkeypatch: pytest.MonkeyPatch) -> None:
    from extract.documents import recognise

    def refuse(*_: object) -> None:
        raise AssertionError("a connection was tried")

    monkeypatch.setattr(socket.socket, "connect", refuse)
    monkeypatch.setattr(socket, "getaddrinfo", refuse)
    recognise._engine.cache_clear()
    assert any(isinstance(block, Line | Table) for block in scan.read(saved(drawn())).blocks)


def test_without_the_extra_the_user_is_told_what_to_install(monkeypatch: pytest.MonkeyPatch) -> None:
    for name in ("extract.documents.recognise", "extract.documents.straighten"):
        monkeypatch.delitem(sys.modules, name, raising=False)
        monkeypatch.delattr(sys.modules["extract.documents"], name.rpartition(".")[2], raising=False)
    monkeypatch.setitem(sys.modules, "cv2", None)
    with pytest.raises(DocumentError) as refused:
        scan.read(saved(drawn()))
    assert str(refused.value) == (
        "This is a picture, and the reading of pictures is not installed: install it with "
        'pip install "quartzfolio[ocr]", or give the sheet as PDF, XLSX, CSV, HTML, DOCX or text.'
    )
