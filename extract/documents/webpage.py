"""Web pages: tables with their spans, definition lists, headings, paragraphs and list items in the page's order."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field

from lxml import etree
from lxml import html as lxml_html

from extract.documents import marks
from extract.documents.decoding import decode
from extract.documents.grid import address
from extract.documents.model import Cell, Document, DocumentError, Line, Segment, Table
from extract.documents.spacing import pieces
from extract.model import Note, Where

_DROPPED = frozenset(
    {
        "script", "style", "nav", "noscript", "template", "svg", "math", "iframe", "object", "select", "option",
        "button", "input", "textarea", "head", "title", "link", "meta",
    }
)  # fmt: skip
_STRUCK = frozenset({"del", "s", "strike"})
_BLOCKS = frozenset(
    {
        "p", "div", "section", "article", "main", "header", "footer", "aside", "ul", "ol", "li", "dl", "dt", "dd",
        "h1", "h2", "h3", "h4", "h5", "h6", "pre", "blockquote", "figure", "figcaption", "form", "fieldset",
        "address", "details", "summary", "center", "hr", "tr", "td", "th", "caption", "table", "body", "html",
    }
)  # fmt: skip
_HEADINGS = frozenset({"h1", "h2", "h3", "h4", "h5", "h6"})
_META = re.compile(
    rb"""<meta[^>]+charset\s*=\s*["']?\s*([\w-]+)|<\?xml[^>]+encoding\s*=\s*["']([\w-]+)""", re.IGNORECASE
)
_SPACES = re.compile(r"[ \t\r\n\f\u00a0\u2002-\u200a\u202f]+")
_MOST_SPAN = 1000


def read(data: bytes) -> Document:
    """Tables and lines of a page; `where` is the table and cell, or the line that the text starts on."""
    declared = _META.search(data[:4096])
    encoding = next((group.decode("ascii") for group in declared.groups() if group), None) if declared else None
    text, notes = decode(data, declared=encoding)
    parser = lxml_html.HTMLParser(encoding="utf-8", huge_tree=True, remove_comments=True, remove_pis=True)
    try:
        root = lxml_html.document_fromstring(_without_declaration(text).encode("utf-8", "replace"), parser=parser)
    except (etree.ParserError, etree.XMLSyntaxError) as fault:
        raise DocumentError("The web page is empty. Save it again from the browser, with its content.") from fault
    page = _Page()
    page.walk(root)
    page.close()
    if not page.blocks:
        raise DocumentError(
            "The web page holds no text; a script may fill it in. Print it to PDF in the browser, or copy its text."
        )
    return Document("html", tuple(page.blocks), notes=notes + tuple(page.notes))


def _without_declaration(text: str) -> str:
    return re.sub(r"^\s*<\?xml[^>]*\?>", "", text)


@dataclass(slots=True)
class _Page:
    """Collects blocks while it walks over the elements."""

    blocks: list[Table | Line] = field(default_factory=list)
    notes: list[Note] = field(default_factory=list)
    tables: int = 0
    term: list[str] = field(default_factory=list)
    words: list[str] = field(default_factory=list)
    line_number: int = 1
    heading: bool = False

    def walk(self, element: etree._Element) -> None:
        """Take an element's text and children in; a block ends the line before and after it."""
        if not isinstance(element.tag, str):
            return
        tag = element.tag.lower()
        if tag in _DROPPED or _is_hidden(element):
            return
        if tag == "table":
            self.close()
            self._table(element)
            return
        if tag == "dl":
            self.close()
            self._definitions(element)
            return
        is_block = tag in _BLOCKS
        if is_block or tag == "br":
            self.close()
            self.line_number = _line_of(element, self.line_number)
        if tag in _HEADINGS:
            self.heading = True
        if not is_block and tag != "br" and not len(element):
            self.words.append(_inline(element, "".join(self.words)))
            return
        self._content(element, keep_lines=tag == "pre")
        if is_block:
            self.close()
        if tag in _HEADINGS:
            self.heading = False

    def _content(self, element: etree._Element, *, keep_lines: bool) -> None:
        if keep_lines:
            for offset, line in enumerate("".join(str(part) for part in element.itertext()).split("\n")):
                self.line_number = (_line_of(element, self.line_number)) + offset
                self.words.append(line)
                self.close(keep_gaps=True)
            return
        self.words.append(element.text or "")
        for child in element:
            self.walk(child)
            self.words.append(child.tail or "")

    def close(self, *, keep_gaps: bool = False) -> None:
        """End the line."""
        text = "".join(self.words)
        self.words = []
        if keep_gaps:
            texts = [piece.text for piece in pieces(text.replace("\u00a0", " "))]
        else:
            tidy = _SPACES.sub(" ", text).strip()
            texts = [tidy] if tidy else []
        if texts:
            where = Where(line=self.line_number)
            self.blocks.append(Line(tuple(Segment(part, where) for part in texts), where, heading=self.heading))

    def _definitions(self, element: etree._Element) -> None:
        """One line for each term and its description."""
        term: etree._Element | None = None
        for item in element.iter("dt", "dd"):
            if item.tag == "dt":
                if term is not None:
                    self._pair(term, None)
                term = item
            else:
                self._pair(term, item)
                term = None
        if term is not None:
            self._pair(term, None)

    def _pair(self, term: etree._Element | None, description: etree._Element | None) -> None:
        parts = [part for part in (term, description) if part is not None]
        texts = [text for part in parts if (text := cell_text(part))]
        if texts:
            first, last = (Where(line=_line_of(part, self.line_number)) for part in (parts[0], parts[-1]))
            places = (first, last)[: len(texts)]
            self.blocks.append(
                Line(tuple(Segment(text, where) for text, where in zip(texts, places, strict=True)), first)
            )

    def _table(self, element: etree._Element) -> None:
        if _is_layout(element):
            for cell in _own_cells(element):
                self._content(cell, keep_lines=False)
                self.close()
            return
        self.tables += 1
        table, struck = _grid(element, self.tables)
        if table.cells:
            self.blocks.append(table)
        self.notes.extend(struck)


def _line_of(element: etree._Element, otherwise: int) -> int:
    found: object = element.sourceline
    return found if isinstance(found, int) else otherwise


def _is_hidden(element: etree._Element) -> bool:
    style = re.sub(r"\s", "", element.get("style", "")).lower()
    return "display:none" in style or "visibility:hidden" in style or element.get("hidden") is not None


def _is_layout(table: etree._Element) -> bool:
    """A table that only holds other tables in their places on the page."""
    inner = list(table.iter("table"))[1:]
    if not inner:
        return False
    return any(len(list(one.iter("tr"))) > 1 for one in inner) and len(_own_rows(table)) <= 3 * len(inner) + 1


def _own_rows(table: etree._Element) -> list[etree._Element]:
    return [row for row in table.iter("tr") if next(row.iterancestors("table")) is table]


def _own_cells(table: etree._Element) -> Iterator[etree._Element]:
    for row in _own_rows(table):
        yield from (cell for cell in row if cell.tag in ("td", "th"))


def _grid(element: etree._Element, number: int) -> tuple[Table, list[Note]]:
    rows = _own_rows(element)
    taken: dict[tuple[int, int], bool] = {}
    cells: list[Cell] = []
    notes: list[Note] = []
    width = 0
    for row, line in enumerate(rows):
        column = 0
        for item in (cell for cell in line if cell.tag in ("td", "th")):
            while (row, column) in taken:
                column += 1
            height, span = _span(item, "rowspan", len(rows) - row), _span(item, "colspan", _MOST_SPAN)
            for covered in range(row, row + height):
                taken.update(((covered, place), True) for place in range(column, column + span))
            where = Where(table=number, cell=address(row, column))
            text = cell_text(item)
            notes.extend(_struck_note(item, where))
            is_header = item.tag == "th" or next(line.iterancestors("thead"), None) is not None
            if text:
                cells.append(Cell(text, row, column, where, height, span, is_header))
            column += span
            width = max(width, column)
    caption = next((cell_text(one) for one in element.iter("caption")), "")
    return Table(tuple(cells), len(rows), width, Where(table=number), title=caption), notes


def _span(cell: etree._Element, name: str, most: int) -> int:
    printed = re.match(r"\s*(\d+)", cell.get(name, "1"))
    span = int(printed.group(1)) if printed else 1
    # Zero means "to the end" for rows.
    return most if span == 0 and name == "rowspan" else max(1, min(span, most))


def _struck_note(element: etree._Element, where: Where) -> Iterator[Note]:
    for struck in element.iter(*_STRUCK):
        words = _SPACES.sub(" ", "".join(str(part) for part in struck.itertext())).strip()
        if words:
            yield Note(level="info", message=f"Struck-out words left out: {words!r}.", where=where)


def cell_text(element: etree._Element) -> str:
    """An element's text, its lines (breaks, paragraphs, list items, inner table rows) parted by newlines."""
    text = _flow(element, "")
    lines = (_SPACES.sub(" ", line).strip() for line in text.split("\n"))
    stacked = "\n".join(lines)
    # A blank line at the head holds the place of a label's heading in the cell beside it.
    return re.sub(r"\n{3,}", "\n\n", stacked).rstrip("\n") if stacked.strip() else ""


def _flow(element: etree._Element, before: str) -> str:
    text = _SPACES.sub(" ", element.text or "")
    for child in element:
        if isinstance(child.tag, str):
            text += _inline(child, before + text)
        text += _SPACES.sub(" ", child.tail or "")
    return text


def _inline(child: etree._Element, before: str) -> str:
    tag = child.tag.lower() if isinstance(child.tag, str) else ""
    if tag in _DROPPED or tag in _STRUCK or _is_hidden(child):
        return ""
    if tag in ("br", "img"):
        return "\n" if tag == "br" else child.get("alt") or ""
    inner = _flow(child, before)
    if tag == "sup":
        return marks.raised(inner, before)
    if tag == "sub":
        return marks.lowered(inner)
    if tag in ("td", "th"):
        return inner + "  "
    if tag in _BLOCKS and inner.strip():
        start = "" if not before.strip() or before.endswith("\n") else "\n"
        inner = start + inner.strip(" ") + "\n"
    return inner
