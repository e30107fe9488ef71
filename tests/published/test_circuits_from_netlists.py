"""The circuits of ``test_circuits`` again, from a netlist to the number: recognised, posed and measured."""

from dataclasses import replace
from math import inf

import pytest

from tests.events.boards import Bench, bench

NO_SPREAD = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
SUPPLY = '[supply."+3V3"]\nvoltage = "3.3 V"\n'


def divider(tolerance: str = NO_SPREAD) -> Bench:
    """Circuits 1 to 1c."""
    nets = """
        IN: J1.1 R1.1
        N: R1.2 R2.1 C1.1 U1.1/AIN0/input
        GND: J1.2 R2.2 C1.2 U1.2/GND/power_in
        +5V: U1.3/VDD/power_in
    """
    project = '[net."IN"]\nswing = "0 V .. 12 V"\n' + tolerance
    return bench("R1 30k, R2 10k, C1 100n, J1 IN, U1 QX7301", nets, project)


def test_divider_with_capacitor():
    board = divider()
    assert board.measure("N", "delay", event="step-up", to="2 V").nominal == pytest.approx(823.959e-6, rel=1e-6)
    assert board.measure("N", "delay", event="step-up", to="2.9 V").nominal == pytest.approx(2.55090e-3, rel=2e-6)
    assert board.measure("N", "corner_frequency").nominal == pytest.approx(212.207, rel=3e-6)


def test_divider_over_tolerances():
    board = divider('[defaults.resistor]\ntolerance = "1 %"\n[defaults.capacitor]\ntolerance = "10 %"\n')
    found = board.measure("N", "delay", event="step-up", to="2 V", given_only=True)
    assert (found.low, found.high) == (pytest.approx(725.360e-6, rel=1e-6), pytest.approx(927.014e-6, rel=1e-6))
    assert found.proved
    wide = divider('[defaults.resistor]\ntolerance = "5 %"\n[defaults.capacitor]\ntolerance = "10 %"\n')
    assert wide.measure("N", "delay", event="step-up", to="2.9 V", given_only=True).high == inf


def reset(facts: str, farads: str = "100n", ohms: str = "10k") -> Bench:
    """Circuits 2, 7: a reset pin behind R to +3V3 and C to ground."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        NRST: R1.2 C1.1 U1.7/NRST/input
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    thresholds = '[pin."U1.NRST"]\nlow = "30 % of +3V3"\nhigh = "70 % of +3V3"\n'
    return bench(f"R1 {ohms}, C1 {farads}, U1 QX7301, U2 QX3300", nets, SUPPLY + facts + NO_SPREAD + thresholds)


def test_reset_behind_a_ramping_supply():
    board = reset('valid = "3 V"\nrise = "10 ms"\n')
    up = {"event": "power-up"}
    assert board.measure("NRST", "delay", **up, to="0.99 V").nominal == pytest.approx(3.98134e-3, rel=2e-6)
    assert board.measure("NRST", "delay", **up, to="2.31 V").nominal == pytest.approx(7.99966e-3, rel=2e-6)
    valid = {**up, "from": "supply valid"}
    assert board.measure("NRST", "delay", **valid, to="0.99 V").nominal == pytest.approx(-5.10957e-3, abs=6e-9)
    assert board.measure("NRST", "delay", **up, to="may switch").nominal == pytest.approx(0.761434e-3, rel=2e-6)
    assert board.measure("NRST", "delay", **up, to="must have switched").nominal == pytest.approx(3.19706e-3, rel=2e-6)


def test_active_high_reset_behind_a_ramping_supply():
    """Circuits 3, 3a."""
    nets = """
        +5V: U2.1/VO/power_out C1.1 U1.3/VDD/power_in
        RST: C1.2 R1.1 U1.7/RST/input
        GND: U2.2/GND/power_in R1.2 U1.2/GND/power_in
    """
    parts, supply = "R1 10k, C1 100n, U1 QX7301, U2 QX5000", '[supply."+5V"]\nvoltage = "5 V"\n'
    step = bench(parts, nets, supply + NO_SPREAD)
    assert step.measure("RST", "pulse_width", event="power-up", level="1.5 V").nominal == pytest.approx(
        1.20397e-3, rel=5e-6
    )
    assert step.measure("RST", "delay", event="power-up", to="1.5 V").nominal == pytest.approx(1.20397e-3, rel=5e-6)
    slow = bench(parts, nets, supply + 'rise = "10 ms"\n' + NO_SPREAD)
    assert slow.measure("RST", "peak_voltage", event="power-up").nominal == pytest.approx(0.499977, rel=1e-6)
    assert slow.measure("RST", "delay", event="power-up", to="1.5 V").nominal == 0.0
    fast = bench(parts, nets, supply + 'rise = "1 ms"\n' + NO_SPREAD)
    assert fast.measure("RST", "peak_voltage", event="power-up").nominal == pytest.approx(3.16060, rel=1e-5)
    assert fast.measure("RST", "pulse_width", event="power-up", level="1.5 V").nominal == pytest.approx(
        1.38862e-3, rel=5e-6
    )


def button(series: str, *, at_pull_up: bool = False) -> Bench:
    """Circuits 6 (contact at the pull-up), 6a, 6b (contact behind the series resistor)."""
    joined = (
        "A: R1.2 R2.1 SW1.1\nN: R2.2 C1.1 U1.7/KEY/input"
        if at_pull_up
        else "N: R1.2 C1.1 R2.1 U1.7/KEY/input\nS: R2.2 SW1.1"
    )
    nets = (
        f"+3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in\n{joined}\nGND: U2.2/GND/power_in C1.2 U1.2/GND/power_in SW1.2"
    )
    project = SUPPLY + NO_SPREAD + '[part."SW1"]\ncontact = "normally open"\ncontact-resistance = "0 ohm"\n'
    return bench(f"R1 10k, R2 {series}, C1 1u, SW1 push, U1 QX7301, U2 QX3300", nets, project)


def test_button_with_series_resistor():
    board = button("1k", at_pull_up=True)
    assert board.measure("N", "delay", event="press", to="0.99 V").nominal == pytest.approx(1.20397e-3, rel=5e-6)
    assert board.measure("N", "delay", event="release", to="2.31 V").nominal == pytest.approx(13.2437e-3, rel=5e-6)
    between = replace(board.node("N"), net="A", joint="A")  # without a capacitor of its own it is no node
    assert board.measure(between, "initial_voltage", event="release").nominal == pytest.approx(0.3, rel=1e-6)


@pytest.mark.parametrize(("series", "low", "seconds"), [("4.7k", 1.0551, inf), ("3.3k", 0.818797, 6.63387e-3)])
def test_button_whose_divider_decides(series: str, low: float, seconds: float):
    board = button(series)
    assert board.measure("N", "final_voltage", event="press").nominal == pytest.approx(low, rel=1e-4)
    assert board.measure("N", "delay", event="press", to="0.99 V").nominal == pytest.approx(seconds, rel=5e-6)


@pytest.mark.parametrize(("leakage", "high"), [("0 A .. 0.98 uA", 5.44674), ("-1 uA .. 1 uA", inf)])
def test_leakage_of_the_pin(leakage: str, high: float):
    board = reset("", "1u", "1M")
    with_leak = reset(f'[pin."U1.7"]\nleakage = "{leakage}"\n', "1u", "1M")
    assert board.measure("NRST", "delay", event="power-up", to="2.31 V").nominal == pytest.approx(1.20397, rel=5e-6)
    found = with_leak.measure("NRST", "delay", event="power-up", to="2.31 V", given_only=True)
    assert found.high == pytest.approx(high, rel=5e-6)
    if high == inf:
        assert found.low == pytest.approx(0.770480, rel=5e-6)


def test_supply_that_sets_the_threshold_too():
    """Circuit 8."""
    board = reset("", "1u").project
    assert board.supplies["+3V3"].voltage is not None
    spread = bench(
        "R1 10k, C1 1u, U1 QX7301, U2 QX3300",
        """
        VS: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        NRST: R1.2 C1.1 U1.7/NRST/input
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
        """,
        '[supply."VS"]\nvoltage = "3.3 V +/- 10 %"\n' + NO_SPREAD,
    )
    ratio = spread.measure("NRST", "delay", event="power-up", to="50 % of VS", given_only=True)
    assert (ratio.low, ratio.high, ratio.proved) == (
        pytest.approx(6.93147e-3, rel=1e-6),
        pytest.approx(6.93147e-3, rel=1e-6),
        True,
    )
    fixed = spread.measure("NRST", "delay", event="power-up", to="1.65 V", given_only=True)
    assert (fixed.low, fixed.high, fixed.proved) == (
        pytest.approx(6.06136e-3, rel=1e-6),
        pytest.approx(8.10930e-3, rel=1e-6),
        True,
    )


def test_two_stages():
    """Circuit 10a: stages that load each other, and the last one a converter's input."""
    nets = """
        IN: J1.1 R1.1
        A: R1.2 R2.1 C1.1
        B: R2.2 C2.1 U1.1/AIN0/input
        GND: J1.2 C1.2 C2.2 U1.2/GND/power_in
        +3V3: U1.3/VDD/power_in
    """
    board = bench("R1 10k, R2 10k, C1 100n, C2 100n, J1 IN, U1 QX7301", nets, NO_SPREAD)
    assert board.measure("B", "settling_time", band=1 / 8192).nominal == pytest.approx(24.0038e-3, rel=5e-6)
    assert board.measure("A", "settling_time", band=1 / 8192).nominal == pytest.approx(22.7439e-3, rel=5e-6)


def test_power_peaks_at_matched_resistance():
    """Circuit 14, with a capacitor that makes it a network."""
    nets = """
        +5V: U2.1/VO/power_out R1.1
        N: R1.2 R2.1 C1.1
        GND: U2.2/GND/power_in R2.2 C1.2
    """
    project = '[supply."+5V"]\nvoltage = "5 V"\n[part."R1"]\ntolerance = "0 %"\n[part."R2"]\ntolerance = "50 %"\n'
    found = bench("R1 100, R2 100, C1 100n, U2 QX5000", nets, project).measure("R2", "power", given_only=True)
    assert (found.low, found.high) == (pytest.approx(55.556e-3, rel=1e-5), pytest.approx(62.5e-3, rel=1e-6))
