"""Proposals on small boards, and on the demo: applied to the BOM and checked again, they hold."""

import csv
import io
from pathlib import Path
from typing import Any

import pytest

from rcrules.findings import Document, Finding
from rcrules.pipeline import Job, run
from rcrules.reports import reports
from tests.cli._board import NETLIST, PROJECT

DEMO = Path(__file__).parents[2] / "rcrules" / "demo"
RULE = """
[[rule]]
id = "{id}"
title = "t"
level = "error"
role = {role}
measure = "{measure}"
{limits}
why = "w"
source = "the test"
"""


def rule(name: str, measure: str, limits: str, role: str = '["power-on-delay", "divider-low-pass"]') -> str:
    return RULE.format(id=name, measure=measure, limits=limits, role=role)


@pytest.fixture
def proposed(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Any:
    """A run with proposals over a netlist and rules."""
    monkeypatch.chdir(tmp_path)

    def work(*rules: str, netlist: str = NETLIST, project: str = PROJECT) -> Document:
        (tmp_path / "board.xml").write_text(netlist, encoding="utf-8")
        (tmp_path / "rcrules.toml").write_text(project, encoding="utf-8")
        (tmp_path / "our-rules.toml").write_text('[pack]\nname = "our-rules"\ntitle = "t"\n' + "".join(rules))
        return run(Job(project="rcrules.toml", proposals=True))

    return work


def failing(document: Document) -> list[Finding]:
    return [item for item in document.findings if item.outcome == "fails"]


def offers(item: Finding) -> list[list[tuple[str, str, str, str]]]:
    """The changes of every proposal: reference, what, new, source."""
    assert item.proposals is not None
    keys = ("ref", "what", "now", "source")
    return [[tuple(change[key] for key in keys) for change in found["changes"]] for found in item.proposals["found"]]


def test_one_part_of_the_nearest_coarse_value_mends_it(proposed: Any) -> None:
    """10 kΩ ± 1 % and 1 µF ± 10 % give at least 8.9 ms less drift; 12 ms ask for twice the time constant."""
    (item,) = failing(proposed(rule("slow-enough", "time_constant", 'at-least = "12 ms"')))
    assert offers(item)[0] == [("R1", "value", "22 kΩ", "E6")]
    assert [("C1", "value", "2.2 µF", "E6")] in offers(item)
    assert item.proposals is not None
    assert item.proposals["reason"] is None


def test_a_value_on_the_bom_comes_first(proposed: Any) -> None:
    netlist = NETLIST.replace("</components>", '<comp ref="R9"><value>27k 1%</value></comp></components>')
    (item,) = failing(proposed(rule("slow-enough", "time_constant", 'at-least = "12 ms"'), netlist=netlist))
    assert offers(item)[0] == [("R1", "value", "27 kΩ", "on the BOM as R9")]


def test_a_finer_series_is_used_where_the_coarse_one_has_no_value(proposed: Any) -> None:
    """With 1 µF ± 5 % the E6 values beside the limits, 15 kΩ and 22 kΩ, are outside; 18 kΩ of E12 is inside."""
    netlist = NETLIST.replace("1uF 10% 16V", "1uF 5% 16V C0G")
    found = proposed(rule("between", "time_constant", 'at-least = "16.5 ms"\nat-most = "19.5 ms"'), netlist=netlist)
    assert offers(failing(found)[0])[0] == [("R1", "value", "18 kΩ", "E12")]


def test_every_rule_at_the_network_must_hold(proposed: Any) -> None:
    """10 µA into the pin drop 0.1 V at 10 kΩ and 0.22 V at 22 kΩ, which is too much: so the capacitor is changed."""
    found = proposed(
        rule("slow-enough", "time_constant", 'at-least = "12 ms"'),
        rule("high-enough", "final_voltage", 'with = { event = "power-up" }\nat-least = "3.15 V"'),
        project=PROJECT + 'rise = "1 us"\nvalid = "3 V"\n[pin."U1.NRST"]\nleakage = "-10 uA .. 10 uA"\n',
    )
    (item,) = failing(found)
    assert item.rule == "slow-enough"
    assert {change[0] for changes in offers(item) for change in changes} == {"C1"}


def test_two_parts_are_changed_where_one_does_not_do(proposed: Any) -> None:
    """A divider at half the supply that must be at a quarter, and forty times slower."""
    netlist = NETLIST.replace(
        "</components>", '<comp ref="R2"><value>10k 1%</value></comp></components>'
    ).replace('<node ref="C1" pin="1"/>', '<node ref="C1" pin="1"/><node ref="R2" pin="1"/>').replace(
        '<node ref="C1" pin="2"/>', '<node ref="C1" pin="2"/><node ref="R2" pin="2"/>'
    )  # fmt: skip
    role = '["divider-low-pass", "power-on-delay", "low-pass", "other"]'
    limits = 'with = { event = "power-up" }\nat-least = "0.4 V"\nat-most = "0.9 V"'
    found = proposed(
        rule("low-enough", "final_voltage", limits, role),
        rule("slow-enough", "time_constant", 'at-least = "10 ms"\nat-most = "50 ms"', role),
        netlist=netlist,
        project=PROJECT + 'rise = "1 us"\nvalid = "3 V"\n',
    )
    items = failing(found)
    assert len(items) == 2
    changes = offers(items[0])[0]
    assert len(changes) == 2
    assert {change[1] for change in changes} == {"value"}


def test_where_no_standard_value_can_the_reason_is_told(proposed: Any) -> None:
    found = proposed(rule("narrow", "time_constant", 'at-least = "9.9 ms"\nat-most = "10.1 ms"'))
    (item,) = failing(found)
    assert item.proposals is not None
    assert item.proposals["found"] == []
    reason = item.proposals["reason"]
    assert reason.startswith("no standard value of one part or of two holds: C1: narrow too high from 1.2 µF to")
    assert f"no proposal  {reason}" in reports()["text"].render(found)


def test_a_rating_is_raised_to_the_lowest_that_holds(proposed: Any) -> None:
    text = NETLIST.replace("100nF 10% 16V", "100nF 10% 4V X7R")
    item = next(
        item
        for item in failing(
            proposed(
                rule("half", "voltage_ratio", 'at-most = "50 %"', '["decoupling"]').replace("role =", "role ="),
                netlist=text,
            )
        )
        if item.parts == ["C2"]
    )
    assert offers(item) == [[("C2", "rated voltage", "10 V", "preferred rating")]]


def test_without_asking_there_are_none(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(DEMO)
    assert {item.proposals for item in run(Job(project="rcrules.toml")).findings} == {None}


@pytest.fixture(scope="module")
def demo() -> Document:
    """The demo board with its planted faults and what would mend them."""
    with pytest.MonkeyPatch.context() as patch:
        patch.chdir(DEMO)
        return run(Job(project="rcrules.toml", proposals=True))


def test_every_planted_fault_of_the_demo_has_a_proposal(demo: Document) -> None:
    assert len(failing(demo)) >= 5
    assert all(item.proposals and item.proposals["found"] for item in failing(demo))


COLUMNS = {"value": "Value", "rated voltage": "Voltage", "tolerance": "Tolerance", "dielectric": "Dielectric"}


def applied(bom: str, changes: list[dict[str, str]]) -> str:
    """The BOM with the changed cells; a part that shares its line with others gets a line of its own."""
    rows = list(csv.reader(io.StringIO(bom)))
    head = next(index for index, row in enumerate(rows) if "Reference" in row)
    column = {name: index for index, name in enumerate(rows[head])}
    for change in changes:
        refs = [row[column["Reference"]].replace(",", " ").split() if len(row) > 3 else [] for row in rows]
        index = next(index for index, own in enumerate(refs) if change["ref"] in own)
        old, new = rows[index], list(rows[index])
        rest = [ref for ref in refs[index] if ref != change["ref"]]
        new[column["Reference"]], old[column["Reference"]] = change["ref"], " ".join(rest)
        new[column[COLUMNS[change["what"]]]] = change["now"]
        rows.append(new)
    out = io.StringIO()
    csv.writer(out).writerows(row for row in rows if len(row) <= column["Reference"] or row[column["Reference"]])
    return out.getvalue()


def test_each_proposal_applied_to_the_bom_and_checked_again_holds(demo: Document, tmp_path: Path) -> None:
    for path in DEMO.iterdir():
        if path.is_file():
            (tmp_path / path.name).write_bytes(path.read_bytes())
    bom = (DEMO / "tide-gauge-bom.csv").read_text(encoding="utf-8")
    tried = 0
    for item in failing(demo):
        assert item.proposals is not None
        for proposal in item.proposals["found"]:
            (tmp_path / "tide-gauge-bom.csv").write_text(applied(bom, proposal["changes"]), encoding="utf-8")
            with pytest.MonkeyPatch.context() as patch:
                patch.chdir(tmp_path)
                after = {(found.rule, found.fingerprint): found for found in run(Job(project="rcrules.toml")).findings}
            assert after[item.rule, item.fingerprint].outcome == "holds"
            own = next(row for row in proposal["findings"] if (row["rule"], row["net"]) == (item.rule, item.net))
            assert own["margin"] == pytest.approx(after[item.rule, item.fingerprint].margin, rel=1e-9, abs=1e-12)
            tried += 1
    assert tried >= 8


def test_reports_tell_what_would_hold(demo: Document) -> None:
    assert "would hold  R12 22 kΩ" in reports()["text"].render(demo)
    assert "would hold with R12 22 kΩ" in reports()["markdown"].render(demo)
