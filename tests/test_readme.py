"""The README's commands are the truth: they run on the demo board."""

import argparse
import re
import shlex
from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.cli._arguments import parser
from rcrules.project import load

ROOT = Path(__file__).parent.parent
README = (ROOT / "README.md").read_text(encoding="utf-8")
DEMO = ROOT / "rcrules" / "demo"


def blocks(language: str) -> list[str]:
    """The fenced blocks of a language, in order."""
    return re.findall(rf"```{language}\n(.*?)```", README, re.DOTALL)


def commands() -> list[str]:
    """Every line of the README that starts with the command itself."""
    return [line for block in blocks("sh") for line in block.splitlines() if line.startswith("rcrules ")]


@pytest.fixture
def reader_folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """What a reader has who follows the README: a board, a BOM, and the two files that it shows."""
    (tmp_path / "board.xml").write_bytes((DEMO / "tide-gauge.xml").read_bytes())
    (tmp_path / "bom.csv").write_bytes((DEMO / "tide-gauge-bom.csv").read_bytes())
    project, _, _, rules = blocks("toml")
    (tmp_path / "rcrules.toml").write_text(project, encoding="utf-8")
    (tmp_path / "our-rules.toml").write_text(rules, encoding="utf-8")
    monkeypatch.chdir(tmp_path)
    return tmp_path


def options(parser: argparse.ArgumentParser) -> set[str]:
    """Every long option of the command line, of all commands."""
    found: set[str] = set()
    for action in parser._actions:
        found.update(name for name in action.option_strings if name.startswith("--"))
        if isinstance(action, argparse._SubParsersAction):
            found.update(*(options(command) for command in action.choices.values()))
    return found


def test_every_option_named_is_one_of_the_help() -> None:
    own = "\n".join(line for line in README.splitlines() if "pip install" not in line)
    named = set(re.findall(r"(?<![\w-])--[a-z][a-z-]*", own))
    assert {"--report", "--fail-on", "--verbose"} <= named
    assert named <= options(parser())


def test_every_command_stands_in_the_readme() -> None:
    (commands,) = (action for action in parser()._actions if isinstance(action, argparse._SubParsersAction))
    assert [name for name in commands.choices if f"rcrules {name}" not in README] == []


def test_the_readme_shows_commands() -> None:
    assert len(commands()) >= 7


@pytest.mark.parametrize("command", commands())
def test_each_command_runs(command: str, reader_folder: Path, capfd: pytest.CaptureFixture[str]) -> None:
    """Each shown command gives a report and no complaint about usage or inputs."""
    if shown := re.findall(r"(?<= )(?<!json=)\w+\.json", command):
        main(["check", *(f"--report=json={name}" for name in dict.fromkeys(shown))])
        capfd.readouterr()
    if " start " in command:
        (reader_folder / "rcrules.toml").unlink()
    status = main(shlex.split(command)[1:])
    out, err = capfd.readouterr()
    assert status in (0, 1), err
    assert out or any(reader_folder.glob("*.json")) or "wrote rcrules.toml" in err


@pytest.mark.usefixtures("reader_folder")
def test_the_part_number_shown_is_read_by_the_pattern_shown(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "patterns.toml").write_text(blocks("toml")[2], encoding="utf-8")
    (tmp_path / "parts.csv").write_text("Reference,Value,MPN\nC1,100n,QXC0603B104K5AT\n", encoding="utf-8")
    assert main(["networks", "--project", "patterns.toml", "parts.csv", "--report", "parts"]) == 0
    out = capsys.readouterr().out
    assert re.search(
        r"C1 .* 100 nF +±10 % +50 V +X7R +value: BOM value; tolerance, rated voltage, dielectric: BOM field 'MPN'", out
    )


@pytest.mark.usefixtures("reader_folder")
def test_the_rule_shown_judges_the_demo_board(capfd: pytest.CaptureFixture[str]) -> None:
    """The first rule of the README meets the probe filter and holds."""
    status = main(["check", "--rules", "our-rules.toml", "--verbose"])
    out, err = capfd.readouterr()
    assert status == 0, err
    assert "probe-filter-fast-enough" in out
    assert "LEVEL_ADC" in out


def test_shown_finding_is_what_the_demo_prints(capfd: pytest.CaptureFixture[str], tmp_path: Path) -> None:
    """The finding explained in the README stands word for word in the demo's report."""
    assert main(["demo", str(tmp_path / "demo")]) == 0
    out, _ = capfd.readouterr()
    finding, _ = blocks("text")
    assert finding.strip() in out


def test_the_rule_that_is_tried_on_a_board_reads_as_shown(capfd: pytest.CaptureFixture[str], tmp_path: Path) -> None:
    """What the README shows of ``rules --on`` is what it prints for the demo board."""
    folder = tmp_path / "demo"
    assert main(["demo", str(folder)]) == 0
    capfd.readouterr()
    exports = [str(folder / name) for name in ("tide-gauge.xml", "tide-gauge-bom.csv")]
    assert main(["rules", str(folder / "gauge-rules.toml"), "--on", *exports]) == 0
    _, tried = blocks("text")
    assert tried.strip() in capfd.readouterr().out


def test_the_formats_shown_are_understood() -> None:
    formats = load("rcrules.toml", blocks("toml")[1]).formats
    assert [item.kind for item in formats] == ["xml", "delimited", "lines"]
