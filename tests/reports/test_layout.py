"""Where the symbols of a network stand."""

import re
from collections.abc import Sequence

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rcrules.reports._page._chain import chain
from rcrules.reports._page._drawing import drawings
from rcrules.reports._page._layout import Branch, Plan, plan

HELD = {"GND": "ground", "+3V3": "supply", "IN": "driven"}
NETS = ["GND", "+3V3", "IN", "A", "B", "C", "D"]


def branches(*texts: str) -> list[Branch]:
    """``R1 IN A`` each."""
    return [
        Branch(
            ref=text.split()[0],
            value="1",
            kind="capacitor" if text[0] == "C" else "resistor",
            nets=(text.split()[1], text.split()[2]),
        )
        for text in texts
    ]


def ends(found: Plan, ref: str, members: Sequence[Branch]) -> tuple[tuple[float, float], tuple[float, float]]:
    """Start and end of the symbol whose label is the reference."""
    label = next(item for item in found.labels if item.text.split()[0] == ref)
    parts = [item for item in found.symbols if item.kind in ("resistor", "capacitor") and item.end is not None]

    def off(item: object) -> float:
        (x1, y1), (x2, y2) = item.start, item.end
        return abs((x1 + x2) / 2 - label.at[0]) + abs((y1 + y2) / 2 - label.at[1])

    best = min(parts, key=off)
    assert best.end is not None
    assert members
    return best.start, best.end


def test_a_low_pass_is_drawn_as_by_hand() -> None:
    """Series part from the left, shunt part down to ground."""
    members = branches("R1 IN A", "C1 A GND")
    found = plan(members, HELD, {"A": ["U1.1"]})
    (left, right), (top, bottom) = ends(found, "R1", members), ends(found, "C1", members)
    assert left[1] == right[1] == top[1] == 0.0
    assert left[0] < right[0] == top[0] == bottom[0]
    assert bottom[1] < 0.0
    assert [item.kind for item in found.symbols if item.end is None] == ["driven", "ground", "dot"]
    assert "→ U1.1" in [item.text for item in found.labels]


def test_a_delay_hangs_between_its_supply_above_and_ground_below() -> None:
    members = branches("R1 +3V3 A", "C1 A GND")
    found = plan(members, HELD, {})
    up, down = ends(found, "R1", members), ends(found, "C1", members)
    assert up[0] == down[0]
    assert up[1][1] > 0.0 > down[1][1]
    assert up[1][0] == down[1][0]


def test_a_ladder_is_a_chain_with_its_fed_end_on_the_left() -> None:
    nets = ["C", "A", "B"]
    pairs = [("B", "C"), ("A", "B"), ("IN", "A"), ("C", "GND")]
    assert chain(nets, pairs, [("A", "C")], HELD) == ["A", "B", "C"]


def test_parts_between_two_held_nets_stand_between_the_same_rails() -> None:
    members = branches("R1 +3V3 GND", "C1 GND +3V3")
    found = plan(members, HELD, {})
    tops, bottoms = zip(*(ends(found, ref, members) for ref in ("R1", "C1")), strict=True)
    assert {y for _, y in tops} == {1.35}
    assert {y for _, y in bottoms} == {-1.35}


def test_a_part_past_its_neighbours_runs_above_the_names_of_supplies() -> None:
    members = branches("R1 IN A", "R2 A B", "R3 B C", "C1 A C", "C2 C GND")
    found = plan(members, HELD, {})
    start, end = ends(found, "C1", members)
    assert start[1] == end[1] > 3.5


@given(st.lists(st.tuples(st.sampled_from(NETS), st.sampled_from(NETS)).filter(lambda pair: pair[0] != pair[1])))
def test_every_part_is_drawn_once_and_no_two_stand_on_one_another(pairs: list[tuple[str, str]]) -> None:
    members = branches(*(f"{'RC'[index % 2]}{index} {a} {b}" for index, (a, b) in enumerate(pairs)))
    found = plan(members, HELD, {})
    parts = [item for item in found.symbols if item.kind in ("resistor", "capacitor")]
    assert len(parts) == len(members)
    spans = {frozenset((item.start, item.end)) for item in parts}
    assert len(spans) == len(parts)
    assert {item.text.split()[0] for item in found.labels} >= {item.ref for item in members}


def test_a_network_of_any_size_is_drawn_on_sheets_that_can_be_read() -> None:
    rows = [{"part": f"R{index}", "nets": [f"N{index}", f"N{index + 1}"]} for index in range(150)]
    rows += [{"part": f"C{index}", "nets": [f"N{index}", "GND"]} for index in range(150)]
    texts = {row["part"]: f"{row['part']} {index} Ω" for index, row in enumerate(rows)}
    found = drawings({"branches": rows, "nodes": []}, [{"net": "GND", "kind": "ground"}], texts)
    assert len(found) == 14
    assert all(text.count("between") <= 25 for text in found)
    assert {row["part"] for row in rows} == {part for text in found for part in re.findall(r">([RC]\d+)\b", text)}


def test_parts_of_one_value_between_the_same_nets_are_one_symbol_of_a_large_network() -> None:
    rows = [{"part": f"C{index}", "nets": ["A", "GND"][:: 1 - 2 * (index % 2)]} for index in range(1, 61)]
    network = {"branches": [*rows, {"part": "R1", "nets": ["IN", "A"]}], "nodes": []}
    held = [{"net": "GND", "kind": "ground"}, {"net": "IN", "kind": "driven"}]
    (text,) = drawings(network, held, {row["part"]: f"{row['part']} 100 nF" for row in rows})
    assert "C1 … C60 60 × 100 nF between A and GND" in text or "C1 … C60 60 × 100 nF between GND and A" in text
    (text,) = drawings({**network, "branches": rows[:3]}, held, {})
    assert "C1  between" in text


def test_many_parts_between_held_nets_alone_are_drawn_too() -> None:
    rows = [{"part": f"R{index}", "nets": ["+5V", "GND"]} for index in range(70)]
    held = [{"net": "GND", "kind": "ground"}, {"net": "+5V", "kind": "supply"}]
    found = drawings({"branches": rows, "nodes": []}, held, {f"R{index}": f"R{index} {index} Ω" for index in range(70)})
    assert [text.count("between") for text in found] == [24, 24, 22]


@pytest.mark.parametrize("ref", ["R1", "C1"])
def test_a_drawing_says_in_words_what_it_shows(ref: str) -> None:
    network = {"branches": [{"part": ref, "nets": ["A", "GND"]}], "nodes": []}
    (text,) = drawings(network, [{"net": "GND", "kind": "ground"}], {ref: f"{ref} 10 kΩ"})
    assert f'aria-label="Circuit: {ref} 10 kΩ between A and GND"' in text
    assert "<text" in text
    assert "style=" not in text
