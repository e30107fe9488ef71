"""A board on disk."""

from pathlib import Path

import pytest

from tests.cli._board import write_board


@pytest.fixture
def board(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A folder with a board whose rule holds; the working folder."""
    write_board(tmp_path)
    monkeypatch.chdir(tmp_path)
    return tmp_path
