"""From a failing finding to an accepted one, as a team does it."""

from pathlib import Path

import pytest

from rcrules.cli import main
from tests.cli._board import NETLIST, write_board


@pytest.fixture
def failing(board: Path) -> Path:
    """A board whose rule fails."""
    write_board(board, limit="1 s")
    return board


def complete(path: Path) -> None:
    text = path.read_text(encoding="utf-8")
    text = text.replace('reason  = ""', 'reason = "x"').replace('who     = ""', 'who = "Ada"')
    path.write_text(text, encoding="utf-8")


def named(board: Path) -> None:
    project = board / "rcrules.toml"
    project.write_text(project.read_text().replace("[board]", '[board]\nwaivers = "waivers.toml"'))


def test_the_entry_is_written_completed_and_then_covers_the_finding(
    failing: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main(["check", "--waive"]) == 1
    assert '[board] waivers = "waivers.toml"' in capsys.readouterr().err
    named(failing)
    assert main(["check"]) == 2
    assert "the waiver has no reason" in capsys.readouterr().err
    complete(failing / "waivers.toml")
    assert main(["check"]) == 0
    assert "1 waived" in capsys.readouterr().out
    (failing / "board.xml").write_text(NETLIST.replace("1uF", "2.2uF"))
    assert main(["check"]) == 1
    assert "waiver lapsed" in capsys.readouterr().out


def test_nothing_that_is_waived_is_written_again(failing: Path) -> None:
    assert main(["check", "--waive"]) == 1
    named(failing)
    complete(failing / "waivers.toml")
    before = (failing / "waivers.toml").read_text(encoding="utf-8")
    assert main(["check", "--waive"]) == 0
    assert (failing / "waivers.toml").read_text(encoding="utf-8") == before


def test_what_was_there_stays(failing: Path) -> None:
    named(failing)
    (failing / "waivers.toml").write_text("# ours\n")
    assert main(["check", "--waive"]) == 1
    assert (failing / "waivers.toml").read_text(encoding="utf-8").startswith("# ours\n\n[[waiver]]\n")


def test_a_waivers_file_that_is_not_there_is_a_mistake(failing: Path, capsys: pytest.CaptureFixture[str]) -> None:
    named(failing)
    assert main(["check"]) == 2
    assert "waivers.toml: cannot be read" in capsys.readouterr().err
