"""Fingerprints of whole boards: what they survive, and what they do not."""

from pathlib import Path

import pytest

from rcrules.pipeline import Job, run
from tests.cli._board import NETLIST, PROJECT, RULES

SUPPLY = """
[[rule]]
id       = "little-energy"
level    = "warning"
subject  = "supply"
measure  = "stored_energy"
at-most  = "1 J"
"""
SECOND = NETLIST.replace(
    '<net code="2"',
    """<net code="4" name="+5V">
      <node ref="U2" pin="2" pinfunction="VIN" pintype="power_in"/>
      <node ref="U1" pin="9" pinfunction="VDDIO" pintype="power_in"/>
    </net>
    <net code="2\"""",
)
"""The board with a second supply."""


@pytest.fixture
def keys(tmp_path: Path, monkeypatch: pytest.MonkeyPatch):
    """A function: netlist text to the keys of the reset's finding."""
    monkeypatch.chdir(tmp_path)

    def found(netlist: str) -> list[str]:
        Path("board.xml").write_text(netlist, encoding="utf-8")
        Path("our-rules.toml").write_text(RULES.format(limit="1 ms"), encoding="utf-8")
        Path("rcrules.toml").write_text(PROJECT, encoding="utf-8")
        (item,) = run(Job()).findings
        return item.fingerprint.split(".")

    return found


def test_they_survive_other_values_and_fields(keys) -> None:
    assert keys(NETLIST.replace("10k 1%", "47k 5%").replace("1uF 10% 16V", "2u2 6.3V")) == keys(NETLIST)


def test_they_survive_another_automatic_name_of_a_net(keys) -> None:
    one, other = (NETLIST.replace('name="NRST"', f'name="{name}"') for name in ("Net-(C1-Pad1)", "Net-(R1-Pad2)"))
    assert keys(one) == keys(other)


def test_they_survive_another_name_of_the_node(keys) -> None:
    assert keys(NETLIST.replace('name="NRST"', 'name="RESET_N"')) == keys(NETLIST)


def test_the_second_key_survives_another_annotation(keys) -> None:
    own, around = keys(NETLIST)
    again = NETLIST.replace('ref="R1"', 'ref="R107"').replace('ref="C1"', 'ref="C44"').replace('ref="U1"', 'ref="U9"')
    own_again, around_again = keys(again)
    assert own != own_again
    assert around == around_again


def test_the_second_key_changes_with_the_connections(keys) -> None:
    """R1 pulls up to another supply: same parts and pin, another circuit around them."""
    moved = SECOND.replace('<node ref="R1" pin="1"/>', "").replace('name="+5V">', 'name="+5V"><node ref="R1" pin="1"/>')
    (own, around), (own_moved, around_moved) = keys(SECOND), keys(moved)
    assert own == own_moved
    assert around != around_moved


def test_they_change_with_the_pin_that_is_fed(keys) -> None:
    assert not set(keys(NETLIST.replace('pinfunction="NRST"', 'pinfunction="EN"'))) & set(keys(NETLIST))


def test_every_supply_has_a_key_of_its_own(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("board.xml").write_text(SECOND)
    Path("rules.toml").write_text(RULES.partition("[[rule]]")[0] + SUPPLY)
    found = [item.fingerprint.split(".")[0] for item in run(Job(inputs=("board.xml",), rules=("rules.toml",))).findings]
    assert len(found) == 2
    assert len(set(found)) == 2
