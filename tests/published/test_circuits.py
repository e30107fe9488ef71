"""Circuits that a shortcut gets wrong; answers worked out apart, in closed form and by a matrix exponential."""

from math import inf, log

import pytest

from rcrules.engine import Shape
from rcrules.measures import registry
from rcrules.problems import Bounds, LevelForm, Problem, column, constant, solve_bounds
from tests.published.circuits import changed, circuit, of, parameter, ramps, steps, volts


def bounds(problem: Problem, measure: str) -> Bounds:
    found = solve_bounds([(problem, registry()[measure])])[0]
    assert isinstance(found, Bounds)
    return found


def delay(problem: Problem, to: LevelForm, **changes: object) -> Bounds:
    return bounds(changed(problem, levels=(("to", to),), **changes), "delay")


def divider(r: float = 0.0, c: float = 0.0) -> Problem:
    """Circuit 1: 12 V over 30 kΩ onto 10 kΩ with 100 nF."""
    waves = {"IN": steps(constant(12.0))}
    return circuit("N", "IN G", "R1 IN N, R2 N G, C1 N G", waves, R1=(30e3, r), R2=(10e3, r), C1=(100e-9, c))


def test_divider_with_capacitor_reaches_a_level():
    assert delay(divider(), volts(2.0)).nominal == pytest.approx(823.959e-6, rel=1e-6)


def test_divider_bounds_over_tolerances_are_proved():
    found = delay(divider(0.01, 0.10), volts(2.0))
    assert (found.low, found.high) == (pytest.approx(725.360e-6, rel=1e-6), pytest.approx(927.014e-6, rel=1e-6))
    assert found.proved


def test_divider_may_never_reach_a_level_near_its_end():
    found = delay(divider(0.05), volts(2.9))
    assert found.nominal == pytest.approx(2.55090e-3, rel=1e-5)
    assert found.high == inf


def test_divider_corner():
    problem = changed(divider(0.01, 0.1), options=(("source", 1.0), ("passes", "low")))
    found = bounds(problem, "corner_frequency")
    assert found.nominal == pytest.approx(212.207, rel=3e-6)
    assert found.proved


def ramped(seconds: float, **changes: object) -> Problem:
    """Circuit 2: 10 kΩ from a supply that ramps to 3.3 V, 100 nF to ground."""
    problem = circuit("N", "S G", "R1 S N, C1 N G", {"S": ramps(constant(3.3), seconds)}, R1=(10e3, 0), C1=(100e-9, 0))
    return changed(problem, **changes)


@pytest.mark.parametrize(("level", "seconds"), [(0.99, 3.98134e-3), (2.31, 7.99966e-3)])
def test_ramp_to_a_fixed_level(level: float, seconds: float):
    assert delay(ramped(10e-3), volts(level)).nominal == pytest.approx(seconds, rel=1e-6)


@pytest.mark.parametrize(("level", "seconds"), [(0.99, -5.10957e-3), (2.31, -1.09124e-3)])
def test_delay_from_a_valid_supply_may_be_negative(level: float, seconds: float):
    assert delay(ramped(10e-3), volts(level), reference=(1, volts(3.0))).nominal == pytest.approx(seconds, abs=6e-9)


@pytest.mark.parametrize(("part", "seconds"), [(0.3, 0.761434e-3), (0.7, 3.19706e-3)])
def test_ramp_to_a_level_that_follows_the_supply(part: float, seconds: float):
    assert delay(ramped(10e-3), of(1, part)).nominal == pytest.approx(seconds, rel=2e-6)


def active_high(wave: object) -> Problem:
    """Circuit 3: 100 nF from 5 V, 10 kΩ to ground."""
    return circuit("N", "S G", "C1 S N, R1 N G", {"S": wave}, C1=(100e-9, 0), R1=(10e3, 0))  # type: ignore[dict-item]


def test_active_high_reset_holds_for_a_pulse():
    problem = changed(active_high(steps(constant(5.0))), levels=(("level", volts(1.5)),), options=(("side", "above"),))
    assert bounds(problem, "pulse_width").nominal == pytest.approx(1.20397e-3, rel=5e-6)


def test_slow_supply_gives_no_reset_pulse_at_all():
    problem = changed(
        active_high(ramps(constant(5.0), 10e-3)), levels=(("level", volts(1.5)),), options=(("side", "above"),)
    )
    assert bounds(problem, "pulse_width").nominal == 0.0
    assert bounds(problem, "peak_voltage").nominal == pytest.approx(0.499977, rel=1e-6)
    fast = changed(problem, waveforms=(ramps(constant(5.0), 1e-3), steps(())))
    assert bounds(fast, "pulse_width").nominal == pytest.approx(1.38862e-3, rel=5e-6)
    assert bounds(fast, "peak_voltage").nominal == pytest.approx(3.16060, rel=1e-5)


def button(*, pressed: bool) -> Problem:
    """Circuit 6: 10 kΩ from 3.3 V to A, 1 kΩ to N, 1 µF at N, a contact from A to ground."""
    numbers = {"R1": (10e3, 0.0), "R2": (1e3, 0.0), "C1": (1e-6, 0.0)}
    problem = circuit("N A", "S G", "R1 S A, R2 A N, C1 N G", {"S": steps(constant(3.3), constant(3.3))}, **numbers)
    open_, ohms = problem.structure.shape, problem.structure.ohms
    closed = Shape(2, 2, (*open_.resistors, (1, 3)), open_.capacitors)
    shut = (*ohms, constant(1e-9))
    after, before = ((closed, shut), (open_, ohms)) if pressed else ((open_, ohms), (closed, shut))
    return changed(problem, shape=after[0], ohms=after[1], earlier=before, empty=False, rising=not pressed)


def test_button_pressed_and_released():
    assert delay(button(pressed=True), volts(0.99)).nominal == pytest.approx(1.20397e-3, rel=5e-6)
    assert delay(button(pressed=False), volts(2.31)).nominal == pytest.approx(13.2437e-3, rel=5e-6)
    assert bounds(changed(button(pressed=False), at=1), "initial_voltage").nominal == pytest.approx(0.3, rel=1e-9)


@pytest.mark.parametrize(("ohms", "low", "seconds"), [(4.7e3, 1.0551, inf), (3.3e3, 0.818797, 6.63387e-3)])
def test_pressed_level_may_stay_too_high(ohms: float, low: float, seconds: float):
    """Circuit 6a, 6b: the divider of pull-up and series resistor; its low level 3.3 V · R2/(R1 + R2)."""
    numbers = {"R1": (10e3, 0.0), "R2": (ohms, 0.0), "C1": (1e-6, 0.0)}
    problem = circuit("N", "S G", "R1 S N, R2 N G, C1 N G", {"S": steps(constant(3.3), constant(3.3))}, **numbers)
    before = Shape(1, 2, problem.structure.shape.resistors[:1], problem.structure.shape.capacitors)
    pressed = changed(problem, earlier=(before, problem.structure.ohms[:1]), empty=False, rising=False)
    assert bounds(pressed, "final_voltage").nominal == pytest.approx(low, rel=1e-4)
    assert delay(pressed, volts(0.99)).nominal == pytest.approx(seconds, rel=5e-6)


@pytest.mark.parametrize(("amps", "seconds"), [(0.0, 1.20397), (0.98e-6, 5.44674), (1e-6, inf), (-1e-6, 0.770480)])
def test_leakage_of_the_pin_decides_with_a_large_resistor(amps: float, seconds: float):
    """Circuit 7: 1 MΩ, 1 µF, 3.3 V, to 2.31 V."""
    problem = circuit("N", "S G", "R1 S N, C1 N G", {"S": steps(constant(3.3))}, R1=(1e6, 0), C1=(1e-6, 0))
    assert delay(problem, volts(2.31), amps=((0, constant(amps)),)).nominal == pytest.approx(seconds, rel=5e-6)


def supplied() -> Problem:
    """Circuit 8: 10 kΩ, 1 µF from 3.3 V ±10 %, one column wherever it acts."""
    return circuit("N", "S G", "R1 S N, C1 N G", {"S": steps(column(2))}, R1=(10e3, 0), C1=(1e-6, 0), VS=(3.3, 0.1))


def test_ratiometric_level_cancels_the_supply():
    found = delay(supplied(), of(1, 0.5))
    assert (found.low, found.high) == (pytest.approx(0.01 * log(2), rel=1e-9), pytest.approx(0.01 * log(2), rel=1e-9))
    assert found.proved


def test_fixed_level_sees_the_supply():
    found = delay(supplied(), volts(1.65))
    assert (found.low, found.high) == (pytest.approx(6.06136e-3, rel=1e-6), pytest.approx(8.10930e-3, rel=1e-6))
    assert found.proved


def test_node_between_resistors_jumps():
    """Circuit 10: the node before the second resistor jumps to half the step."""
    numbers = {"R1": (10e3, 0.0), "R2": (10e3, 0.0), "C1": (100e-9, 0.0)}
    problem = circuit("A B", "IN G", "R1 IN A, R2 A B, C1 B G", {"IN": steps(constant(3.3))}, **numbers)
    assert bounds(problem, "initial_voltage").nominal == pytest.approx(1.65, rel=1e-12)
    assert delay(problem, volts(2.31)).nominal == pytest.approx(1.02165e-3, rel=5e-6)


def two_stages(at: int, share: float = 0.0) -> Problem:
    """Circuit 10a: two equal stages that load each other."""
    numbers = {"R1": (10e3, share), "R2": (10e3, share), "C1": (100e-9, share), "C2": (100e-9, share)}
    branches = "R1 IN A, R2 A B, C1 A G, C2 B G"
    return changed(circuit("A B", "IN G", branches, {"IN": steps(constant(3.3))}, **numbers), at=at)


@pytest.mark.parametrize(("at", "half", "settled"), [(0, 1.05963e-3, 22.7439e-3), (1, 2.22492e-3, 24.0038e-3)])
def test_two_stages_load_each_other(at: int, half: float, settled: float):
    problem = two_stages(at)
    assert delay(problem, LevelForm(kind="final", fraction=constant(0.5))).nominal == pytest.approx(half, rel=5e-6)
    banded = changed(problem, options=(("band", 1 / 8192),))
    assert bounds(banded, "settling_time").nominal == pytest.approx(settled, rel=5e-6)
    at_end = changed(problem, options=(("time", settled),))
    assert bounds(at_end, "residual").nominal == pytest.approx(1 / 8192, rel=1e-4)


def test_far_end_of_a_ladder_is_proved():
    assert delay(two_stages(1, 0.1), LevelForm(kind="final", fraction=constant(0.5))).proved


def test_power_peaks_inside_the_box():
    """Circuit 14: 5 V, 100 Ω, load 50 .. 150 Ω."""
    problem = circuit("N", "S G", "R1 S N, R2 N G", {"S": steps(constant(5.0))}, R1=(100.0, 0.0), R2=(100.0, 0.5))
    problem = changed(problem, states=((constant(5.0), ()),), element=1)
    found = bounds(problem, "power")
    assert (found.low, found.high) == (pytest.approx(55.556e-3, rel=1e-5), pytest.approx(62.5e-3, rel=1e-9))


def test_parameter_helper_keeps_nominal_in_the_middle():
    assert parameter("R", 10.0, 0.1).low == 9.0
