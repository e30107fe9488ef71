import ast
import json
import subprocess
import sys
from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.findings import loads
from tests.cli._board import NETLIST, write_board


@pytest.fixture
def board(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A folder with a board whose rule holds; the working folder."""
    write_board(tmp_path)
    monkeypatch.chdir(tmp_path)
    return tmp_path


@pytest.mark.usefixtures("board")
def test_a_board_that_keeps_its_rules_exits_0(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check"]) == 0
    out, err = capsys.readouterr()
    assert out.startswith("small board   5 parts, 3 nets, 1 RC node   1 of 1 finding decided (100 %)")
    assert err == ""


def test_a_failing_finding_exits_1_and_names_the_limit(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    write_board(board, limit="1 s")
    assert main(["check"]) == 1
    assert "must be at least 1 s" in capsys.readouterr().out


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


def test_a_dash_reads_standard_input(board: Path) -> None:
    done = subprocess.run(
        [sys.executable, "-m", "rcrules", "networks", "-", "--report", "json"],
        input=NETLIST.encode(),
        capture_output=True,
        cwd=board,
        check=True,
    )
    assert json.loads(done.stdout)["inputs"][0]["file"] == "<stdin>"


def test_reports_go_to_files_and_standard_output(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", "--report", "text", "--report", "json=found.json"]) == 0
    assert "small board" in capsys.readouterr().out
    assert loads((board / "found.json").read_text(encoding="utf-8")).board["name"] == "small board"


@pytest.mark.parametrize(
    ("reports", "message"),
    [
        (["yaml"], "unknown report format"),
        (["json="], "no file after '='"),
        (["text", "json"], "more than one report on standard output"),
        (["json=nowhere/found.json"], "cannot write the report"),
    ],
)
@pytest.mark.usefixtures("board")
def test_reports_that_cannot_be_written_exit_2(
    capsys: pytest.CaptureFixture[str], reports: list[str], message: str
) -> None:
    assert main(["check", *(item for report in reports for item in ("--report", report))]) == 2
    assert message in capsys.readouterr().err


@pytest.mark.usefixtures("board")
def test_quiet_prints_no_report_unless_asked(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", "--quiet"]) == 0
    assert capsys.readouterr().out == ""
    main(["check", "--quiet", "--report", "json"])
    assert capsys.readouterr().out.startswith("{")


def test_several_projects_give_one_document_each(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    for name in ("one", "two"):
        (board / name).mkdir()
        project = write_board(board / name)
        project.write_text(project.read_text().replace("small board", f"board {name}"))
    projects = ["--project", "one/rcrules.toml", "--project", "two/rcrules.toml"]
    assert main(["check", *projects, "--report", "text", "--report", "json={board}.json"]) == 0
    out = capsys.readouterr().out
    assert out.index("board one") < out.index("board two")
    assert loads((board / "board-two.json").read_text(encoding="utf-8")).inputs[0]["file"] == "two/board.xml"
    assert main(["check", *projects, "--jobs", "2"]) == 0
    assert capsys.readouterr().out == out


@pytest.mark.usefixtures("board")
def test_several_projects_do_not_fit_in_one_file() -> None:
    twice = ["--project", "rcrules.toml"] * 2
    assert main(["check", *twice, "--report", "json=found.json"]) == 2
    assert main(["check", *twice, "--report", "json"]) == 2
    assert main(["check", "board.xml", *twice]) == 2


def test_the_document_tells_nothing_of_the_machine(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    main(["check", str(board / "board.xml"), "--project", str(board / "rcrules.toml"), "--report", "json"])
    inside = capsys.readouterr().out
    assert str(board) not in inside
    main(["check", "--report", "json"])
    assert capsys.readouterr().out.replace(" ", "") == inside.replace(" ", "")


def test_the_same_inputs_give_the_same_bytes(board: Path) -> None:
    command = [sys.executable, "-m", "rcrules", "check", "--report", "json"]
    seeds = [{"PYTHONHASHSEED": seed, "PATH": ""} for seed in ("1", "2")]
    first, second = (
        subprocess.run(command, cwd=board, env=env, capture_output=True, check=True).stdout for env in seeds
    )
    assert first == second


def test_a_reader_that_goes_away_is_no_mistake(board: Path) -> None:
    command = f"{sys.executable} -m rcrules check --report json | head -c 1; exit ${{PIPESTATUS[0]}}"
    done = subprocess.run(["bash", "-c", command], cwd=board, capture_output=True, check=False)
    assert done.returncode == 0
    assert done.stderr == b""


def test_a_terminal_without_the_letters_gets_escapes(board: Path) -> None:
    env = {"PYTHONIOENCODING": "ascii", "PATH": ""}
    command = [sys.executable, "-m", "rcrules", "networks"]
    done = subprocess.run(command, cwd=board, env=env, capture_output=True, check=True)
    assert rb"10 k\u03a9" in done.stdout


@pytest.mark.usefixtures("board")
def test_colour_is_for_terminals_or_on_request(capsys: pytest.CaptureFixture[str]) -> None:
    main(["check"])
    assert "\x1b" not in capsys.readouterr().out
    main(["check", "--color", "always"])
    assert "\x1b[" in capsys.readouterr().out


def test_without_a_project_only_packs_without_facts_apply_as_warnings(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(tmp_path)
    monkeypatch.setattr("rcrules.project.find", lambda _: None)
    (tmp_path / "board.xml").write_text(NETLIST.replace("16V", "1V"))
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
    assert "band = " in out


def test_help_imports_next_to_nothing() -> None:
    code = (
        "import sys\nfrom rcrules.cli import main\ntry: main(['--help'])\nexcept SystemExit: pass\n"
        "print(sorted(sys.modules), file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    loaded = set(ast.literal_eval(done.stderr))
    assert loaded.isdisjoint({"numpy", "lxml", "networkx", "pint", "rich", "json", "tomllib", "rcrules.findings"})


def test_check_does_not_import_what_it_does_not_need(board: Path) -> None:
    code = "import sys\nfrom rcrules.cli import main\nmain(['check'])\nprint(sorted(sys.modules), file=sys.stderr)"
    done = subprocess.run([sys.executable, "-c", code], cwd=board, capture_output=True, text=True, check=True)
    assert set(ast.literal_eval(done.stderr)).isdisjoint({"pint", "rich"})
