"""The command line: `quartzfolio extract | review | rank | substitute | changes | report | page`, and exit statuses.

Heavy imports stand inside the commands that need them, so that `--help` answers at once.
"""

from __future__ import annotations

import argparse
import json
import os
import sys
from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

from compare.command_report import add_arguments

if TYPE_CHECKING:
    from compare.bench import Bench
    from compare.intake import Intake
    from extract.model import Note

DONE, LOOK, WRONG_CALL, STOPPED = 0, 1, 2, 130


class CallError(Exception):
    """The call itself is wrong; the message says what, where and what to do."""


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one command and return its exit status."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(encoding="utf-8")
    options = _parser().parse_args(arguments)
    try:
        if getattr(options, "wordings", None) is not None:
            _add_wordings(options.wordings)
        status: int = options.run(options)
        sys.stdout.flush()
    except CallError as fault:
        print(f"quartzfolio: {fault}", file=sys.stderr)  # noqa: T201
        return WRONG_CALL
    except BrokenPipeError:
        # The reader of our output went away (`| head`): no fault, but the interpreter would complain at exit.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return DONE
    except KeyboardInterrupt:
        print("quartzfolio: stopped; nothing was finished", file=sys.stderr)  # noqa: T201
        return STOPPED
    return status


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(
        prog="quartzfolio",
        description="Reads quartz-crystal spec sheets, works out what each crystal does in your oscillator circuit, "
        "and ranks the candidates.",
    )
    parser.add_argument("--version", action=_Version, nargs=0, help="print the versions of program and schemas")
    commands = parser.add_subparsers(title="commands", metavar="COMMAND", required=True)
    extract = _command(commands, "extract", "what the sheets say, each value with its place", _extract)
    _sheets(extract)
    extract.add_argument(
        "--explain", action="store_true", help="for each reading, and for each value left out, why (not with --json)"
    )
    review = _command(commands, "review", "each part in your circuit: every number, verdict and reason", _review)
    _sheets(review)
    _bench(review)
    review.add_argument(
        "--what-if", action="store_true", help="also every single change that would turn what falls short"
    )
    review.add_argument(
        "--spread",
        choices=("rss", "draws"),
        help="beside the worst case: root-sum-square, or boards drawn at random within the tolerances",
    )
    review.add_argument("--boards", type=_count, default=10_000, help="boards to draw (default %(default)s)")
    review.add_argument("--seed", type=int, default=1, help="seed of the draws (default %(default)s)")
    rank = _command(commands, "rank", "the candidates for your circuit, best first, and why", _rank)
    _sheets(rank)
    _bench(rank)
    rank.add_argument("--all", action="store_true", help="show every part, however long the list")
    swap = _command(commands, "substitute", "may these parts stand in for that one, on the board as built", _substitute)
    swap.add_argument(
        "incumbent", type=_name, metavar="INCUMBENT", help="the part on the board: its sheet, or FILE#PART_NUMBER"
    )
    _sheets(swap, "candidates", "CANDIDATE")
    _bench(swap, required=False)
    changed = _command(
        commands, "changes", "what differs between two revisions of a sheet, and if it matters", _changes
    )
    changed.add_argument("old", metavar="OLD", help="the earlier revision")
    changed.add_argument("new", metavar="NEW", help="the later one")
    _bench(changed, required=False)
    report = _command(commands, "report", "the margin report of one part, to be checked and signed", _report)
    _sheets(report)
    _bench(report)
    add_arguments(report)
    page = commands.add_parser("page", help="the same in the browser, on this machine only")
    page.add_argument(
        "sheets", nargs="*", type=_name, metavar="SHEET", help="sheets, folders or a work file (.folio) to open at once"
    )
    page.add_argument("--bench", metavar="BENCH.toml", help="circuit and requirement to open at once")
    page.add_argument("--port", type=int, default=8733, help="port on 127.0.0.1 (default %(default)s)")
    page.set_defaults(run=_page)
    return parser


def _command(commands: Any, name: str, about: str, run: Any) -> argparse.ArgumentParser:
    described = about[0].upper() + about[1:] + "."
    parser: argparse.ArgumentParser = commands.add_parser(name, help=about, description=described)
    parser.add_argument("--json", action="store_true", help="one JSON document instead of the readable table")
    parser.add_argument(
        "--wordings", metavar="FOLDER", help="wording files (*.toml) to read besides those that come with the program"
    )
    parser.set_defaults(run=run)
    return parser


def _name(text: str) -> str:

    if text.partition("#")[0].strip() or (text and os.path.exists(text)):  # noqa: PTH110
        return text
    raise argparse.ArgumentTypeError(f"{text!r} names no file; write FILE, a folder, FILE#PART_NUMBER or -")


def _count(text: str) -> int:
    number = int(text)
    if not 1 <= number <= 1_000_000:
        raise argparse.ArgumentTypeError(f"must be from 1 to 1000000, got {text}")
    return number


def _sheets(parser: argparse.ArgumentParser, name: str = "sheets", shown: str = "SHEET") -> None:
    parser.add_argument(
        name,
        nargs="+",
        type=_name,
        metavar=shown,
        help="a file (PDF, XLSX, XLS, ODS, CSV, TSV, HTML, DOCX, text, picture), a folder of them, "
        "FILE#PART_NUMBER for one part of a file, or - for standard input",
    )


def _bench(parser: argparse.ArgumentParser, *, required: bool = True) -> None:
    parser.add_argument("--bench", required=required, metavar="BENCH.toml", help="your circuit and what is asked of it")


class _Version(argparse.Action):
    def __call__(self, parser: argparse.ArgumentParser, *_: Any) -> None:
        from importlib.metadata import version

        from extract.model import SCHEMA

        schemas = ", ".join(f"quartzfolio/{name}/1" for name in ("review", "rank", "substitute", "changes"))
        print(f"quartzfolio {version('quartzfolio')}, {SCHEMA}, {schemas}")  # noqa: T201
        parser.exit()


def _extract(options: argparse.Namespace) -> int:
    if options.explain:
        return _explain(options)
    intake = _read(options, options.sheets)
    if options.json:
        from compare.sheets_json import write_sheets

        write_sheets(intake.sheets, intake.notes, sys.stdout)
    else:
        from compare.report import extract_text

        _print(extract_text(intake.sheets), intake.notes)
    return _extract_status(intake)


def _extract_status(intake: Intake) -> int:
    if intake.stopped:
        return _say_stopped(intake)
    complete = bool(intake.sheets) and all(sheet.parts for sheet in intake.sheets)
    return DONE if complete and not _faults(intake.notes) else LOOK


def _explain(options: argparse.Namespace) -> int:
    from compare.explain_text import explain_text
    from extract.trace import tracing

    if options.json:
        raise CallError("extract: --explain is text for a person; leave out --json or --explain")
    with tracing() as trace:
        intake = _read(options, options.sheets)
    _print("\n\n".join(explain_text(sheet, trace) for sheet in intake.sheets), intake.notes)
    return _extract_status(intake)


def _say_stopped(intake: Intake) -> int:
    """One line on the error stream; what is finished was printed."""
    print(f"quartzfolio: {intake.notes[-1].message}", file=sys.stderr)  # noqa: T201
    return STOPPED


def _review(options: argparse.Namespace) -> int:
    from compare.report import review_text
    from compare.review import review

    bench = _read_bench(options.bench)
    intake = _read(options, options.sheets)
    result = review(intake.sheets, bench, what_if=options.what_if)
    if options.spread is not None:
        from compare.spread import add_spread

        result = add_spread(result, intake.sheets, bench, options.spread, boards=options.boards, seed=options.seed)
    _add_notes(result, intake)
    _print_json(result) if options.json else _print(review_text(result))
    if intake.stopped:
        return _say_stopped(intake)
    sound = all(one["verdict"] == "meets" and not one["to_check"] for one in result["reviews"])
    every_file = bool(intake.sheets) and all(sheet.parts for sheet in intake.sheets)
    return DONE if result["reviews"] and sound and every_file and not _faults(intake.notes) else LOOK


def _rank(options: argparse.Namespace) -> int:
    from compare.ranking import MOST_INDENTED, rank, rank_sheets, write_ranking
    from compare.report import MOST_ROWS, rank_text

    bench = _read_bench(options.bench)
    intake = _read(options, options.sheets)
    if options.json:
        ranked = rank_sheets(intake.sheets, bench)
        said: dict[str, Any] = {"notes": []}
        _add_notes(said, intake)
        write_ranking(ranked, said["notes"], sys.stdout, indented=len(ranked) <= MOST_INDENTED)
        found = len(ranked)
    else:
        result = rank(intake.sheets, bench, shown=None if options.all else MOST_ROWS)
        _add_notes(result, intake)
        _print(rank_text(result))
        found = len(result["rows"])
    if intake.stopped:
        return _say_stopped(intake)
    readable = not any(_faults(sheet.notes) for sheet in intake.sheets) and not _faults(intake.notes)
    return DONE if found and readable else LOOK


def _report(options: argparse.Namespace) -> int:
    from compare.command_report import ReportCallError, write_report

    if options.json:
        raise CallError("report: there is no JSON of it; `quartzfolio review --json` has the same numbers")
    bench = _read_bench(options.bench)
    intake = _read(options, options.sheets, whole=True)
    try:
        dossier = write_report(intake.sheets, bench, options)
    except ReportCallError as fault:
        raise CallError(str(fault)) from None
    review = dossier.review
    return DONE if review["verdict"] == "meets" and not review["to_check"] and not _faults(intake.notes) else LOOK


def _substitute(options: argparse.Namespace) -> int:
    from compare.sieve import read_candidates
    from compare.substitute_text import substitute_text
    from compare.substitution import SubstituteError, substitute

    bench = None if options.bench is None else _read_bench(options.bench)
    incumbent = _read(options, [options.incumbent], whole=True)
    try:
        candidates = read_candidates(
            options.candidates, incumbent.sheets, bench, lambda names: _read(options, names, whole=True)
        )
        result = substitute(incumbent.sheets, candidates.sheets, bench)
    except SubstituteError as fault:
        raise CallError(str(fault)) from None
    _add_notes(result, incumbent)
    _add_notes(result, candidates)
    _print_json(result) if options.json else _print(substitute_text(result))
    fits = all(one["verdict"] == "drop-in" for one in result["candidates"])
    every_file = bool(candidates.sheets) and all(sheet.parts for sheet in candidates.sheets)
    return DONE if result["candidates"] and fits and every_file and not _faults(candidates.notes) else LOOK


def _changes(options: argparse.Namespace) -> int:
    from compare.changes import changes
    from compare.substitute_text import changes_text

    bench = None if options.bench is None else _read_bench(options.bench)
    old, new = (_read(options, [name], whole=True) for name in (options.old, options.new))
    for name, intake in ((options.old, old), (options.new, new)):
        if not any(sheet.parts for sheet in intake.sheets):
            said = [note.message for sheet in intake.sheets for note in sheet.notes] + [n.message for n in intake.notes]
            raise CallError(f"{name}: no crystal to compare ({said[0] if said else 'nothing was read'})")
    result = changes(old.sheets, new.sheets, bench)
    _add_notes(result, old)
    _add_notes(result, new)
    _print_json(result) if options.json else _print(changes_text(result))
    return LOOK if any(line["matters"] for line in result["lines"]) else DONE


def _page(options: argparse.Namespace) -> int:
    from compare.serve import serve

    if options.bench is not None:
        _read_bench(options.bench)
    return serve(options.sheets, bench=options.bench, port=options.port)


def _read(options: argparse.Namespace, names: Sequence[str], *, whole: bool = False) -> Intake:
    """Read the sheets, with a progress line; `whole`: a read that is stopped half-way is of no use."""
    from compare.intake import read_sheets
    from compare.waiting import ProgressLine

    progress = ProgressLine(sys.stderr, quiet=options.json)
    try:
        intake = read_sheets(names, progress=progress)
    finally:
        progress.done()
    if whole and intake.stopped:
        raise KeyboardInterrupt
    return intake


def _add_wordings(folder: str) -> None:
    from pathlib import Path

    from extract.vocabulary import WordingError, add_wordings

    try:
        add_wordings(Path(folder))
    except WordingError as fault:
        raise CallError(str(fault)) from None


def _read_bench(name: str) -> Bench:
    from compare.bench import BenchError, read_bench

    try:
        text = _bench_text(name)
    except FileNotFoundError:
        raise CallError(f"{name}: no such bench file; check the name") from None
    except UnicodeDecodeError:
        raise CallError(f"{name}: not a text file in UTF-8; a bench is a TOML file") from None
    except OSError as fault:
        raise CallError(f"{name}: cannot be opened: {(fault.strerror or str(fault)).lower()}") from None
    try:
        return read_bench(text, name)
    except BenchError as fault:
        raise CallError(str(fault)) from None


def _bench_text(name: str) -> str:
    if not name.lower().endswith(".folio"):
        from pathlib import Path

        return Path(name).read_text(encoding="utf-8-sig")
    from compare.folio import FolioError, bench_text

    try:
        return bench_text(name)
    except FolioError as fault:
        raise CallError(str(fault)) from None


def _faults(notes: Sequence[Note]) -> bool:
    return any(note.level == "error" for note in notes)


def _add_notes(result: dict[str, Any], intake: Intake) -> None:
    """Put what was said about names and sheets in front of what the reckoning has to say."""
    from compare.sheets_json import notes_of

    said = [note.model_dump(mode="json") for note in intake.notes]
    result["notes"] = [*said, *notes_of(intake.sheets), *result["notes"]]


def _print_json(document: dict[str, Any]) -> None:
    json.dump(document, sys.stdout, ensure_ascii=False, indent=1, allow_nan=False)
    sys.stdout.write("\n")


def _print(text: str, notes: Sequence[Note] = ()) -> None:
    sys.stdout.write(text.rstrip() + "\n")
    for note in notes:
        sys.stdout.write(f"{note.level}: {note.message}\n")
