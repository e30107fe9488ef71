"""Variants of a board on the command line and in the project file."""

from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.findings import loads
from tests.cli._board import NETLIST, PROJECT

BOM = "Reference,Value,Lite\nR1,10k 1%,yes\nC1,1uF 10% 16V,no\nC2,100nF 10% 16V,yes\n"


@pytest.fixture(autouse=True)
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    Path("board.xml").write_text(NETLIST, encoding="utf-8")
    Path("bom.csv").write_text(BOM, encoding="utf-8")
    project = PROJECT.replace('netlist = "board.xml"', 'netlist = "board.xml"\nbom = "bom.csv"')
    Path("rcrules.toml").write_text(project.replace('rules   = ["our-rules.toml"]\n', ""), encoding="utf-8")
    return tmp_path


def test_a_part_that_the_variant_leaves_out_is_in_no_network(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["networks", "--report", "json"]) == 0
    assert len(loads(capsys.readouterr().out).networks) == 1
    assert main(["networks", "--variant", "lite", "--report", "json"]) == 0
    document = loads(capsys.readouterr().out)
    assert (document.networks, document.board["name"]) == ([], "small board (lite)")
    assert next(row for row in document.parts if row["ref"] == "C1")["fitted"] is False


def test_the_project_file_names_it_too_and_the_command_line_goes_before(capsys: pytest.CaptureFixture[str]) -> None:
    project = Path("rcrules.toml")
    project.write_text(project.read_text().replace("[board]\n", '[board]\nvariant = "lite"\n'))
    assert main(["networks"]) == 0
    assert capsys.readouterr().out.startswith("small board (lite)")
    assert main(["networks", "--variant", "ful"]) == 2
    err = capsys.readouterr().err
    assert "--variant: no input knows this variant" in err
    assert "one of Lite" in err


def test_a_name_in_the_project_file_that_nobody_knows_is_told_at_its_line(capsys: pytest.CaptureFixture[str]) -> None:
    project = Path("rcrules.toml")
    project.write_text(project.read_text().replace("[board]\n", '[board]\nvariant = "full"\n'))
    assert main(["check"]) == 2
    assert "rcrules.toml:2:1: no input knows this variant" in capsys.readouterr().err
