from tests.events.boards import bench
from tests.networks.drafts import nodes


def test_resistor_to_supply_and_capacitor_to_ground_at_a_reset_pin_is_a_power_on_delay():
    node = nodes("R1 10k +3V3 POR\nC1 100n POR GND\nU1 NRST:input=POR VDD:power-in=+3V3")["POR"]
    assert (node.role, node.certainty) == ("power-on-delay", "sure")
    assert (node.parts, node.fed_from, node.feeds, node.kinds_fed) == (
        ("R1", "C1"),
        ("+3V3",),
        ("U1.NRST",),
        ("reset",),
    )
    assert node.evidence[:2] == ("R1 10 kΩ to +3V3", "C1 100 nF to GND")
    assert "feeds U1.NRST (reset)" in node.evidence


def test_resistor_to_ground_and_capacitor_to_supply_delays_too():
    assert nodes("R1 10k GND N\nC1 100n N +3V3\nU1 RESET:input=N")["N"].role == "power-on-delay"


def test_discharge_diode_does_not_change_a_power_on_delay():
    node = nodes("R1 10k +3V3 N\nC1 1u N GND\nD1 N +3V3\nU1 RESET:input=N")["N"]
    assert (node.role, node.parts) == ("power-on-delay", ("R1", "C1"))


def test_reset_pin_behind_a_series_resistor_is_fed_and_the_resistor_sets_no_time():
    node = nodes("R1 10k +3V3 N\nC1 1u N GND\nR2 1k N M\nU1 RESET:input=M")["N"]
    assert (node.role, node.parts, node.feeds) == ("power-on-delay", ("R1", "C1"), ("U1.RESET",))


def test_net_behind_a_series_resistor_without_a_capacitor_is_no_node_of_its_own():
    assert set(nodes("R1 10k +3V3 N\nC1 1u N GND\nR2 1k N M\nU1 RESET:input=M")) == {"N"}


def test_pin_named_burst_is_no_reset():
    node = nodes("R1 10k +3V3 N\nC1 1u N GND\nU1 BURST:input=N")["N"]
    assert node.kinds_fed == ("logic",)


def test_pin_without_a_name_takes_its_net_name_as_last_evidence():
    node = nodes("R1 10k +3V3 /MCU/RESET\nC1 1u /MCU/RESET GND\nU1 =/MCU/RESET")["/MCU/RESET"]
    assert (node.role, node.kinds_fed) == ("power-on-delay", ("reset",))


def test_net_named_reset_without_any_part_that_takes_it_is_one_unsurely():
    for text in ("R1 10k +3V3 NRST\nC1 100n NRST GND", "R1 10k +3V3 NRST\nC1 100n NRST GND\nJ1 1=NRST 2=GND"):
        node = nodes(text)["NRST"]
        assert (node.role, node.certainty, node.parts) == ("power-on-delay", "unsure", ("R1", "C1"))
    assert nodes("R1 10k +3V3 BURST\nC1 100n BURST GND")["BURST"].role != "power-on-delay"
    assert nodes("R1 10k +3V3 NRST\nC1 100n NRST GND\nR2 10k NRST GND")["NRST"].role != "power-on-delay"


def test_net_named_reset_that_no_pull_feeds_is_no_power_on_delay():
    node = nodes("R1 1k D NRST\nC1 1n NRST GND\nU1 IN:input=NRST", hold={"D": "driven"})["NRST"]
    assert node.role == "low-pass"


def test_open_collector_with_pull_up_and_capacitor_is_a_low_pass_but_not_for_sure():
    text = "R1 10k +3V3 N\nC1 1n N GND\nU1 OUT:open-collector=N\nU2 IN:input=N"
    node = nodes(text)["N"]
    assert (node.role, node.certainty) == ("low-pass", "unsure")


def test_line_resistor_to_a_rail_is_no_delay():
    node = nodes("R1 50 +3V3 N\nC1 18p N GND\nU1 RXP:bidirectional=N\nJ1 RD=N")["N"]
    assert node.role == "other"


def test_small_resistor_into_a_supply_pin_is_a_supply_filter():
    node = nodes("R1 10 +5V N\nC1 10u N GND\nC2 100n N GND\nU1 AVCC:power-in=N")["N"]
    assert (node.role, node.parts, node.kinds_fed) == ("supply-filter", ("R1", "C1", "C2"), ("supply",))


def test_load_of_a_supply_filter_does_not_set_its_time():
    text = "R1 22 +5V N\nC1 10u N GND\nU1 V+:input=N\nR2 10k N M\nR3 10k M GND\nC2 1u M GND\nU2 [op-amp] +=M"
    found = nodes(text, hold={"N": "supply"}, local=["N"])
    assert (found["N"].role, found["N"].parts) == ("supply-filter", ("R1", "C1"))
    assert (found["M"].role, found["M"].parts) == ("divider-low-pass", ("R2", "R3", "C2"))


def test_supply_pins_without_names_or_types_are_told_by_a_small_resistor():
    assert nodes("R1 10 +5V N\nC1 100n N GND\nU1 =N")["N"].role == "supply-filter"


def test_filter_of_a_bias_that_feeds_further_resistors_is_a_supply_filter():
    node = nodes("R1 1M +5V N\nC1 10n N GND\nR2 10M N M\nC2 2.2n M GND")["N"]
    assert (node.role, node.parts) == ("supply-filter", ("R1", "C1"))


def test_milliohms_in_a_supply_are_a_shunt():
    node = nodes("R1 10m +5V N\nC1 10u N GND\nU1 VDD:power-in=N", hold={"N": "supply"}, local=["N"])["N"]
    assert (node.role, node.certainty) == ("sense-shunt", "unsure")


def test_a_pull_up_inside_the_pin_delays_with_a_capacitor_alone():
    """A controller's reset with the recommended capacitor and no resistor of its own; the project tells the pull-up."""
    nets = """
        VCC: U2.1/VO/power_out U1.1/VCC/power_in
        NRST: C1.1 U1.7/NRST/input
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    parts = "C1 100n, U1 QX7301, U2 QX5000"
    pull = '[pin."U1.NRST"]\npull-up = "30 kohm .. 60 kohm to VCC"\n'
    (node,) = [node for network in bench(parts, nets, pull).board.networks for node in network.nodes]
    assert (node.net, node.role, node.parts, node.feeds) == ("NRST", "power-on-delay", ("C1",), ("U1.NRST",))
    assert not [node for network in bench(parts, nets).board.networks for node in network.nodes]
