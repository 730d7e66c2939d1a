"""The line that tells a waiting person how far a long read has come: on a terminal only, gone when it is done."""

from __future__ import annotations

import time
from typing import TextIO

from extract.progress import Progress

# A shorter wait needs no line.
SHOWN_AFTER_S = 0.5
EVERY_S = 0.1


class ProgressLine(Progress):
    """Shows "file 2 of 5, page 17 of 300: NAME" on one line of a terminal; says nothing into a pipe or a file."""

    def __init__(self, stream: TextIO, *, quiet: bool = False) -> None:
        super().__init__()
        self._stream = stream
        self._on = stream.isatty() and not quiet
        self._began = time.monotonic()
        self._last = 0.0
        self._file = self._name = ""
        self._shown = False
        self._width = 0

    def file(self, number: int, count: int, name: str) -> None:
        self._file, self._name = f"file {number} of {count}", name
        self._show(self._file)

    def page(self, number: int, count: int) -> None:
        self._show(f"{self._file}, page {number} of {count}")

    def _show(self, where: str) -> None:
        now = time.monotonic()
        if not self._on or now - self._began < SHOWN_AFTER_S or now - self._last < EVERY_S:
            return
        # Most reads end before this; the report's own libraries would take longer to load than a sheet to read.
        from compare.report import WIDTH, fitted

        self._last, self._shown, self._width = now, True, WIDTH - 1
        self._stream.write("\r" + fitted(f"{where}: {self._name}", self._width))
        self._stream.flush()

    def done(self) -> None:
        """Take the line away."""
        if self._shown:
            self._stream.write("\r" + " " * self._width + "\r")
            self._stream.flush()
            self._shown = False
