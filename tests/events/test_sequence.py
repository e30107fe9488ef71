"""Supplies that come one after the other, against an integrator of a general-purpose library (scipy, LSODA)."""

from itertools import pairwise

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from scipy.optimize import brentq

from tests.events.boards import Bench, bench

FACTS = """
[supply."+5V"]
voltage = "5 V"
valid   = "4.5 V"
rise    = "2 ms"
[supply."+3V3"]
voltage = "3.3 V"
valid   = "3.0 V"
rise    = "1 ms"
after   = "+5V"
[supply."+1V8"]
voltage = "1.8 V"
valid   = "1.6 V"
rise    = "0.5 ms"
after   = "+3V3"
"""
FIVE = 0.9 * 2e-3
THREE = FIVE + 3.0 / 3.3 * 1e-3
"""When the first two are valid; the next one starts then."""
END = 20e-3


@pytest.fixture(scope="module")
def three() -> Bench:
    """Two nodes between three supplies; the part that is fed runs on +3V3."""
    parts = "R1 10k, R2 22k, R3 4.7k, R4 1k, C1 220n, C2 100n, U1 QX7301, U2 QX1, U3 QX2, U4 QX3"
    nets = """
        +5V: U2.1/VO/power_out R1.1
        +3V3: U3.1/VO/power_out R2.1 U1.1/VDD/power_in
        +1V8: U4.1/VO/power_out R3.1
        N: R1.2 R2.2 R4.1 C1.1
        M: R4.2 R3.2 C2.1 U1.2/IN/input
        GND: C1.2 C2.2 U1.3/GND/power_in U2.2/GND/power_in U3.2/GND/power_in U4.2/GND/power_in
    """
    return bench(parts, nets, FACTS)


def slopes(t: float, volts: np.ndarray) -> list[float]:
    five, three, one = (np.clip((t - begin) / rise, 0.0, 1.0) for begin, rise in RAMPS)
    n, m = volts
    into_n = (5.0 * five - n) / 10e3 + (3.3 * three - n) / 22e3 + (m - n) / 1e3
    return [into_n / 220e-9, ((n - m) / 1e3 + (1.8 * one - m) / 4.7e3) / 100e-9]


RAMPS = ((0.0, 2e-3), (FIVE, 1e-3), (THREE, 0.5e-3))
BENDS = sorted({0.0, END, *(begin + share * rise for begin, rise in RAMPS for share in (0.0, 1.0))})


def stepped(t: float) -> float:
    """Voltage of M, integrated from bend to bend."""
    volts = np.zeros(2)
    for begin, end in pairwise([bend for bend in BENDS if bend < t] + [t]):
        run = solve_ivp(slopes, (begin, end), volts, method="LSODA", rtol=1e-10, atol=1e-12)
        volts = run.y[:, -1]
    return float(volts[1])


def test_supplies_follow_one_another(three: Bench) -> None:
    wanted = brentq(lambda t: stepped(t) - 1.5, 1e-3, 10e-3, xtol=1e-12)
    assert three.measure("M", "delay", event="power-up", to="1.5 V").nominal == pytest.approx(wanted, rel=1e-6)
    assert three.measure("M", "voltage_at", event="power-up", time=3e-3).nominal == pytest.approx(
        stepped(3e-3), rel=1e-6
    )


def test_a_delay_counts_from_the_supply_of_the_part_that_is_fed(three: Bench) -> None:
    """Not from the one whose name comes first: U1 runs on +3V3."""
    plain = three.measure("M", "delay", event="power-up", to="1.5 V").nominal
    found = three.measure("M", "delay", event="power-up", from_="supply valid", to="1.5 V").nominal
    assert found == pytest.approx(plain - THREE, rel=1e-9)


def test_a_supply_counts_that_only_powers_the_part_that_is_fed() -> None:
    """The reset hangs on +5V, the part on +3V3, which is valid 0.909 ms after +5V is."""
    nets = """
        +5V: U2.1/VO/power_out R1.1
        +3V3: U3.1/VO/power_out U1.1/VDD/power_in
        N: R1.2 C1.1 U1.2/NRST/input
        GND: C1.2 U1.3/GND/power_in U2.2/GND/power_in U3.2/GND/power_in
    """
    other = bench("R1 10k, C1 1u, U1 QX7301, U2 QX1, U3 QX2", nets, FACTS)
    plain = other.measure("N", "delay", event="power-up", to="1.5 V").nominal
    found = other.measure("N", "delay", event="power-up", from_="supply valid", to="1.5 V").nominal
    assert found == pytest.approx(plain - THREE, rel=1e-9)
