from dataclasses import replace
from typing import Any

import pytest

from rcrules.checks._select import selected
from rcrules.checks._subjects import Subjects
from rcrules.quantities import Spread
from rcrules.rulebook import Comparison, Selection
from tests.checks._objects import board


def met(kind: str, /, **keys: Any) -> list[str]:
    """References, or net, of what a selection meets."""
    chosen = [item for item in Subjects(board()).of(kind) if selected(Selection(**keys), item, board())]
    return [item.net or item.refs[0] for item in chosen]


def farads(value: float) -> Spread:
    return Spread(low=value, nominal=value, high=value, unit="F")


def test_without_keys_everything_is_met() -> None:
    assert met("node") == ["NRST"]
    assert met("capacitor") == ["C1", "C2"]
    assert met("resistor") == ["R1"]
    assert met("supply") == ["+3V3"]
    assert met("network") == ["NRST"]
    assert met("pin") == ["NRST"]


@pytest.mark.parametrize(
    ("keys", "hit"),
    [
        ({"role": ("power-on-delay", "debounce")}, True),
        ({"role": ("debounce",)}, False),
        ({"name": ("RST",)}, True),
        ({"name": ("BURST",)}, False),
        ({"net": ("NR*",)}, True),
        ({"net": ("GND",)}, False),
        ({"pin": ("U3.*",)}, True),
        ({"pin": ("U4.*",)}, False),
        ({"part": ("C1",)}, True),
        ({"part": ("C2",)}, False),
        ({"sheet": ("/cpu/",)}, True),
        ({"sheet": ("/io/",)}, False),
        ({"kind": ("capacitor",)}, True),
        ({"kind": ("inductor",)}, False),
        ({"kind_fed": ("reset",)}, True),
        ({"kind_fed": ("adc",)}, False),
        ({"dielectric": ("X7R",)}, True),
        ({"dielectric": ("C0G",)}, False),
        ({"certainty": ("sure",)}, True),
        ({"certainty": ("unsure",)}, False),
        ({"value_at_least": farads(1e-6)}, True),
        ({"value_at_least": farads(2e-6)}, False),
        ({"value_at_most": farads(1e-6)}, True),
        ({"value_at_most": farads(1e-9)}, False),
        ({"polarised": False}, True),
        ({"polarised": True}, False),
        ({"any_of": (Selection(net=("GND",)), Selection(part=("R1",)))}, True),
        ({"any_of": (Selection(net=("GND",)), Selection(part=("R9",)))}, False),
        ({"exclude": (Selection(net=("GND",)),)}, True),
        ({"exclude": (Selection(net=("NRST",)),)}, False),
        ({"role": ("power-on-delay",), "kind_fed": ("adc",)}, False),
    ],
)
def test_each_key_of_a_node(keys: dict[str, Any], hit: bool) -> None:
    assert (met("node", **keys) == ["NRST"]) is hit


def test_a_part_answers_for_its_node() -> None:
    assert met("capacitor", role=("power-on-delay",)) == ["C1"]
    assert met("capacitor", pin=("U3.NRST",)) == ["C1"]
    assert met("capacitor", role=("decoupling",)) == ["C2"]
    assert met("capacitor", dielectric=("C0G",)) == ["C2"]


def test_a_part_between_held_nets_answers_to_them() -> None:
    assert met("capacitor", net=("+3V3",)) == ["C2"]


def test_a_net_with_brackets_is_met_by_its_own_name() -> None:
    from rcrules.checks._select import globbed

    assert globbed(("DATA[0]",), ["DATA[0]"])
    assert not globbed(("DATA[0]",), ["DATA[1]"])


def test_a_node_answers_to_every_net_joined_to_it() -> None:
    joined = board(joints={"+3V3": "+3V3", "GND": "GND", "NRST": "NRST", "MCU_RESET": "NRST"})
    subject = Subjects(joined).of("node")[0]
    assert selected(Selection(name=("RESET",)), subject, joined)


def test_parts_that_are_not_fitted_or_have_no_value_are_no_subjects() -> None:
    from rcrules.parts import Unknown
    from tests.checks._objects import part

    odd = {
        "C8": part("C8", "capacitor", 1e-6, "A", "B", fitted=False),
        "C9": part("C9", "capacitor", 1e-6, "A", "B", value=Unknown(why="not understood")),
        "C10": part("C10", "capacitor", 1e-6),
    }
    assert Subjects(board(parts={**board().parts, **odd})).of("capacitor") == Subjects(board()).of("capacitor")


def above(volts: float, fact: str = "supply_high") -> Comparison:
    return Comparison(left=fact, right=volts, sign=">=")


@pytest.mark.parametrize(
    ("kind", "condition", "hit"),
    [
        ("node", above(3.2), ["NRST"]),
        ("node", above(3.4), []),
        ("capacitor", above(3.2, "voltage_low"), ["C2"]),
    ],
)
def test_a_condition_on_facts(kind: str, condition: Comparison, hit: list[str]) -> None:
    found = [item for item in Subjects(board()).of(kind) if selected(Selection(when=condition), item, board()) is True]
    assert [item.net or item.refs[0] for item in found] == hit


def test_a_condition_on_a_fact_that_is_not_known_neither_holds_nor_fails() -> None:
    held = {**board().held, "+3V3": replace(board().held["+3V3"], voltage=None)}
    dark = board(held=held)
    subject = Subjects(dark).of("node")[0]
    assert selected(Selection(when=above(3.2)), subject, dark) is None
    assert selected(Selection(when=above(3.2), net=("GND",)), subject, dark) is False
    assert selected(Selection(exclude=(Selection(when=above(3.2)),)), subject, dark) is None
    assert selected(Selection(any_of=(Selection(when=above(3.2)), Selection())), subject, dark) is True
