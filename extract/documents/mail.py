"""Saved mail with parts (EML, MHT): its sender and subject, and its text; attachments are named, not read."""

from __future__ import annotations

import re
from collections.abc import Iterator
from typing import TYPE_CHECKING

from extract.documents.decoding import decode
from extract.documents.model import Document, DocumentError, Line, Segment, Table
from extract.model import Note, Where

if TYPE_CHECKING:
    from email.message import EmailMessage, MIMEPart

_HEADERS = ("From", "Date", "Subject")
_IS_MAIL = re.compile(rb"\A(?:[A-Za-z][\w-]*:[^\n]*\n(?:[ \t][^\n]*\n)*)*?MIME-Version:", re.IGNORECASE)


def is_mail(data: bytes) -> bool:
    """Whether a file is a mail as programs exchange it, rather than a mail's text."""
    return bool(_IS_MAIL.match(data[:16384].replace(b"\r\n", b"\n").removeprefix(b"\xef\xbb\xbf").lstrip()))


def read(data: bytes) -> Document:
    """Header lines and the body; lines count in the file where the body stands there as it reads, else in the body."""
    # Every text is asked whether it is a mail; few are.
    import email.policy
    from email.message import EmailMessage

    message = email.message_from_bytes(data, policy=email.policy.default)
    if not isinstance(message, EmailMessage):
        raise DocumentError("The mail cannot be read. Copy its text into a file.")
    body = _fuller(message)
    blocks: list[Table | Line] = [
        Line((Segment(f"{name}: {message[name]}", Where(line=1)),), Where(line=1)) for name in _HEADERS if message[name]
    ]
    notes: list[Note] = list(_attachment_notes(message))
    if body is not None:
        found, more = _body(body, message is body, data)
        blocks.extend(found)
        notes.extend(more)
    if len(blocks) <= len(_HEADERS) and body is None:
        raise DocumentError("The mail holds no text, only attachments. Save them and give them as files of their own.")
    return Document("text", tuple(blocks), notes=tuple(notes))


def _fuller(message: EmailMessage) -> MIMEPart | None:
    """The plain text, or the HTML where that holds a table or the plain text says next to nothing."""
    plain, page = message.get_body(preferencelist=("plain",)), message.get_body(preferencelist=("html",))
    if plain is None or page is None:
        return plain or page
    words, markup = (part.get_payload(decode=True) for part in (plain, page))
    if not isinstance(words, bytes) or not isinstance(markup, bytes):
        return plain
    return page if b"<table" in markup.lower() or not re.search(rb"\d.*\d", words, re.DOTALL) else plain


def _with_marks(markup: str) -> bytes:
    """A page with ">" before each line that it quotes, each block of text on a line of its own."""
    from lxml import etree, html

    try:
        root = html.fromstring(markup)
    except (etree.ParserError, ValueError):
        return markup.encode()
    for element in list(root.iter("blockquote")):
        lines = [str(line).strip() for line in element.itertext() if str(line).strip()]
        for child in list(element):
            element.remove(child)
        element.text = None
        for line in lines:
            quoted = etree.SubElement(element, "p")
            quoted.text, quoted.tail = f"> {line}", "\n"
    for element in root.iter("p", "div", "br", "table", "tr", "blockquote", "li"):
        element.tail = "\n" + (element.tail or "")
    return bytes(html.tostring(root, encoding="utf-8"))


def _body(part: MIMEPart, is_whole: bool, data: bytes) -> tuple[tuple[Table | Line, ...], tuple[Note, ...]]:
    from extract.documents import text, webpage

    payload = part.get_payload(decode=True)
    content = payload if isinstance(payload, bytes) else b""
    if part.get_content_subtype() == "html":
        page = webpage.read(_with_marks(decode(content, declared=part.get_content_charset())[0]))
        return page.blocks, page.notes
    words, notes = decode(content, declared=part.get_content_charset())
    plain = str(part.get("Content-Transfer-Encoding", "7bit")).strip().lower() in ("7bit", "8bit", "binary")
    start = _first_body_line(data) if is_whole and plain else 1
    lines = list(enumerate(re.split(r"\r\n|\r|\n", words), start=start))
    return tuple(text.blocks_of(lines)), notes


def _first_body_line(data: bytes) -> int:
    head = re.split(rb"\r?\n\r?\n", data.lstrip(), maxsplit=1)[0]
    return head.count(b"\n") + 3


def _attachment_notes(message: EmailMessage) -> Iterator[Note]:
    for part in message.iter_attachments():
        name = part.get_filename()
        if name:
            yield Note(
                level="warning", message=f"Attachment {name!r} left out: save it and give it as a file of its own."
            )
