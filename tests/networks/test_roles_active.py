from rcrules.networks._model import Node
from tests.networks.drafts import nodes

AMP = "U1 [op-amp] 1.OUT:output=VO 2.-:input=N 3.+:input=REF"


def _feedback(node: Node) -> bool:
    return node.role == "feedback" and node.active is not None


def test_crystal_with_load_capacitor_is_an_oscillator():
    found = nodes("Y1 A B\nC1 20p A GND\nC2 20p B GND\nR1 1M A B\nU1 XIN:input=A XOUT:output=B")
    assert [(found[net].role, found[net].parts) for net in "AB"] == [
        ("oscillator", ("R1", "C1")),
        ("oscillator", ("R1", "C2")),
    ]
    assert found["A"].active == "crystal Y1 oscillates with the part that drives it"


def test_capacitor_from_the_switch_node_through_a_resistor_to_the_boot_pin_is_a_bootstrap():
    text = "C1 47n SWN N\nR1 2 N M\nU1 VBST:input=M SW:output=SWN\nL1 SWN +3V3"
    node = nodes(text, hold={"SWN": "driven"})["N"]
    assert (node.role, node.parts) == ("bootstrap", ("R1", "C1"))
    assert node.active


def test_capacitor_at_a_feedback_pin_is_feedback():
    node = nodes("R1 10k +3V3 N\nR2 4.7k N GND\nC1 1n N +3V3\nU1 FB:input=N VIN:power-in=+5V SW:output=X")["N"]
    assert _feedback(node)
    assert (node.fed_from, node.kinds_fed, node.active) == (
        ("+3V3", "GND"),
        ("regulator",),
        "regulator U1 inside the loop",
    )


def test_compensation_pin_and_the_joint_of_its_leg_are_feedback():
    text = "R1 6.8k COMP M\nC1 2.2n M GND\nC2 24p COMP GND\nU1 COMP1:input=COMP VIN:power-in=+5V SW:output=X"
    found = nodes(text)
    assert _feedback(found["COMP"])
    assert found["COMP"].parts == ("R1", "C2", "C1") or set(found["COMP"].parts) == {"R1", "C1", "C2"}
    assert _feedback(found["M"])
    assert found["M"].parts == ("R1", "C1")


def test_ripple_injected_into_a_feedback_pin_takes_the_parts_up_to_the_switch_node():
    text = (
        "R1 6.5k +3V3 N\nR2 10k N GND\nC1 1n M N\nR3 10.7k SWN M\nC2 22n M +3V3\nU1 VFB:input=N SW:output=SWN VIN=+5V"
    )
    found = nodes(text, hold={"SWN": "driven"})
    assert _feedback(found["N"])
    assert set(found["N"].parts) == {"R1", "R2", "R3", "C1", "C2"}
    assert _feedback(found["M"])
    assert set(found["M"].parts) == {"R3", "C1", "C2"}


def test_amplifier_with_its_output_back_at_the_inverting_input_is_feedback():
    node = nodes(f"R1 10k A N\nR2 100k N VO\nC1 10p N VO\n{AMP}", hold={"A": "driven", "VO": "driven"})["N"]
    assert _feedback(node)
    assert node.active == "amplifier U1 inside the loop"


def test_inverting_input_without_pin_names_is_told_by_its_resistor_from_the_output():
    text = "R1 10k A N\nR2 100k N VO\nC1 10p N VO\nU1 1.=VO 2.=N 3.=REF 4.V-=GND 5.V+=+5V"
    assert _feedback(nodes(text, hold={"A": "driven", "VO": "driven"})["N"])


def test_feedback_is_traced_through_a_small_resistor_and_a_follower():
    text = "R1 100M G VO\nR2 47 N G\nC1 2.7p N VO\nQ1 G=G D=+5V S=S\nR3 1k S GND\nU1 [op-amp] 1.OUT=VO 2.-=S 3.+=B"
    found = nodes(text, hold={"VO": "driven"})
    assert _feedback(found["N"])
    assert set(found["N"].parts) == {"R1", "R2", "C1"}
    assert _feedback(found["G"])
    assert set(found["G"].parts) == {"R1", "R2", "C1"}


def test_low_pass_into_the_other_half_of_a_dual_amplifier_is_no_feedback():
    text = "R1 1k VO N\nC1 1n N GND\nR2 10k N M\nU1 [op-amp] 1.OUT:output=VO 2.-=VO 3.+=A 5.+=X 6.-=M 7.OUT:output=W"
    assert nodes(text, hold={"VO": "driven", "W": "driven"})["N"].role != "feedback"


def test_timer_with_resistor_and_capacitor_is_timing():
    node = nodes("R1 100k +5V N\nC1 1u N GND\nU1 [555 timer] THR:input=N DIS:input=N TR:input=X")["N"]
    assert (node.role, node.kinds_fed) == ("timing", ("timer",))
    assert node.active


def test_soft_start_pin_is_timing():
    text = "R1 1M +5V N\nC1 10n N GND\nU1 SS/TR:input=N VIN:power-in=+5V SW:output=X"
    assert nodes(text)["N"].role == "timing"


def test_gate_whose_output_comes_back_to_its_own_input_is_timing():
    text = "R1 100k Q N\nC1 10n N GND\nU1 [74HC14] 1.1A:input=N 2.1Y:output=Q"
    assert nodes(text, hold={"Q": "driven"})["N"].role == "timing"


def test_delay_between_two_gates_of_one_package_is_a_low_pass():
    text = "R1 100k Q N\nC1 10n N GND\nU1 [74HC14] 3.2A:input=N 4.2Y:output=X 2.1Y:output=Q"
    assert nodes(text, hold={"Q": "driven"})["N"].role == "low-pass"


def test_filter_before_an_inverting_amplifier_is_no_feedback_but_active():
    text = f"R1 1k A M\nC1 1n M GND\nR2 10k M N\nR3 10k N VO\n{AMP}"
    node = nodes(text, hold={"A": "driven", "VO": "driven"})["M"]
    assert (node.role, node.active) == ("low-pass", "amplifier U1 inside the loop")


def test_leg_from_the_inverting_input_to_ground_is_feedback():
    text = f"R1 1k N M\nC1 10u M GND\nR3 10k N VO\n{AMP}"
    node = nodes(text, hold={"VO": "driven"})["M"]
    assert _feedback(node)
    assert node.parts[0] == "R1"


def test_capacitor_between_two_halves_of_a_dual_amplifier_is_a_high_pass():
    text = "C1 1u VO N\nR1 100k N GND\nU1 [op-amp] 1.OUT:output=VO 2.-=VO 3.+=A 5.+=N 6.-=W 7.OUT:output=W"
    assert nodes(text, hold={"VO": "driven", "W": "driven"})["N"].role == "high-pass"


def test_capacitor_from_an_output_to_its_own_other_input_is_feedback_but_not_for_sure():
    text = "C1 1n VO N\nR1 10k A N\nU1 [op-amp] 1.OUT:output=VO 2.-=VO 3.+=N 5.+=X 6.-=W 7.OUT:output=W"
    node = nodes(text, hold={"VO": "driven", "W": "driven", "A": "driven"})["N"]
    assert (node.role, node.certainty) == ("feedback", "unsure")


def test_output_of_a_converter_is_not_fed():
    node = nodes("R1 1k A N\nC1 1n N GND\nU1 AOUT1:bidirectional=N\nU2 IN:input=N", hold={"A": "driven"})["N"]
    assert node.feeds == ("U2.IN",)


def test_lead_network_over_the_upper_resistor_of_a_feedback_divider_takes_its_series_resistor():
    text = "R1 10k +3V3 N\nR2 1k +3V3 M\nC1 1n M N\nR3 4.7k N GND\nU1 FB=N VIN=+5V SW=SWN"
    found = nodes(text, hold={"SWN": "driven"})
    assert _feedback(found["N"])
    assert set(found["N"].parts) == {"R1", "R2", "R3", "C1"}
    assert _feedback(found["M"])
    assert found["M"].parts == ("R2", "C1")


def test_timing_capacitor_between_two_pins_sets_the_time():
    text = "R1 100k +5V N\nC1 1u M N\nU1 RXCX=N CX=M Q:output=B"
    assert nodes(text, hold={"B": "driven"})["N"].parts == ("R1", "C1")
