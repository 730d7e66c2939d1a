"""A piece of work as one file: a ZIP of JSON that any program can read, described in DEVELOPERS.md ("The folio file").

folio.json         what the file is: format, versions of program, formulas and schema, when saved
work.json          name, circuits with what is set, corrections, slots, and the list of sheets
sheets/KEY.json    a sheet as it was read, in the shape of `quartzfolio extract --json`
files/SHA256       the sheet itself, where it was wanted
bench/CIRCUIT.toml the circuit as a bench file, for the command line; not read back
history.json       the way back, only in the work that is kept on this machine
"""

from __future__ import annotations

import hashlib
import io
import json
import zipfile
import zlib
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from pydantic import ValidationError

from compare.corrections import Correction
from compare.desk import Desk
from compare.folio_versions import FORMAT, VERSION, upgraded
from compare.intake import WORK_SUFFIX, read_bytes
from compare.sheets_json import write_sheets
from compare.versions import FORMULA_SET as FORMULAS
from compare.versions import program_version
from compare.work import Circuit, History, OpenSheet, Step, Work
from extract.documents.grid import garbage_left
from extract.model import SCHEMA, SpecSheet

SUFFIX = WORK_SUFFIX
MOST_BYTES = 1 << 30
"""A folio that unpacks to more is refused: it is damaged, or made to fill the machine."""
LONG_BYTES = 2_000_000
"""Readings of a sheet in JSON; of more the sheet is read again where it is at hand."""
ZIP_TIME = (1980, 1, 1, 0, 0, 0)


Find = Callable[[str, str], bytes | None]
"""The bytes of the sheet with that name and sha256, where they lie outside the work."""


class FolioError(ValueError):
    """A file that is no folio or a damaged one; the message is one sentence: what is wrong and what to do."""


@dataclass(frozen=True)
class Reopened:
    """A work read back, and what there is to say about it."""

    work: Work
    history: History = History()
    said: tuple[str, ...] = ()


def head(saved: str) -> dict[str, Any]:
    """`folio.json`."""
    told = {"format": FORMAT, "version": VERSION, "program": program_version(), "formulas": FORMULAS}
    return told | {"schema": SCHEMA, "saved": saved}


def folio_bytes(work: Work, saved: str, *, files: Mapping[str, bytes] | None = None) -> bytes:
    """The work as a `.folio` file. `files`: the sheets to put in, by sha256; the same work gives the same bytes."""
    members = {"folio.json": json_bytes(head(saved)), "work.json": json_bytes(work_json(work))}
    members |= {sheet_member(one): sheet_bytes(one.sheet) for one in work.sheets}
    members |= {f"files/{name}": data for name, data in sorted((files or {}).items())}
    members |= {f"bench/{one.ident}.toml": one.desk.bench_text.encode() for one in work.circuits if one.desk.bench_text}
    held = io.BytesIO()
    with zipfile.ZipFile(held, "w") as archive:
        for name, data in members.items():
            entry = zipfile.ZipInfo(name, ZIP_TIME)
            entry.compress_type = zipfile.ZIP_DEFLATED
            entry.external_attr = 0o600 << 16
            archive.writestr(entry, data)
    return held.getvalue()


def sheet_member(one: OpenSheet) -> str:
    return f"sheets/{one.key}.json"


def sheet_bytes(sheet: SpecSheet) -> bytes:
    """The sheet as the JSON document that `quartzfolio extract --json` prints."""
    held = io.StringIO()
    write_sheets([sheet], [], held)
    return held.getvalue().encode()


def json_bytes(value: Any) -> bytes:
    return json.dumps(value, ensure_ascii=False, allow_nan=False, indent=1).encode()


def work_json(work: Work) -> dict[str, Any]:
    """`work.json`: everything but the sheets themselves."""
    return {
        "name": work.name,
        "at": work.at,
        "circuits": [circuit_json(one) for one in work.circuits],
        "corrections": [one.model_dump(mode="json", exclude_defaults=True) for one in work.corrections],
        "slots": dict(work.slots),
        "sheets": [
            {"key": one.key, "file": one.sheet.file, "sha256": one.sheet.sha256, "kind": one.sheet.kind}
            for one in work.sheets
        ],
    }


def circuit_json(circuit: Circuit) -> dict[str, Any]:
    desk = circuit.desk
    return {
        "ident": circuit.ident,
        "name": circuit.name,
        "typed": dict(desk.typed),
        "kept": sorted(map(list, desk.kept)),
        "carried": dict(desk.carried),
        "conditions": desk.conditions,
    }


def history_json(history: History) -> list[dict[str, Any]]:
    """`history.json`: each step with the pieces as they were before it; sheets by their keys."""
    return [
        {"said": step.said, "before": {key: _piece_json(key, value) for key, value in step.before.items()}}
        for step in history.steps
    ]


def _piece_json(key: str, value: Any) -> Any:
    if key == "sheets":
        return [one.key for one in value]
    if key == "corrections":
        return [one.model_dump(mode="json", exclude_defaults=True) for one in value]
    return list(map(circuit_json, value)) if key == "circuits" else value


def read_folio(data: bytes, name: str) -> Reopened:
    """The work in a `.folio` file of this or an earlier version; FolioError says in a sentence why it cannot be had."""
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            if sum(entry.file_size for entry in archive.infolist()) > MOST_BYTES:
                raise FolioError(f"{name}: unpacks to more than {MOST_BYTES >> 30} GB; it is not used")
            members = {entry: archive.read(entry) for entry in archive.namelist()}
    except (zipfile.BadZipFile, EOFError, RuntimeError, zlib.error) as fault:
        raise FolioError(
            f"{name}: no work file, or a damaged one ({fault}); save it again on the machine it comes from"
        ) from None
    return reopen(members, name)


def bench_text(name: str) -> str:
    """The text of a bench file by its name; of a work file that of the circuit in view.

    OSError and UnicodeDecodeError as the file gives them, FolioError where a work cannot be read or has no circuit.
    """
    if not name.lower().endswith(SUFFIX):
        return Path(name).read_text(encoding="utf-8-sig")
    text = read_folio(Path(name).read_bytes(), name).work.desk.bench_text
    if not text:
        raise FolioError(f"{name}: no circuit is set in this work; set it on the page, or name a bench file")
    return text


def reopen(members: Mapping[str, bytes], name: str, find: Find | None = None) -> Reopened:
    """The work out of its members by name, as `read_folio`; `find` gives the bytes of a sheet that lies elsewhere."""
    told = _json(members, "folio.json", name)
    if not isinstance(told, dict) or told.get("format") != FORMAT:
        raise FolioError(f"{name}: no work file of quartzfolio: folio.json does not say “{FORMAT}”")
    number = told.get("version")
    if not isinstance(number, int) or not 1 <= number <= VERSION:
        raise FolioError(
            f"{name}: a work file of version {number!r}, and this program reads 1 to {VERSION}; use a newer one"
        )
    try:
        told_work = upgraded(_json(members, "work.json", name), number)
        work, history = _rebuilt(told_work, _Members(members, name, find or _nowhere))
    except FolioError:
        raise
    except (ValueError, TypeError, KeyError, AttributeError, RecursionError) as fault:
        raise FolioError(f"{name}: damaged, work.json does not hold what it should ({_short(fault)})") from None
    return Reopened(work, history, tuple(_remarks(told, work, name)))


def _remarks(told: Mapping[str, Any], work: Work, name: str) -> list[str]:
    said = []
    if told.get("formulas") not in (None, FORMULAS):
        said.append(f"{name} was saved with {told['formulas']}; numbers here are worked out with {FORMULAS}.")
    lone = {one.sheet for one in work.corrections} - {one.key for one in work.sheets}
    if lone:
        said.append(f"{name} holds corrections of {len(lone)} sheet(s) that it does not hold; they are kept, unused.")
    return said


@dataclass(frozen=True)
class _Members:
    """What the file holds, by name, and where a sheet may be found that it does not hold."""

    members: Mapping[str, bytes]
    name: str
    find: Find


def _nowhere(file: str, sha256: str) -> bytes | None:  # noqa: ARG001
    return None


def _rebuilt(told: Mapping[str, Any], held: _Members) -> tuple[Work, History]:
    sheets = {row["key"]: _sheet(row, held) for row in told["sheets"]}
    circuits = tuple(_circuit(row) for row in told["circuits"]) or (Circuit(),)
    work = Work(
        name=str(told["name"]),
        sheets=tuple(sheets.values()),
        corrections=tuple(Correction.model_validate(row) for row in told["corrections"]),
        circuits=circuits,
        at=told["at"] if told["at"] in {one.ident for one in circuits} else circuits[0].ident,
        slots=dict(told["slots"]),
    )
    there = "history.json" in held.members
    steps: Sequence[Any] = _json(held.members, "history.json", held.name) if there else ()
    return work, History(tuple(Step(str(row["said"]), _pieces(row["before"], sheets, held)) for row in steps))


def _pieces(told: Mapping[str, Any], sheets: dict[str, OpenSheet], held: _Members) -> dict[str, Any]:
    def sheet(key: str) -> OpenSheet | None:
        if key not in sheets and f"sheets/{key}.json" in held.members:
            sheets[key] = _sheet({"key": key}, held)
        return sheets.get(key)

    rebuilt: dict[str, Callable[[Any], Any]] = {
        "sheets": lambda keys: tuple(one for one in map(sheet, keys) if one is not None),
        "corrections": lambda rows: tuple(map(Correction.model_validate, rows)),
        "circuits": lambda rows: tuple(map(_circuit, rows)),
    }
    return {key: rebuilt.get(key, lambda value: value)(value) for key, value in told.items()}


def _circuit(told: Mapping[str, Any]) -> Circuit:
    kept = frozenset((str(key), str(text)) for key, text in told["kept"])
    typed = {str(key): str(text) for key, text in told["typed"].items()}
    desk = Desk(typed, kept, dict(told["carried"]), int(told["conditions"]))
    desk.understood  # noqa: B018 - a field that this program does not know shows itself here
    return Circuit(str(told["ident"]), str(told["name"]), desk)


def _sheet(row: Mapping[str, Any], held: _Members) -> OpenSheet:
    member, name = f"sheets/{row['key']}.json", held.name
    file, sha256 = str(row.get("file")), str(row.get("sha256"))
    if member not in held.members:
        return _unwritten(row, held)
    written, data = held.members[member], held.members.get(f"files/{sha256}")
    sheet = None
    if len(written) >= LONG_BYTES:
        sheet = _read_again(written, data if data is not None else held.find(file, sha256), file)
    if sheet is None:
        sheet = _from_json(held.members, member, name)
        data = held.members.get(f"files/{sheet.sha256}")
    if data is not None and hashlib.sha256(data).hexdigest() != sheet.sha256:
        raise FolioError(f"{name}: damaged, the sheet {sheet.file} in it is not the one that was read")
    return OpenSheet(sheet, data)


def _unwritten(row: Mapping[str, Any], held: _Members) -> OpenSheet:
    """A sheet whose readings were still to be written when the machine stopped, out of its own bytes."""
    file, sha256 = str(row.get("file")), str(row.get("sha256"))
    own = held.members.get(f"files/{sha256}")
    data = own if own is not None else held.find(file, sha256)
    if data is not None and held.find is not _nowhere:
        found = OpenSheet(read_bytes(data, file), own)
        if found.key == row["key"]:
            return found
    lacks = f"sheets/{row['key']}.json, the readings of {row.get('file', 'a sheet')}"
    raise FolioError(f"{held.name}: damaged, it lacks {lacks}")


def _read_again(written: bytes, data: bytes | None, file: str) -> SpecSheet | None:
    """A long list out of its own bytes, which is quicker and leaves it a list; None where it reads otherwise now."""
    if data is None:
        return None
    sheet = read_bytes(data, file)
    return sheet if sheet_bytes(sheet) == written else None


def _from_json(members: Mapping[str, bytes], member: str, name: str) -> SpecSheet:
    told = _json(members, member, name)
    try:
        (only,) = told["sheets"] if isinstance(told, dict) and "sheets" in told else (told,)
        with garbage_left():
            return SpecSheet.model_validate(only)
    except (ValidationError, ValueError) as fault:
        raise FolioError(f"{name}: damaged, {member} does not hold readings ({_short(fault)})") from None


def _json(members: Mapping[str, bytes], member: str, name: str) -> Any:
    if member not in members:
        raise FolioError(f"{name}: no work file of quartzfolio, or a damaged one: it lacks {member}")
    try:
        return json.loads(members[member])
    except (ValueError, RecursionError) as fault:
        raise FolioError(f"{name}: damaged, {member} cannot be read ({_short(fault)})") from None


def _short(fault: Exception) -> str:
    return " ".join(str(fault).split())[:120]
