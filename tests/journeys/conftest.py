"""What the journeys share: an empty folder to stand in, and the command."""

import pytest
from journey import Rigdesign, runner


@pytest.fixture
def here(tmp_path, monkeypatch):
    """An empty folder, made the current one."""
    monkeypatch.chdir(tmp_path)
    return tmp_path


@pytest.fixture
def rigdesign(capsys) -> Rigdesign:
    """The command."""
    return runner(capsys)
