"""Standard streams that are closed or full, and reports that would overwrite something."""

import os
import subprocess
import sys
from pathlib import Path

import pytest

import rcrules
from rcrules.cli import main
from tests.cli._board import write_board

ENVIRONMENT = {**os.environ, "PYTHONPATH": str(Path(rcrules.__file__).parent.parent)}


def ran(arguments: str, folder: Path, before: str = "") -> "subprocess.CompletedProcess[str]":
    """The command in a shell of its own, with redirections."""
    command = f'{before}"{sys.executable}" -m rcrules {arguments}'
    return subprocess.run(["sh", "-c", command], cwd=folder, env=ENVIRONMENT, capture_output=True, text=True)


def test_closed_streams_change_no_exit_code(board: Path) -> None:
    assert ran("check >&-", board).returncode == 0
    assert ran("check 2>&-", board).returncode == 0
    assert ran("check nowhere.xml 2>&-", board).returncode == 2
    closed = ran("check - <&-", board)
    assert (closed.returncode, "the file is empty" in closed.stderr) == (2, True)


def test_a_full_disk_under_standard_output_is_told(board: Path) -> None:
    full = ran("check > out.txt", board, before="ulimit -f 0; ")
    assert full.returncode == 2
    assert full.stderr.startswith("standard output: cannot write the report: ")


def test_a_reader_that_goes_away_is_no_mistake(board: Path) -> None:
    gone = ran("check | true", board)
    assert gone.stderr == ""


def test_reports_overwrite_neither_each_other_nor_an_input(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    before = (board / "board.xml").read_bytes()
    assert main(["check", "board.xml", "--report", "json=board.xml"]) == 2
    assert "board.xml: the file is an input" in capsys.readouterr().err
    assert (board / "board.xml").read_bytes() == before
    assert main(["check", "--report", "json=same.txt", "--report", "text=./same.txt"]) == 2
    assert "the file would hold two reports" in capsys.readouterr().err
    (board / "two").mkdir()
    write_board(board / "two")
    assert (
        main(["check", "--project", "rcrules.toml", "--project", "two/rcrules.toml", "--report", "json={board}"]) == 2
    )
    assert not (board / "small-board").exists()


@pytest.mark.usefixtures("board")
def test_odd_options_are_told(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", "--project", "rcrules.toml", "--project", "rcrules.toml"]) == 2
    assert "one project file is named twice" in capsys.readouterr().err
    for jobs in ("0", "x", "-1", "9" * 5000):
        with pytest.raises(SystemExit):
            main(["check", f"--jobs={jobs}"])
        assert "expected a whole number of 1 or more" in capsys.readouterr().err
    assert main(["check", "--report", "json=nowhere/x.json"]) == 2
    assert "name a file in a folder that is there" in capsys.readouterr().err
