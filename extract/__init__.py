"""What crystal spec sheets say: every format to one validated form, each value with its place on the sheet."""

from __future__ import annotations

from hashlib import sha256

from extract.model import Note, SpecSheet

__all__ = ["read_sheet"]


def read_sheet(data: bytes, name: str) -> SpecSheet:
    """Read one sheet; `name` helps to tell its format and is repeated in the result.

    A file that cannot be read gives a sheet without parts and a note of level "error"; a file without a crystal one
    with a warning. Nothing is raised for odd content.
    """
    from extract.blocks import read_blocks
    from extract.documents.kinds import read_document
    from extract.documents.model import DocumentError
    from extract.parts import parts_of

    digest = sha256(data).hexdigest()
    try:
        document = read_document(data, name)
    except DocumentError as fault:
        return SpecSheet(file=name, sha256=digest, kind="text", notes=(Note(level="error", message=str(fault)),))
    found = parts_of(read_blocks(document))
    notes = [*document.notes, *found.notes]
    if not found.parts:
        notes.append(Note(level="warning", message="no crystal found in this file"))
    return SpecSheet(
        file=name,
        sha256=digest,
        kind=document.kind,
        scan=document.scan,
        parts=tuple(found.parts),
        notes=tuple(notes),
    )
