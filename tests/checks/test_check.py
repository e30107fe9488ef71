"""Whole checks: a netlist, a project file and a rule in text; findings out."""

import math
from pathlib import Path

import pytest

from rcrules.findings import Document, Finding
from rcrules.pipeline import Job, run
from tests.cli._board import NETLIST, PROJECT

RULE = """
[[rule]]
id    = "{name}"
title = "{name}"
level = "error"
{body}
why    = "Told by the test."
source = "the test"
"""
PACK = '[pack]\nname = "our-rules"\ntitle = "Ours"\n'


@pytest.fixture
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    return tmp_path


def judged(folder: Path, body: str, *, netlist: str = NETLIST, project: str = "", pack: str = PACK) -> Document:
    """The document of the board under one rule."""
    (folder / "board.xml").write_text(netlist, encoding="utf-8")
    (folder / "rcrules.toml").write_text(PROJECT + project, encoding="utf-8")
    (folder / "our-rules.toml").write_text(pack + RULE.format(name="tested", body=body), encoding="utf-8")
    return run(Job(project="rcrules.toml"))


def only(document: Document) -> Finding:
    (found,) = document.findings
    return found


SLOW = 'role = ["power-on-delay"]\nmeasure = "time_constant"\nat-least = "{}"'


def test_a_finding_tells_bounds_limit_margin_and_the_case(folder: Path) -> None:
    """R 10 kΩ 1 %, C 1 µF 10 %: 10 ms at nominal; the worst case has both at their low end."""
    found = only(judged(folder, SLOW.format("20 ms")))
    assert (found.outcome, found.net, found.parts, found.feeds) == ("fails", "NRST", ["R1", "C1"], ["U1.NRST"])
    assert found.measured is not None
    assert found.measured.nominal == pytest.approx(0.01)
    assert found.measured.method == "proved"
    assert found.limit is not None
    assert (found.limit["at_least"], found.limit["unit"]) == (0.02, "s")
    assert found.margin == pytest.approx(found.measured.low - 0.02)
    assert set(found.margin_case) == {"R1", "C1"}
    assert found.margin_case["C1"] < 1e-6
    assert found.detail["worst"][0]["parameter"] == "C1"
    assert found.places[0]["file"] == "board.xml"


def test_what_is_assumed_decides_and_says_so(folder: Path) -> None:
    """C without a tolerance: 10 ms at nominal, and an assumed spread that reaches below 9.8 ms."""
    loose = NETLIST.replace("1uF 10% 16V", "1uF 16V").replace("10k 1%", "10k 0.1%")
    document = judged(folder, SLOW.format("9.8 ms"), netlist=loose)
    found = only(document)
    assert found.outcome == "undecided"
    assert found.detail["deciding"]["parameter"] == "C1"
    assert found.detail["deciding"]["flips_at"] == pytest.approx(0.98e-6, rel=5e-3)
    assert found.reason is not None
    assert "holds where C1 is at least 98" in found.reason
    assert found.ask[0].startswith('[part."C1"]')
    assert {document.assumptions[index]["about"] for index in found.assumptions} >= {"C1"}


def test_a_level_that_is_never_reached_fails_both_limits(folder: Path) -> None:
    """4 V is never reached from 3.3 V."""
    for limit in ('at-most = "1 s"', 'at-least = "1 ms"'):
        body = f'role = ["power-on-delay"]\nmeasure = "delay"\nwith = {{ event = "power-up", to = "4 V" }}\n{limit}'
        found = only(judged(folder, body, project='rise = "1 ms"\n'))
        assert (found.outcome, found.margin, found.detail["never"]) == ("fails", -math.inf, True)


def test_what_the_rule_asks_for_is_undecided_with_the_line(folder: Path) -> None:
    body = SLOW.format("least") + '\ngiven = { least = "ask" }'
    found = only(judged(folder, body))
    assert (found.outcome, found.ask[0]) == ("undecided", '[settings."tested"] least = "…"')
    assert only(judged(folder, body, project='[settings."tested"]\nleast = "1 ms"\n')).outcome == "holds"


def test_the_line_of_the_ask_is_one_that_the_project_file_takes(folder: Path) -> None:
    body = SLOW.format("least") + '\ngiven = { least = "ask" }'
    for line in only(judged(folder, body)).ask:
        table, _, fact = line.partition("] ")
        project = f"{table}]\n{fact.replace('…', '1 ms')}\n"
        assert only(judged(folder, body, project=project)).outcome == "holds"


def test_a_rule_of_the_team_that_meets_nothing_is_told(folder: Path) -> None:
    document = judged(folder, SLOW.format("1 ms").replace("power-on-delay", "snubber"))
    assert document.findings == []
    assert [item["text"] for item in document.problems] == ["rule tested met nothing on this board"]
    assert document.packs[0]["rules"][0]["met"] == 0


def test_rules_that_miss_the_same_fact_say_so_in_one_remark(folder: Path) -> None:
    """Without rules asked for, a condition on a fact that is not known leaves its subjects out."""
    unrated = NETLIST.replace(" 16V", "").replace("+3V3", "VCC")
    (folder / "board.xml").write_text(unrated)
    remarks = [item for item in run(Job(inputs=("board.xml",))).problems if "not known" in item["text"]]
    assert [item["text"] for item in remarks] == [
        "voltage-within-rating leaves out 2 capacitors: the rated voltage is not known (a field of the BOM or [part] "
        "can tell)",
        "discharged-in-five-seconds and energy-above-ten-joules-is-known each leave out 2 capacitors: the voltage "
        "there is not known ([supply] or [net] can tell)",
    ]
    assert all(item["place"] == {} for item in remarks)


BOOSTED = (
    NETLIST.replace('<node ref="R1" pin="2"/>', "")
    .replace("NRST", "BST")
    .replace('<node ref="C1" pin="2"/>', "")
    .replace("</nets>", '<net name="SW"><node ref="C1" pin="2"/><node ref="U1" pin="4" pinfunction="SW"/></net></nets>')
)
"""C1 between a boot pin and a switch pin."""


@pytest.mark.parametrize(
    ("when", "netlist", "reason", "line"),
    [
        (
            "rated_voltage_nominal > 10 V",
            NETLIST.replace(" 16V", ""),
            "the rated voltage is not known, and the rule is for rated_voltage_nominal > 10 V",
            '[part."C1"] rated-voltage = "…"',
        ),
        (
            "voltage_high > 60 V",
            NETLIST.replace("+3V3", "VCC"),
            "the voltage there is not known, and the rule is for voltage_high > 60 V",
            '[supply."VCC"] voltage = "…"',
        ),
        (
            "voltage_high > 60 V",
            BOOSTED,
            "the voltage there is not known, and the rule is for voltage_high > 60 V",
            '[part."C1"] voltage-across = "…"',
        ),
    ],
)
def test_a_condition_on_a_fact_that_is_missing_asks_for_that_fact(
    folder: Path, when: str, netlist: str, reason: str, line: str
) -> None:
    body = f'kind = ["capacitor"]\npart = ["C1"]\nwhen = "{when}"\nmeasure = "stored_charge"\nat-most = "1 C"'
    found = only(judged(folder, body, netlist=netlist))
    assert (found.outcome, found.reason, found.ask[0]) == ("undecided", reason, line)


def test_what_the_project_says_lies_across_a_capacitor_meets_conditions(folder: Path) -> None:
    body = 'kind = ["capacitor"]\nwhen = "voltage_high > 60 V"\nmeasure = "applied_voltage"\nat-most = "100 V"'
    found = only(judged(folder, body, project='[part."C2"]\nvoltage-across = "70 V .. 110 V"\n'))
    assert (found.parts, found.outcome) == (["C2"], "fails")


def test_one_cause_on_many_parts_is_one_group(folder: Path) -> None:
    twice = (
        NETLIST.replace('<comp ref="C2">', '<comp ref="C3"><value>100nF 10% 16V</value></comp><comp ref="C2">')
        .replace('<node ref="C2" pin="1"/>', '<node ref="C2" pin="1"/><node ref="C3" pin="1"/>')
        .replace('<node ref="C2" pin="2"/>', '<node ref="C2" pin="2"/><node ref="C3" pin="2"/>')
    )
    document = judged(folder, 'kind = ["capacitor"]\nmeasure = "voltage_ratio"\nat-most = "10 %"', netlist=twice)
    causes = {item.parts[0]: item.cause for item in document.findings}
    assert causes["C2"] == causes["C3"] != ""
    assert causes["C1"] != causes["C2"]


def test_every_part_stands_in_one_class_of_coverage(folder: Path) -> None:
    document = judged(folder, SLOW.format("1 ms"))
    assert {part["ref"]: part["coverage"] for part in document.parts} == {
        "C1": "judged",
        "C2": "decoupling",
        "R1": "judged",
    }
    assert sum(document.coverage.values()) == document.board["resistors"] + document.board["capacitors"]


def test_names_of_the_project_file_that_mean_nothing_are_told(folder: Path) -> None:
    document = judged(folder, SLOW.format("1 ms"), project='[net."NOWHERE"]\nswing = "1 V"\n')
    assert "NOWHERE" in document.problems[0]["text"]


def test_a_bom_alone_gives_parts_and_no_networks(folder: Path) -> None:
    (folder / "bom.csv").write_text("Reference,Value\nR1,10k\nC1,100n\n")
    document = run(Job(inputs=("bom.csv",), with_rules=False))
    assert (document.networks, document.held, document.board["pins"]) == ([], [], 0)
    assert [part["ref"] for part in document.parts] == ["C1", "R1"]
