import re
from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.cli._arguments import parser
from rcrules.findings import loads
from rcrules.reports import reports
from tests.cli._board import NETLIST, write_board


@pytest.mark.usefixtures("board")
def test_networks_gives_the_document_without_findings(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["networks", "--report", "json"]) == 0
    document = loads(capsys.readouterr().out)
    assert document.findings == []
    assert document.packs == []
    assert document.networks[0]["nodes"][0]["role"] == "power-on-delay"
    assert document.coverage["unruled"] == 2


def test_inputs_on_the_command_line_stand_for_those_of_the_project(
    board: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (board / "other.xml").write_text(NETLIST.replace("NRST", "RESET_B"))
    assert main(["networks", "other.xml"]) == 0
    assert "RESET_B" in capsys.readouterr().out


def test_several_projects_give_one_document_each(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    for name in ("one", "two"):
        (board / name).mkdir()
        project = write_board(board / name)
        project.write_text(project.read_text().replace("small board", f"board {name}"))
    projects = ["--project", "one/rcrules.toml", "--project", "two/rcrules.toml"]
    assert main(["check", *projects, "--report", "text", "--report", "json={board}.json"]) == 0
    out = capsys.readouterr().out
    assert out.index("board one") < out.index("board two")
    assert "boards   2, none of them with findings that fail" in out
    assert re.search(r"board two +nothing fails, 1 hold", out)
    assert loads((board / "board-two.json").read_text(encoding="utf-8")).inputs[0]["file"] == "two/board.xml"
    assert main(["check", *projects, "--jobs", "2"]) == 0
    assert capsys.readouterr().out == out


def test_without_a_project_only_packs_without_facts_apply_as_warnings(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(tmp_path)
    monkeypatch.setattr("rcrules.project.find", lambda _: None)
    (tmp_path / "board.xml").write_text(NETLIST.replace("16V", "2.5V"))
    assert main(["check", "board.xml", "--report", "json"]) == 0
    document = loads(capsys.readouterr().out)
    assert all(not pack["needs_facts"] for pack in document.packs)
    assert {item.level for item in document.findings} == {"warning"}


def test_the_demo_board_is_checked_and_exits_0(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["demo", str(tmp_path / "demo")]) == 0
    out, err = capsys.readouterr()
    assert "fails" not in err
    assert "error" in out
    assert (tmp_path / "demo" / "rcrules.toml").is_file()


def test_the_demo_does_not_overwrite_what_it_did_not_write(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "rcrules.toml").write_text("# mine")
    assert main(["demo", str(tmp_path)]) == 2
    assert (tmp_path / "rcrules.toml").read_text() == "# mine"
    assert "another file stands here" in capsys.readouterr().err


def test_rules_lists_packs_in_words(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["rules"]) == 0
    out = capsys.readouterr().out
    assert "voltage-within-rating" in out
    assert "reset-lifts-late-enough" in out


def test_rules_tells_what_is_wrong_with_a_file(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    rules = board / "our-rules.toml"
    assert main(["rules", "our-rules.toml"]) == 0
    rules.write_text(rules.read_text().replace("time_constant", "time_konstant"))
    assert main(["rules", "our-rules.toml"]) == 2
    assert "our-rules.toml:10:" in capsys.readouterr().err


def test_measures_are_listed_with_their_options(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["rules", "--measures"]) == 0
    out = capsys.readouterr().out
    assert "time_constant [s]" in out
    assert "settling_time" in out
    assert "band = QUANTITY   (default 1 %)" in out


def test_what_many_options_share_is_told_once(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["rules", "--measures"]) == 0
    out = capsys.readouterr().out
    assert "event = EVENT" in out
    assert out.count('"power-up" | "power-down"') == 1


def test_names_in_rule_files_cannot_steer_the_terminal(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    rules = board / "our-rules.toml"
    rules.write_text(rules.read_text().replace("Rules of our team", "\\u001b[2JRules"))
    assert main(["rules", "our-rules.toml"]) == 0
    out = capsys.readouterr().out
    assert "\x1b" not in out
    assert "\\x1b[2JRules" in out
    main(["rules", "our-rules.toml", "--color", "always"])
    assert "\x1b[1mour-rules\x1b[0m" in capsys.readouterr().out


@pytest.mark.parametrize("command", ["check", "networks", "render", "rules", "demo"])
def test_every_command_explains_itself(command: str, capsys: pytest.CaptureFixture[str]) -> None:
    """A sentence of what it does, a text for every argument and option, the exit codes."""
    with pytest.raises(SystemExit) as stopped:
        main([command, "--help"])
    assert stopped.value.code == 0
    out = capsys.readouterr().out
    assert "exit code: 0" in " ".join(out.split())
    (actions,) = (action.choices for action in parser()._actions if action.choices and action.metavar == "COMMAND")
    assert all(action.help for action in actions[command]._actions)
    assert actions[command].description.endswith(".")
    assert len(actions[command].description) > 40


def test_the_help_names_every_report(capsys: pytest.CaptureFixture[str]) -> None:
    with pytest.raises(SystemExit):
        main(["check", "--help"])
    told = re.search(r"text \(default\), ([\w, ]+), on", " ".join(capsys.readouterr().out.split()))
    assert told is not None
    assert {"text", *re.split(", | or ", told[1])} == set(reports())
