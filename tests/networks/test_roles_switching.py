from tests.networks.drafts import nodes


def test_button_across_the_capacitor_is_a_debounce():
    node = nodes("R1 10k +3V3 N\nC1 100n N GND\nSW1 N GND\nU1 PB0:bidirectional=N")["N"]
    assert (node.role, node.certainty, node.parts, node.feeds) == ("debounce", "sure", ("R1", "C1"), ("U1.PB0",))


def test_button_at_a_reset_pin_is_a_debounce():
    node = nodes("R1 10k +3V3 N\nC1 100n N GND\nSW1 N GND\nU1 RESET:input=N")["N"]
    assert (node.role, node.kinds_fed) == ("debounce", ("reset",))


def test_button_behind_a_resistor_counts_and_its_resistor_acts():
    node = nodes("R1 10k +3V3 N\nC1 100n N GND\nR2 100 N M\nSW1 M GND\nU1 RESET:input=N")["N"]
    assert (node.role, node.certainty, node.parts) == ("debounce", "sure", ("R1", "R2", "C1"))


def test_button_behind_a_diode_is_not_sure():
    node = nodes("R1 470k +3V3 N\nC1 100u N GND\nD1 N M\nSW1 M GND\nU1 EN:input=N")["N"]
    assert (node.role, node.certainty) == ("debounce", "unsure")


def test_led_resistor_on_a_button_sets_no_time():
    node = nodes("R1 10k +3V3 N\nC1 100n N GND\nSW1 N GND\nR2 1k N L\nD1 +3V3 L\nU1 IN:input=N")["N"]
    assert node.parts == ("R1", "C1")


def test_series_resistor_and_capacitor_across_a_switch_node_is_a_snubber():
    text = "C1 2.2n SWN N\nR1 3 N GND\nU1 SW:output=SWN\nL1 SWN +3V3"
    node = nodes(text, hold={"SWN": "driven"})["N"]
    assert (node.role, node.certainty, node.parts) == ("snubber", "sure", ("R1", "C1"))


def test_small_resistor_under_an_output_capacitor_is_no_snubber():
    assert nodes("R1 1 +5V N\nC1 10u N GND")["N"].role == "other"


def test_damper_at_an_analog_line_is_a_snubber_but_not_for_sure():
    node = nodes("C1 470p A N\nR1 4.7 N GND\nJ1 A=A", hold={"A": "driven"})["N"]
    assert (node.role, node.certainty) == ("snubber", "unsure")


def test_gate_with_resistor_and_capacitor_is_a_gate_drive():
    node = nodes("R1 10k GND N\nC1 100n N +5V\nQ1 G=N D=OUT S=+5V")["N"]
    assert (node.role, node.certainty) == ("gate-drive", "sure")


def test_unnamed_pin_one_of_a_transistor_is_its_base_but_not_for_sure():
    node = nodes("R1 10k A N\nC1 1n N GND\nQ1 =N =GND =OUT", hold={"A": "driven"})["N"]
    assert (node.role, node.certainty) == ("gate-drive", "unsure")


def test_contact_with_its_own_pull_before_the_filter_is_a_debounce():
    node = nodes("R1 10k +3V3 E\nSW1 E GND\nR2 10k E N\nC1 10n N GND\nU1 PA0=N")["N"]
    assert (node.role, node.certainty, set(node.parts)) == ("debounce", "sure", {"R1", "R2", "C1"})


def test_leg_from_a_pin_to_ground_is_a_snubber_only_with_a_small_resistor():
    legs = {ohms: nodes(f"R1 {ohms} P N\nC1 100n N GND\nU1 APD:input=P")["N"] for ohms in ("51", "4.3k")}
    assert [(node.role, node.certainty) for node in legs.values()] == [("snubber", "unsure"), ("other", "unsure")]


def test_series_branch_from_a_signal_into_another_node_is_no_snubber():
    text = "R1 100k A N\nC1 10u N M\nC2 1n A M\nR2 5k M GND"
    found = nodes(text, hold={"A": "driven"})
    assert (found["N"].role, found["M"].role) == ("other", "high-pass")
    assert set(found["M"].parts) == {"R1", "R2", "C1", "C2"}
