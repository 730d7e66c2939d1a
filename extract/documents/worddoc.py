"""Word documents (DOCX): paragraphs, tables with merged cells, text boxes, footnotes, page headers and footers."""

from __future__ import annotations

import io
import posixpath
import zipfile
from collections.abc import Iterator
from dataclasses import dataclass, field

from lxml import etree

from extract.documents import marks, spacing
from extract.documents.grid import address, titled
from extract.documents.model import Cell, Document, DocumentError, Line, Segment, Table
from extract.documents.opendocument import ZIP_FAULTS
from extract.model import Note, Where

_W = "{http://schemas.openxmlformats.org/wordprocessingml/2006/main}"
_M = "{http://schemas.openxmlformats.org/officeDocument/2006/math}"
_MC = "{http://schemas.openxmlformats.org/markup-compatibility/2006}"
_STRICT = b"http://purl.oclc.org/ooxml/"
_STRICT_NAMES = (
    (b"http://purl.oclc.org/ooxml/wordprocessingml/main", _W[1:-1].encode()),
    (b"http://purl.oclc.org/ooxml/officeDocument/math", _M[1:-1].encode()),
)
_SKIPPED = frozenset(
    {f"{_W}del", f"{_W}moveFrom", f"{_W}instrText", f"{_W}rt", f"{_MC}Fallback", f"{_W}pPr", f"{_W}rPr"}
)
_WRAPPERS = frozenset({f"{_W}sdt", f"{_W}sdtContent", f"{_W}ins", f"{_W}moveTo", f"{_W}customXml", f"{_W}smartTag"})
_HEADING_NAMES = ("heading", "title", "subtitle", "überschrift", "titel", "标题", "見出し")


def read(data: bytes) -> Document:
    """Tables and lines of a document; `where` is the table and cell, or the number of the line in the running text."""
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            return _Reader(archive).document()
    except ZIP_FAULTS as fault:
        raise DocumentError(
            "The Word document is damaged or cut short. Fetch it again, or open it in Word and save it as DOCX or PDF."
        ) from fault


def _parse(archive: zipfile.ZipFile, part: str) -> etree._Element:
    content = archive.read(part)
    if _STRICT in content[:4096]:
        for strict, usual in _STRICT_NAMES:
            content = content.replace(strict, usual)
    return etree.fromstring(content, etree.XMLParser(resolve_entities=False, huge_tree=True))


def _is_on(properties: etree._Element | None, name: str) -> bool:
    """Whether a switch such as `strike` is set among a run's properties."""
    switch = properties.find(f"{_W}{name}") if properties is not None else None
    return switch is not None and switch.get(f"{_W}val", "1") not in ("0", "false", "none", "off")


@dataclass(slots=True)
class _Reader:
    """Reads the parts of one document."""

    archive: zipfile.ZipFile
    blocks: list[Table | Line] = field(default_factory=list)
    notes: list[Note] = field(default_factory=list)
    line: int = 0
    tables: int = 0
    footnotes: dict[str, int] = field(default_factory=dict)
    heading_styles: frozenset[str] = frozenset()

    def document(self) -> Document:
        """All of it; page headers and footers apart, footnotes at the end."""
        names = set(self.archive.namelist())
        if "word/styles.xml" in names:
            self.heading_styles = _heading_styles(_parse(self.archive, "word/styles.xml"))
        body = _parse(self.archive, "word/document.xml").find(f"{_W}body")
        if body is not None:
            self._flow(body)
        self._read_footnotes(names)
        headers = tuple(self._page_headers(names))
        if not self.blocks and not headers:
            raise DocumentError("The Word document holds no text; it may hold pictures only. Save them as PDF or PNG.")
        return Document("docx", titled(self.blocks), page_headers=headers, notes=tuple(self.notes))

    def _flow(self, parent: etree._Element) -> None:
        """Paragraphs and tables in their order; paragraphs with the same tabs are a table."""
        tabbed: list[tuple[int, str]] = []
        for element in _unwrapped(parent):
            if element.tag == f"{_W}p":
                texts = _Paragraph(self, element).text().split("\n")
                if len(texts) == 1 and texts[0].count("\t") >= 2:
                    self.line += 1
                    tabbed.append((self.line, texts[0]))
                else:
                    self._tabbed(tabbed)
                    self._paragraph(element, texts)
                for box in _text_boxes(element):
                    self._tabbed(tabbed)
                    self._flow(box)
            elif element.tag == f"{_W}tbl":
                self._tabbed(tabbed)
                self._table(element)
        self._tabbed(tabbed)

    def _tabbed(self, lines: list[tuple[int, str]]) -> None:
        """What the run of tabbed paragraphs is: a table, or lines."""
        table = spacing.by_tabs(lines) if len(lines) > 1 else None
        if table:
            self.blocks.append(table)
        else:
            self.blocks.extend(line for number, text in lines if (line := _line(text, Where(line=number))))
        lines.clear()

    def _paragraph(self, element: etree._Element, texts: list[str]) -> None:
        style = element.find(f"{_W}pPr/{_W}pStyle")
        outline = element.find(f"{_W}pPr/{_W}outlineLvl")
        heading = outline is not None or (style is not None and style.get(f"{_W}val") in self.heading_styles)
        for text in texts:
            self.line += 1
            line = _line(text, Where(line=self.line), heading=heading)
            if line:
                self.blocks.append(line)

    def _table(self, element: etree._Element) -> None:
        rows = [row for row in _unwrapped(element) if row.tag == f"{_W}tr"]
        cells = [[cell for cell in _unwrapped(row) if cell.tag == f"{_W}tc"] for row in rows]
        if len(rows) == 1 and len(cells[0]) == 1:  # a frame drawn round running text
            self._flow(cells[0][0])
            return
        self.tables += 1
        table = _Grid(self, self.tables).table(rows)
        if table.cells:
            self.blocks.append(table)

    def _read_footnotes(self, names: set[str]) -> None:
        for part, tag in (("word/footnotes.xml", "footnote"), ("word/endnotes.xml", "endnote")):
            if part not in names:
                continue
            for note in _parse(self.archive, part).iter(f"{_W}{tag}"):
                number = self.footnotes.get(f"{tag}{note.get(f'{_W}id')}")
                text = " ".join(_Paragraph(self, one).text().strip() for one in note.iter(f"{_W}p")).strip()
                if number is not None and text:
                    self.line += 1
                    line = _line(f"{marks.raised(str(number), 'note').strip()} {text}", Where(line=self.line))
                    self.blocks.extend([line] if line else [])

    def _page_headers(self, names: set[str]) -> Iterator[Line]:
        seen: set[str] = set()
        for part in sorted(name for name in names if _is_header(name)):
            for paragraph in _parse(self.archive, part).iter(f"{_W}p"):
                for text in _Paragraph(self, paragraph).text().split("\n"):
                    line = _line(text, Where())
                    if line and line.text not in seen:
                        seen.add(line.text)
                        yield line


def _is_header(part: str) -> bool:
    return posixpath.dirname(part) == "word" and posixpath.basename(part).startswith(("header", "footer"))


def _heading_styles(styles: etree._Element) -> frozenset[str]:
    found = set()
    for style in styles.iter(f"{_W}style"):
        name = style.find(f"{_W}name")
        if name is not None and name.get(f"{_W}val", "").lower().startswith(_HEADING_NAMES):
            found.add(style.get(f"{_W}styleId", ""))
    return frozenset(found)


def _unwrapped(parent: etree._Element) -> Iterator[etree._Element]:
    """Children, those of content controls and accepted changes among them."""
    for child in parent:
        if child.tag in _WRAPPERS:
            yield from _unwrapped(child)
        elif child.tag == f"{_MC}AlternateContent":
            choice = child.find(f"{_MC}Choice")
            yield from _unwrapped(choice if choice is not None else child)
        elif child.tag not in _SKIPPED:
            yield child


def _text_boxes(paragraph: etree._Element) -> Iterator[etree._Element]:
    """Text boxes anchored in a paragraph; their older twin for older programs is left out, as is one box in another."""
    for box in paragraph.iter(f"{_W}txbxContent"):
        above = [one.tag for one in box.iterancestors()]
        if f"{_MC}Fallback" not in above and f"{_W}txbxContent" not in above[: above.index(f"{_W}p") + 1]:
            yield box


def _line(text: str, where: Where, *, heading: bool = False) -> Line | None:
    segments = tuple(Segment(piece.text, where) for piece in spacing.pieces(text))
    return Line(segments, where, heading=heading) if segments else None


class _Paragraph:
    """Collects the text of one paragraph, run after run."""

    def __init__(self, reader: _Reader, element: etree._Element) -> None:
        self.reader = reader
        self.element = element
        self.parts: list[str] = []

    def text(self) -> str:
        """The paragraph's text; breaks as newlines, tabs as tabs."""
        self._collect(self.element)
        return "".join(self.parts)

    def _collect(self, parent: etree._Element) -> None:
        for child in _unwrapped(parent):
            if child.tag == f"{_W}r":
                self._run(child)
            elif child.tag == f"{_M}t":
                self.parts.append(child.text or "")
            elif child.tag in (f"{_M}sup", f"{_M}sub"):
                self._script(child)
            elif child.tag not in (f"{_W}txbxContent", f"{_W}tbl"):
                self._collect(child)

    def _script(self, element: etree._Element) -> None:
        text = "".join(part.text or "" for part in element.iter(f"{_M}t"))
        raised = element.tag == f"{_M}sup"
        self.parts.append(marks.raised(text, "".join(self.parts)) if raised else marks.lowered(text))

    def _run(self, run: etree._Element) -> None:
        properties = run.find(f"{_W}rPr")
        if _is_on(properties, "vanish"):
            return
        text = "".join(self._run_parts(run))
        if _is_on(properties, "strike") or _is_on(properties, "dstrike"):
            if text.strip():
                self.reader.notes.append(
                    Note(
                        level="info",
                        message=f"Struck-out words left out: {text.strip()!r}.",
                        where=Where(line=self.reader.line + 1),
                    )
                )
            return
        align = properties.find(f"{_W}vertAlign") if properties is not None else None
        height = align.get(f"{_W}val") if align is not None else None
        if height == "superscript":
            text = marks.raised(text, "".join(self.parts))
        elif height == "subscript":
            text = marks.lowered(text)
        self.parts.append(text)

    def _run_parts(self, run: etree._Element) -> Iterator[str]:
        fixed = {"tab": "\t", "br": "\n", "cr": "\n", "noBreakHyphen": "-", "ptab": "\t"}
        for child in _unwrapped(run):
            name = etree.QName(child).localname
            if name == "t":
                yield child.text or ""
            elif name in fixed:
                yield fixed[name]
            elif name == "sym":
                yield chr(int(child.get(f"{_W}char", "20"), 16))
            elif name in ("footnoteReference", "endnoteReference"):
                key = f"{name.removesuffix('Reference')}{child.get(f'{_W}id')}"
                number = self.reader.footnotes.setdefault(key, len(self.reader.footnotes) + 1)
                yield marks.raised(str(number), "note")
            elif name == "ruby":
                yield "".join(part.text or "" for part in child.iterfind(f"{_W}rubyBase//{_W}t"))


@dataclass(slots=True)
class _Grid:
    """Places the cells of one table."""

    reader: _Reader
    number: int
    cells: dict[tuple[int, int], Cell] = field(default_factory=dict)

    def table(self, rows: list[etree._Element]) -> Table:
        """The table, with cells merged over rows standing once."""
        width = 0
        for row, element in enumerate(rows):
            column = _number(element.find(f"{_W}trPr/{_W}gridBefore"), 0)
            header = _is_on(element.find(f"{_W}trPr"), "tblHeader")
            for cell in (one for one in _unwrapped(element) if one.tag == f"{_W}tc"):
                span = _number(cell.find(f"{_W}tcPr/{_W}gridSpan"), 1)
                merge = cell.find(f"{_W}tcPr/{_W}vMerge")
                if merge is not None and merge.get(f"{_W}val", "continue") == "continue":
                    self._grow(row, column)
                else:
                    where = Where(table=self.number, cell=address(row, column))
                    self.cells[row, column] = Cell(self._text(cell), row, column, where, 1, span, header)
                column += span
            width = max(width, column)
        filled = tuple(cell for cell in self.cells.values() if cell.text)
        return Table(filled, len(rows), width, Where(table=self.number))

    def _grow(self, row: int, column: int) -> None:
        """Let the cell above reach down into this row."""
        for above in range(row - 1, -1, -1):
            cell = self.cells.get((above, column))
            if cell is not None:
                grown = Cell(
                    cell.text,
                    above,
                    column,
                    cell.where,
                    row - above + 1,
                    cell.column_span,
                    cell.header,
                    cell.confidence,
                )
                self.cells[above, column] = grown
                return

    def _text(self, cell: etree._Element) -> str:
        lines: list[str] = []
        for element in _unwrapped(cell):
            if element.tag == f"{_W}p":
                lines.append(_Paragraph(self.reader, element).text().strip())
            elif element.tag == f"{_W}tbl":
                lines.extend(self._inner_rows(element))
        return "\n".join(lines).rstrip() if any(lines) else ""

    def _inner_rows(self, table: etree._Element) -> Iterator[str]:
        """A table in a cell, one line for each of its rows."""
        for row in (one for one in _unwrapped(table) if one.tag == f"{_W}tr"):
            texts = [self._text(cell).replace("\n", " ") for cell in _unwrapped(row) if cell.tag == f"{_W}tc"]
            yield "  ".join(text for text in texts if text)


def _number(element: etree._Element | None, default: int) -> int:
    value = element.get(f"{_W}val", "") if element is not None else ""
    return int(value) if value.isdigit() else default
