"""A first project file: it loads as it is, says what was found, and asks for what decides most."""

import re
from dataclasses import replace
from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.findings import Document, Finding
from rcrules.pipeline import Job, run
from rcrules.project import load
from rcrules.rulebook import packs
from rcrules.starter import FIRST_PACKS, MOST_QUESTIONS, project_text, questions
from tests.cli._board import NETLIST
from tests.reports._sample import DOCUMENT, finding


@pytest.fixture
def strange(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A folder with a netlist and nothing else."""
    monkeypatch.chdir(tmp_path)
    (tmp_path / "board.xml").write_text(NETLIST, encoding="utf-8")
    return tmp_path


def started(folder: Path) -> str:
    assert main(["start", str(folder / "board.xml")]) == 0
    return (folder / "rcrules.toml").read_text(encoding="utf-8")


def test_what_was_read_stands_in_the_file(strange: Path) -> None:
    text = started(strange)
    project = load("rcrules.toml", text)
    assert project.netlists == ("board.xml",)
    supply = project.supplies["+3V3"].voltage
    assert supply is not None
    assert supply.nominal == 3.3
    assert project.grounds == ("GND",)
    assert '[pin."U1.NRST"]\n# power-on-delay on NRST\n# low = "30 % of …"' in text


def test_the_questions_stand_in_their_tables_and_say_what_they_decide(strange: Path) -> None:
    text = started(strange)
    assert '[settings."reset-lifts-late-enough"]\n# hold_time = "…"   # question 1: decides 1 finding' in text
    assert "#   1. hold time of the rule reset-lifts-late-enough: decides 1 finding" in text


def test_answers_decide_what_they_said(strange: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The file as written changes no verdict; filled in line by line, the resets are decided."""
    text = started(strange)
    assert "without answers 2 of 4 findings are decided" in capsys.readouterr().err
    assert outcomes() == {"undecided"}
    answers = {"low": "30 % of +3V3", "high": "70 % of +3V3", "valid": "3 V", "rise": "1 ms"}
    answers |= {"hold_time": "1 us", "longest_reset": "10 s"}
    for key, answer in answers.items():
        text, found = re.subn(rf'^# {key} = "[^"]*"', f'{key} = "{answer}"', text, flags=re.MULTILINE)
        assert found == 1, key
    (strange / "rcrules.toml").write_text(text, encoding="utf-8")
    assert outcomes() == {"holds"}


def outcomes() -> set[str]:
    """Of the two rules about the reset."""
    return {item.outcome for item in run(Job(project="rcrules.toml")).findings if item.rule.startswith("reset-")}


def test_facts_asked_for_in_one_line_get_a_line_each() -> None:
    ask = finding(outcome="undecided", ask=['[pin."U3.X"] low = "…"  high = "…"'])
    text = project_text(_with([ask]), "b", [], [])
    assert re.search(r'\[pin."U3.X"\]\n# low = "…"   # question 1.*\n# high = "…"   # question 1', text)


def test_at_most_ten_questions_the_most_useful_first() -> None:
    many = [
        finding(outcome="undecided", ask=[f'[settings."rule-{index}"] limit = "…"'])
        for index in range(15)
        for _ in range(index + 1)
    ]
    asked = questions(many)
    assert len(asked) == MOST_QUESTIONS
    assert asked[0].about == "limit of the rule rule-14"
    assert [item.decides for item in asked] == sorted((item.decides for item in asked), reverse=True)


def test_one_fact_of_many_nets_is_one_question() -> None:
    nets = [finding(outcome="undecided", ask=[f'[net."N{index}"] swing = "…"']) for index in range(20)]
    (question,) = questions(nets)
    assert question.decides == 20
    text = project_text(_with(nets), "b", ["b.xml"], [])
    assert text.count("# swing") == 12
    assert "and 8 more like it" in text
    assert len(load("rcrules.toml", text).nets) == 12


def _with(findings: list[Finding]) -> Document:
    return replace(DOCUMENT, findings=findings, packs=[{**DOCUMENT.packs[0], "rules": [{"id": "a", "met": 1}]}])


def test_hostile_names_make_no_other_file() -> None:
    name = 'N"]\n[board]\nname = "x"\x7f\u202e'
    held = [{**row, "net": name, "evidence": [name], "sure": sure} for row in DOCUMENT.held for sure in (True, False)]
    document = replace(_with([]), held=held)
    assert load("rcrules.toml", project_text(document, name, [], [])).name == name


def test_capacitors_without_rating_are_listed_by_value_and_place() -> None:
    text = project_text(_with([]), "b", [], [])
    assert "# 10uF 16V (gauge-bom.csv:14): C7" in text
    assert "C44" not in text


def test_a_project_file_is_never_overwritten(strange: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (strange / "rcrules.toml").write_text("# mine")
    assert main(["start", "board.xml"]) == 2
    assert (strange / "rcrules.toml").read_text() == "# mine"
    assert "--to FILE" in capsys.readouterr().err
    assert main(["start", "board.xml", "--to", "other.toml"]) == 0
    assert (strange / "other.toml").is_file()


@pytest.mark.usefixtures("strange")
def test_standard_input_and_missing_folders_are_told(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["start", "-"]) == 2
    assert "standard input" in capsys.readouterr().err
    assert main(["start", "board.xml", "--to", "gone/x.toml"]) == 2
    assert "cannot write it" in capsys.readouterr().err


def test_inputs_are_named_from_where_the_file_stands(strange: Path) -> None:
    (strange / "export").mkdir()
    (strange / "board.xml").rename(strange / "export" / "board.xml")
    assert main(["start", "export/board.xml", "--to", "rcrules.toml"]) == 0
    text = (strange / "rcrules.toml").read_text(encoding="utf-8")
    assert load("rcrules.toml", text).netlists == ("export/board.xml",)
    assert main(["check", "--fail-on", "never", "--quiet"]) == 0


def test_every_pack_that_meets_something_is_named(strange: Path) -> None:
    project = load("rcrules.toml", started(strange))
    assert "power-on-reset" in project.rules
    assert set(project.rules) <= set(FIRST_PACKS) <= {pack.name for pack in packs()}
