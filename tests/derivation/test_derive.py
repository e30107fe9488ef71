"""A reviewer with a pocket calculator gets the printed result, line by line."""

import json
import re
from pathlib import Path
from typing import Any

import pytest

from rcrules.cli import main
from rcrules.findings import Document
from rcrules.pipeline import Job, derive, run
from tests.cli._board import NETLIST, PROJECT
from tests.derivation._calculator import work_out

DEMO = Path(__file__).parents[2] / "rcrules" / "demo"
MEASURES = {
    "delay": ('event = "power-up", from = "supply valid", to = "may switch"', "s"),
    "settling_time": ('event = "power-up", band = "1 %"', "s"),
    "rise_time": ('event = "power-up"', "s"),
    "time_constant": ("", "s"),
    "time_to_63": ('event = "power-up"', "s"),
    "final_voltage": ('event = "power-up"', "V"),
    "voltage_at": ('event = "power-up", time = "5 ms"', "V"),
    "residual": ('event = "power-up", time = "20 ms"', "1"),
    "corner_frequency": ("", "Hz"),
}


def rules(measure: str) -> str:
    options, unit = MEASURES[measure]
    limit = {"s": "1 h", "V": "100 V", "1": "2", "Hz": "1 GHz"}[unit]
    return f"""[pack]
name = "our-rules"
title = "t"
[[rule]]
id = "one"
title = "t"
level = "error"
role = ["power-on-delay", "low-pass", "supply-filter", "timing", "other"]
measure = "{measure}"
{f"with = {{ {options} }}" if options else ""}
at-most = "{limit}"
why = "w"
source = "the test"
"""


LEVELS = '[pin."U1.NRST"]\nlow = "30 % of +3V3"\nhigh = "70 % of +3V3"\nleakage = "-1 uA .. 1 uA"\n'


def written(folder: Path, measure: str, netlist: str = NETLIST) -> None:
    (folder / "board.xml").write_text(netlist, encoding="utf-8")
    (folder / "our-rules.toml").write_text(rules(measure), encoding="utf-8")
    project = PROJECT + 'valid = "3 V"\nrise = "0.5 ms .. 2 ms"\n' + LEVELS
    (folder / "rcrules.toml").write_text(project, encoding="utf-8")


def lines_arrive(case: dict[str, Any]) -> None:
    """Every line's numbers give its result to what is printed, and the last line gives the case's value."""
    for step in case["steps"]:
        if step["put_in"]:
            found, told = work_out(step["put_in"]), work_out(step["text"])
            assert found == pytest.approx(told, rel=2e-5, abs=1e-15), step
    assert work_out(case["steps"][-1]["text"]) == pytest.approx(float(case["value"]), rel=2e-5), case["steps"][-1]


@pytest.mark.parametrize("measure", MEASURES)
def test_each_line_gives_its_result_on_a_pocket_calculator(
    measure: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    written(tmp_path, measure)
    (item,) = run(Job(project="rcrules.toml", derived=True)).findings
    assert item.derivation is not None
    cases = item.derivation["cases"]
    assert item.measured is not None
    ends = {"nominal": item.measured.nominal, "lowest": item.measured.low, "highest": item.measured.high}
    assert sorted(name for case in cases for name in case["case"].split(", ")) == sorted(ends)
    for case in cases:
        assert case["by_hand"], case
        lines_arrive(case)
        for name in case["case"].split(", "):
            assert case["value"] == pytest.approx(ends[name], rel=1e-9)


@pytest.fixture(scope="module")
def demo() -> Document:
    """The demo with all derivations."""
    with pytest.MonkeyPatch.context() as patch:
        patch.chdir(DEMO)
        return run(Job(project="rcrules.toml", derived=True))


def test_every_number_of_the_demo_is_worked_out_by_hand(demo: Document) -> None:
    derived = [item.derivation for item in demo.findings if item.measured is not None]
    assert len(derived) > 20
    for found in derived:
        assert found is not None
        for case in found["cases"]:
            assert case["by_hand"]
            lines_arrive(case)


def test_shares_of_the_spread_add_up_to_one(demo: Document) -> None:
    for item in demo.findings:
        if item.derivation is not None and item.measured is not None and item.measured.low < item.measured.high:
            assert sum(row["share"] for row in item.derivation["parameters"]) == pytest.approx(1.0)


def test_plain_runs_hold_no_derivations(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(DEMO)
    assert {item.derivation for item in run(Job(project="rcrules.toml")).findings} == {None}


MORE = '<comp ref="R2"><value>22k 1%</value></comp><comp ref="C3"><value>470nF 10%</value></comp></components>'
LADDER = NETLIST.replace("</components>", MORE).replace(
    '<node ref="R1" pin="2"/><node ref="C1" pin="1"/>',
    '<node ref="R2" pin="2"/><node ref="C1" pin="1"/>',
).replace(
    "</nets>",
    '<net code="4" name="MID"><node ref="R1" pin="2"/><node ref="R2" pin="1"/><node ref="C3" pin="1"/></net></nets>',
).replace('<node ref="C1" pin="2"/>', '<node ref="C1" pin="2"/><node ref="C3" pin="2"/>')  # fmt: skip


def test_of_a_ladder_the_modes_are_told_and_the_level_is_proved_by_putting_the_time_in(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    written(tmp_path, "delay", LADDER)
    (item,) = [item for item in run(Job(project="rcrules.toml", derived=True)).findings if item.net == "NRST"]
    assert item.derivation is not None
    assert len(item.derivation["modes"]) == 2
    for case in item.derivation["cases"]:
        assert case["by_hand"]
        lines_arrive(case)


def test_the_report_draws_the_network_and_tells_the_way(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(DEMO)
    assert main(["derive", "--at", "NRST", "--rule", "reset-lifts-late-enough"]) == 0
    out = capsys.readouterr().out
    assert "    +3V3\n      |\n      R12 10 kΩ\n      |\n    NRST   <- observed\n      |-- C7 10 µF -- 0 V\n" in out
    assert "source  +3V3   3.2 V .. 3.3 V .. 3.4 V, from 0 V: 0 V at 0 s, 3.3 V at 1.25 ms" in out
    assert "time constants   100 ms (100 %)" in out
    assert "tau             = R · C = 10 kΩ · 10 µF = 100 ms" in out
    assert "C7                5.84 µF .. 10 µF .. 14.9 µF" in out


STEP = re.compile(r"^ {8}(\S.*?) +(= .*)$")


@pytest.mark.parametrize("at", ["NRST", "C7", "LEVEL_ADC", "C1", "R13"])
def test_from_the_printed_lines_alone_a_pocket_calculator_gets_the_printed_results(
    at: str, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """Every ``= formula = numbers = result   note`` of the text report; the last result of a case is what heads it."""
    monkeypatch.chdir(DEMO)
    assert main(["derive", "--at", at]) == 0
    lines = capsys.readouterr().out.splitlines()
    cases: list[tuple[str, str]] = []
    for line in lines:
        if heading := re.match(r"^ {4}(?:nominal|lowest|highest)[^=]*?   (\S+(?: \S+)?)", line):
            cases.append((heading[1], ""))
        elif found := STEP.match(line):
            *others, result = re.split(r" = ", re.split(r" {3,}", found[2])[0].removeprefix("= "))
            if len(others) > 1:
                assert work_out(others[-1]) == pytest.approx(work_out(result), rel=2e-5, abs=1e-15), line
            cases[-1] = (cases[-1][0], result)
    assert len(cases) > 3
    for told, last in cases:
        assert work_out(told) == pytest.approx(work_out(last), rel=5e-3), (told, last)


@pytest.mark.parametrize("at", ["NRST", "C7", "R12", "U3.NRST", "+3V3", "C1", "R1", "GND", "C40"])
def test_every_place_gets_an_answer(
    at: str, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(DEMO)
    assert main(["derive", "--at", at]) == 0
    assert capsys.readouterr().out.strip()


@pytest.mark.parametrize(
    ("at", "why"),
    [
        ("U3", "U3 is a part of kind ic: numbers are told of resistors, capacitors, nets and pins; it is at "),
        ("LEVEL_IN", "LEVEL_IN is driven from outside the network"),
    ],
)
def test_where_there_is_no_number_the_reason_is_told(
    at: str, why: str, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(DEMO)
    assert main(["derive", "--at", at]) == 0
    assert why in capsys.readouterr().out


def test_samples_are_told_beside_the_number(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(DEMO)
    assert main(["derive", "--at", "NRST", "--rule", "reset-lifts-late-enough", "--samples", "200"]) == 0
    assert "of 200 samples (uniform) fail" in capsys.readouterr().out


def test_what_does_not_matter_to_an_end_stays_nominal_in_it(monkeypatch: pytest.MonkeyPatch) -> None:
    """The final voltage of R and C does not depend on C."""
    monkeypatch.chdir(DEMO)
    _, found = derive(Job(project="rcrules.toml"), "NRST")
    (item,) = [row for row in found if row.measure == "final_voltage"]
    assert item.derivation is not None
    off = [text for case in item.derivation["cases"] for text in case["off"]]
    assert any(text.startswith("+3V3 ") for text in off)
    assert not any(text.startswith("C7 ") for text in off)


def test_what_has_no_number_says_why_and_what_to_add(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(DEMO)
    assert main(["derive", "--at", "C40"]) == 0
    assert 'add  [net."HOUSING"] swing = "…"' in capsys.readouterr().out


def test_a_place_that_is_not_there_gets_a_guess(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(DEMO)
    assert main(["derive", "--at", "NRSTT"]) == 2
    assert "did you mean NRST" in capsys.readouterr().err
    assert main(["derive", "--at", "NRST", "--rule", "gone"]) == 2
    assert "reset-lifts-late-enough" in capsys.readouterr().err
    assert main(["derive", "--at", "NRST", "--report", "sarif"]) == 2
    assert "text, json" in capsys.readouterr().err


def test_derivations_are_written_as_json(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(DEMO)
    path = tmp_path / "found.json"
    assert main(["derive", "--at", "NRST", "--report", f"json={path}"]) == 0
    rows = json.loads(path.read_text(encoding="utf-8"))["derivations"]
    plain = {"time_constant", "corner_frequency", "time_to_63", "final_voltage"}
    assert {row["measure"] for row in rows} == {"delay", *plain}
    assert all(row["derivation"]["cases"] for row in rows)


def test_a_number_asked_for_by_a_rule_is_told_once(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(DEMO)
    _, found = derive(Job(project="rcrules.toml"), "LEVEL_ADC")
    assert len({(item.measure, item.finding and item.finding.rule) for item in found}) == len(found)
