"""The bias loss of a capacitor is taken up to the voltage that its network can put across it."""

import pytest

from tests.events.boards import Bench, bench

FACTS = """
[supply."+3V3"]
voltage = "3.3 V"
[net."IN"]
swing = "0 V .. 6 V"
[defaults.resistor]
tolerance = "0 %"
[part."C1"]
tolerance = "0 %"
bias-curve = [["0 V", "100 %"], ["3.3 V", "90 %"], ["6 V", "80 %"], ["16 V", "30 %"]]
"""


def board(nets: str, parts: str = "R1 10k, C1 10uF C0G, U1 QX7301, J1 IN", facts: str = FACTS) -> Bench:
    return bench(parts, nets, facts)


def farads_low(circuit: Bench, at: str) -> float:
    """Lowest value of C1's column relative to its nominal, in the question for the time constant."""
    parameters = {item.name: item for item in circuit.pose(at, "time_constant").parameters}
    return parameters["C1"].low / parameters["C1"].nominal


RESET = "+3V3: R1.1 U1.1/VDD/power_in\nN: R1.2 C1.1 U1.7/NRST/input\nGND: C1.2 U1.2/GND/power_in"
FILTER = "IN: J1.1 R1.1\nN: R1.2 C1.1 U1.7/AIN0/input\nGND: J1.2 C1.2 U1.2/GND/power_in\n+3V3: U1.1/VDD/power_in"


def test_a_curve_is_followed_up_to_the_supply_that_feeds_the_network():
    drift = 1 - 0.003  # C0G: 30 ppm/K over the assumed temperatures, at most
    assert farads_low(board(RESET), "N") == pytest.approx(0.9, abs=1 - drift + 1e-9)


def test_the_swing_of_a_driver_counts_where_it_feeds_the_network():
    assert farads_low(board(FILTER), "N") == pytest.approx(0.8, abs=0.004)


def test_a_source_of_unknown_voltage_leaves_the_whole_curve():
    unknown = FACTS.replace('[net."IN"]\nswing = "0 V .. 6 V"\n', "")
    assert farads_low(board(FILTER, facts=unknown), "N") == pytest.approx(0.3, abs=0.004)


def test_a_capacitor_between_two_nodes_keeps_the_whole_curve():
    nets = FILTER.replace("N: R1.2 C1.1", "N: R1.2 C1.1 R2.1 C2.1").replace(
        "GND: J1.2 C1.2", "M: C1.2 R3.1\nGND: J1.2 R2.2 C2.2 R3.2"
    )
    parts = "R1 10k, R2 10k, R3 10k, C1 10uF C0G, C2 100n, U1 QX7301, J1 IN"
    assert farads_low(board(nets, parts), "N") == pytest.approx(0.3, abs=0.004)
