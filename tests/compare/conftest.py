"""What every test of this folder needs: work is kept in a folder of the test's own, and short reads are waited for."""

import pytest


@pytest.fixture(autouse=True)
def state_folder(monkeypatch, tmp_path_factory):
    """Where the page keeps work during the test; the person's own folder is never touched."""
    folder = tmp_path_factory.mktemp("state")
    monkeypatch.setenv("XDG_STATE_HOME", str(folder))
    monkeypatch.setenv("LOCALAPPDATA", str(folder))
    monkeypatch.setattr("compare.background.PATIENCE_S", 60)
    return folder / "quartzfolio"
