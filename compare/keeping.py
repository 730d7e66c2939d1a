"""Where work is kept between two looks at the page, so that a reload loses nothing, and how it is forgotten.

A kept work is a folder of its own with the members of a folio file (folio.py), written one by one: what has not changed
is not written again. It lies in the person's own folder for programs' state, readable by nobody else.
"""

from __future__ import annotations

import atexit
import hashlib
import json
import os
import re
import secrets
import shutil
import sys
import tempfile
import threading
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import datetime
from pathlib import Path
from typing import NamedTuple

from compare.folio import FolioError, Reopened, head, history_json, json_bytes, reopen, sheet_bytes, sheet_member
from compare.folio import work_json as as_json
from compare.work import History, OpenSheet, Work

IDENT = re.compile(r"[0-9a-f]{16}")
MOST_LISTED = 6
MOST_AT_ONCE = 2000
"""Parts of a sheet whose readings are written while somebody waits; those of 20 000 take a second."""
_put_off: dict[Path, OpenSheet] = {}
_failed: set[Path] = set()
_writing = threading.Lock()


def state_folder(environment: Mapping[str, str] = os.environ, platform: str = sys.platform) -> Path:
    """The folder for all kept work: where the system has programs keep their state."""
    home = Path.home()
    if platform == "win32":
        base = Path(environment.get("LOCALAPPDATA") or home / "AppData" / "Local")
    elif platform == "darwin":
        base = home / "Library" / "Application Support"
    else:
        given = environment.get("XDG_STATE_HOME", "")
        base = Path(given) if Path(given).is_absolute() else home / ".local" / "state"
    return base / "quartzfolio"


def new_ident() -> str:
    """A name for a work that nobody can guess."""
    return secrets.token_hex(8)


def now() -> str:
    """The time here, to the minute, with its offset: `2031-04-02T14:32+02:00`."""
    return datetime.now().astimezone().isoformat(timespec="minutes")


@dataclass(frozen=True)
class Kept:
    """A work that lies on this machine: its name in the address, what it is called, when it was saved, its sheets."""

    ident: str
    name: str
    saved: str
    sheets: int


def folder_of(ident: str) -> Path:
    """The folder of one work; ValueError where `ident` is none that `new_ident` gives."""
    if not IDENT.fullmatch(ident):
        raise ValueError(f"{ident!r} names no work")
    return state_folder() / ident


class Stamp(NamedTuple):
    """When a work was written, and for the how manieth time."""

    saved: str
    times: int


class ChangedElsewhere(RuntimeError):  # noqa: N818 - not a fault: another page has the same work open
    """The work on the machine is not the one that was last written from here."""


def keep(ident: str, work: Work, history: History, after: Stamp | None = None) -> Stamp:
    """Write what changed; returns when. The readings of a long list are put off until `write_rest`.

    `after` is what the writer was given when it last wrote or recalled the work. ChangedElsewhere where another page
    has written since, OSError where the folder cannot be written.
    """
    folder = folder_of(ident)
    there = stamp_of(ident)
    if after is not None and there is not None and there.times != after.times:
        raise ChangedElsewhere(ident)
    # Parents that `mkdir` makes on its way have no mode of their own: each is made by itself.
    folder.parent.mkdir(mode=0o700, parents=True, exist_ok=True)
    for each in (folder, folder / "sheets", folder / "files"):
        each.mkdir(mode=0o700, exist_ok=True)
    for one in _every_sheet(work, history):
        keep_sheet(folder, one)
    stamp = Stamp(now(), 1 if there is None else there.times + 1)
    _write(folder / "history.json", json_bytes(history_json(history)))
    _write(folder / "work.json", json_bytes(as_json(work)))
    _write(folder / "folio.json", json_bytes({**head(stamp.saved), "times": stamp.times}))
    return stamp


def keep_sheet(folder: Path, one: OpenSheet) -> None:
    """Write a sheet's readings and bytes, unless they are there."""
    readings, file = folder / sheet_member(one), folder / "files" / (one.sheet.sha256 or "none")
    if not readings.exists():
        # What could not be written while nobody waited is tried once more, to be told.
        if len(one.sheet.parts) > MOST_AT_ONCE and readings not in _failed:
            _put_off[readings] = one
        else:
            _write(readings, sheet_bytes(one.sheet))
            _failed.discard(readings)
    if one.data is not None and not file.exists():
        _write(file, one.data)


def write_soon() -> None:
    """Write what was put off in a thread of its own; the end of the program waits for it."""
    if _put_off:
        threading.Thread(target=write_rest, name="keeping").start()


@atexit.register
def write_rest(folder: Path | None = None) -> None:
    """Write what was put off, of one work or of all; returns when it is there.

    What cannot be written is tried again by the next `keep`, which tells. Until then the sheet's own file stands in.
    """
    with _writing:
        for readings, one in list(_put_off.items()):
            if folder in (None, readings.parent.parent):
                try:
                    _write(readings, sheet_bytes(one.sheet))
                except OSError:
                    _failed.add(readings)
                _put_off.pop(readings, None)


def _every_sheet(work: Work, history: History) -> list[OpenSheet]:
    """The sheets of the work and those that an undo would bring back."""
    closed = [one for step in history.steps for one in step.before.get("sheets", ())]
    return list({one.key: one for one in (*closed, *work.sheets)}.values())


def _write(path: Path, data: bytes) -> None:
    """All of it or nothing: a reload in between finds the file as it was."""
    part, name = tempfile.mkstemp(dir=path.parent, prefix=".part")
    try:
        with os.fdopen(part, "wb") as stream:
            stream.write(data)
        Path(name).replace(path)
    except OSError:
        Path(name).unlink(missing_ok=True)
        raise


def recall(ident: str) -> Reopened | None:
    """The work of that name; None where there is none. FolioError where it is damaged."""
    try:
        folder = folder_of(ident)
    except ValueError:
        return None
    if not (folder / "folio.json").is_file():
        return None
    write_rest(folder)
    found = [path for path in folder.rglob("*") if path.is_file() and not path.name.startswith(".")]
    try:
        members = {path.relative_to(folder).as_posix(): path.read_bytes() for path in found}
    except OSError as fault:
        raise FolioError(f"{folder}: cannot be read: {(fault.strerror or str(fault)).lower()}") from None
    reopened = reopen(members, "the work kept on this machine", _on_disk)
    _sweep(folder, _every_sheet(reopened.work, reopened.history))
    return reopened


def _on_disk(file: str, sha256: str) -> bytes | None:
    """A sheet that was opened by its name, where it still is the one that was read."""
    try:
        data = Path(file).read_bytes()
    except OSError:
        return None
    return data if hashlib.sha256(data).hexdigest() == sha256 else None


def _sweep(folder: Path, needed: Sequence[OpenSheet]) -> None:
    """Remove the sheets that neither the work nor an undo needs any more."""
    names = {sheet_member(one) for one in needed} | {f"files/{one.sheet.sha256}" for one in needed}
    for kind in ("sheets", "files"):
        for path in (folder / kind).glob("*"):
            if f"{kind}/{path.name}" not in names:
                path.unlink(missing_ok=True)


def kept_works() -> list[Kept]:
    """Every work that lies on this machine, newest first."""
    found = []
    for folder in state_folder().glob("*"):
        if not IDENT.fullmatch(folder.name):
            continue
        try:
            saved = json.loads((folder / "folio.json").read_bytes())["saved"]
            told = json.loads((folder / "work.json").read_bytes())
            found.append(Kept(folder.name, told["name"], saved, len(told["sheets"])))
        except (OSError, ValueError, KeyError, TypeError):
            found.append(Kept(folder.name, "a damaged one", "", 0))
    return sorted(found, key=lambda one: one.saved, reverse=True)


def stamp_of(ident: str) -> Stamp | None:
    """When the work of that name was last written; None where it lies not here."""
    try:
        told = json.loads((folder_of(ident) / "folio.json").read_bytes())
        return Stamp(str(told["saved"]), int(told["times"]))
    except (OSError, ValueError, KeyError, TypeError):
        return None


def forget(ident: str) -> None:
    """Remove everything of one work from this machine; OSError where something cannot be removed."""
    folder = folder_of(ident)
    for readings in [path for path in _put_off if path.parent.parent == folder]:
        _put_off.pop(readings, None)
    with _writing:
        _remove(folder)


def _remove(folder: Path) -> None:
    if folder.exists():
        shutil.rmtree(folder)
    parent = state_folder()
    if parent.is_dir() and not any(parent.iterdir()):
        parent.rmdir()
