"""Plain text, mail and Markdown: lines of segments, and tables drawn with pipes or held by spaces."""

from __future__ import annotations

import html
import re
from collections.abc import Iterator, Sequence

from extract.documents import marks, spacing
from extract.documents.decoding import decode
from extract.documents.grid import titled
from extract.documents.model import Cell, Document, Line, Segment, Table
from extract.model import Note, Where

Numbered = Sequence[tuple[int, str]]

_LINE_END = re.compile(r"\r\n|\r|\n")
_KEY = re.compile(r"(?<!\S)(?=[A-Za-z][\w/.#-]{0,24}=\S)")
_PAIR = re.compile(r"[^:：=;；]{1,60}\s*[:：=]\s*\S")
_PIPE_RULE = re.compile(r"\s*\|?\s*:?-{2,}:?\s*(?:\|\s*:?-{2,}:?\s*)*\|?\s*$")
_BOX_RULE = re.compile(r"\s*[+├┌└╔╠╚┏┣┗][-=+─━═┬┼┴╦╬╩┳╋┻┐┤┘╗╣╝┓┫┛]{2,}\s*$")
_HEADING = re.compile(r"\s{0,3}#{1,6}\s+(.*?)\s*#*\s*$")
_UNDERLINE = re.compile(r"\s{0,3}(=|-){3,}\s*$")
_BOLD = re.compile(r"(\*\*|__)(?=\S)(.+?)(?<=\S)\1")
_STRUCK = re.compile(r" ?~~(?=\S)(.+?)(?<=\S)~~")
_LINK = re.compile(r"!?\[([^\]]*)\]\([^)]*\)")
_RAISED = re.compile(r"<sup>(.*?)</sup>", re.IGNORECASE)
_LOWERED = re.compile(r"<sub>(.*?)</sub>", re.IGNORECASE)
_BREAK = re.compile(r"\s*<br\s*/?>\s*", re.IGNORECASE)
_VERTICALS = str.maketrans("│┃║┆┊", "|||||")


def read(data: bytes) -> Document:
    """Lines and tables of a text; `where` is the line, counted from 1."""
    text, notes = decode(data)
    lines = [(number, line) for number, line in enumerate(_LINE_END.split(text), start=1)]
    if is_markdown(text):
        cleaned, struck = _without_markup(lines)
        return Document("text", titled(blocks_of(cleaned)), notes=(*notes, *struck))
    return Document("text", titled(blocks_of(lines)), notes=notes)


def is_markdown(text: str) -> bool:
    """Whether a text is marked up: a pipe table's second line, or headings and bold type."""
    lines = text.splitlines()
    if any("|" in line and _PIPE_RULE.match(line) for line in lines):
        return True
    headings = sum(1 for line in lines if re.match(r"#{1,6} \S", line))
    return headings > 0 and (headings > 1 or bool(_BOLD.search(text)))


def _without_markup(lines: Numbered) -> tuple[list[tuple[int, str]], list[Note]]:
    """Lines without marks for bold type, links and the like; struck-out words go, with a note."""
    cleaned, notes = [], []
    for number, line in lines:
        struck = [match.group(1) for match in _STRUCK.finditer(line)]
        if any(any(character.isalnum() for character in words) for words in struck):
            words = ", ".join(repr(words) for words in struck)
            notes.append(Note(level="info", message=f"Struck-out words left out: {words}.", where=Where(line=number)))
        plain = _STRUCK.sub("", line)
        plain = _BOLD.sub(r"\2", plain)
        plain = _LINK.sub(r"\1", plain).replace("`", "")
        plain = _RAISED.sub(lambda found: marks.raised(found.group(1), found.string[: found.start()]), plain)
        plain = _LOWERED.sub(lambda found: marks.lowered(found.group(1)), plain)
        cleaned.append((number, html.unescape(plain)))
    return cleaned, notes


def blocks_of(lines: Numbered) -> Iterator[Table | Line]:
    """Tables and lines of numbered lines of text."""
    index = 0
    while index < len(lines):
        number, text = lines[index]
        run = _pipe_run(lines, index)
        if run:
            yield from _pipe_table(lines[index : index + run])
            index += run
            continue
        run = _column_run(lines, index)
        table = _spaced_table(lines[index : index + run]) if run >= 2 else None
        if table:
            yield table
            index += run
            continue
        if text.strip() and not spacing.is_rule(text):
            following = lines[index + 1][1] if index + 1 < len(lines) else ""
            yield _line(number, text, underlined=bool(_UNDERLINE.match(following)) and len(text.strip()) < 80)
        index += 1


def _pipe_run(lines: Numbered, start: int) -> int:
    """How many lines from here on are rows of a table drawn with pipes; 0 where there is none."""
    end = start
    while end < len(lines) and _is_pipe_row(lines[end][1]):
        end += 1
    run = [text for _, text in lines[start:end]]
    if any(_PIPE_RULE.match(text) and "|" in text or _BOX_RULE.match(text) for text in run):
        return len(run)
    return len(run) if len(run) >= 2 and all(text.strip()[:1] in "|│┃║" for text in run) else 0


def _is_pipe_row(text: str) -> bool:
    return "|" in text.translate(_VERTICALS) or bool(_BOX_RULE.match(text))


def _pipe_table(lines: Numbered) -> Iterator[Table]:
    """A Markdown table, or a box whose rows may be several lines high."""
    boxed = sum(1 for _, text in lines if _BOX_RULE.match(text)) > 2
    rows: list[list[tuple[int, list[str]]]] = []
    is_open = False
    rules: list[int] = []
    for number, text in lines:
        if _BOX_RULE.match(text) or _PIPE_RULE.match(text):
            rules.append(len(rows))
            is_open = False
            continue
        texts = _pipe_cells(text)
        if boxed and is_open:
            rows[-1].append((number, texts))
        else:
            rows.append([(number, texts)])
        is_open = True
    if not rows:
        return
    header_rows = next((rule for rule in rules if rule), 0)
    header_rows = header_rows if len(rules) < len(rows) or not boxed else 1
    width = max(len(texts) for row in rows for _, texts in row)
    cells = [
        Cell(text, row, column, Where(line=number), header=row < header_rows)
        for row, parts in enumerate(rows)
        for column in range(width)
        for number, text in [_stacked(parts, column)]
        if text
    ]
    yield Table(tuple(cells), len(rows), width, Where(line=lines[0][0]))


def _stacked(parts: Sequence[tuple[int, list[str]]], column: int) -> tuple[int, str]:
    texts = [(number, texts[column]) for number, texts in parts if column < len(texts) and texts[column]]
    if not texts:
        return parts[0][0], ""
    return texts[0][0], "\n".join(text for _, text in texts)


def _pipe_cells(text: str) -> list[str]:
    inner = text.translate(_VERTICALS).strip()
    inner = inner[1:] if inner.startswith("|") else inner
    inner = inner[:-1] if inner.endswith("|") and not inner.endswith("\\|") else inner
    return [_BREAK.sub("\n", cell.replace("\\|", "|")).strip() for cell in re.split(r"(?<!\\)\|", inner)]


def _column_run(lines: Numbered, start: int) -> int:
    """How many lines from here on have columns; rules may stand between them, blank lines end them."""
    end = start
    while end < len(lines):
        text = lines[end][1]
        if not text.strip() or text.lstrip().startswith(">"):
            break
        if not spacing.is_rule(text) and len(spacing.pieces(text)) < 2 and not _is_continuation(lines, start, end):
            break
        end += 1
    while end > start and spacing.is_rule(lines[end - 1][1]):
        end -= 1
    return end - start


def _is_continuation(lines: Numbered, start: int, index: int) -> bool:
    """A line with one piece, far from the left edge, goes on with a column of the line above it."""
    if index == start:
        return False
    indent = len(lines[index][1]) - len(lines[index][1].lstrip())
    return indent >= 8 and any(
        abs(piece.start - indent) <= 1 for piece in spacing.pieces(lines[index - 1][1].expandtabs(8))
    )


def _spaced_table(lines: Numbered) -> Table | None:
    if all("\t" in text for _, text in lines):
        tabbed = spacing.by_tabs(lines)
        if tabbed:
            return tabbed
    return spacing.by_position(lines)


def _line(number: int, text: str, *, underlined: bool) -> Line:
    where = Where(line=number)
    heading = _HEADING.match(text)
    body = heading.group(1) if heading else text
    texts = [part for line in _BREAK.split(body) for part in _segments(line)]
    return Line(
        tuple(Segment(part, where) for part in texts) or (Segment(body.strip(), where),),
        where,
        heading=bool(heading) or underlined,
    )


# What a chat sets before each message: "[10:05, 5/3/2026] Name: ".
_STAMP = re.compile(r"^\s*(?P<stamp>\[[^\]]*\d{1,2}:\d{2}[^\]]*\]\s*[^:\[\]]{1,60}):\s+(?=\S)")


def _segments(text: str) -> list[str]:
    """Pieces of a line, and within a piece each KEY=VALUE or each `label: value` between semicolons."""
    if (stamp := _STAMP.match(text)) is not None:
        return [stamp["stamp"], *_segments(text[stamp.end() :])]
    found: list[str] = []
    for piece in spacing.pieces(text):
        keys = [part.strip() for part in _KEY.split(piece.text) if part.strip()]
        if len(keys) > 1 and sum("=" in part for part in keys) > 1:
            found.extend(keys)
            continue
        for separator in (r";", r"；", r"\s\|\s"):
            pairs = [part.strip() for part in re.split(separator, piece.text) if part.strip()]
            if len(pairs) > 1 and sum(bool(_PAIR.match(part)) for part in pairs) * 3 >= len(pairs) * 2:
                found.extend(pairs)
                break
        else:
            found.append(piece.text)
    return found
