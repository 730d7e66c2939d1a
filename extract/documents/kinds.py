"""Which kind of file this is, by its first bytes rather than its name, and the reader for it."""

from __future__ import annotations

import io
import re
import zipfile
from collections.abc import Callable
from pathlib import PurePath

from extract.documents.model import Document, DocumentError
from extract.model import Kind
from extract.progress import Progress

_PICTURES = (b"\x89PNG\r\n\x1a\n", b"\xff\xd8\xff", b"II*\0", b"MM\0*", b"BM", b"GIF8")
_OLD_OFFICE = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
_HTML_TAGS = re.compile(
    rb"<(?:!doctype\s+html|html|head|body|table|div|dl|ul|ol|h[1-6]|p|span|article|section|tr|td|meta)\b", re.IGNORECASE
)
# The suffixes by which a folder's sheets are told from its other files; what such a file is, its bytes decide.
SHEET_SUFFIXES: dict[str, Kind] = {
    ".pdf": "pdf",
    **dict.fromkeys((".xlsx", ".xlsm", ".xls", ".ods"), "xlsx"),
    **dict.fromkeys((".csv", ".tsv", ".tab", ".psv"), "csv"),
    **dict.fromkeys((".html", ".htm", ".xhtml"), "html"),
    ".docx": "docx",
    **dict.fromkeys((".txt", ".md", ".markdown", ".eml", ".text"), "text"),
    **dict.fromkeys((".png", ".jpg", ".jpeg", ".tif", ".tiff", ".bmp", ".gif"), "image"),
}
_DELIMITED_NAMES = frozenset({".csv", ".tsv", ".tab", ".psv"})
_MARKDOWN_NAMES = frozenset({".md", ".markdown"})
_WEB_NAMES = frozenset({".html", ".htm", ".xhtml"})
_HTML_START = re.compile(rb"(?:\xef\xbb\xbf|\xff\xfe|\xfe\xff)?\s*<(?:!doctype html|html)", re.IGNORECASE)
_HOW_TO_SAVE = "Save it as PDF, XLSX, CSV, HTML, DOCX, text, PNG or JPEG."


def kind_by_name(name: str) -> Kind:
    """The kind that a name promises, for a file that could not be read at all."""
    return SHEET_SUFFIXES.get(PurePath(name).suffix.lower(), "text")


def read_document(
    data: bytes, name: str, *, wanted: Callable[[str], bool] | None = None, progress: Progress | None = None
) -> Document:
    """Read a file of any kind.

    Parameters
    ----------
    data
        The file's bytes.
    name
        The file's name; it decides only where the bytes do not.
    wanted
        Tells from a page's bare text whether the page is worth a close look; pages of a long PDF that are not are left
        out, and one note says which.
    progress
        Told each page of a PDF before it is read.

    Raises
    ------
    DocumentError
        The file cannot be read at all; the message says why and what to do.
    """
    suffix = PurePath(name).suffix.lower()
    if not data.strip(b"\0 \t\r\n"):
        raise DocumentError("The file is empty. Fetch it again.")
    # Some servers put stray bytes ahead of the mark, and readers allow for 1,024 of them.
    if b"%PDF-" in data[:1024]:
        from extract.documents import pdf

        return pdf.read(data, wanted, progress)
    if data.startswith(b"PK\x03\x04") or data.startswith(b"PK\x05\x06"):
        return _read_zip(data, suffix)
    if data.startswith(_OLD_OFFICE):
        return _read_old_office(data, suffix)
    if data.startswith(_PICTURES) or data[4:12] in (b"ftypheic", b"ftypavif") or data[8:12] == b"WEBP":
        from extract.documents import scan

        return scan.read(data)
    return _read_text(data, suffix)


def _read_zip(data: bytes, suffix: str) -> Document:
    from extract.documents.opendocument import ZIP_FAULTS

    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            names = set(archive.namelist())
            kind = archive.read("mimetype").decode("ascii", "replace") if "mimetype" in names else ""
    except ZIP_FAULTS as fault:
        raise DocumentError(
            "The file is damaged or cut short (its ZIP directory cannot be read). Fetch it again."
        ) from fault
    if any(part.startswith("xl/") for part in names) or "opendocument.spreadsheet" in kind:
        from extract.documents import workbook

        return workbook.read_open(data) if "opendocument" in kind else workbook.read(data)
    if "word/document.xml" in names:
        from extract.documents import worddoc

        return worddoc.read(data)
    if suffix in (".xlsx", ".xlsm", ".ods"):
        raise DocumentError("The file is a ZIP archive but no workbook. Save the workbook again as XLSX.")
    if suffix == ".docx":
        raise DocumentError("The file is a ZIP archive but no Word document. Save the document again as DOCX.")
    raise DocumentError(
        f"The file is a ZIP archive that is no document. Unpack it and give the sheets in it. {_HOW_TO_SAVE}"
    )


def _read_old_office(data: bytes, suffix: str) -> Document:
    if _utf16("EncryptedPackage") in data:
        raise DocumentError("The file is locked with a password. Open it, save it without a password and try again.")
    if _utf16("Workbook") in data or _utf16("Book") in data:
        from extract.documents import workbook

        return workbook.read(data)
    if _utf16("WordDocument") in data:
        raise DocumentError("The file is in the old Word format (DOC). Save it as DOCX or PDF.")
    raise DocumentError(f"The file is in an old Office format that is not read. {_HOW_TO_SAVE}")


def _utf16(text: str) -> bytes:
    return text.encode("utf-16-le")


def _read_text(data: bytes, suffix: str) -> Document:
    if _is_binary(data):
        raise DocumentError(f"The file is of an unknown binary kind. {_HOW_TO_SAVE}")
    if data.lstrip()[:5] == b"{\\rtf":
        raise DocumentError("The file is in Rich Text Format. Save it as DOCX or PDF.")
    if suffix in _DELIMITED_NAMES:
        from extract.documents import delimited

        return delimited.read(data)
    from extract.documents import mail, text

    if mail.is_mail(data):
        return mail.read(data)
    if suffix in _MARKDOWN_NAMES:
        return text.read(data)
    if suffix in _WEB_NAMES or _is_web_page(data):
        # Another module for pages only: its library takes as long to load as a text sheet to read.
        from extract.documents import webpage

        return webpage.read(data)
    return _read_list_or_text(data)


def _is_web_page(data: bytes) -> bool:
    head = data[:4096].replace(b"\0", b"")
    return bool(_HTML_START.match(head)) or len(_HTML_TAGS.findall(head)) > 2


def _read_list_or_text(data: bytes) -> Document:
    from extract.documents import delimited, text
    from extract.documents.decoding import decode

    content, _ = decode(data)
    is_list = not text.is_markdown(content) and delimited.looks_delimited(content)
    return delimited.read(data) if is_list else text.read(data)


def _is_binary(data: bytes) -> bool:
    """Control bytes that no text holds; the zero bytes of UTF-16 do not count."""
    sample = data[:8192]
    if sample.startswith((b"\xff\xfe", b"\xfe\xff")):
        return False
    controls = sum(1 for byte in sample if byte < 32 and byte not in (0, 9, 10, 12, 13, 26, 27))
    zeros = sample.count(0)
    regular = max(sample[0::2].count(0), sample[1::2].count(0))
    return controls * 50 > len(sample) or (zeros > 0 and (regular < 0.9 * zeros or zeros * 5 < len(sample)))
