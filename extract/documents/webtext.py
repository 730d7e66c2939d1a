"""What a person sees of a web page's elements, as text: hidden parts out, raised and lowered letters tellable."""

from __future__ import annotations

import re

from lxml import etree

from extract.documents import marks
from extract.model import Note, Where

DROPPED = (
    "script", "style", "nav", "noscript", "template", "svg", "iframe", "object", "select", "button", "input",
    "textarea", "head", "link", "meta",
)  # fmt: skip
STRUCK = ("del", "s", "strike")
BLOCKS = frozenset(
    {
        "p", "div", "section", "article", "main", "header", "footer", "aside", "ul", "ol", "li", "dl", "dt", "dd",
        "h1", "h2", "h3", "h4", "h5", "h6", "pre", "blockquote", "figure", "figcaption", "form", "fieldset",
        "address", "details", "summary", "center", "hr", "tr", "td", "th", "caption", "table", "body", "html",
    }
)  # fmt: skip
_SPACES = re.compile(r"[ \t\r\n\f\u00a0\u2002-\u200a\u202f]+")
_COMMENTS = re.compile(r"/\*.*?\*/", re.DOTALL)
_CONDITIONAL = re.compile(r"@[^{}]*\{(?:[^{}]*\{[^{}]*\})*[^{}]*\}")
_RULE = re.compile(r"([^{}]+)\{([^{}]*)\}")
_CLASS = re.compile(r"(?:[a-z]\w*)?\.([\w-]+)$", re.IGNORECASE)


def prune(root: etree._Element) -> list[Note]:
    """Take out of a page what nobody sees, and what is struck out, with a note for each of these."""
    hidden = _hidden_classes(root)
    notes: list[Note] = []
    for element in list(root.iter()):
        if not isinstance(element.tag, str):
            continue
        if element.tag in STRUCK:
            words = tidy("".join(str(part) for part in element.itertext()))
            if words:
                where = Where(line=line_of(element, 1))
                notes.append(Note(level="info", message=f"Struck-out words left out: {words!r}.", where=where))
        elif element.tag not in DROPPED and not _is_hidden(element, hidden):
            continue
        _take_out(element)
    return notes


def _take_out(element: etree._Element) -> None:
    """Remove an element but keep the text behind it."""
    parent = element.getparent()
    if parent is None:
        return
    if element.tail:
        before = element.getprevious()
        if before is None:
            parent.text = (parent.text or "") + element.tail
        else:
            before.tail = (before.tail or "") + element.tail
    parent.remove(element)


def _hidden_classes(root: etree._Element) -> frozenset[str]:
    """Classes that the page's own style sheet hides on every screen."""
    found: set[str] = set()
    for style in root.iter("style"):
        sheet = _CONDITIONAL.sub("", _COMMENTS.sub("", style.text or ""))
        for selectors, body in _RULE.findall(sheet):
            if re.search(r"display\s*:\s*none", body):
                matches = (_CLASS.match(selector.strip()) for selector in selectors.split(","))
                found.update(match.group(1) for match in matches if match)
    return frozenset(found)


def _is_hidden(element: etree._Element, classes: frozenset[str]) -> bool:
    style = re.sub(r"\s", "", element.get("style", "")).lower()
    if "display:none" in style or "visibility:hidden" in style or element.get("hidden") is not None:
        return True
    return bool(classes & set(element.get("class", "").split()))


def line_of(element: etree._Element, otherwise: int) -> int:
    """The line of the file on which an element starts."""
    found: object = element.sourceline
    return found if isinstance(found, int) else otherwise


def tidy(text: str) -> str:
    """One line, single spaces."""
    return _SPACES.sub(" ", text).strip()


def is_leaf(element: etree._Element) -> bool:
    """Whether an element holds running text only."""
    return not any(isinstance(inner.tag, str) and inner.tag in BLOCKS for inner in element.iterdescendants())


def text_of(element: etree._Element) -> str:
    """An element's text, its lines (breaks, paragraphs, list items, inner table rows) parted by newlines."""
    stacked = "\n".join(tidy(line) for line in flow(element, "").split("\n"))
    # A blank line at the head holds the place of a label's heading in the cell beside it.
    return re.sub(r"\n{3,}", "\n\n", stacked).rstrip("\n") if stacked.strip() else ""


def flow(element: etree._Element, before: str) -> str:
    """Text in an element as it goes on after `before`; newlines are real breaks, the file's own are spaces."""
    text = _SPACES.sub(" ", element.text or "")
    for child in element:
        if isinstance(child.tag, str):
            text += inline(child, before + text)
        text += _SPACES.sub(" ", child.tail or "")
    return text


def inline(child: etree._Element, before: str) -> str:
    """Text of an element within running text."""
    tag = str(child.tag)
    if tag in ("br", "img"):
        return "\n" if tag == "br" else child.get("alt") or ""
    inner = flow(child, before)
    if tag in ("sup", "msup"):
        return marks.raised(inner, before) if tag == "sup" else _math_power(child, before)
    if tag == "sub":
        return marks.lowered(inner)
    if tag in ("td", "th"):
        return inner + "  "
    if tag in BLOCKS and inner.strip():
        start = "" if not before.strip() or before.endswith("\n") else "\n"
        inner = start + inner.strip(" ") + "\n"
    return inner


def _math_power(element: etree._Element, before: str) -> str:
    """A power in a formula: base and exponent."""
    parts = [tidy("".join(str(text) for text in part.itertext())) for part in element]
    base = parts[0] if parts else ""
    return base + "".join(marks.raised(part, before + base) for part in parts[1:])
