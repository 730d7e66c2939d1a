"""Reads sheets one after another in a thread of its own, so that nobody who presses something meanwhile has to wait."""

from __future__ import annotations

import hashlib
import threading
import time
from collections import OrderedDict
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path

from compare.intake import read_bytes, read_single
from compare.read_apart import Apart
from compare.work import OpenSheet
from extract.documents.kinds import kind_by_name
from extract.model import Note, SpecSheet

MOST_REMEMBERED = 64
PATIENCE_S = 0.4
"""So long a press waits for the sheets it brought: most are read by then and need no line that says so."""
BROKE_OFF = (
    "the reader ended without an answer, perhaps for want of memory; nothing of this sheet is used. Try it once more, "
    "or save the pages you need as a file of their own"
)
File = tuple[str, bytes | None]
"""A name, and the bytes where it did not come by name alone."""
Pages = Callable[[int, int], None]
"""Told the number of a page, and how many there are, before the page is read."""


@dataclass(frozen=True)
class Reading:
    """How far a read has come. `number` of `count` counts from 1; `page` is 0 where a file has no pages to speak of."""

    name: str
    number: int
    count: int
    page: int = 0
    pages: int = 0
    seconds: float = 0.0

    def said(self) -> str:
        """`Reading 3 of 7: hollinbank_hq32.pdf, page 2 of 3, 4 s`."""
        page = f", page {self.page} of {self.pages}" if self.page else ""
        spent = f", {self.seconds:.0f} s" if self.seconds >= 1 else ""
        return f"Reading {self.number} of {self.count}: {self.name.rsplit('/', 1)[-1]}{page}{spent}"


class Reader:
    """A queue of files and the thread that reads them; every method may be called from any thread.

    `read` turns a file into a sheet, None where it was broken off: such a file counts as not read and is left over.
    """

    def __init__(self, read: Callable[[File, Apart, Pages], SpecSheet | None] | None = None) -> None:
        self._read = read or read_file
        self._apart = Apart()
        self._lock = threading.Lock()
        self._idle = threading.Event()
        self._idle.set()
        self._waiting: list[File] = []
        self._left: list[File] = []
        self._done: list[OpenSheet] = []
        self._now: Reading | None = None
        self._began = 0.0
        self._count = self._number = 0
        self.stopping = False

    def add(self, files: Sequence[File]) -> None:
        """Queue files; what a stopped read left over is forgotten."""
        with self._lock:
            self._left = []
            self._waiting += files
            if not files:
                return
            if self._idle.is_set():
                self._count, self._number, self.stopping = len(files), 0, False
                self._idle.clear()
                threading.Thread(target=self._run, name="reading sheets", daemon=True).start()
            else:
                self._count += len(files)

    def stop(self) -> None:
        """Read no further; what is finished stays, the rest is `left`."""
        with self._lock:
            if not self._idle.is_set():
                self.stopping = True
                self._apart.kill()

    def take(self) -> list[OpenSheet]:
        """The sheets finished since this was last asked."""
        with self._lock:
            done, self._done = self._done, []
            return done

    def wait(self, seconds: float) -> bool:
        """Wait for the end of all reading, at most so long; True when it is reached."""
        return self._idle.wait(seconds)

    @property
    def news(self) -> bool:
        """Whether there is something to take."""
        with self._lock:
            return bool(self._done)

    @property
    def now(self) -> Reading | None:
        """What is being read; None where nothing is."""
        with self._lock:
            if self._now is None:
                return None
            now = self._now
            return Reading(now.name, now.number, self._count, now.page, now.pages, time.monotonic() - self._began)

    @property
    def left(self) -> list[File]:
        """What a stop left unread."""
        with self._lock:
            return list(self._left)

    @property
    def stopped_sentence(self) -> str:
        """`Stopped. 4 of 7 were read; the rest can be read later.`, where it was; else ""."""
        with self._lock:
            if not self._left:
                return ""
            read = self._count - len(self._left)
            return f"Stopped. {read} of {self._count} were read; the rest can be read later."

    def _at_page(self, number: int, count: int) -> None:
        with self._lock:
            if self._now is not None:
                self._now = Reading(self._now.name, self._now.number, self._count, number, count)

    def _run(self) -> None:
        while (file := self._next()) is not None:
            sheet = self._read(file, self._apart, self._at_page)
            with self._lock:
                if sheet is not None:
                    self._done.append(OpenSheet(sheet, file[1]))
                elif self.stopping:
                    self._waiting.insert(0, file)
                else:
                    self._done.append(OpenSheet(_failed(file), file[1]))
        self._apart.end()

    def _next(self) -> File | None:
        with self._lock:
            self._now = None
            if self.stopping:
                self._left, self._waiting = self._waiting, []
            if not self._waiting:
                self._idle.set()
                return None
            file = self._waiting.pop(0)
            self._number += 1
            self._now, self._began = Reading(file[0], self._number, self._count), time.monotonic()
            return file


_remembered: OrderedDict[tuple[str, str], SpecSheet] = OrderedDict()
_remembering = threading.Lock()


def read_file(file: File, apart: Apart, page: Pages) -> SpecSheet | None:
    """A sheet by its bytes or by its name; one that was read before, and has not changed, is not read again."""
    name, data = file
    told = (name, hashlib.sha256(data).hexdigest() if data is not None else _stamp(name))
    with _remembering:
        if told in _remembered:
            _remembered.move_to_end(told)
            return _remembered[told]
    sheet = _read(name, data, apart, page)
    # A file that was not there may be the next time.
    if sheet is not None and sheet.sha256 is not None:
        with _remembering:
            _remembered[told] = sheet
            while len(_remembered) > MOST_REMEMBERED:
                _remembered.popitem(last=False)
    return sheet


def _read(name: str, data: bytes | None, apart: Apart, page: Pages) -> SpecSheet | None:
    def by_bytes(data: bytes, name: str) -> SpecSheet | None:
        return apart.read(name, data, page) if _takes_long(data) else read_bytes(data, name)

    return read_single(name, by_bytes) if data is None else by_bytes(data, name)


def _takes_long(data: bytes) -> bool:
    """Whether it is a PDF or a picture; anything else is text or packed (ZIP, old Office) and read where it is."""
    packed = data.startswith((b"PK", b"\xd0\xcf\x11\xe0"))
    return b"%PDF-" in data[:1024] or (not packed and b"\0" in data[:8192])


def _failed(file: File) -> SpecSheet:
    note = Note(level="error", message=BROKE_OFF)
    sha256 = None if file[1] is None else hashlib.sha256(file[1]).hexdigest()
    return SpecSheet(file=file[0], sha256=sha256, kind=kind_by_name(file[0]), notes=(note,))


def _stamp(name: str) -> str:
    """When the file of a name was changed and how large it is; "" where there is none."""
    for candidate in (name, name.rpartition("#")[0]):
        try:
            found = Path(candidate).stat()
        except OSError:
            continue
        return f"{found.st_mtime_ns} {found.st_size}"
    return ""
