"""Whole circuits, from text to roles: what recognition must make of parts whose pins are drawn in unhelpful ways."""

import pytest

from rcrules.networks import Node
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
