"""Why the reader took one value and left another: kept only while somebody asks (`tracing`), for the command line.

The reader's steps report here what they see, drop and take. While nobody asks, a report is one look at a variable.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from contextlib import contextmanager
from contextvars import ContextVar
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from extract.model import Reading, Where

if TYPE_CHECKING:
    from extract.candidates import Candidate
    from extract.wording import Label


@dataclass(frozen=True, slots=True)
class Seen:
    """A candidate as first read: its label, and every text that may have given it its unit or its band.

    `texts` go from what they are ("the cell", "the unit column", "a condition") to what they print.
    """

    candidate: Candidate
    label: Label
    printed_label: str
    texts: tuple[tuple[str, str], ...]
    file: str


@dataclass(frozen=True, slots=True)
class Dropped:
    """Something that might have been a reading and is none; `rule` says why, in words."""

    field: str | None
    raw: str
    where: Where
    rule: str
    file: str


@dataclass(frozen=True, slots=True)
class Taken:
    """A reading, and the candidate that it was written from."""

    reading: Reading
    candidate: Candidate


@dataclass(slots=True)
class Trace:
    """All that was reported while one or more sheets were read, in order; `file` is the one being read."""

    file: str = ""
    seen: list[Seen] = field(default_factory=list)
    dropped: list[Dropped] = field(default_factory=list)
    taken: list[Taken] = field(default_factory=list)

    def origin(self, candidate: Candidate, file: str) -> Seen | None:
        """How a candidate of that file was first read; None for one made of another field's condition."""
        same = [each for each in self.seen if each.file == file and _one_place(each.candidate, candidate)]
        return next((each for each in same if each.candidate.bounds == candidate.bounds), same[0] if same else None)

    def left_out(self, file: str) -> list[Dropped]:
        """What of a file became no reading, each statement once, without what another part took from that place."""
        used = {(one.reading.field, str(one.reading.where), one.candidate.raw) for one in self.taken}
        return [
            each
            for each in dict.fromkeys(self.dropped)
            if each.file == file
            and not any(
                each.field == name and str(each.where) == where and raw.startswith(each.raw)
                for name, where, raw in used
            )
        ]


def _one_place(seen: Candidate, later: Candidate) -> bool:
    return seen.field == later.field and seen.where == later.where and later.raw.startswith(seen.raw)


_trace: ContextVar[Trace | None] = ContextVar("trace", default=None)


@contextmanager
def tracing() -> Iterator[Trace]:
    """Collect what the reader reports inside the `with`."""
    trace = Trace()
    token = _trace.set(trace)
    try:
        yield trace
    finally:
        _trace.reset(token)


def begin(file: str) -> None:
    """Say which file the reports that follow are about."""
    trace = _trace.get()
    if trace is not None:
        trace.file = file


def asked() -> bool:
    """Whether somebody collects reports; ask before a report that is dear to make."""
    return _trace.get() is not None


def saw(candidate: Candidate, label: Label, printed_label: str, texts: Sequence[tuple[str, Iterable[str]]]) -> None:
    """Report a candidate with its label and the texts around it, each list of texts under what they are."""
    trace = _trace.get()
    if trace is not None:
        flat = tuple((what, text) for what, several in texts for text in several if text)
        trace.seen.append(Seen(candidate, label, printed_label, flat, trace.file))


def dropped(candidate: Candidate, rule: str) -> None:
    """Report a candidate that becomes no reading."""
    trace = _trace.get()
    if trace is not None:
        trace.dropped.append(Dropped(candidate.field, candidate.raw, candidate.where, rule, trace.file))


def passed(raw: str, where: Where, rule: str, field_name: str | None = None) -> None:
    """Report a printed text that did not even become a candidate."""
    trace = _trace.get()
    if trace is not None:
        trace.dropped.append(Dropped(field_name, " ".join(raw.split()), where, rule, trace.file))


def took(readings: Sequence[Reading], candidates: Sequence[Candidate]) -> None:
    """Report the readings of one part beside the candidates that they were written from."""
    trace = _trace.get()
    if trace is not None:
        trace.taken += [Taken(*pair) for pair in zip(readings, candidates, strict=True)]
