"""Values of several measures: each worked out, then the expression with their numbers put in."""

from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.pipeline import Job, derive
from tests.cli._board import NETLIST, PROJECT
from tests.derivation.test_derive import LEVELS, lines_arrive

RULES = """[pack]
name = "our-rules"
title = "t"
[[rule]]
id = "one"
title = "t"
level = "error"
role = ["power-on-delay"]
value = '{value}'
{limit}
given = {{ {given} }}
why = "w"
source = "the test"
"""
GIVEN = {"factor": "0.2 .. 0.3", "extra": "3 ms"}
VALUES = [
    ("time_constant()", 'at-most = "1 h"'),
    ("time_constant() * 3 + extra", 'at-most = "1 h"'),
    ("max(time_constant(), extra) / 2", 'at-most = "1 h"'),
    ('delay(event = "power-up", to = "2 V") - delay(event = "power-up", to = "1 V")', 'at-least = "1 us"'),
    ('time_to_63(event = "power-up")', 'at-most = "factor * time_constant()"'),
    ("time_constant() * (1 + factor) - extra", 'at-most = "1 h"'),
    ("1 / (2 * time_constant())", 'at-most = "1 GHz"'),
]


def rules(value: str, limit: str) -> str:
    """The rule, with those numbers that it uses."""
    given = ", ".join(f'{name} = "{text}"' for name, text in GIVEN.items() if name in value + limit)
    return RULES.format(value=value, limit=limit, given=given)


@pytest.fixture
def board(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    (tmp_path / "board.xml").write_text(NETLIST, encoding="utf-8")
    (tmp_path / "rcrules.toml").write_text(PROJECT + 'valid = "3 V"\nrise = "0.5 ms .. 2 ms"\n' + LEVELS)
    return tmp_path


@pytest.mark.parametrize(("value", "limit"), VALUES)
def test_a_pocket_calculator_gets_the_value(value: str, limit: str, board: Path) -> None:
    (board / "our-rules.toml").write_text(rules(value, limit))
    _, found = derive(Job(project="rcrules.toml"), "NRST")
    (item,) = [row for row in found if row.finding is not None]
    assert item.derivation is not None
    assert item.measured is not None
    ends = {"nominal": item.measured.nominal, "lowest": item.measured.low, "highest": item.measured.high}
    for case in item.derivation["cases"]:
        assert case["by_hand"], case
        lines_arrive(case)
        for name in case["case"].split(", "):
            assert case["value"] == pytest.approx(ends[name], rel=1e-9)
    assert item.derivation["picture"]
    assert sum(row["share"] for row in item.derivation["parameters"]) == pytest.approx(1.0)


def test_the_last_line_is_the_expression(board: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (board / "our-rules.toml").write_text(rules(*VALUES[1]))
    assert main(["derive", "--at", "NRST", "--rule", "one"]) == 0
    out = capsys.readouterr().out
    assert "value           = time constant · 3 + extra = 10 ms · 3 + 3 ms = 33 ms" in out
    assert "for time constant" in out
