"""Crossings, exits, extremes and widths against dense sampling and against answers in closed form."""

import numpy as np
import pytest

from rcrules.engine import Drive, Shape, Signal, solve
from rcrules.engine._exponential import ExponentialSum
from tests.engine.networks import at_node, ramp, random_shape, random_values, step

approx = pytest.approx

CHARGING = Shape(1, 2, ((1, 0),), ((0, 2),))
"""Held terminal 1 through R, C to held terminal 2."""


def charging(offset: float, volts: float = 1.0, charged: float = 0.0) -> Signal:
    """1 kΩ, 1 mF: tau is 1 s."""
    modes = solve(CHARGING, np.array([[1e3]]), np.array([[1e-3]]))
    return modes.respond(step(CHARGING, [volts, 0.0]), np.array([[charged]])).observe(at_node(CHARGING, 0), offset)


def signal(start: float, amps: list[float], rates: list[float]) -> Signal:
    """start + sum amps (exp(-rates t) - 1) in one case."""
    found = ExponentialSum(
        start=np.array([start]),
        slope=np.zeros(1),
        amps=np.array(amps)[:, None],
        rates=np.array(rates)[:, None],
        ramps=None,
    )
    return Signal(starts=np.zeros((1, 1)), sums=(found,), lengths=(np.array([np.inf]),))


def limited(rest: float, amps: list[float], rates: list[float]) -> Signal:
    """rest + sum amps exp(-rates t) in one case."""
    return signal(rest + sum(amps), amps, rates)


@pytest.mark.parametrize(
    ("level", "wanted"),
    [(0.1, 0.105361), (0.5, 0.693147), (0.632121, 1.0), (0.9, 2.302585), (0.95, 2.995732), (0.99, 4.605170)],
)
def test_charging_reaches_a_fraction_after_its_logarithm(level, wanted):
    assert charging(level).first_crossing(1.0) == approx([wanted], abs=2e-6)


def test_the_final_value_itself_is_never_reached():
    assert charging(1.0).first_crossing(1.0) == np.inf
    assert charging(0.0, 0.0, 1.0).first_crossing(-1.0) == np.inf


def test_a_level_above_the_final_value_is_never_reached():
    assert charging(1.0 + 1e-12).first_crossing(1.0) == np.inf


def test_a_level_close_below_the_final_value_is_reached_late():
    assert charging(1.0 - 1e-9).first_crossing(1.0) == approx([9.0 * np.log(10.0)], rel=1e-7)


def test_what_holds_at_once_is_crossed_at_once():
    assert charging(-0.5).first_crossing(1.0) == 0.0
    assert charging(0.5).first_crossing(-1.0) == 0.0


def test_a_touch_at_the_start_counts_only_when_the_slope_goes_that_way():
    assert charging(0.0).first_crossing(1.0) == 0.0
    assert charging(0.0).first_crossing(-1.0) == np.inf
    assert charging(0.0, -1.0).first_crossing(1.0) == np.inf


def test_a_level_at_rest_is_met_from_both_sides():
    assert charging(0.0, 0.0).first_crossing(1.0) == 0.0
    assert charging(0.0, 0.0).first_crossing(-1.0) == 0.0


def test_direction_may_differ_between_cases():
    modes = solve(CHARGING, np.full((2, 1), 1e3), np.full((2, 1), 1e-3))
    response = modes.respond(step(CHARGING, [1.0, 0.0], 2), np.array([[0.0], [3.0]]))
    found = response.observe(at_node(CHARGING, 0), np.array([0.5, 2.0])).first_crossing(np.array([1.0, -1.0]))
    assert found == approx([np.log(2.0), np.log(2.0)], rel=1e-14)


def test_a_ratiometric_level_under_a_ramp_skips_the_start():
    """R 10 kΩ, C 100 nF, supply 0 to 3.3 V in 10 ms: 30, 70 % of the momentary supply (hand: 1 - e^-x = (1 - p) x)."""
    modes = solve(CHARGING, np.array([[1e4]]), np.array([[1e-7]]))
    response = modes.respond(ramp(CHARGING, [3.3, 0.0], 10e-3), np.zeros((1, 1)))
    for share, wanted in ((0.3, 0.761434e-3), (0.7, 3.19706e-3)):
        found = response.observe(np.array([1.0, -share, 0.0]), 0.0).first_crossing(1.0)
        assert found == approx([wanted], rel=2e-6)
        x = found / 1e-3
        assert 1.0 - np.exp(-x) == approx((1.0 - share) * x, rel=1e-12)


def test_a_response_that_crosses_three_times():
    """(1 - y/0.8)(1 - y/0.5)(1 - y/0.2) with y = e^-t: zeros at ln 1.25, ln 2, ln 5."""
    found = limited(1.0, [-8.25, 18.75, -12.5], [1.0, 2.0, 3.0])
    assert found.first_crossing(1.0) == approx([np.log(1.25)], rel=1e-13)
    assert found.width() == np.inf
    upside_down = limited(-1.0, [8.25, -18.75, 12.5], [1.0, 2.0, 3.0])
    assert upside_down.first_crossing(-1.0) == approx([np.log(1.25)], rel=1e-13)
    assert upside_down.width() == approx([np.log(1.25) + np.log(5.0) - np.log(2.0)], rel=1e-12)
    assert found.last_exit(0.0, 2.0) == approx([np.log(5.0)], rel=1e-12)
    assert found.extremes() == (approx([-1.0], rel=1e-13), approx([1.0], rel=1e-13))


def test_extremes_inside_are_found():
    """y - 2 y² with y = e^-t: starts at -1, peaks at y = 1/4 with 1/8, ends at 0."""
    found = limited(0.0, [1.0, -2.0], [1.0, 2.0])
    assert found.extremes() == (approx([-1.0], rel=1e-14), approx([0.125], rel=1e-14))
    assert found.at(np.array([np.log(4.0)])) == approx([0.125], rel=1e-14)


def test_a_double_zero_is_touched_without_harm():
    """(1 - 2 e^-t)² touches 0 at ln 2 from above, its negative from below."""
    squared = limited(1.0, [-4.0, 4.0], [1.0, 2.0])
    assert squared.extremes()[0] == approx([0.0], abs=1e-12)
    assert squared.first_crossing(1.0) == 0.0
    just = limited(1.0 + 1e-9, [-4.0, 4.0], [1.0, 2.0])
    assert just.first_crossing(-1.0) == np.inf
    under = limited(1.0 - 1e-9, [-4.0, 4.0], [1.0, 2.0])
    assert under.first_crossing(-1.0) == approx([np.log(2.0)], abs=1e-4)
    assert under.width() == np.inf


def test_last_exit_is_when_it_settles_for_good():
    """1/8192 of the step is left after 13 ln 2 time constants; y - 2 y² is below 0.1 from y = (1 - √0.2)/4 on."""
    assert charging(1.0).last_exit(-1.0 / 8192.0, 1.0 / 8192.0) == approx([13.0 * np.log(2.0)], rel=1e-12)
    assert charging(0.0).last_exit(-1.0, 2.0) == 0.0
    assert charging(0.0).last_exit(-1.0, 0.5) == np.inf
    overshoot = limited(0.0, [1.0, -2.0], [1.0, 2.0])
    assert overshoot.last_exit(-0.1, 0.1) == approx([np.log(4.0 / (1.0 - np.sqrt(0.2)))], rel=1e-12)


def test_last_exit_over_a_jump_is_the_jump():
    """A source that returns to 0 at 1 s: out of the band until then when nothing stores."""
    shape = Shape(1, 1, ((1, 0),), ())
    modes = solve(shape, np.array([[1e3]]), np.zeros((1, 0)))
    drive = Drive(
        starts=np.array([[0.0, 1.0]]),
        levels=np.array([[[1.0], [0.0]]]),
        slopes=np.zeros((1, 2, 1)),
        amps=np.zeros((1, 1)),
    )
    found = modes.respond(drive, np.zeros((1, 0))).observe(np.array([1.0, 0.0]), 0.0)
    assert found.last_exit(-0.5, 0.5) == [1.0]
    assert found.width() == np.inf
    assert modes.respond(drive, np.zeros((1, 0))).observe(np.array([1.0, 0.0]), 0.5).width() == [1.0]


def test_a_pulse_through_a_capacitor_has_its_peak_and_width():
    """C 100 nF, R 10 kΩ, supply 5 V in 1 ms: peak 3.16060 V at the end of the ramp, above 1.5 V for 1.38862 ms.

    Peak by hand: 5 V · RC/T (1 - e^(-T/RC)). With T = 10 ms the peak is 0.499977 V and 1.5 V is never reached.
    """
    shape = Shape(1, 2, ((0, 2),), ((1, 0),))
    modes = solve(shape, np.array([[1e4]]), np.array([[1e-7]]))
    fast, slow = (
        modes.respond(ramp(shape, [5.0, 0.0], seconds), np.zeros((1, 1))).observe(at_node(shape, 0), 1.5)
        for seconds in (1e-3, 10e-3)
    )
    assert fast.extremes()[1] + 1.5 == approx([5.0 * (1.0 - np.exp(-1.0))], rel=1e-12)
    assert fast.width() == approx([1.38862e-3], rel=3e-6)
    assert slow.extremes()[1] + 1.5 == approx([0.499977], abs=5e-7)
    assert slow.width() == 0.0
    assert slow.first_crossing(1.0) == np.inf


def test_random_sums_against_dense_sampling():
    """Random signs and rates: first crossing both ways, last exit, extremes and width agree with 40 000 samples."""
    rng = np.random.default_rng(11)
    grid = np.concatenate([[0.0], np.geomspace(1e-4, 60.0, 40_000)])
    for _ in range(300):
        n = int(rng.integers(2, 6))
        rates = np.sort(10.0 ** rng.uniform(-0.3, 1.5, n))
        amps = rng.normal(size=n) * 10.0 ** rng.uniform(0.0, 1.0)
        rest = float(rng.normal())
        found = limited(rest, list(amps), list(rates))
        f = rest + (amps[:, None] * np.exp(-rates[:, None] * grid)).sum(axis=0)
        _compare_crossings(found, grid, f)
        band = 0.3 * abs(rest) + 0.05
        outside = np.flatnonzero(np.abs(f - rest) > band)
        settled = found.last_exit(rest - band, rest + band)[0]
        assert settled == approx(grid[outside[-1]] if len(outside) else 0.0, rel=1e-3, abs=2e-4)
        assert found.extremes()[0][0] == approx(min(f.min(), rest), rel=1e-5, abs=1e-5)
        assert found.extremes()[1][0] == approx(max(f.max(), rest), rel=1e-5, abs=1e-5)


def _compare_crossings(found: Signal, grid: np.ndarray, f: np.ndarray) -> None:
    """The first sample beyond zero, unless the samples only just touch it."""
    if (
        np.abs(f[np.r_[False, f[1:-1] * (np.sign(np.diff(f)[:-1]) != np.sign(np.diff(f)[1:])) != 0.0, False]]).min(
            initial=1.0
        )
        < 1e-5
    ):
        return
    for direction in (1.0, -1.0):
        beyond = np.flatnonzero(direction * f >= 0.0)
        wanted = grid[beyond[0]] if len(beyond) else np.inf
        assert found.first_crossing(direction)[0] == approx(wanted, rel=1e-3, abs=2e-4)
        t = found.first_crossing(direction)
        if 0.0 < t[0] < np.inf:
            assert found.at(t) == approx([0.0], abs=1e-13 * (1.0 + np.abs(found.sums[0].amps).sum()))
    changes = np.flatnonzero(np.diff(np.sign(f)) != 0.0)
    if f[-1] < 0.0:
        edges = np.r_[0.0, 0.5 * (grid[changes] + grid[changes + 1]), grid[-1]]
        spans = np.diff(edges)
        middle = 0.5 * (edges[1:] + edges[:-1])
        assert found.width()[0] == approx(spans[np.interp(middle, grid, f) > 0.0].sum(), rel=2e-3, abs=1e-3)


def test_crossings_of_random_networks_lie_on_the_level_and_none_is_missed():
    rng = np.random.default_rng(12)
    for _ in range(60):
        shape = random_shape(rng, int(rng.integers(1, 7)))
        ohms, farads = random_values(rng, shape, 10, 6.0)
        charged = rng.uniform(-1.0, 1.0, (10, len(shape.capacitors)))
        response = solve(shape, ohms, farads).respond(step(shape, rng.uniform(-1.0, 1.0, 2), 10), charged)
        seen = response.observe(at_node(shape, int(rng.integers(shape.free))), rng.uniform(-0.5, 0.5, 10))
        first = seen.first_crossing(1.0)
        there = np.isfinite(first) & (first > 0.0)
        assert np.all(np.abs(seen.at(np.where(there, first, 0.0))[there]) < 1e-9)
        until = np.where(np.isfinite(first), first, 1e3)
        for share in 10.0 ** -np.linspace(1e-6, 14.0, 300):
            assert np.all((seen.at(until * share) <= 1e-12) | (first == 0.0))


def test_a_crossing_across_fifteen_decades_of_rates():
    """0.5 - e^(-t/1e6) - 0.001 e^(-1e9 t): the slow mode decides."""
    assert limited(0.5, [-1.0, -1e-3], [1e-6, 1e9]).first_crossing(1.0) == approx([1e6 * np.log(2.0)], rel=1e-14)


def test_energy_of_a_discharge_is_half_r_c_v_squared():
    assert charging(0.0, 0.0, 3.0).energy() == approx([0.5 * 9.0], rel=1e-14)
    assert charging(0.0).energy() == np.inf


def test_energy_over_a_ramp_is_the_integral_of_its_square():
    """Voltage on R, ramp of T, RC 1 s: (1/T)² [T - 2 (1-e) + (1-e²)/2], and the tail (1-e)²/2 of it, e = exp(-T).

    With T = 1 s, RC = 1 s, and with T = 1 µs, where the closed form of the sum would lose all digits.
    """
    modes = solve(CHARGING, np.array([[1e3]]), np.array([[1e-3]]))
    for seconds, wanted in ((1.0, None), (1e-6, 0.5)):
        drop = modes.respond(ramp(CHARGING, [1.0, 0.0], seconds), np.zeros((1, 1))).observe([-1.0, 1.0, 0.0], 0.0)
        e = np.exp(-seconds)
        hand = (seconds - 2.0 * (1.0 - e) + 0.5 * (1.0 - e * e) + 0.5 * (1.0 - e) ** 2) / seconds**2
        assert drop.energy() == approx([hand if wanted is None else wanted], rel=1e-12 if wanted is None else 1e-6)


def test_a_ramp_between_held_terminals_alone_is_crossed():
    """0 to 4 V in 2 s passes 1 V at 0.5 s; no free node is needed."""
    shape = Shape(0, 2, (), ())
    modes = solve(shape, np.zeros((1, 0)), np.zeros((1, 0)))
    found = modes.respond(ramp(shape, [4.0, 0.0], 2.0), np.zeros((1, 0))).observe(np.array([1.0, -1.0]), 1.0)
    assert found.first_crossing(1.0) == approx([0.5], rel=1e-14)


def test_a_voltage_that_equals_the_level_but_for_rounding_is_at_the_level():
    """0.1 + 0.2 is not 0.3 in binary: a divider held there has still reached 0.3 V."""
    shape = Shape(0, 2, (), ())
    modes = solve(shape, np.zeros((1, 0)), np.zeros((1, 0)))
    found = modes.respond(step(shape, [0.1, 0.2]), np.zeros((1, 0))).observe(np.array([1.0, 1.0]), 0.3)
    assert list(found.initial()) == [0.0]
    assert list(found.first_crossing(1.0)) == [0.0]
    assert list(found.first_crossing(-1.0)) == [0.0]


def test_widths_of_cases_with_different_numbers_of_crossings():
    """0.8 from 1 to 0.5 crosses once, 0.8 from 1 to 0.9 never; both without a warning."""
    found = ExponentialSum(
        start=np.array([0.2, 0.2]),
        slope=np.zeros(2),
        amps=np.array([[0.5, 0.1]]),
        rates=np.ones((1, 2)),
        ramps=None,
    )
    both = Signal(starts=np.zeros((1, 2)), sums=(found,), lengths=(np.full(2, np.inf),))
    assert both.width() == approx([np.log(0.5 / 0.3), np.inf])


def test_cases_are_taken_as_often_as_they_are_named() -> None:
    """1 kΩ and 2 kΩ at 1 mF from 1 V, each at its own instants."""
    modes = solve(CHARGING, np.array([[1e3], [2e3]]), np.array([[1e-3], [1e-3]]))
    drive = step(CHARGING, [1.0, 0.0])
    twice = {name: np.repeat(getattr(drive, name), 2, axis=0) for name in ("starts", "levels", "slopes", "amps")}
    drive = Drive(**twice)
    whole = modes.respond(drive, np.zeros((2, 1))).observe(at_node(CHARGING, 0), 0.0)
    found = whole.take(np.array([1, 0, 1])).at(np.array([1.0, 1.0, 2.0]))
    assert found == approx([1 - np.exp(-0.5), 1 - np.exp(-1.0), 1 - np.exp(-1.0)])
