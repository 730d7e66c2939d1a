"""Which reader takes a file, and what is said of files that none can take."""

from __future__ import annotations

import io
import zipfile

import openpyxl
import pytest

from extract.documents.kinds import read_document
from extract.documents.model import DocumentError

OLE = bytes.fromhex("d0cf11e0a1b11ae1")  # mark of the compound file format, [MS-CFB] 2.2


def zipped(**parts: str) -> bytes:
    target = io.BytesIO()
    with zipfile.ZipFile(target, "w") as archive:
        for name, content in parts.items():
            archive.writestr(name, content)
    return target.getvalue()


def workbook() -> bytes:
    book = openpyxl.Workbook()
    book.active.append(["Part", "MHz"])
    book.active.append(["A1", 16])
    target = io.BytesIO()
    book.save(target)
    return target.getvalue()


@pytest.mark.parametrize(
    ("data", "name", "kind"),
    [
        (workbook(), "list.dat", "xlsx"),
        (b"a;b\n1;2\n3;4\n", "list.csv", "csv"),
        (b"a\tb\n1\t2\n3\t4\n", "list.tsv", "csv"),
        (b"a;b;c\n1;2;3\n4;5;6\n", "list.txt", "csv"),
        (b"<!doctype html><p>ESR 60 Ohm</p>", "page", "html"),
        (b"\xef\xbb\xbf<html><p>ESR 60 Ohm</p></html>", "page.txt", "html"),
        (b"ESR: 60 Ohm\n", "mail.txt", "text"),
        (b"|a|b|c|\n|---|---|---|\n|1|2|3|\n", "sheet.md", "text"),
        ("ESR: 60 Ω\n".encode("utf-16"), "sheet.txt", "text"),
    ],
)
def test_the_kind_is_told_by_the_bytes(data: bytes, name: str, kind: str) -> None:
    assert read_document(data, name).kind == kind


@pytest.mark.parametrize(
    ("data", "name", "message"),
    [
        (b"", "a.pdf", "The file is empty. Fetch it again."),
        (b"\0\0\n", "a.txt", "The file is empty. Fetch it again."),
        (
            zipped(readme="x"),
            "a.xlsx",
            "The file is a ZIP archive but no workbook. Save the workbook again as XLSX.",
        ),
        (
            zipped(readme="x"),
            "a.docx",
            "The file is a ZIP archive but no Word document. Save the document again as DOCX.",
        ),
        (
            zipped(readme="x"),
            "a.zip",
            "The file is a ZIP archive that is no document. Unpack it and give the sheets in it. "
            "Save it as PDF, XLSX, CSV, HTML, DOCX, text, PNG or JPEG.",
        ),
        (
            workbook()[:-200],
            "a.xlsx",
            "The file is damaged or cut short (its ZIP directory cannot be read). Fetch it again.",
        ),
        (
            OLE + bytes(600) + "EncryptedPackage".encode("utf-16-le"),
            "a.xlsx",
            "The file is locked with a password. Open it, save it without a password and try again.",
        ),
        (
            OLE + bytes(600) + "WordDocument".encode("utf-16-le"),
            "a.doc",
            "The file is in the old Word format (DOC). Save it as DOCX or PDF.",
        ),
        (
            OLE + bytes(600) + "Workbook".encode("utf-16-le"),
            "a.xls",
            "The workbook is damaged or cut short. Fetch it again, or open it and save it as XLSX.",
        ),
        (
            bytes(range(256)) * 8,
            "a.bin",
            "The file is of an unknown binary kind. Save it as PDF, XLSX, CSV, HTML, DOCX, text, PNG or JPEG.",
        ),
        (rb"{\rtf1 x}", "a.rtf", "The file is in Rich Text Format. Save it as DOCX or PDF."),
        (b"\x89PNG\r\n\x1a\n broken", "a.png", "The picture is damaged or of an unknown kind. Save it as PNG or JPEG."),
    ],
)
def test_a_file_that_cannot_be_read_is_told_what_is_wrong(data: bytes, name: str, message: str) -> None:
    with pytest.raises(DocumentError) as refused:
        read_document(data, name)
    assert str(refused.value) == message


def test_a_sheet_in_a_damaged_archive_is_refused() -> None:
    data = bytearray(workbook())
    place = data.index(b"xl/worksheets/sheet1.xml") + 60
    data[place : place + 40] = bytes(40)
    with pytest.raises(DocumentError, match="^The workbook is damaged or cut short"):
        read_document(bytes(data), "a.xlsx")
