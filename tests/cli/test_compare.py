"""Saved documents against each other, and a board against one saved before."""

from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.findings import loads
from tests.cli._board import NETLIST


@pytest.fixture
def saved(board: Path, capsys: pytest.CaptureFixture[str]) -> Path:
    """``old.json`` of a board that holds, ``new.json`` of one that does not."""
    assert main(["check", "--quiet", "--report", "json=old.json"]) == 0
    (board / "board.xml").write_text(NETLIST.replace("1uF", "10nF"))
    assert main(["check", "--quiet", "--report", "json=new.json"]) == 1
    capsys.readouterr()
    return board


@pytest.mark.usefixtures("saved")
def test_compare_tells_what_broke_and_why(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["compare", "old.json", "new.json"]) == 1
    out, err = capsys.readouterr()
    assert "1 broke" in out
    assert "C1 1 µF → 10 nF" in out
    assert "exit code 1: 1 new finding" in err
    assert main(["compare", "new.json", "old.json"]) == 0
    assert "1 mended" in capsys.readouterr().out


@pytest.mark.usefixtures("saved")
def test_against_a_saved_document_only_new_findings_count(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", "--against", "new.json"]) == 0
    assert "1 still fail" in capsys.readouterr().out
    assert main(["check", "--against", "old.json", "--quiet"]) == 1
    assert "1 new finding" not in capsys.readouterr().err
    assert main(["check", "--against", "old.json", "--fail-on", "never", "--report", "json"]) == 0
    assert [item.baseline for item in loads(capsys.readouterr().out).findings] == ["new"]


@pytest.mark.usefixtures("saved")
def test_each_board_is_held_against_its_own_document(saved: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (saved / "two.toml").write_text((saved / "rcrules.toml").read_text().replace("small board", "two"))
    boards = ["check", "--project", "rcrules.toml", "--project", "two.toml"]
    assert main([*boards, "--against", "old.json"]) == 2
    assert "--against 'saved/{board}.json'" in capsys.readouterr().err
    (saved / "small-board.json").write_bytes((saved / "new.json").read_bytes())
    (saved / "two.json").write_bytes((saved / "new.json").read_bytes())
    assert main([*boards, "--against", "{board}.json"]) == 0


@pytest.mark.usefixtures("saved")
@pytest.mark.parametrize(
    ("options", "message"),
    [
        (["--moved", "5 V"], "expected  a share, such as '5 %'"),
        (["--moved", "-1 %"], "not one number of 0 or more"),
        (["--moved", "1 % .. 2 %"], "not one number of 0 or more"),
    ],
)
def test_a_share_that_is_none_is_refused(
    options: list[str], message: str, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main(["compare", "old.json", "new.json", *options]) == 2
    assert message in capsys.readouterr().err


@pytest.mark.usefixtures("board")
def test_a_document_that_is_not_there_is_told_by_name(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", "--against", "gone.json"]) == 2
    assert "gone.json: cannot read it" in capsys.readouterr().err
