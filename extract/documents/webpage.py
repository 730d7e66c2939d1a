"""Web pages: tables with their spans, definition lists, headings, paragraphs and list items in the page's order."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace

from lxml import etree
from lxml import html as lxml_html

from extract.documents import text as plain
from extract.documents.decoding import decode
from extract.documents.grid import address, titled
from extract.documents.model import Cell, Document, DocumentError, Line, Segment, Table
from extract.documents.webtext import BLOCKS, inline, is_leaf, line_of, prune, text_of, tidy
from extract.model import Where

_HEADINGS = frozenset({"h1", "h2", "h3", "h4", "h5", "h6"})
_META = re.compile(
    rb"""<meta[^>]+charset\s*=\s*["']?\s*([\w-]+)|<\?xml[^>]+encoding\s*=\s*["']([\w-]+)""", re.IGNORECASE
)
_MOST_SPAN = 1000
_LEAST_ALIKE = 3


def read(data: bytes) -> Document:
    """Tables and lines of a page; `where` is the table and cell, or the line that the text starts on."""
    declared = _META.search(data[:4096])
    encoding = next((group.decode("ascii") for group in declared.groups() if group), None) if declared else None
    content, notes = decode(data, declared=encoding)
    parser = lxml_html.HTMLParser(encoding="utf-8", huge_tree=True, remove_comments=True, remove_pis=True)
    unmarked = re.sub(r"[\0-\x08\x0b\x0c\x0e-\x1f]", " ", re.sub(r"^\s*<\?xml[^>]*\?>", "", content))
    try:
        root = lxml_html.document_fromstring(unmarked.encode("utf-8", "replace"), parser=parser)
    except (etree.ParserError, etree.XMLSyntaxError) as fault:
        raise DocumentError("The web page is empty. Save it again from the browser, with its content.") from fault
    titles = [tidy(title.text or "") for title in root.iter("title")]
    notes += tuple(prune(root))
    page = _Page()
    page.walk(root)
    page.close()
    if not page.blocks:
        raise DocumentError(
            "The web page holds no text; a script may fill it in. Print it to PDF in the browser, or copy its text."
        )
    headers = tuple(Line((Segment(title, Where(line=1)),), Where(line=1)) for title in titles if title)
    return Document("html", titled(page.blocks), page_headers=headers, notes=notes)


@dataclass(slots=True)
class _Page:
    """Collects blocks while it walks over the elements."""

    blocks: list[Table | Line] = field(default_factory=list)
    tables: int = 0
    words: str = ""
    line: int = 1
    heading: bool = False

    def walk(self, element: etree._Element) -> None:
        """Take in an element; a block ends the line before and after it."""
        tag = element.tag if isinstance(element.tag, str) else ""
        if tag in ("table", "dl", "pre"):
            self.close()
            {"table": self._table, "dl": self._definitions, "pre": self._preformatted}[tag](element)
        elif tag in BLOCKS:
            self.close()
            self.line = line_of(element, self.line)
            self.heading = tag in _HEADINGS
            if not self._alike(element):
                self._content(element)
            self.close()
            self.heading = False
        elif tag and is_leaf(element):
            self._text(inline(element, self.words))
        elif tag:
            self._content(element)

    def _content(self, element: etree._Element) -> None:
        self._text(re.sub(r"\s+", " ", element.text or ""))
        for child in element:
            self.walk(child)
            self._text(re.sub(r"\s+", " ", child.tail or ""))

    def _text(self, text: str) -> None:
        """Take in running text, whose newlines are breaks."""
        first, *others = text.split("\n")
        self.words += first
        for other in others:
            self.close()
            self.words = other

    def close(self) -> None:
        """End the line."""
        self._line([tidy(self.words)], self.line)
        self.words = ""

    def _line(self, texts: Sequence[str], number: int) -> None:
        where = Where(line=number)
        segments = tuple(Segment(text, where) for text in texts if text)
        if segments:
            self.blocks.append(Line(segments, where, heading=self.heading))

    def _preformatted(self, element: etree._Element) -> None:
        content = "".join(str(part) for part in element.itertext())
        start = line_of(element, self.line)
        self.blocks.extend(plain.blocks_of(list(enumerate(content.split("\n"), start=start))))

    def _definitions(self, element: etree._Element) -> None:
        """One line for each term and its descriptions."""
        group: list[etree._Element] = []
        for item in element.iter("dt", "dd"):
            if item.tag == "dt" and group:
                self._pair(group)
                group = []
            group.append(item)
        self._pair(group)

    def _pair(self, parts: Sequence[etree._Element]) -> None:
        if parts:
            self._line([text_of(part) for part in parts], line_of(parts[0], self.line))

    def _alike(self, parent: etree._Element) -> bool:
        """Rows made of other elements than a table's: several children that hold equally many pieces of text each."""
        rows = [child for child in parent if isinstance(child.tag, str)]
        if len(rows) < _LEAST_ALIKE or not _are_rows(parent, rows):
            return False
        width = len(rows[0])
        texts = [[text_of(piece) for piece in row] for row in rows]
        places = [line_of(row, self.line) for row in rows]
        if width == 2:
            for row, number in zip(texts, places, strict=True):
                self._line(row, number)
        else:
            cells = [
                Cell(text, row, column, Where(line=number))
                for row, (pieces, number) in enumerate(zip(texts, places, strict=True))
                for column, text in enumerate(pieces)
                if text
            ]
            self.blocks.append(Table(tuple(cells), len(rows), width, Where(line=places[0]), ruled=False))
        return True

    def _table(self, element: etree._Element) -> None:
        if _is_layout(element):
            for row in _own_rows(element):
                for cell in _own_cells(row):
                    self._content(cell)
                    self.close()
            return
        self.tables += 1
        table = _grid(element, self.tables)
        if table.cells:
            self.blocks.append(table)


def _are_rows(parent: etree._Element, rows: Sequence[etree._Element]) -> bool:
    """Whether elements look like rows: same tag, two or more leaves in each and as many in all, no text between."""
    width = len(rows[0])
    loose = (parent.text or "").strip() or any((row.tail or "").strip() for row in rows)
    if loose or width < 2 or width > 30 or rows[0].tag in ("p", "a", "tr", *_HEADINGS):
        return False
    for row in rows:
        pieces = [piece for piece in row if isinstance(piece.tag, str)]
        if row.tag != rows[0].tag or len(pieces) != width or any(not is_leaf(piece) for piece in pieces):
            return False
        if (row.text or "").strip() or any((piece.tail or "").strip() for piece in pieces):
            return False
        if any(piece.tag in ("br", "img", "sub", "sup") for piece in pieces):
            return False
    return True


def _is_layout(table: etree._Element) -> bool:
    """A table that only holds other things in their places on the page."""
    rows = _own_rows(table)
    if len(rows) == 1 and len(_own_cells(rows[0])) == 1:
        return True
    inner = list(table.iter("table"))[1:]
    return any(len(list(one.iter("tr"))) > 1 for one in inner) and len(rows) <= 3 * len(inner) + 1


def _own_rows(table: etree._Element) -> list[etree._Element]:
    return [row for row in table.iter("tr") if next(row.iterancestors("table"), None) is table]


def _own_cells(row: etree._Element) -> list[etree._Element]:
    return [cell for cell in row if cell.tag in ("td", "th")]


def _grid(element: etree._Element, number: int) -> Table:
    rows = _own_rows(element)
    taken: set[tuple[int, int]] = set()
    cells: list[Cell] = []
    width = 0
    for row, line in enumerate(rows):
        column = 0
        in_head = next(line.iterancestors("thead"), None) is not None
        for item in _own_cells(line):
            while (row, column) in taken:
                column += 1
            height, span = _span(item, "rowspan", len(rows) - row), _span(item, "colspan", _MOST_SPAN)
            for below in range(row, row + height):
                taken.update((below, beside) for beside in range(column, column + span))
            text = text_of(item)
            if text:
                where = Where(table=number, cell=address(row, column))
                cells.append(Cell(text, row, column, where, height, span, in_head or item.tag == "th"))
            column += span
            width = max(width, column)
    caption = next((text_of(one) for one in element.iter("caption")), "")
    return Table(tuple(_without_repeats(cells)), len(rows), width, Where(table=number), title=caption)


def _span(cell: etree._Element, name: str, most: int) -> int:
    printed = re.match(r"\s*(\d+)", cell.get(name, "1"))
    span = int(printed.group(1)) if printed else 1
    # Zero rows means "to the end".
    return most if span == 0 and name == "rowspan" else max(1, min(span, most))


def _without_repeats(cells: Sequence[Cell]) -> Iterator[Cell]:
    """Cells without the label that pages for small screens repeat in front of each value."""
    row_labels = {cell.row: cell.text for cell in cells if cell.column == 0}
    heads = {cell.column: cell.text for cell in cells if cell.row == 0}
    inner = [cell for cell in cells if cell.row > 0 and cell.column > 0]
    for labels, key in ((row_labels, "row"), (heads, "column")):
        led = [cell for cell in inner if _led_by(cell.text, labels.get(getattr(cell, key), ""))]
        if len(led) >= _LEAST_ALIKE and 3 * len(led) >= 2 * len(inner):
            known = {id(cell) for cell in led}
            for cell in cells:
                label = labels.get(getattr(cell, key), "")
                yield replace(cell, text=cell.text[len(label) :].lstrip(" :\n")) if id(cell) in known else cell
            return
    yield from cells


def _led_by(text: str, label: str) -> bool:
    return bool(label) and text.startswith(label) and text[len(label) : len(label) + 1] in (" ", ":", "\n")
