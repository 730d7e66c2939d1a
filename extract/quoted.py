"""The quoted part of a mail: what the other side wrote, which states nothing of the part that the answer offers."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from extract import trace
from extract.candidates import Candidate
from extract.documents.model import Document, Line
from extract.fields import field_of
from extract.fold import fold
from extract.vocabulary import vocabulary

_RULE = re.compile(r"^\s*[-_=]{3,}.*[-_=]{3,}\s*$")
_DOUBT = "stands in the quoted part of the mail, which may be what was asked for and not what is offered"


def quoted_lines(document: Document) -> frozenset[int]:
    """The numbers of the lines that a mail quotes: marked with ">", or all below a line that begins the quotation.

    Nothing is quoted where the mail's own lines hold no label: then the quotation is the sheet.
    """
    if document.kind != "text":
        return frozenset()
    found: set[int] = set()
    below = False
    for block in document.blocks:
        number = block.where.line
        if number is None:
            continue
        if isinstance(block, Line):
            below = below or _begins_quotation(block.text)
            marked = block.text.lstrip().startswith(">")
        else:
            marked = False
        if below or marked:
            found.add(number)
    return frozenset(found)


def _begins_quotation(text: str) -> bool:
    """Whether a line is the mark that mail programs set above the mail that is answered."""
    folded = fold(text).casefold().strip(" -_=*")
    words = vocabulary().phrases.get("original_message", ())
    if any(folded.startswith(word) for word in words) and (len(folded) < 40 or bool(_RULE.match(text))):
        return True
    wrote = vocabulary().phrases.get("wrote", ())
    return folded.endswith(":") and any(word in folded for word in wrote) and any(c.isdigit() for c in folded)


def without_quoted(candidates: Sequence[Candidate], quoted: frozenset[int]) -> list[Candidate]:
    """Candidates without those of quoted lines whose field the mail's own lines state; of others a person is asked."""
    if not quoted:
        return list(candidates)
    own = {each.field for each in candidates if each.where.line not in quoted}
    if not own - {"frequency_mhz"}:
        return list(candidates)
    kept: list[Candidate] = []
    for each in candidates:
        if each.where.line not in quoted:
            kept.append(each)
        elif each.field in own:
            trace.dropped(each, f"quoted from another mail, and the mail itself states {field_of(each.field).title}")
        else:
            kept.append(replace(each, doubts=(*each.doubts, _DOUBT)))
    return kept
