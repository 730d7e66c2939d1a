"""What crystal spec sheets say: every format to one validated form, each value with its place on the sheet."""

from __future__ import annotations

import gc
from collections.abc import Iterator
from contextlib import contextmanager
from hashlib import sha256

from extract import trace
from extract.model import Note, SpecSheet
from extract.progress import Progress

__all__ = ["read_sheet"]


@contextmanager
def _uncollected() -> Iterator[None]:
    """Hold garbage collection back.

    A long list makes many small objects that all live on, and counting them again and again takes a third of the time.
    Nothing is counted either before the function so held back has returned and let go of what it needed only meanwhile.
    """
    was_on = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if was_on:
            gc.enable()


def _error(message: str) -> Note:
    return Note(level="error", message=message)


@_uncollected()
def read_sheet(data: bytes, name: str, *, progress: Progress | None = None) -> SpecSheet:
    """Read one sheet; `name` helps to tell its format and is repeated in the result, `progress` is told each page.

    A file that cannot be read gives a sheet without parts and a note of level "error"; a file without a crystal one
    with a warning. Nothing is raised for odd content.
    """
    from extract.blocks import read_blocks
    from extract.documents.kinds import kind_by_name, read_document
    from extract.documents.model import DocumentError
    from extract.pages import CrystalPages
    from extract.parts import parts_of

    trace.begin(name)
    digest = sha256(data).hexdigest()
    try:
        document = read_document(data, name, wanted=CrystalPages(), progress=progress)
        found = parts_of(read_blocks(document))
    except DocumentError as fault:
        return SpecSheet(file=name, sha256=digest, kind=kind_by_name(name), notes=(_error(str(fault)),))
    except Exception as fault:
        import logging

        # One odd sheet must not stop a heap of others; a log that somebody set up gets the whole fault, the user one
        # sentence.
        logger = logging.getLogger(__name__)
        logger.addHandler(logging.NullHandler())
        logger.exception("reading %s", name)
        message = (
            f"the reader failed on this file ({type(fault).__name__}: {fault}); report it, and read the file by eye"
        )
        return SpecSheet(file=name, sha256=digest, kind=kind_by_name(name), notes=(_error(message),))
    notes = [*document.notes, *found.notes]
    if not found.parts:
        notes.append(Note(level="warning", message="no crystal found in this file"))
    return SpecSheet(
        file=name,
        sha256=digest,
        kind=document.kind,
        scan=document.scan,
        parts=found.parts,
        notes=tuple(notes),
    )
