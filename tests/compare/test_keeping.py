"""Work that is kept on this machine: written, recalled, listed and forgotten without a trace."""

import os
import stat
import sys
from dataclasses import replace
from pathlib import Path

import hand_made
import pytest

from compare import keeping
from compare.corrections import Correction
from compare.folio import FolioError
from compare.work import History, OpenSheet, Work
from extract import read_sheet

MAIL = hand_made.MAIL.encode()
OPEN = OpenSheet(read_sheet(MAIL, "offer.txt"), MAIL)
WORK = Work(name="Frost node", sheets=(OPEN,))
GONE = Correction(sheet=OPEN.key, part=0, reading=0, what="not on the sheet", was=OPEN.sheet.parts[0].readings[0])


def files(folder):
    return sorted(path.relative_to(folder).as_posix() for path in folder.rglob("*") if path.is_file())


def test_kept_work_comes_back_with_its_way_back_and_its_sheets():
    ident, corrected = keeping.new_ident(), replace(WORK, corrections=(GONE,))
    history = History().after("frequency not on the sheet", WORK, corrected)
    stamp = keeping.keep(ident, corrected, history)
    back = keeping.recall(ident)
    assert (back.work, back.work.sheets[0].data) == (corrected, MAIL)
    assert back.history.undone(back.work)[0] == WORK
    assert keeping.stamp_of(ident) == stamp


def test_a_closed_sheet_can_be_brought_back_after_a_reload():
    ident, closed = keeping.new_ident(), replace(WORK, sheets=())
    keeping.keep(ident, closed, History().after("sheet closed", WORK, closed))
    back = keeping.recall(ident)
    undone = back.history.undone(back.work)[0]
    assert undone == WORK
    assert undone.sheets[0].data == MAIL


def test_what_no_undo_can_bring_back_is_swept_when_the_work_is_recalled(state_folder):
    ident = keeping.new_ident()
    keeping.keep(ident, WORK, History())
    keeping.keep(ident, replace(WORK, sheets=()), History())
    assert keeping.recall(ident).work.sheets == ()
    assert files(state_folder / ident) == ["folio.json", "history.json", "work.json"]


def test_a_sheet_is_written_once(state_folder):
    ident = keeping.new_ident()
    keeping.keep(ident, WORK, History())
    sheet = state_folder / ident / "sheets" / f"{OPEN.key}.json"
    os.utime(sheet, (1, 1))
    keeping.keep(ident, replace(WORK, name="other"), History())
    assert sheet.stat().st_mtime == 1
    assert keeping.recall(ident).work.name == "other"


@pytest.mark.skipif(sys.platform == "win32", reason="access rights are kept another way there")
def test_nobody_else_may_read_what_is_kept(state_folder):
    ident = keeping.new_ident()
    keeping.keep(ident, WORK, History())
    for path in (state_folder / ident).rglob("*"):
        assert not stat.S_IMODE(path.stat().st_mode) & 0o077 or path.is_dir()
    assert not stat.S_IMODE((state_folder / ident).stat().st_mode) & 0o077


def test_forgotten_work_leaves_nothing_behind(state_folder):
    ident = keeping.new_ident()
    keeping.keep(ident, WORK, History())
    keeping.forget(ident)
    assert keeping.recall(ident) is None
    assert not state_folder.exists()


def test_forgetting_one_work_leaves_the_other():
    first, second = keeping.new_ident(), keeping.new_ident()
    for ident in (first, second):
        keeping.keep(ident, WORK, History())
    keeping.forget(first)
    assert [one.ident for one in keeping.kept_works()] == [second]
    assert keeping.recall(second).work == WORK


def test_kept_works_are_listed_with_name_time_and_sheets(state_folder):
    ident = keeping.new_ident()
    saved = keeping.keep(ident, WORK, History()).saved
    (state_folder / ("0" * 16)).mkdir()
    assert keeping.kept_works() == [
        keeping.Kept(ident, "Frost node", saved, 1),
        keeping.Kept("0" * 16, "a damaged one", "", 0),
    ]


def test_what_another_page_has_written_since_is_not_written_over():
    ident = keeping.new_ident()
    mine = keeping.keep(ident, WORK, History())
    theirs = keeping.keep(ident, replace(WORK, name="theirs"), History(), mine)
    with pytest.raises(keeping.ChangedElsewhere):
        keeping.keep(ident, replace(WORK, name="mine"), History(), mine)
    assert keeping.recall(ident).work.name == "theirs"
    keeping.keep(ident, replace(WORK, name="theirs again"), History(), theirs)
    assert keeping.recall(ident).work.name == "theirs again"


@pytest.mark.parametrize("ident", ["", "../other", "0123", "g" * 16, "0" * 16])
def test_a_name_that_is_none_recalls_nothing(ident):
    assert keeping.recall(ident) is None


def test_damaged_work_is_refused_with_a_sentence(state_folder):
    ident = keeping.new_ident()
    keeping.keep(ident, WORK, History())
    (state_folder / ident / "work.json").write_text("{", encoding="utf-8")
    with pytest.raises(FolioError, match="the work kept on this machine: damaged, work.json cannot be read"):
        keeping.recall(ident)


@pytest.mark.parametrize(
    ("platform", "environment", "ends"),
    [
        ("linux", {"XDG_STATE_HOME": "/srv/state"}, "/srv/state/quartzfolio"),
        ("linux", {"XDG_STATE_HOME": "not/absolute"}, ".local/state/quartzfolio"),
        ("linux", {}, ".local/state/quartzfolio"),
        ("darwin", {}, "Library/Application Support/quartzfolio"),
        ("win32", {"LOCALAPPDATA": "C:/Users/q/AppData/Local"}, "C:/Users/q/AppData/Local/quartzfolio"),
    ],
)
def test_work_lies_where_the_system_has_programs_keep_their_state(platform, environment, ends):
    assert keeping.state_folder(environment, platform).as_posix().endswith(ends)


def test_a_folder_that_cannot_be_written_is_an_error_and_no_half_written_file(monkeypatch, tmp_path):
    blocked = tmp_path / "file"
    blocked.write_text("", encoding="utf-8")
    monkeypatch.setattr(keeping, "state_folder", lambda: Path(blocked))
    with pytest.raises(OSError, match="file"):
        keeping.keep(keeping.new_ident(), WORK, History())


LIST = ("Part number,Frequency (MHz)\n" + "".join(f"OR{at:05d},26\n" for at in range(2_001))).encode()
LONG = OpenSheet(read_sheet(LIST, "list.csv"), LIST)


def test_the_readings_of_a_long_list_are_put_off_and_there_when_the_work_is_recalled(state_folder):
    ident, work = keeping.new_ident(), replace(WORK, sheets=(OPEN, LONG))
    keeping.keep(ident, work, History())
    assert [path.stem for path in (state_folder / ident / "sheets").iterdir()] == [OPEN.key]
    assert keeping.recall(ident).work == work
    assert (state_folder / ident / "sheets" / f"{LONG.key}.json").is_file()


def test_a_list_whose_readings_were_never_written_comes_back_out_of_its_file(state_folder):
    ident, work = keeping.new_ident(), replace(WORK, sheets=(LONG,))
    keeping.keep(ident, work, History())
    keeping.write_rest()
    (state_folder / ident / "sheets" / f"{LONG.key}.json").unlink()
    back = keeping.recall(ident).work
    assert (back, back.sheets[0].data) == (work, LIST)


def test_forgotten_work_is_not_written_afterwards(state_folder):
    ident = keeping.new_ident()
    keeping.keep(ident, replace(WORK, sheets=(LONG,)), History())
    keeping.forget(ident)
    keeping.write_rest()
    assert not (state_folder / ident).exists()


def test_what_could_not_be_written_later_is_told_by_the_next_save(state_folder, monkeypatch):
    ident, work = keeping.new_ident(), replace(WORK, sheets=(LONG,))
    keeping.keep(ident, work, History())

    def full(path, data):
        raise OSError(28, "No space left on device")

    with monkeypatch.context() as patched:
        patched.setattr(keeping, "_write", full)
        keeping.write_rest()
        with pytest.raises(OSError, match="No space left"):
            keeping.keep(ident, work, History())
    keeping.keep(ident, work, History())
    assert (state_folder / ident / "sheets" / f"{LONG.key}.json").is_file()
