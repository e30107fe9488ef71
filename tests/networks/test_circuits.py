"""Whole circuits, from text to roles: what recognition must make of parts whose pins are drawn in unhelpful ways."""

import re
from collections.abc import Iterable, Iterator

import pytest

from rcrules.networks import Node
from tests.events.boards import bench
from tests.networks.boards import board

RAIL = "U9 VDD:power-in=+3V3 GND:power-in=GND\nU8 VDD:power-in=+3V3 GND:power-in=GND\n"


def only(text: str, net: str) -> Node:
    """The node of that name."""
    return next(node for network in board(RAIL + text).networks for node in network.nodes if node.net == net)


@pytest.mark.parametrize("ohms", ["100", "1k"])
def test_a_card_fed_through_a_resistor_lives_on_a_supply_filter(ohms: str) -> None:
    """A connector's pin that takes power in brings none; the resistor does."""
    card = "J1 [card] VDD:power-in=N VSS:power-in=GND DAT0=D"
    node = only(f"R1 {ohms} +3V3 N\nC1 10u N GND\n{card}", "N")
    assert (node.role, node.parts, node.fed_from) == ("supply-filter", ("R1", "C1"), ("+3V3",))


def test_a_converter_output_typed_as_input_drives_its_line() -> None:
    converter = "U1 VDD:power-in=+3V3 GND=GND AOUTL1P:input=A"
    node = only(f"{converter}\nR1 4k A N\nC1 1n N GND\nU2 AIN1:input=N", "N")
    assert (node.role, node.parts, node.fed_from) == ("low-pass", ("R1", "C1"), ("A",))


def test_the_output_of_a_receiver_drawn_as_a_connector_drives_its_net() -> None:
    """Its pull-up is no node of its own; the coupling behind it is."""
    receiver = "J1 [receiver] VCC:input=+3V3 GND:input=GND VOUT:input=N\nR1 10k N +3V3"
    text = f"{receiver}\nC1 10n N M\nR2 1k M GND\nU1 A:input=M"
    assert board(RAIL + text).held["N"].kind == "driven"
    assert only(text, "M").role == "high-pass"


def test_the_ground_pin_of_a_regulator_lifted_by_its_output_is_its_feedback() -> None:
    regulator = "U1 [QX1117-ADJ] IN=+12V OUT=VX GND=N\nU2 VDD:power-in=VX GND:power-in=GND\nC2 10u VX GND"
    node = only(f"{regulator}\nR1 150 VX N\nR2 931 N GND\nC1 10u N GND", "N")
    assert (node.role, node.active) == ("feedback", "regulator U1 inside the loop")


def test_a_capacitor_across_two_driven_lines_makes_low_passes() -> None:
    driver = "U1 VDD:power-in=+3V3 GND=GND OUTP:output=A OUTN:output=B"
    text = f"{driver}\nR1 100 A P\nR2 100 B M\nC1 10n P M\nU2 AINP:input=P AINN:input=M"
    assert [only(text, net).role for net in "PM"] == ["low-pass", "low-pass"]
    assert set(only(text, "P").parts) == {"R1", "R2", "C1"}


def test_a_capacitor_with_an_open_end_leaves_its_node_as_it_is() -> None:
    """A tap of two resistors stays a divider when a further capacitor leads to a pad that nothing else is on."""
    text = "R1 1k +3V3 N\nR2 1k N GND\nC1 100n N GND\nC2 10n N OPEN\nU2 VREF=N GND=GND"
    assert board(RAIL + text).reasons["C2"] == "one end is open"
    assert (only(text, "N").role, only(text, "N").parts) == ("divider-low-pass", ("R1", "R2", "C1"))


def test_a_resistor_beside_a_capacitor_from_one_output_is_no_high_pass() -> None:
    """The lead network of an amplifier: both reach the input from the output, the resistor through a small one."""
    amplifier = "U1 [op-amp] V+:power-in=+3V3 V-:power-in=GND OUTB:output=B INA+:input=N INB-:input=M"
    text = f"{amplifier}\nR1 10 B A\nR2 6.8k A N\nC1 220p B N\nR3 10k N X\nC2 100u X J\nJ1 1=J 2=GND\nC3 100p A GND"
    node = only(text, "N")
    assert (node.role, node.active) == ("low-pass", "an amplifier drives C1")


PARTS = (
    "R1 10k, C1 100n, SW1 PUSH, R2 33k, R3 10k, C2 100n, R4 22, C3 1u, R5 1k, C4 10n, R6 10k, U1 QX1, U2 QX2, U3 QX3"
)
NETS = """+3V3: R1.1 R2.1 R4.1 R6.2 U1.1/VDD/power_in U3.1/VDD/power_in
GND: C1.2 SW1.2 R3.2 C2.2 C3.2 C4.2 U1.2/GND/power_in U2.2/GND/power_in U3.2/GND/power_in
NRST: R1.2 C1.1 SW1.1 U1.3/NRST/input
TAP: R2.2 R3.1 C2.1 U1.4/ADC1/input
VA: R4.2 C3.1 U2.1/VDDA/power_in
OUT: U2.3/OUT/output R5.1 R6.1
IN: R5.2 C4.1 U3.3/A/input"""


def test_order_of_the_export_and_ends_of_resistors_do_not_matter() -> None:
    """The same circuit written in another order, each resistor turned round, is the same for the same reasons."""
    turned = re.sub(r"\b(R\d)\.([12])", lambda found: f"{found[1]}.{3 - int(found[2])}", NETS)
    nets = "\n".join(f"{net}: {' '.join(reversed(pins.split()))}" for net, pins in _nets(reversed(turned.split("\n"))))
    one = bench(PARTS, NETS).board
    other = bench(", ".join(reversed(PARTS.split(", "))), nets).board
    nodes = [{node.net: node for network in found.networks for node in network.nodes} for found in (one, other)]
    assert sorted(nodes[0]) == ["IN", "NRST", "TAP", "VA"]
    assert nodes[0] == nodes[1]
    assert dict(one.held) == dict(other.held)
    assert (one.coverage, one.reasons) == (other.coverage, other.reasons)


def _nets(lines: Iterable[str]) -> Iterator[tuple[str, str]]:
    for line in lines:
        net, _, pins = line.partition(": ")
        yield net, pins
