"""Capacitors in series, and the value that is left of one."""

import pytest

from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
LEAKY = '[supply."+400V"]\nvoltage = "400 V"\n[part."C?"]\nrated-voltage = "250 V"\nleakage = "2.5 mA"\n'
"""At rated voltage: a dielectric of at least 100 kΩ."""


def string(resistors: str, facts: str = LEAKY + EXACT) -> Bench:
    """Two capacitors of 100 µF in series, with balancing resistors of these values where given."""
    values = resistors.split()
    parts = ", ".join(f"R{number} {value}" for number, value in enumerate(values, 1))
    top, middle, bottom = ("R1.1", "R1.2 R2.1", "R2.2") if values else ("", "", "")
    nets = f"""
        +400V: J1.1 C1.1 {top}
        M: C1.2 C2.1 {middle}
        GND: C2.2 J1.2 {bottom}
    """
    return bench(f"C1 100u, C2 100u, J1 IN{', ' if values else ''}{parts}", nets, facts)


def test_without_balancing_each_may_take_the_whole_voltage():
    found = string("").measure("C1", "series_share")
    assert (found.low, found.high, found.proved) == (1.0, 1.0, True)
    assert string("").measure("C2", "applied_voltage").nominal == 400.0
    assert string("").measure("C1", "voltage_ratio").nominal == pytest.approx(1.6)


def test_balancing_resistors_work_against_leakage():
    """47 kΩ each, one capacitor leaks through 100 kΩ: the other takes 47/(47 + 47 ∥ 100) = 59.514 % (by hand)."""
    found = string("47k 47k").measure("C1", "series_share", given_only=True)
    assert found.nominal == pytest.approx(0.5)
    assert found.high == pytest.approx(47 / (47 + 47 * 100 / 147), rel=1e-9)


def test_capacitance_divides_first():
    """At ±20 % the smaller of two takes 120/(80 + 120) = 60 % of a step, more than leakage leaves it."""
    facts = LEAKY + EXACT.replace('[defaults.capacitor]\ntolerance = "0 %"', '[defaults.capacitor]\ntolerance = "20 %"')
    assert string("47k 47k", facts).measure("C1", "series_share", given_only=True).high == pytest.approx(0.6, rel=1e-9)


def test_balancing_cannot_be_judged_without_leakage():
    facts = '[supply."+400V"]\nvoltage = "400 V"\n' + EXACT
    with pytest.raises(Unmeasurable, match="leakage of C1 is not known") as caught:
        string("47k 47k", facts).pose("C1", "series_share")
    assert caught.value.ask == '[part."C1"] leakage = "…"'


def test_leakage_is_one_at_rated_voltage():
    facts = LEAKY.replace('rated-voltage = "250 V"\n', "") + EXACT
    with pytest.raises(Unmeasurable, match="rated voltage") as caught:
        string("47k 47k", facts).pose("C1", "series_share")
    assert caught.value.ask == '[part."C1"] rated-voltage = "…"'


def test_a_lone_capacitor_is_in_no_string():
    nets = "+400V: J1.1 C1.1\nGND: C1.2 J1.2"
    with pytest.raises(Unmeasurable, match="in series with nothing"):
        bench("C1 100u, J1 IN", nets, LEAKY + EXACT).pose("C1", "series_share")


def test_effective_capacitance_follows_the_bias_curve_to_the_supply():
    nets = "+5V: U2.1/VO/power_out U1.1/VDD/power_in C1.1\nGND: U2.2/GND/power_in U1.2/GND/power_in C1.2"
    facts = """
        [supply."+5V"]
        voltage = "5 V"
        [part."C1"]
        tolerance = "10 %"
        tcr = "0 ppm/K"
        bias-curve = [["0 V", "100 %"], ["10 V", "40 %"]]
    """
    board = bench("C1 10u C0G, U1 QX7301, U2 QX5000", nets, facts)
    found = board.measure("C1", "effective_capacitance")
    assert (found.low, found.nominal, found.high) == pytest.approx((6.3e-6, 10e-6, 11e-6))
    assert found.proved
