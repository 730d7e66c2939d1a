"""From names (files, folders, `FILE#PART`, work files, `-`) to sheets read; one bad file stops no other."""

from __future__ import annotations

import hashlib
import sys
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, field
from pathlib import Path

from extract import read_sheet
from extract.documents.kinds import SHEET_SUFFIXES, kind_by_name
from extract.model import Note, Part, SpecSheet
from extract.progress import Progress

STANDARD_INPUT = "-"
WORK_SUFFIX = ".folio"


@dataclass(frozen=True, slots=True)
class Intake:
    """The sheets in the order given, and what is to be said about the names themselves.

    `stopped`: Ctrl-C ended the read; the sheets are those finished by then, and the last note says how far it came.
    """

    sheets: tuple[SpecSheet, ...] = ()
    notes: tuple[Note, ...] = ()
    stopped: bool = False


@dataclass(slots=True)
class _Named:
    """One file to read, and the one part wanted of it, if any."""

    name: str
    part: str | None = None


@dataclass(slots=True)
class _Plan:
    files: list[_Named] = field(default_factory=list)
    notes: list[Note] = field(default_factory=list)


def read_sheets(names: Iterable[str], *, progress: Progress | None = None) -> Intake:
    """Read every sheet that `names` stand for.

    Parameters
    ----------
    names
        Files, folders (their sheets and those of their sub-folders, in order of name), `FILE#PART_NUMBER`, work files
        (their sheets, corrected), or `-`.
    progress
        Told each file and page before it is read. With it, Ctrl-C ends the read and what is finished is kept.
    """
    plan = _Plan()
    for name in names:
        _plan_for(name, plan)
    sheets: list[SpecSheet] = []
    try:
        for number, named in enumerate(plan.files, start=1):
            if progress is not None:
                progress.file(number, len(plan.files), named.name)
            sheets += _sheets_of(named, progress)
            if progress is not None and progress.stopped:
                break
    except KeyboardInterrupt:
        if progress is None:
            raise
        progress.stopped = True
    stopped = progress is not None and progress.stopped
    if stopped:
        message = f"stopped: {len(sheets)} of {len(plan.files)} files were read, the last of them perhaps in part"
        plan.notes.append(Note(level="warning", message=message))
    return Intake(tuple(sheets), tuple(plan.notes), stopped)


def single_names(names: Iterable[str]) -> tuple[list[str], list[Note]]:
    """The single files (`FILE` or `FILE#PART_NUMBER`) that `names` stand for, and what there is to say about them."""
    plan = _Plan()
    for name in names:
        _plan_for(name, plan)
    return [one.name if one.part is None else f"{one.name}#{one.part}" for one in plan.files], plan.notes


def read_single(name: str, read: Callable[[bytes, str], SpecSheet | None]) -> SpecSheet | None:
    """The sheet that one of `single_names` stands for, by `read`; None where that gives none."""
    plan = _Plan()
    _plan_for(name, plan)
    named = plan.files[0]
    data = _bytes_of(named.name)
    sheet = data if isinstance(data, SpecSheet) else read(data, named.name)
    return sheet if sheet is None or named.part is None else _only(sheet, named.part)


def read_bytes(data: bytes, name: str, progress: Progress | None = None) -> SpecSheet:
    """Read one sheet; a fault of the program itself becomes a note, so that the other sheets are still done."""
    try:
        return read_sheet(data, name, progress=progress)
    except Exception as fault:
        message = (
            f"could not be read because of a fault in quartzfolio ({type(fault).__name__}: {fault}); "
            "nothing of this sheet is used. Enter its values by hand, and report the fault with the sheet"
        )
        return _failed(name, message, hashlib.sha256(data).hexdigest())


def _plan_for(name: str, plan: _Plan) -> None:
    path = Path(name)
    if name != STANDARD_INPUT and path.is_dir():
        _plan_for_folder(path, plan)
    elif name == STANDARD_INPUT or path.exists() or "#" not in name:
        plan.files.append(_Named(name))
    else:
        file, _, part = name.rpartition("#")
        plan.files.append(_Named(file, part))


def _plan_for_folder(folder: Path, plan: _Plan) -> None:
    found: list[Path] = []
    passed: list[Path] = []
    for path in sorted(_visible_files(folder)):
        (found if path.suffix.lower() in SHEET_SUFFIXES else passed).append(path)
    plan.files += [_Named(str(path)) for path in found]
    if passed:
        names = ", ".join(str(path.relative_to(folder)) for path in passed[:6])
        more = f" and {len(passed) - 6} more" if len(passed) > 6 else ""
        plan.notes.append(Note(level="info", message=f"{folder}: passed over, no kind of sheet: {names}{more}"))
    if not found:
        plan.notes.append(Note(level="error", message=f"{folder}: no sheets in this folder; name one that holds some"))


def _visible_files(folder: Path) -> Iterator[Path]:
    for path in folder.iterdir():
        if path.name.startswith("."):
            continue
        if path.is_dir():
            yield from _visible_files(path)
        elif path.is_file():
            yield path


def _sheets_of(named: _Named, progress: Progress | None) -> list[SpecSheet]:
    """The sheet of a file; of a work file all that it holds, with every correction put in."""
    if not named.name.lower().endswith(WORK_SUFFIX):
        sheet = _read_one(named.name, progress)
        return [sheet if named.part is None else _only(sheet, named.part)]
    from compare.folio import FolioError, read_folio

    data = _bytes_of(named.name)
    if isinstance(data, SpecSheet):
        return [data]
    try:
        sheets = list(read_folio(data, named.name).work.corrected)
    except FolioError as fault:
        return [_failed(named.name, str(fault).removeprefix(f"{named.name}: "))]
    if not sheets:
        return [_failed(named.name, "this work holds no sheets")]
    if named.part is None:
        return sheets
    chosen = [_only(sheet, named.part) for sheet in sheets]
    return [sheet for sheet in chosen if sheet.parts] or chosen[:1]


def _read_one(name: str, progress: Progress | None) -> SpecSheet:
    data = sys.stdin.buffer.read() if name == STANDARD_INPUT else _bytes_of(name)
    if name == STANDARD_INPUT and not data:
        return _failed(name, "nothing came in on standard input; send a sheet to it, or name a file")
    return data if isinstance(data, SpecSheet) else read_bytes(data, name, progress)


def _bytes_of(name: str) -> bytes | SpecSheet:
    """The file's bytes, or a sheet without parts that says why there are none."""
    try:
        return Path(name).read_bytes()
    except FileNotFoundError:
        return _failed(name, "no such file; check the name")
    except OSError as fault:
        return _failed(name, f"cannot be opened: {(fault.strerror or str(fault)).lower()}")


def _failed(name: str, message: str, sha256: str | None = None) -> SpecSheet:
    note = Note(level="error", message=message)
    return SpecSheet(file=name, sha256=sha256, kind=kind_by_name(name), notes=(note,))


def _only(sheet: SpecSheet, wanted: str) -> SpecSheet:
    parts = tuple(part for part in sheet.parts if _same_number(part, wanted))
    if parts or not sheet.parts:
        return sheet.model_copy(update={"parts": parts})
    there = [part.part_number or "one without a part number" for part in sheet.parts]
    listed = ", ".join(there[:8]) + (f" and {len(there) - 8} more" if len(there) > 8 else "")
    note = Note(level="error", message=f"no part {wanted} in this sheet; it has {listed}")
    return sheet.model_copy(update={"parts": (), "notes": (*sheet.notes, note)})


def _same_number(part: Part, wanted: str) -> bool:
    def plain(number: str) -> str:
        return "".join(character for character in number.casefold() if character.isalnum())

    return part.part_number is not None and plain(part.part_number) == plain(wanted)
