import json
import subprocess
import sys
from pathlib import Path

import pytest

import rcrules
from rcrules.cli import main
from rcrules.findings import loads
from rcrules.reports import reports
from tests.cli._board import NETLIST

OWN = {"PATH": "", "PYTHONPATH": str(Path(rcrules.__file__).parent.parent)}
"""An environment with nothing but these sources."""


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


def test_an_unchanged_board_gives_the_same_bytes_in_every_report(board: Path) -> None:
    asked = [f"--report={name}=out{report.suffix}" for name, report in reports().items()]
    command = [sys.executable, "-m", "rcrules", "check", *asked]
    found = []
    for seed in ("1", "2"):
        subprocess.run(command, cwd=board, env={**OWN, "PYTHONHASHSEED": seed}, capture_output=True, check=True)
        found.append({report.suffix: (board / f"out{report.suffix}").read_bytes() for report in reports().values()})
    assert len(found[0]) == len(reports())
    assert found[0] == found[1]


@pytest.mark.parametrize("name", [name for name, report in reports().items() if report.for_programs])
def test_reports_for_programs_are_utf_8_whatever_the_terminal_shows(name: str, board: Path) -> None:
    project = board / "rcrules.toml"
    project.write_text(project.read_text(encoding="utf-8").replace("small board", "µ board"), encoding="utf-8")
    command = [sys.executable, "-m", "rcrules", "check", f"--report={name}"]
    env = {**OWN, "PYTHONIOENCODING": "latin-1"}
    done = subprocess.run(command, cwd=board, env=env, capture_output=True, check=True)
    assert "µ" in done.stdout.decode("utf-8")


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
