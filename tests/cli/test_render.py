"""A saved document shown again, without the board."""

import io
from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.reports import reports

FORMS = [["--report", "text", "--verbose"], *(["--report", name] for name in reports()), []]


@pytest.fixture
def saved(board: Path, capsys: pytest.CaptureFixture[str]) -> Path:
    """A saved document, and its board gone."""
    rules = board / "our-rules.toml"
    rules.write_text(rules.read_text().replace("1 ms", "1 s"))
    assert main(["check", "--report", "json=old.json"]) == 1
    capsys.readouterr()
    return board / "old.json"


@pytest.mark.parametrize("form", FORMS)
@pytest.mark.parametrize("command", ["check", "networks"])
def test_it_reads_as_on_the_day_it_was_saved(
    command: str, form: list[str], board: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main([command, *form]) == 0
    then = capsys.readouterr().out
    main([command, "--report", "json=old.json"])
    (board / "board.xml").unlink()
    assert main(["render", "old.json", *form]) == 0
    assert capsys.readouterr().out == then


def test_what_failed_then_is_no_failure_of_showing_it(saved: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["render", str(saved)]) == 0
    assert "error   reset-slow-enough" in capsys.readouterr().out


def test_it_reads_standard_input_and_writes_files(
    saved: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setattr("sys.stdin", io.TextIOWrapper(io.BytesIO(saved.read_bytes())))
    assert main(["render", "-", "--report", "json={board}-again.json"]) == 0
    assert capsys.readouterr().out == ""
    assert saved.with_name("small-board-again.json").read_bytes() == saved.read_bytes()


@pytest.mark.parametrize(
    ("change", "message"),
    [
        (lambda text: text[: len(text) // 2], "not JSON"),
        (lambda text: text.replace('"findings": [', '"findings": [7, '), r"document.findings[0]: expected object"),
        (lambda text: text.replace('"rcrules": 1', '"rcrules": 2'), "another schema number"),
        (lambda text: "\x00\ufffe" + text, "not JSON"),
    ],
)
def test_a_damaged_document_is_a_mistake_told_with_its_place(
    change, message: str, saved: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    saved.write_text(change(saved.read_text(encoding="utf-8")), encoding="utf-8")
    assert main(["render", str(saved)]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert message in err
    assert "old.json" in err


def test_no_file_and_no_text_are_mistakes(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["render", str(tmp_path / "none.json")]) == 2
    assert "cannot read it" in capsys.readouterr().err
    (tmp_path / "old.json").write_bytes(b"\xff\xfe\x00")
    assert main(["render", str(tmp_path / "old.json")]) == 2
    assert "other bytes than UTF-8" in capsys.readouterr().err
