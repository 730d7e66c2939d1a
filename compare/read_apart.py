"""Reads PDFs and pictures in a process of their own: their parser serves one thread at a time, and a scan takes long.

Run as `python -m compare.read_apart` it answers each request on standard input, a line of JSON and then the file's
bytes: lines `{"page": [2, 7]}` while it reads, then one line `{"sheet": ...}` in the shape of the JSON of `extract`.
"""

from __future__ import annotations

import json
import os
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import IO, Any

from extract.model import SpecSheet
from extract.progress import Progress


class Apart:
    """The other process, begun with the first file and used again for the next ones."""

    def __init__(self) -> None:
        self._process: subprocess.Popen[bytes] | None = None

    def read(self, name: str, data: bytes, page: Callable[[int, int], None]) -> SpecSheet | None:
        """The sheet, `page` told before each page; None where the process ended before it had one."""
        questions, answers = self._begun()
        try:
            questions.write(json.dumps({"name": name, "size": len(data)}).encode() + b"\n" + data)
            questions.flush()
            for line in answers:
                told = json.loads(line)
                if "sheet" in told:
                    return SpecSheet.model_validate(told["sheet"])
                page(*told["page"])
        except (OSError, ValueError):
            # A pipe that broke: the process is gone or was ended, which its end says below.
            pass
        self.end()
        return None

    def end(self) -> None:
        """End the process, whatever it does."""
        process, self._process = self._process, None
        if process is not None:
            process.kill()
            for stream in (process.stdin, process.stdout):
                if stream is not None:
                    _close(stream)
            process.wait()

    def kill(self) -> None:
        """Break off what is being read; the `read` that waits for it returns None. May be called from any thread."""
        process = self._process
        if process is not None:
            process.kill()

    def _begun(self) -> tuple[IO[bytes], IO[bytes]]:
        if self._process is None or self._process.poll() is not None:
            self.end()
            root = str(Path(__file__).resolve().parent.parent)
            paths = [root, *filter(None, [os.environ.get("PYTHONPATH")])]
            self._process = subprocess.Popen(
                [sys.executable, "-m", "compare.read_apart"],
                stdin=subprocess.PIPE,
                stdout=subprocess.PIPE,
                env={**os.environ, "PYTHONPATH": os.pathsep.join(paths)},
            )
        questions, answers = self._process.stdin, self._process.stdout
        if questions is None or answers is None:
            raise RuntimeError("a process without its pipes")
        return questions, answers


def _close(stream: IO[bytes]) -> None:
    try:
        stream.close()
    except OSError:
        # What was still to be written to a process that is gone.
        return


class _Told(Progress):
    def __init__(self, tell: Callable[[dict[str, Any]], None]) -> None:
        super().__init__()
        self._tell = tell

    def page(self, number: int, count: int) -> None:
        self._tell({"page": [number, count]})


def main() -> None:
    """Answer requests until standard input ends."""
    from compare.intake import read_bytes
    from extract.model import written

    if hasattr(os, "nice"):
        # Whoever presses something on the page goes before the reading of a scan.
        os.nice(10)
    # Libraries that print would spoil the answers: what they print goes to standard error.
    answers = os.fdopen(os.dup(1), "wb")
    os.dup2(2, 1)

    def tell(told: dict[str, Any]) -> None:
        answers.write(json.dumps(told, allow_nan=False, default=written).encode() + b"\n")
        answers.flush()

    while line := sys.stdin.buffer.readline():
        asked = json.loads(line)
        data = sys.stdin.buffer.read(asked["size"])
        tell({"sheet": read_bytes(data, asked["name"], _Told(tell))})


if __name__ == "__main__":
    main()
