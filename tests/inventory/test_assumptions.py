"""Assumptions as the document lists them."""

from pathlib import Path

import pytest

from rcrules.inventory import assumptions_of
from rcrules.pipeline import Job, run
from rcrules.problems import Parameter
from tests.cli._board import NETLIST


def parameter(**changed: object) -> Parameter:
    """A capacitor of which the bias loss and the life are assumed."""
    fields = {
        "name": "C1",
        "unit": "F",
        "low": 0.9,
        "nominal": 1.0,
        "high": 1.1,
        "given_low": 1.0,
        "given_high": 1.0,
        "origin": "",
        "assumed": ("no bias curve", "no life given"),
        "ask": "curve line",
    }
    return Parameter(**{**fields, **changed})


def test_each_assumption_names_the_line_that_would_replace_it() -> None:
    found = assumptions_of([parameter(asks=("curve line", "life line"))])
    assert found == [("C1", "no bias curve", "curve line"), ("C1", "no life given", "life line")]


def test_one_line_may_replace_all() -> None:
    assert {ask for *_, ask in assumptions_of([parameter()])} == {"curve line"}


def test_a_part_asks_for_each_fact_that_it_misses(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The life of the product is asked for as a condition, the bias curve at the part."""
    monkeypatch.chdir(tmp_path)
    Path("board.xml").write_text(NETLIST.replace("1uF 10% 16V", "1uF 10% X7R 16V"), encoding="utf-8")
    rows = [row for row in run(Job(inputs=("board.xml",))).assumptions if row["about"] == "C1"]
    asked = {row["ask"].partition(" = ")[0] for row in rows}
    assert {'[part."C1"] bias-curve', "[conditions] life"} <= asked
