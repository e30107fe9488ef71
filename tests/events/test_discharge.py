"""Capacitors after power-off."""

from math import inf, log

import pytest

from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
SUPPLIES = '[supply."+48V"]\nvoltage = "48 V"\n[supply."+5V"]\nvoltage = "5 V"\n'


def board(parts: str, nets: str) -> Bench:
    """A regulator U1 from +48V to +5V, a load U2, and further parts around them."""
    return bench(f"U1 QX4805, U2 QX7301, {parts}", nets, SUPPLIES + EXACT)


def test_a_bleeder_discharges_all_that_is_parallel():
    """100 µF and 47 µF with 100 kΩ: RC ln(48/5)."""
    nets = """+48V: U1.1/VIN/power_in C1.1 C2.1 R1.1
        +5V: U1.5/VO/power_out U2.1/VDD/power_in
        GND: U1.3/GND/power_in U2.2/GND/power_in C1.2 C2.2 R1.2"""
    found = board("C1 100u, C2 47u, R1 100k", nets).measure("C1", "discharge_time", to="5 V")
    assert found.nominal == pytest.approx(14.7 * log(48 / 5))
    assert found.proved


def test_loads_never_count_as_bleed():
    nets = """+48V: U1.1/VIN/power_in C1.1
        +5V: U1.5/VO/power_out U2.1/VDD/power_in
        GND: U1.3/GND/power_in U2.2/GND/power_in C1.2"""
    assert board("C1 100u", nets).measure("C1", "discharge_time", to="5 V").nominal == inf


def test_what_is_charged_below_the_level_is_safe_at_once():
    nets = """+48V: U1.1/VIN/power_in
        +5V: U1.5/VO/power_out U2.1/VDD/power_in C1.1 C2.1 R1.1
        GND: U1.3/GND/power_in U2.2/GND/power_in C1.2 C2.2 R1.2"""
    assert board("C1 100u, C2 1u, R1 1k", nets).measure("C1", "discharge_time", to="60 V").high == 0.0


def test_the_way_may_lead_through_another_opened_supply():
    """48 V hangs on 5 V by 10 kΩ, and 5 V on ground by 1 kΩ: one time constant of 11 kΩ."""
    nets = """+48V: U1.1/VIN/power_in C1.1 R1.1
        +5V: U1.5/VO/power_out U2.1/VDD/power_in R1.2 R2.1
        GND: U1.3/GND/power_in U2.2/GND/power_in C1.2 R2.2"""
    found = board("C1 100u, R1 10k, R2 1k", nets).measure("C1", "discharge_time", to="5 V")
    assert found.nominal == pytest.approx(1.1 * log(48 / 5), rel=1e-9)


def test_a_pull_up_into_nothing_changes_nothing():
    nets = """+48V: U1.1/VIN/power_in C1.1 R1.1 R2.1
        OPEN: R2.2 U2.5/EN/input
        +5V: U1.5/VO/power_out U2.1/VDD/power_in
        GND: U1.3/GND/power_in U2.2/GND/power_in C1.2 R1.2"""
    problem = board("C1 100u, R1 100k, R2 10k", nets).pose("C1", "discharge_time", to="5 V")
    assert "R2" not in [item.name for item in problem.parameters]


def test_a_discharge_ends_at_a_fixed_voltage():
    nets = """+48V: U1.1/VIN/power_in C1.1 R1.1
        +5V: U1.5/VO/power_out U2.1/VDD/power_in
        GND: U1.3/GND/power_in U2.2/GND/power_in C1.2 R1.2"""
    with pytest.raises(Unmeasurable, match="fixed voltage"):
        board("C1 100u, R1 100k", nets).pose("C1", "discharge_time", to="10 % of final")
