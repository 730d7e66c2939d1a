"""How far a long read has come, told to whoever waits for it, and whether he has stopped it."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(slots=True)
class Progress:
    """What a reader of many pages reports to. A subclass shows it; `stopped` is set when the read was broken off.

    A reader that is given one keeps what it has finished on Ctrl-C, says so in a note and sets `stopped`.
    """

    stopped: bool = False

    def file(self, number: int, count: int, name: str) -> None:
        """Told before file `number` of `count` is read; both count from 1."""

    def page(self, number: int, count: int) -> None:
        """Told before page `number` of `count` is read; both count from 1."""
