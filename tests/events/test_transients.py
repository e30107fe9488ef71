"""Voltages that a bridging capacitor lets go beyond every DC state."""

from math import exp

import numpy as np
import pytest

from rcrules.events import pose
from rcrules.measures import registry
from rcrules.problems import Bounds, solve_bounds
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'


def at_pin(board: Bench, key: str, **options: str) -> Bounds:
    ref, _, name = key.partition(".")
    pin = next(pin for pin in board.board.design.parts[ref].pins if name in (pin.name, pin.number))
    problem = pose(board.board, board.project, pin, registry()["pin_voltage"], options)
    found = solve_bounds([(problem, registry()["pin_voltage"], True)])[0]
    assert isinstance(found, Bounds)
    return found


def active_high(facts: str = "") -> Bench:
    """Circuit 3: 100 nF from 5 V, 10 kΩ to ground."""
    nets = """
        +5V: U2.1/VO/power_out C1.1 U1.3/VDD/power_in
        RST: C1.2 R1.1 U1.7/RST/input
        GND: U2.2/GND/power_in R1.2 U1.2/GND/power_in
    """
    project = f'[supply."+5V"]\nvoltage = "5 V"\n{facts}\n' + EXACT
    return bench("R1 10k, C1 100n, U1 QX7301, U2 QX5000", nets, project)


def test_a_supply_that_falls_pulls_the_pin_below_ground():
    assert at_pin(active_high(), "U1.RST").nominal == pytest.approx(5.0)
    assert at_pin(active_high(), "U1.RST", extreme="least").nominal == pytest.approx(-5.0)


def test_a_slow_supply_hardly_does():
    """The mirror of circuit 3a: ramps of 10 ms and RC = 1 ms leave 0.499977 V either way (worked out apart)."""
    slow = active_high('rise = "10 ms"\nfall = "10 ms"')
    assert at_pin(slow, "U1.RST").nominal == pytest.approx(0.499977, rel=1e-6)
    assert at_pin(slow, "U1.RST", extreme="least").nominal == pytest.approx(-0.499977, rel=1e-6)


def two_supplies(facts: str = "") -> Bench:
    """A node at 3.3 V behind 10 kΩ, and 100 nF from it to 5 V."""
    nets = """
        +5V: U2.1/VO/power_out C1.1
        +3V3: U3.1/VO/power_out R1.1 U1.3/VDD/power_in
        N: C1.2 R1.2 U1.7/IN/input
        GND: U2.2/GND/power_in U3.2/GND/power_in U1.2/GND/power_in
    """
    project = '[supply."+5V"]\nvoltage = "5 V"\n[supply."+3V3"]\nvoltage = "3.3 V"\n' + facts + EXACT
    return bench("R1 10k, C1 100n, U1 QX7301, U2 QX5000, U3 QX3300", nets, project)


def test_one_supply_may_switch_while_the_other_is_on():
    """5 V rises on top of 3.3 V: 8.3 V; it falls: 3.3 V - 5 V (charge is kept at a jump)."""
    assert at_pin(two_supplies(), "U1.IN").nominal == pytest.approx(8.3)
    assert at_pin(two_supplies(), "U1.IN", extreme="least").nominal == pytest.approx(-5.0)
    assert two_supplies().measure("R1", "applied_voltage").nominal == pytest.approx(5.0)  # 8.3 V against 3.3 V


def test_the_capacitor_itself_only_sees_differences_of_the_sources():
    assert two_supplies().measure("C1", "applied_voltage").nominal == pytest.approx(5.0)


def test_a_driver_couples_through_in_both_directions():
    """0 V .. 3 V through 1 µF onto a divider at 2.5 V, while the supply is on or off: 5.5 V and -3 V at the tap."""
    nets = """
        IN: J1.1 C1.1
        N: C1.2 R1.2 R2.1 U1.7/AIN0/input
        +5V: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        GND: J1.2 U2.2/GND/power_in R2.2 U1.2/GND/power_in
    """
    facts = '[supply."+5V"]\nvoltage = "5 V"\n[net."IN"]\nswing = "0 V .. 3 V"\n'
    board = bench("R1 10k, R2 10k, C1 1u, J1 IN, U1 QX7301, U2 QX5000", nets, facts + EXACT)
    assert at_pin(board, "U1.AIN0").nominal == pytest.approx(5.5)
    assert at_pin(board, "U1.AIN0", extreme="least").nominal == pytest.approx(-3.0)
    slow = bench(
        "R1 10k, R2 10k, C1 1u, J1 IN, U1 QX7301, U2 QX5000",
        nets,
        facts + 'edge = "5 ms"\n' + EXACT,
    )
    assert at_pin(slow, "U1.AIN0").nominal == pytest.approx(2.5 + 3.0 * (1 - exp(-1)), rel=1e-9)


def test_a_contact_couples_through():
    """A released button behind 100 nF: the node at ground through 100 kΩ jumps by what the pull-up lets it."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        KEY: R1.2 SW1.1 C1.1
        N: C1.2 R2.1 U1.7/IN/input
        GND: U2.2/GND/power_in SW1.2 R2.2 U1.2/GND/power_in
    """
    facts = '[supply."+3V3"]\nvoltage = "3.3 V"\n[part."SW1"]\ncontact-resistance = "0 ohm"\n'
    board = bench("R1 10k, R2 100k, C1 100n, SW1 push, U1 QX7301, U2 QX3300", nets, facts + EXACT)
    assert at_pin(board, "U1.IN", extreme="least").nominal == pytest.approx(-3.3, rel=1e-6)
    assert at_pin(board, "U1.IN").nominal == pytest.approx(3.3 * 100 / 110, rel=1e-6)


def test_steps_add_to_states():
    """Two supplies and a driver: every steady state, and every jump by capacitive division on top, one by one."""
    rng = np.random.default_rng(3)
    for _ in range(3):
        a, b, c = rng.uniform(1, 5, 3)
        facts = f'[supply."+5V"]\nvoltage = "{a:.4f} V"\n[supply."+3V3"]\nvoltage = "{b:.4f} V"\n'
        nets = """
            +5V: U2.1/VO/power_out C1.1 R3.1
            +3V3: U3.1/VO/power_out R1.1 U1.3/VDD/power_in
            IN: J1.1 C2.1
            N: C1.2 R1.2 C2.2 R3.2 U1.7/AIN0/input
            GND: U2.2/GND/power_in U3.2/GND/power_in U1.2/GND/power_in J1.2
        """
        board = bench(
            "R1 10k, R3 22k, C1 100n, C2 47n, J1 IN, U1 QX7301, U2 QX5000, U3 QX3300",
            nets,
            facts + f'[net."IN"]\nswing = "0 V .. {c:.4f} V"\n' + EXACT,
        )
        starts = [x * a * 10 / 32 + y * b * 22 / 32 for x in (0, 1) for y in (0, 1)]
        first, third = 100 / 147 * a, 47 / 147 * c
        reachable = [*starts, first + third, first, first + b * 22 / 32, *(start + third for start in starts)]
        assert at_pin(board, "U1.AIN0").nominal == pytest.approx(max(reachable), rel=2e-4)
