"""Saved mail. Messages are made by the standard library's email package (RFC 5322, RFC 2045)."""

from __future__ import annotations

from email.message import EmailMessage

import pytest

from extract.documents.kinds import read_document
from extract.documents.mail import is_mail
from extract.documents.model import DocumentError, Line, Table


def message(text: str = "", **headers: str) -> EmailMessage:
    mail = EmailMessage()
    mail["From"], mail["Subject"] = "Ines <ines@oskaren.example>", "26 MHz Angebot für Sie"
    for name, value in headers.items():
        mail[name] = value
    if text:
        mail.set_content(text)
    return mail


def test_text_in_a_transfer_encoding_is_read() -> None:
    document = read_document(message("Lastkapazität: 9 pF\nESR: 45 Ω\n").as_bytes(), "offer.eml")
    assert [block.text for block in document.blocks if isinstance(block, Line)] == [
        "From: Ines <ines@oskaren.example>",
        "Subject: 26 MHz Angebot für Sie",
        "Lastkapazität: 9 pF",
        "ESR: 45 Ω",
    ]


def test_a_body_that_stands_in_the_file_keeps_its_lines() -> None:
    data = message("ESR: 45 ohm\n").as_bytes()
    last = read_document(data, "offer.eml").blocks[-1]
    assert data.decode().split("\n")[(last.where.line or 0) - 1] == "ESR: 45 ohm"


def test_a_mail_in_html_only_keeps_its_table() -> None:
    mail = message()
    mail.set_content("<table><tr><td>ESR<td>45 Ω<tr><td>CL<td>9 pF</table>", subtype="html")
    assert isinstance(read_document(mail.as_bytes(), "offer.eml").blocks[-1], Table)


def test_an_attachment_is_named_and_not_read() -> None:
    mail = message("See the sheet.")
    mail.add_attachment(b"%PDF-1.4", maintype="application", subtype="pdf", filename="sheet.pdf")
    document = read_document(mail.as_bytes(), "offer.eml")
    assert [note.message for note in document.notes] == [
        "Attachment 'sheet.pdf' left out: save it and give it as a file of its own."
    ]


def test_the_text_of_a_mail_is_no_saved_mail() -> None:
    assert not is_mail(b"From: Ines\nSubject: 26 MHz\n\nESR 45 ohm")


def test_a_mail_of_attachments_only_is_refused() -> None:
    mail = message()
    mail["MIME-Version"] = "1.0"
    mail.add_attachment(b"%PDF-1.4", maintype="application", subtype="pdf", filename="sheet.pdf")
    with pytest.raises(DocumentError, match="^The mail holds no text, only attachments"):
        read_document(mail.as_bytes(), "offer.eml")


def test_the_html_of_a_mail_is_read_where_only_it_holds_the_table_and_its_quotation_is_marked() -> None:
    mail = message("See the HTML version.")
    mail.add_alternative(
        "<p>Our offer:</p><table><tr><td>ESR</td><td>35 Ω</td></tr></table>"
        "<blockquote><p>Please quote ESR: 50 Ω</p></blockquote>",
        subtype="html",
    )
    document = read_document(mail.as_bytes(), "offer.eml")
    assert [[cell.text for cell in block.cells] for block in document.blocks if isinstance(block, Table)] == [
        ["ESR", "35 Ω"]
    ]
    assert "> Please quote ESR: 50 Ω" in [block.text for block in document.blocks if isinstance(block, Line)]
