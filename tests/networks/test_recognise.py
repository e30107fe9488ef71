"""Joints, networks and coverage."""

import pytest

from rcrules.errors import Place
from rcrules.networks._links import diodes
from rcrules.project import PartFacts, Project
from tests.networks.boards import board, part

RAIL = "U9 VDD:power-in=+3V3 GND:power-in=GND"
RC = f"{RAIL}\nR1 10k +3V3 NRST\nC1 100n NRST GND\nU1 NRST:input=NRST GND:power-in=GND"


@pytest.mark.parametrize(
    "part", ["FB1 A B", "L1 A B", "F1 A B", "R5 0 A B", "JP1 [Jumper_NC] A B", "NT1 A B", "TH1 [0.5A] A B"]
)
def test_parts_that_join_their_nets_at_dc(part: str) -> None:
    found = board(f"{part}\nR1 1k A N1\nR2 1k B N2")
    assert found.joints["A"] == found.joints["B"]


@pytest.mark.parametrize(
    "part", ["JP1 [Jumper_NO] A B", "JP1 [JP] A B", "FB1! A B", "R5 1 A B", "SW1 A B", "C5 1u A B"]
)
def test_parts_that_do_not(part: str) -> None:
    found = board(f"{part}\nR1 1k A N1\nR2 1k B N2")
    assert found.joints["A"] != found.joints["B"]


def test_a_bridged_jumper_of_three_pins_joins_the_two_it_names() -> None:
    found = board("JP1 [SolderJumper_3_Bridged12] A B C\nR1 1k A N1\nR2 1k C N2")
    assert found.joints["A"] == found.joints["B"] != found.joints["C"]


def test_the_project_file_closes_a_jumper() -> None:
    facts = PartFacts(place=Place(file="rcrules.toml", line=1), contact="normally closed")
    found = board("JP1 A B\nR1 1k A N1\nR2 1k B N2", Project(parts={"JP1": facts}))
    assert found.joints["A"] == found.joints["B"]


def test_a_joint_is_called_by_its_named_net() -> None:
    found = board("R5 0 Net-(R5-Pad1) OUT\nR1 1k Net-(R5-Pad1) N1\nC1 1n Net-(R5-Pad1) N2")
    assert found.joints["Net-(R5-Pad1)"] == "OUT"


def test_a_network_holds_its_free_joints_with_the_held_ones_around() -> None:
    text = f"{RC}\nR2 1k NRST N2\nC2 1n N2 GND\nSW1 N2 GND\nD1 A=NRST K=+3V3"
    (network,) = board(text).networks
    assert (network.id, network.free, network.held) == ("N2", ("N2", "NRST"), ("+3V3", "GND"))
    assert [item.ref for item in network.branches] == ["C1", "C2", "R1", "R2"]
    assert [(item.ref, item.normally) for item in network.contacts] == [("SW1", "open")]
    assert [(item.ref, item.anode, item.cathode) for item in network.diodes] == [("D1", "NRST", "+3V3")]


def test_a_held_net_parts_networks() -> None:
    text = f"{RC}\nR2 10k +3V3 N2\nC2 100n N2 GND\nU2 IN:input=N2 GND:power-in=GND"
    assert [network.id for network in board(text).networks] == ["N2", "NRST"]


def test_unknown_values_stay_branches_and_unfitted_parts_do_not() -> None:
    (network,) = board(f"{RC}\nC2 ? NRST GND\nC3! 1u NRST GND").networks
    assert [item.ref for item in network.branches] == ["C1", "C2", "R1"]


def test_the_positive_pin_of_a_capacitor_comes_first() -> None:
    (network,) = board(f"{RAIL}\nR1 10k +3V3 N1\nC1 10u -=GND +=N1\nU1 IN:input=N1").networks
    assert [(item.a, item.b) for item in network.branches if item.ref == "C1"] == [("N1", "GND")]


def test_held_joints_bridged_by_a_resistor_and_a_capacitor_are_a_network() -> None:
    found = board("J1 SHIELD=GNDPWR 1=X\nR1 1M GNDPWR GND\nC1 10n GNDPWR GND\nU1 GND:power-in=GND VDD:power-in=+3V3")
    (network,) = found.networks
    assert (network.free, [item.ref for item in network.branches]) == ((), ["C1", "R1"])


def test_a_package_of_two_diodes_is_two_by_its_pin_names() -> None:
    series = [(item.anode, item.cathode) for item in diodes(part("D1 A=LOW COM=MID K=HIGH"))]
    shared = [(item.anode, item.cathode) for item in diodes(part("D1 A=A1 A=A2 K=OUT"))]
    assert series == [("LOW", "MID"), ("MID", "HIGH")]
    assert shared == [("A1", "OUT"), ("A2", "OUT")]


def test_every_resistor_and_capacitor_is_in_one_class_with_its_reason() -> None:
    found = board(f"""{RC}
    C2 100n +3V3 GND
    C3! 100n +3V3 GND
    C4 ? +3V3 GND
    R2 10k +3V3 SEL
    R3 1k OUT N3
    D3 A=N3 K=GND
    R4 0 SEL N4
    U2 SEL:input=SEL OUT:output=OUT IN:input=N4 GND:power-in=GND
    RN1 [4x10k] A B C D""")
    assert found.coverage == {
        "C1": "network", "C2": "decoupling", "C3": "not_fitted", "C4": "unreadable",
        "R1": "network", "R2": "elsewhere", "R3": "elsewhere", "R4": "elsewhere",
    }  # fmt: skip
    assert found.reasons == {
        "C3": "marked not fitted",
        "C4": "not understood",
        "R2": "pull to a supply, no capacitor with it",
        "R3": "at a diode",
        "R4": "joins its nets (0 Ω)",
    }


def test_parts_of_a_bom_alone_have_no_netlist() -> None:
    found = board("R1 10k\nC1 1u")
    assert (set(found.coverage.values()), found.networks, dict(found.held)) == ({"elsewhere"}, (), {})
    assert found.reasons["R1"] == "no netlist"


def test_the_order_of_parts_does_not_matter() -> None:
    lines = f"{RC}\nR2 1k NRST N2\nC2 1n N2 GND".splitlines()
    there, back = (board("\n".join(order)).networks[0] for order in (lines, lines[::-1]))
    assert (there.id, there.branches, there.free, there.held) == (back.id, back.branches, back.free, back.held)


@pytest.mark.parametrize(
    ("part", "why"),
    [
        ("R5 33 OUT N3", "in series with a driven net, no capacitor with it"),
        ("R5 10k +3V3 OUT", "between a supply and a driven net"),
        ("R5 1k +3V3 N3", "one end is open"),
        ("C5 18p N3 GND\nY1 N3 N4", "at a crystal"),
    ],
)
def test_a_part_that_makes_no_node_says_what_it_is_at(part: str, why: str) -> None:
    text = f"{RAIL}\nC9 1u +3V3 GND\nU1 Y:output=OUT A:input=OUT\n{part}"
    load = "" if "open" in why else "\nU2 IO:bidirectional=N3 GND:power-in=GND"
    assert board(f"{text}{load}").reasons[part[:2]] == why


def test_a_light_sensor_is_an_arm_of_its_divider() -> None:
    text = "LDR1 [LDR 5528] =+3V3 =N\nR1 10k N GND\nC1 100n N GND\nU1 [MCU] AIN0:input=N VDD:power-in=+3V3 VSS=GND"
    (node,) = (node for network in board(text).networks for node in network.nodes)
    assert (node.role, set(node.parts)) == ("divider-low-pass", {"LDR1", "R1", "C1"})


def test_a_bootstrap_capacitor_without_a_resistor_is_no_node_but_is_called_one() -> None:
    text = "U1 [buck regulator] VIN:power-in=+12V SW=X BST=B GND=GND FB=+5V\nC1 100n B X\nL1 X +5V\nC2 22u +5V GND"
    found = board(text)
    assert not any(network.nodes for network in found.networks)
    assert found.reasons["C1"] == "bootstrap capacitor at U1.BST"
