"""Edges, gains and noise of nodes, against closed forms."""

from math import hypot, inf, log, sqrt

import numpy as np
import pytest

from rcrules.measures import registry
from rcrules.problems import Bounds, LevelForm, Problem, column, solve_bounds
from tests.published.circuits import changed, circuit, of, steps, volts


def bounds(problem: Problem, measure: str) -> Bounds:
    found = solve_bounds([(problem, registry()[measure])])[0]
    assert isinstance(found, Bounds)
    return found


def charging(share: float = 0.1, near: LevelForm | None = None, far: LevelForm | None = None) -> Problem:
    """1 kΩ from 3.3 V, 100 pF to ground, with thresholds 0.8 V and 2 V."""
    numbers = {"R1": (1e3, share), "C1": (100e-12, share), "VS": (3.3, share)}
    problem = circuit("N", "S G", "R1 S N, C1 N G", {"S": steps(column(2))}, **numbers)
    return changed(problem, levels=(("near", near or volts(0.8)), ("far", far or volts(2.0))))


def slow(tau: float, supply: float, low: float, high: float) -> float:
    return tau * log((supply - low) / (supply - high)) / (high - low)


def test_edge_slowness_is_time_per_volt_between_the_thresholds():
    found = bounds(charging(), "edge_slowness")
    assert found.nominal == pytest.approx(slow(1e-7, 3.3, 0.8, 2.0), rel=1e-12)
    assert found.low == pytest.approx(slow(0.81e-7, 3.63, 0.8, 2.0), rel=1e-12)
    assert found.high == pytest.approx(slow(1.21e-7, 2.97, 0.8, 2.0), rel=1e-12)
    assert found.proved


def test_thresholds_may_be_parts_of_the_supply():
    found = bounds(charging(near=of(1, 0.3), far=of(1, 0.7)), "edge_slowness")
    assert found.nominal == pytest.approx(1e-7 * log(7 / 3) / (0.4 * 3.3), rel=1e-12)
    assert found.high == pytest.approx(1.21e-7 * log(7 / 3) / (0.4 * 2.97), rel=1e-12)
    assert found.proved


def test_an_edge_that_ends_between_the_thresholds_is_endless():
    assert bounds(charging(far=volts(3.2)), "edge_slowness").high == inf


def test_a_falling_edge_is_as_slow_as_it_is_long():
    problem = charging(near=volts(2.0), far=volts(0.8))
    problem = changed(problem, waveforms=(steps((), column(2)), steps(())), empty=False, rising=False)
    assert bounds(problem, "edge_slowness").nominal == pytest.approx(1e-7 * log(2.0 / 0.8) / 1.2, rel=1e-12)


def divider(frequency: float, branches: str = "R1 S N, R2 N G, C1 N G") -> Problem:
    numbers = {name: (100e-9, 0.1) if name[0] == "C" else (3e3, 0.1) for name in ("R1", "R2", "C1", "C2")}
    used = {name: number for name, number in numbers.items() if name in branches}
    return changed(circuit("N", "S G", branches, {}, **used), options=(("frequency", frequency), ("source", 1.0)))


def test_gain_at_zero_frequency_is_that_of_the_divider():
    found = bounds(divider(0.0), "gain")
    assert (found.low, found.nominal, found.high) == pytest.approx((2.7 / 6, 0.5, 3.3 / 6), rel=1e-12)
    assert found.proved


def test_gain_falls_with_the_frequency():
    found = bounds(divider(1e3), "gain")
    w = 2 * np.pi * 1e3
    assert found.nominal == pytest.approx((1 / 3e3) / hypot(2 / 3e3, w * 100e-9), rel=1e-12)
    assert found.low == pytest.approx((1 / 3.3e3) / hypot(1 / 3.3e3 + 1 / 2.7e3, w * 110e-9), rel=1e-12)
    assert found.proved


def test_gain_through_a_capacitor():
    found = bounds(divider(1e3, "C1 S N, R1 N G"), "gain")
    x = 2 * np.pi * 1e3 * 100e-9 * 3e3
    assert found.nominal == pytest.approx(x / hypot(1, x), rel=1e-12)
    assert found.proved


def test_a_compensated_divider_is_searched():
    """Equal time constants: the gain does not depend on the frequency."""
    problem = divider(1e3, "R1 S N, R2 N G, C1 S N, C2 N G")
    found = bounds(problem, "gain")
    assert found.nominal == pytest.approx(0.5, rel=1e-12)
    assert not found.proved


def noisy(branches: str, free: str = "N", at: int = 0, **numbers: tuple[float, float]) -> Problem:
    problem = circuit(free, "S G", branches, {}, **numbers, T=(300.0, 0.05))
    return changed(problem, at=at, options=(("kelvin", float(len(numbers))),))


def test_noise_of_one_capacitor_is_kt_over_c_whatever_the_resistance():
    found = bounds(noisy("R1 S N, C1 N G", R1=(1e6, 0.5), C1=(1e-12, 0.1)), "thermal_noise")
    assert found.nominal == pytest.approx(sqrt(1.380649e-23 * 300 / 1e-12), rel=1e-12)
    assert found.high == pytest.approx(sqrt(1.380649e-23 * 315 / 0.9e-12), rel=1e-12)
    assert found.proved


def test_noise_of_joined_capacitors_is_that_of_the_inverse_matrix():
    numbers = {"R1": (1e3, 0.0), "C1": (1e-12, 0.0), "C2": (2e-12, 0.0), "C3": (4e-12, 0.0)}
    found = bounds(noisy("R1 S A, R1 A B, C1 A G, C2 A B, C3 B G", "A B", 1, **numbers), "thermal_noise")
    matrix = np.array([[3e-12, -2e-12], [-2e-12, 6e-12]])
    assert found.nominal == pytest.approx(sqrt(1.380649e-23 * 300 * np.linalg.inv(matrix)[1, 1]), rel=1e-12)


def test_noise_of_a_node_without_capacitance_is_unlimited():
    found = bounds(noisy("R1 S A, R2 A B, C1 B G", "A B", 0, R1=(1e3, 0), R2=(1e3, 0), C1=(1e-9, 0)), "thermal_noise")
    assert found.nominal == inf
