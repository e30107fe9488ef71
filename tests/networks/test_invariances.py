"""What a drawing may change without changing the circuit: roles stay, and every time and frequency to 1e-9."""

import re
from collections.abc import Callable

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rcrules.events import quantities
from rcrules.networks import Board
from rcrules.networks._held_names import hint
from rcrules.project import Project
from tests.networks import (
    test_designs_amplifiers,
    test_designs_inputs,
    test_designs_lines,
    test_designs_sources,
    test_designs_switching,
    test_designs_timers,
)
from tests.networks.boards import board

CIRCUITS = [
    text
    for module in (
        test_designs_amplifiers,
        test_designs_inputs,
        test_designs_lines,
        test_designs_sources,
        test_designs_switching,
        test_designs_timers,
    )
    for text, _ in module.CIRCUITS.values()
]
BRANCH = re.compile(r"(?P<ref>[RC]\d+) (?P<number>[\d.]+)(?P<scale>[pnumkM]?) (?P<a>\S+) (?P<b>\S+)")
BUS = ("SDA", "SCL")
Lines = list[str]


def lines(text: str) -> Lines:
    return [line.strip() for line in text.splitlines() if line.strip()]


def seen(found: Board, net: Callable[[str], str] = str) -> dict[str, tuple[object, ...]]:
    """Role, certainty and what is active of each node, by its net."""
    nodes = [node for network in found.networks for node in network.nodes]
    return {net(node.net): (node.role, node.certainty, node.active is None) for node in nodes}


def numbers(found: Board) -> dict[tuple[str, str], tuple[float, float, float]]:
    """Least, nominal and most of each quantity, by node and measure."""
    return {
        (net, name): (item.bounds.low, item.bounds.nominal, item.bounds.high)
        for (_, net), measured in quantities(found, Project()).items()
        for name, item in measured.items()
        if item.bounds is not None
    }


def same(one: Lines, other: Lines) -> None:
    before, after = board("\n".join(one)), board("\n".join(other))
    assert seen(after) == seen(before)
    expected = numbers(before)
    found = numbers(after)
    assert set(found) == set(expected)
    for key, bounds in expected.items():
        assert found[key] == pytest.approx(bounds, rel=1e-9, nan_ok=True), key


def turned(line: str) -> str:
    found = BRANCH.fullmatch(line)
    if found is None or found["ref"][0] != "R":
        return line
    return f"{found['ref']} {found['number']}{found['scale']} {found['b']} {found['a']}"


def split(line: str, share: float) -> Lines:
    """A resistor as two in series, a capacitor as two in parallel."""
    found = BRANCH.fullmatch(line)
    if found is None:
        return [line]
    ref, number, scale = found["ref"], float(found["number"]), found["scale"]
    first, second = f"{number * share:.15f}{scale}", f"{number * (1 - share):.15f}{scale}"
    if ref[0] == "C":
        return [f"{ref}8 {first} {found['a']} {found['b']}", f"{ref}9 {second} {found['a']} {found['b']}"]
    return [f"{ref}8 {first} {found['a']} MID_{ref}", f"{ref}9 {second} MID_{ref} {found['b']}"]


@given(st.sampled_from(CIRCUITS), st.randoms())
@settings(max_examples=40, deadline=None)
def test_the_order_of_parts_and_the_way_a_resistor_is_drawn_change_nothing(text: str, random: object) -> None:
    drawn = lines(text)
    other = [turned(line) if random.random() < 0.5 else line for line in drawn]  # type: ignore[attr-defined]  # a Random
    random.shuffle(other)  # type: ignore[attr-defined]  # a Random
    same(drawn, other)


@given(st.sampled_from(CIRCUITS), st.integers(1, 9))
@settings(max_examples=40, deadline=None)
def test_the_numbers_of_references_change_nothing(text: str, shift: int) -> None:
    drawn = lines(text)
    same(drawn, [re.sub(r"^([A-Z]+)(\d+)", lambda found: f"{found[1]}{shift}{found[2]}", line) for line in drawn])


@pytest.mark.parametrize("text", CIRCUITS)
def test_names_of_nets_that_say_nothing_change_nothing(text: str) -> None:
    nets = {
        net for line in lines(text) for net in re.findall(r"=(\S+)|(?<= )([^\s=\[\]]+)(?= |$)", line) for net in net
    }
    plain = {net for net in nets if net and hint(net) is None and not any(word in net for word in BUS)}
    renamed = {net: f"N${number}" for number, net in enumerate(sorted(plain), 100)}

    def other(line: str) -> str:
        found = BRANCH.fullmatch(line)
        head, *words = line.split(" ")
        if found is not None:
            return " ".join([head, words[0], *(renamed.get(word, word) for word in words[1:])])
        ends = (word.rpartition("=") if "=" in word else ("", "", word) for word in words)
        return " ".join([head, *(f"{name}{mark}{renamed.get(net, net)}" for name, mark, net in ends)])

    def told(net: str) -> str:
        return " <-> ".join(renamed.get(end, end) for end in net.split(" <-> "))

    before, after = board(text), board("\n".join(map(other, lines(text))))
    assert {node: kind[0] for node, kind in seen(after).items()} == {
        node: kind[0] for node, kind in seen(before, told).items()
    }


@given(st.sampled_from(CIRCUITS), st.floats(0.1, 0.9), st.data())
@settings(max_examples=60, deadline=None)
def test_a_part_split_in_two_changes_nothing(text: str, share: float, data: st.DataObject) -> None:
    drawn = lines(text)
    chosen = data.draw(st.sampled_from([line for line in drawn if BRANCH.fullmatch(line)]))
    same(drawn, [piece for line in drawn for piece in (split(line, share) if line == chosen else [line])])


@pytest.mark.parametrize("text", [text for text in CIRCUITS if "C1 100n DTR RST" not in text])
@pytest.mark.parametrize("type_", ["", ":passive"])
def test_without_pin_types_names_and_structure_show_the_same_roles(text: str, type_: str) -> None:
    """Left out: a capacitor from a handshake line at a contact, which only the type of the line tells."""
    bare = re.sub(r"(?<=\S):(passive|power-in|power-out|input|output|bidirectional|open-collector)", type_, text)
    told = [{net: kind[0] for net, kind in seen(board(drawn)).items()} for drawn in (text, bare)]
    assert told[1] == told[0]
