"""The bias loss of a capacitor is taken up to the voltage that its network can put across it."""

import numpy as np
import pytest
from scipy.integrate import quad

from rcrules.events import pose
from rcrules.measures import registry
from rcrules.problems import Bounds, solve_bounds
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


STORED = """
[supply."+10V"]
voltage = "10 V"
[defaults.capacitor]
tolerance = "0 %"
tcr = "0 ppm/K"
[part."C1"]
bias-curve = [["0 V", "100 %"], ["5 V", "62 %"], ["20 V", "20 %"]]
"""


def stored(facts: str = STORED, further: str = "") -> Bench:
    """10 µF from a supply to ground."""
    ends = ("C2.1", "C2.2") if further else ("", "")
    nets = f"""
        +10V: U2.1/VO/power_out U1.1/VDD/power_in C1.1 {ends[0]}
        GND: U2.2/GND/power_in U1.2/GND/power_in C1.2 {ends[1]}
    """
    return bench(f"C1 10uF C0G, U1 QX7301, U2 QX3300{further}", nets, facts)


def fraction(volts: float) -> float:
    return float(np.interp(volts, [0, 5, 20], [1, 0.62, 0.2]))


def test_charge_and_energy_follow_the_curve():
    """Q = ∫ C dv and W = ∫ v C dv, by adaptive quadrature; C(10 V) V would be 48 µC and C0 V²/2 500 µJ."""
    charge = stored().measure("C1", "stored_charge")
    expected = quad(fraction, 0, 10, points=[5])[0] * 10e-6
    assert (charge.low, charge.nominal, charge.high) == pytest.approx((expected, expected, expected), rel=1e-9)
    energy = stored().measure("C1", "stored_energy")
    expected = quad(lambda v: v * fraction(v), 0, 10, points=[5])[0] * 10e-6
    assert (energy.low, energy.nominal, energy.high) == pytest.approx((expected, expected, expected), rel=1e-9)


def test_beyond_its_last_point_a_curve_goes_on_as_it_ends():
    high = stored(STORED.replace('"10 V"', '"40 V"'))
    expected = (quad(fraction, 0, 20, points=[5])[0] + 20 * 0.2) * 10e-6
    assert high.measure("C1", "stored_charge").nominal == pytest.approx(expected, rel=1e-9)


def test_a_supply_adds_up_the_energy_along_every_curve():
    board_ = stored(STORED + '[part."C2"]\ntolerance = "0 %"\n', ", C2 1uF C0G")
    problem = pose(board_.board, board_.project, board_.board.held["+10V"], registry()["stored_energy"], {})
    found = solve_bounds([(problem, registry()["stored_energy"], False)])[0]
    assert isinstance(found, Bounds)
    expected = quad(lambda v: v * fraction(v), 0, 10, points=[5])[0] * 10e-6 + 0.5e-6 * 100
    assert found.high == pytest.approx(expected, rel=1e-9)


def test_tolerance_scales_the_whole_curve():
    wide = stored(STORED.replace('[part."C1"]', '[part."C1"]\ntolerance = "10 %"'))
    found = wide.measure("C1", "stored_charge")
    expected = quad(fraction, 0, 10, points=[5])[0] * 10e-6
    assert (found.low, found.high, found.proved) == (
        pytest.approx(0.9 * expected, rel=1e-9),
        pytest.approx(1.1 * expected, rel=1e-9),
        True,
    )
