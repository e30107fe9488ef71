from pathlib import Path

import pytest

from rcrules.cli import main
from tests.cli._board import NETLIST, write_board


@pytest.mark.usefixtures("board")
def test_a_board_that_keeps_its_rules_exits_0(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check"]) == 0
    out, err = capsys.readouterr()
    assert out.startswith("small board   5 parts, 3 nets, 1 RC network   1 of 1 finding decided (100 %)")
    assert err == ""


def test_a_failing_finding_exits_1_and_names_the_limit(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    write_board(board, limit="1 s")
    assert main(["check"]) == 1
    out, err = capsys.readouterr()
    assert "must be at least 1 s" in out
    assert err == "exit code 1: 1 finding at or above the fail level (--fail-on error)\n"


def test_quiet_says_nothing_at_all(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    write_board(board, limit="1 s")
    assert main(["check", "--quiet"]) == 1
    assert capsys.readouterr() == ("", "")


@pytest.mark.parametrize(("fail_on", "code"), [("error", 1), ("warning", 1), ("note", 1), ("never", 0)])
def test_the_fail_level_decides_the_exit_code(board: Path, fail_on: str, code: int) -> None:
    write_board(board, limit="1 s")
    assert main(["check", "--fail-on", fail_on]) == code


def test_a_warning_does_not_fail_by_default(board: Path) -> None:
    write_board(board, limit="1 s")
    rules = board / "our-rules.toml"
    rules.write_text(rules.read_text().replace('"error"', '"warning"'))
    assert main(["check"]) == 0
    assert main(["check", "--fail-on", "warning"]) == 1


def test_undecided_findings_count_only_when_asked(board: Path) -> None:
    rules = board / "our-rules.toml"
    rules.write_text(rules.read_text().replace('"1 ms"', '"least"\ngiven = { least = "ask" }'))
    assert main(["check"]) == 0
    assert main(["check", "--fail-on-undecided"]) == 1


def test_a_broken_input_exits_2_and_prints_no_report(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (board / "board.xml").write_text(NETLIST[:400])
    assert main(["check"]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert err.startswith("board.xml:")


def test_mistakes_of_inputs_and_rules_are_told_in_one_run(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (board / "board.xml").write_text("hello")
    (board / "our-rules.toml").write_text('[[rule]]\nid = "x"\n')
    assert main(["check"]) == 2
    err = capsys.readouterr().err
    assert "board.xml" in err
    assert "our-rules.toml" in err


@pytest.mark.usefixtures("board")
def test_a_missing_file_exits_2(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", "nowhere.xml"]) == 2
    assert "no such file" in capsys.readouterr().err


def test_no_inputs_at_all_exit_2(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(tmp_path)
    monkeypatch.setattr("rcrules.project.find", lambda _: None)
    assert main(["check"]) == 2
    assert "no inputs" in capsys.readouterr().err


def test_wrong_usage_exits_2() -> None:
    with pytest.raises(SystemExit) as stopped:
        main(["check", "--no-such-option"])
    assert stopped.value.code == 2


@pytest.mark.usefixtures("board")
def test_our_own_bug_exits_3_with_its_traceback(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    def broken(*_: object, **__: object) -> None:
        raise ZeroDivisionError("planted")

    monkeypatch.setattr("rcrules.pipeline.run", broken)
    assert main(["check"]) == 3
    err = capsys.readouterr().err
    assert "Traceback" in err
    assert "ZeroDivisionError: planted" in err
    assert "bug of rcrules" in err


@pytest.mark.usefixtures("board")
def test_an_interrupt_exits_130(monkeypatch: pytest.MonkeyPatch) -> None:
    def interrupted(*_: object, **__: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr("rcrules.pipeline.run", interrupted)
    assert main(["check"]) == 130


@pytest.mark.usefixtures("board")
def test_mistakes_cannot_steer_the_terminal(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", "evil\x1b[2J.xml"]) == 2
    assert "\x1b" not in capsys.readouterr().err


def test_mistakes_of_project_inputs_and_rules_are_told_in_one_run(
    board: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    project = board / "rcrules.toml"
    project.write_text(project.read_text().replace("voltage =", "volts ="))
    (board / "board.xml").write_text("hello")
    (board / "our-rules.toml").write_text('[[rule]]\nid = "x"\n')
    assert main(["check"]) == 2
    err = capsys.readouterr().err
    assert err.index("rcrules.toml:10:1: unknown key 'volts'") < err.index("board.xml:1") < err.index("our-rules.toml")


def test_a_mistyped_list_of_inputs_is_told_once(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    project = board / "rcrules.toml"
    project.write_text(project.read_text().replace("netlist =", "netlst ="))
    assert main(["check"]) == 2
    err = capsys.readouterr().err
    assert "did you mean 'netlist'?" in err
    assert "no inputs" not in err


def test_mistakes_of_several_boards_are_told_whatever_the_jobs(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    for name in ("one", "two"):
        (board / name).mkdir()
        write_board(board / name).write_text("[bord]\n")
    arguments = ["check", "--project", "one/rcrules.toml", "--project", "two/rcrules.toml"]
    assert main(arguments) == 2
    err = capsys.readouterr().err
    assert err.count("did you mean 'board'?") == 2
    assert main([*arguments, "--jobs", "2"]) == 2
    assert capsys.readouterr().err == err


def test_one_input_twice_is_a_slip(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (board / "copy.xml").write_text(NETLIST)
    assert main(["check", "board.xml", "copy.xml"]) == 2
    assert "copy.xml: the same content twice" in capsys.readouterr().err
    assert main(["check", "-", "-"]) == 2
    assert "standard input is named twice" in capsys.readouterr().err
    assert main(["check", ""]) == 2
    assert "an input without a name" in capsys.readouterr().err


def test_what_the_project_names_wrongly_is_said_to_stand_there(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    project = board / "rcrules.toml"
    text = project.read_text().replace('"board.xml"', '"bord.xml"').replace('"our-rules.toml"', '"debonce"')
    project.write_text(text)
    assert main(["check"]) == 2
    err = capsys.readouterr().err
    assert "bord.xml: no such file\n  do        check the path in [board] of rcrules.toml" in err
    assert "rcrules.toml: no pack is called 'debonce'; did you mean 'debounce'?" in err
    assert main(["check", "board.xml", "--rules", "debonce"]) == 2
    assert "--rules: no pack is called 'debonce'" in capsys.readouterr().err


def test_settings_of_a_rule_that_is_not_applied_are_remarked(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    project = board / "rcrules.toml"
    project.write_text(project.read_text() + '[settings."reset-slow-enuogh"]\nleast = "1 ms"\n')
    assert main(["check"]) == 0
    assert "is of no rule applied here; did you mean 'reset-slow-enough'?" in capsys.readouterr().out
    assert main(["check", "--rules", "debounce"]) == 0
    assert "of no rule applied here" not in capsys.readouterr().out


def test_limits_come_from_the_command_line_before_those_of_the_project(
    board: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = board / "rcrules.toml"
    file.write_text(file.read_text() + "\n[limits]\nparts = 2\n")
    assert main(["check"]) == 2
    assert "too many parts" in capsys.readouterr().err
    assert main(["check", "--limit", "parts=5", "--limit", "nets=9"]) == 0
    with pytest.raises(SystemExit):
        main(["check", "--limit", "pins=5"])
    assert "expected one of file-size, parts, connections, nets" in capsys.readouterr().err
