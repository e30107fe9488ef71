"""What dielectrics leak: a conductance from nothing to its most, and never a proof."""

from math import inf, log

import pytest

from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'


def bulk(resistor: str = "10k", facts: str = 'rated-voltage = "50 V"\nleakage = "500 uA"\n') -> Bench:
    """Circuit 16: 1000 µF at 50 V with a bleeder of 10 kΩ."""
    further, ends = (f", R1 {resistor}", ("R1.1", "R1.2")) if resistor else ("", ("", ""))
    nets = f"P: U1.1/VIN/power_in C1.1 {ends[0]}\nGND: U1.3/GND/power_in C1.2 {ends[1]}"
    project = f'[supply."P"]\nvoltage = "50 V"\n[part."C1"]\n{facts}{EXACT}'
    return bench(f"C1 1000u, U1 QX4805{further}", nets, project)


def test_leakage_shortens_a_discharge_as_a_conductance():
    """Circuit 16: 23.0259 s at most, 20.9326 s at least; a current source would give 17.05 s (worked out apart)."""
    found = bulk().measure("C1", "discharge_time", to="5 V", given_only=True)
    assert (found.low, found.high) == (pytest.approx(20.9326, rel=3e-6), pytest.approx(23.0259, rel=3e-6))
    assert found.proved


def test_insulation_resistance_says_the_same():
    board = bulk(facts='insulation-resistance = "100 kohm"\n')
    found = board.measure("C1", "discharge_time", to="5 V", given_only=True)
    assert found.low == pytest.approx(1000e-6 * 1e5 * 1e4 / 1.1e5 * log(10))


def test_leakage_alone_proves_no_discharge():
    assert bulk("").measure("C1", "discharge_time", to="5 V").low == inf
    opened = bulk().measure("C1", "discharge_time", to="5 V", fault="any one resistor open")
    assert opened.nominal == inf


def reset(facts: str) -> Bench:
    nets = """
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        NRST: R1.2 C1.1 U1.7/NRST/input
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    project = f'[supply."+3V3"]\nvoltage = "3.3 V"\n[part."C1"]\n{facts}{EXACT}'
    return bench("R1 1M, C1 10u, U1 QX7301, U2 QX3300", nets, project)


def test_a_leaky_capacitor_holds_its_node_down():
    """1 MΩ against 10 V/3 µA = 3.33 MΩ: 3.3 V · 3.333/4.333 = 2.53846 V (divider, by hand)."""
    board = reset('rated-voltage = "10 V"\nleakage = "3 uA"\n')
    final = board.measure("NRST", "final_voltage", given_only=True)
    assert (final.low, final.high) == (pytest.approx(3.3 * 10 / 13), pytest.approx(3.3))
    late = board.measure("NRST", "delay", event="power-up", to="2.6 V", given_only=True)
    assert (late.nominal, late.high) == (pytest.approx(10 * log(3.3 / 0.7)), inf)


def test_a_node_that_only_a_dielectric_holds_floats():
    nets = """
        IN: J1.1 C1.1
        N: C1.2 C2.1 R1.1
        M: R1.2 U1.7/AIN0/input
        GND: J1.2 C2.2 U1.2/GND/power_in
        +3V3: U1.3/VDD/power_in
    """
    facts = '[net."IN"]\nswing = "0 V .. 1 V"\n[part."C2"]\ninsulation-resistance = "1 Gohm"\n'
    board = bench("C1 1u, C2 1u, R1 1k, J1 IN, U1 QX7301", nets, facts)
    with pytest.raises(Unmeasurable, match="no resistive path"):
        board.pose("N", "final_voltage", event="step-up")
