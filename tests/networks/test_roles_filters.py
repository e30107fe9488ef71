from dataclasses import replace

from rcrules.networks._roles import nodes_of
from rcrules.project import Project
from tests.networks.drafts import draft, nodes

DRIVEN = {"A": "driven", "B": "driven"}


def test_series_resistor_from_a_driven_net_is_a_low_pass():
    node = nodes("R1 100 A N\nC1 100n N GND\nU1 PA3/ADC1:bidirectional=N", hold=DRIVEN)["N"]
    assert (node.role, node.parts, node.fed_from, node.kinds_fed) == ("low-pass", ("R1", "C1"), ("A",), ("adc",))


def test_second_stage_takes_the_parts_up_to_the_source():
    found = nodes("R1 1k A M\nC1 1u M GND\nR2 100k M N\nC2 1n N GND\nU1 AIN0:input=N", hold=DRIVEN)
    assert (found["N"].role, set(found["N"].parts)) == ("low-pass", {"R1", "R2", "C1", "C2"})
    assert (found["M"].role, found["M"].parts) == ("low-pass", ("R1", "C1"))


def test_capacitor_that_returns_to_an_amplifier_makes_a_low_pass_active():
    text = "R1 1k A M\nR2 1k M N\nC1 1n M B\nC2 1n N GND\nU1 [op-amp] 1.OUT:output=B 2.-=B 3.+=N"
    found = nodes(text, hold=DRIVEN)
    assert (found["N"].role, set(found["N"].parts)) == ("low-pass", {"R1", "R2", "C1", "C2"})
    assert [found[net].active for net in "MN"] == ["an amplifier drives C1"] * 2


def test_capacitor_at_the_tap_of_a_divider():
    node = nodes("R1 33k +5V N\nR2 10k N GND\nC1 100n N GND\nU1 AIN3:input=N")["N"]
    assert (node.role, node.fed_from) == ("divider-low-pass", ("+5V", "GND"))


def test_lower_arm_through_a_further_resistor_is_still_a_divider():
    node = nodes("R1 22k +5V N\nR2 2k N M\nR3 4.7k M GND\nC1 22n N GND")["N"]
    assert (node.role, node.parts) == ("divider-low-pass", ("R1", "R2", "R3", "C1"))


def test_thermistor_acts_as_a_resistor():
    node = nodes("TH1 10k +5V N\nR2 10k N GND\nC1 100n N GND\nU1 CH2:input=N")["N"]
    assert (node.role, node.parts) == ("divider-low-pass", ("TH1", "R2", "C1"))


def test_large_pull_down_beside_a_series_resistor_makes_no_divider():
    node = nodes("R1 1k A N\nR2 1M N GND\nC1 1n N GND\nU1 IN:input=N", hold=DRIVEN)["N"]
    assert node.role == "low-pass"


def test_series_capacitor_to_a_resistor_to_ground_is_a_high_pass():
    found = nodes("C1 100n A N\nR1 2k N GND\nC2 100n N M\nR2 1M M GND\nU1 [op-amp] +=M", hold=DRIVEN)
    assert (found["N"].role, found["N"].parts, found["N"].fed_from) == ("high-pass", ("R1", "C1"), ("A",))
    assert (found["M"].role, set(found["M"].parts)) == ("high-pass", {"R1", "R2", "C1", "C2"})


def test_supply_into_an_analog_input_is_a_low_pass():
    node = nodes("R1 10k +3V3 N\nC1 100n N GND\nU1 [comparator] +=N -=X")["N"]
    assert (node.role, node.kinds_fed) == ("low-pass", ("amplifier",))


def test_value_that_is_not_known_does_not_hide_a_role():
    node = nodes("R1 LDR +5V N\nR2 100k N GND\nC1 C N GND\nU1 CH1:input=N")["N"]
    assert (node.role, node.evidence[0]) == ("divider-low-pass", "R1 LDR to +5V")


def test_divider_of_unknown_values_is_still_a_divider():
    node = nodes("R1 R A N\nR2 R N GND\nC1 100n N GND\nU1 IN:input=N", hold=DRIVEN)["N"]
    assert node.role == "divider-low-pass"


def test_long_ladder_takes_no_more_parts_than_a_bounded_way_gives():
    text = "\n".join(f"R{i} 1k N{i} N{i + 1}\nC{i} 1n N{i + 1} GND" for i in range(200)) + "\nU1 IN=N200"
    found = nodes(text, hold={"N0": "driven"})
    assert len(found) == 200
    assert {node.role for node in found.values()} == {"low-pass"}
    assert len(found["N200"].parts) < 200


def test_two_equal_stages_are_low_passes_and_no_termination():
    found = nodes("R1 1k A M\nC1 1n M GND\nR2 1k M N\nC2 1n N GND\nU1 AIN1:input=N", hold=DRIVEN)
    assert [found[net].role for net in "MN"] == ["low-pass", "low-pass"]


def test_capacitor_from_a_biased_connector_net_is_a_high_pass():
    node = nodes("R1 2.2k +3V3 J\nJ1 MIC=J\nC1 1u J N\nR2 10k N GND\nU1 AIN0=N")["N"]
    assert (node.role, node.parts) == ("high-pass", ("R2", "C1"))


def test_many_filters_on_one_free_joint_take_its_parts_no_further():
    text = "\n".join(f"R{i} 1k HUB N{i}\nC{i} 1n N{i} GND\nU{i} IN=N{i}" for i in range(300))
    node = nodes(text + "\nR999 1k A HUB", hold=DRIVEN)["N7"]
    assert (node.role, node.parts) == ("low-pass", ("R7", "C7"))


def test_source_that_is_not_sure_makes_the_node_unsure():
    text = "R1 100 A N\nC1 100n N GND\nU1 AIN1=N"
    board = draft(text, {"A": "driven", "GND": "ground"}, frozenset(), Project())
    held = {**board.held, "A": replace(board.held["A"], sure=False)}
    (node,) = nodes_of(replace(board, held=held), board.networks[0])
    assert (node.role, node.certainty) == ("low-pass", "unsure")
    assert "what holds A is not sure" in node.evidence
