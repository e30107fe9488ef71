"""Networks with diodes against a stiff integrator, against answers in closed form, and in the state they must be in."""

from dataclasses import replace
from math import exp, log

import numpy as np
import pytest

from rcrules.engine import Array, Bounds, Shape
from rcrules.measures import registry
from rcrules.problems import (
    Failure,
    Junction,
    LevelForm,
    Parameter,
    Problem,
    Structure,
    Waveform,
    column,
    constant,
    solve_bounds,
    solved,
    steady_states,
)
from tests.problems.stiff import CASE, Stiff, numbers

approx = pytest.approx


def still(volts: float) -> Waveform:
    return steps(volts, volts)


def steps(before: float, after: float) -> Waveform:
    return Waveform(before=constant(before), points=(((), constant(after)),))


def through(before: float, *points: tuple[float, float]) -> Waveform:
    forms = [(constant(time) if time else (), constant(volts)) for time, volts in points]
    return Waveform(before=constant(before), points=tuple(forms))


def diode(anode: int, cathode: int, drop: float = 0.6, ohms: float = 10.0, breakdown: float | None = None) -> Junction:
    found = Junction(anode=anode, cathode=cathode, drop=constant(drop), ohms=constant(ohms), name="D1")
    return replace(found, breakdown=breakdown)


def one_node(diodes: tuple[Junction, ...], waves: tuple[Waveform, ...], ohms: float = 10e3) -> Structure:
    """Node 0 with a resistor to terminal 1 and 100 nF to terminal 2, which is 0 V."""
    waves = (waves[0], still(0.0), *waves[1:])
    shape = Shape(1, len(waves), ((0, 1),), ((0, 2),))
    structure = Structure(shape=shape, ohms=(constant(ohms),), farads=(constant(100e-9),), waveforms=waves)
    return replace(structure, diodes=diodes)


def time(structure: Structure, level: float, direction: float) -> float:
    weights = np.eye(structure.shape.free + structure.shape.held)[[0]]
    return float(solved(structure, CASE).watch(weights, np.array([level])).first_crossing(direction)[0])


def volts(structure: Structure, terminal: int, t: float) -> float:
    weights = np.eye(structure.shape.free + structure.shape.held)[[terminal]]
    return float(solved(structure, CASE).watch(weights, np.zeros(1)).at(np.array([t]))[0])


def test_a_reset_discharges_through_its_diode_when_the_supply_falls():
    """3.3 V falls to 0 at once: through 10 Ω and 0.6 V beside 10 kΩ down to 0.6 V, then through 10 kΩ alone."""
    structure = one_node((diode(0, 1),), (steps(3.3, 0.0),))
    both = 1.0 / (1.0 / 10.0 + 1.0 / 10e3)
    rest = 0.6 / 10.0 * both
    opens = 100e-9 * both * log((3.3 - rest) / (0.6 - rest))
    assert time(structure, 1.0, -1.0) == approx(100e-9 * both * log((3.3 - rest) / (1.0 - rest)), rel=1e-10)
    assert time(structure, 0.1, -1.0) == approx(opens + 1e-3 * log(6.0), rel=1e-10)


def test_a_clamp_holds_a_node_at_its_drop_above_the_rail():
    """9 V through 10 kΩ, 10 Ω and 0.6 V into 3.3 V: the charge of a lone RC up to 3.9 V, then towards the divider."""
    structure = one_node((diode(0, 3),), (steps(0.0, 9.0), still(3.3)))
    starts = 1e-3 * log(9.0 / (9.0 - 3.9))
    end = 3.9 + (9.0 - 3.9) * 10.0 / 10010.0
    tau = 100e-9 * 10.0 * 10e3 / 10010.0
    level = 3.9 + 0.5 * (end - 3.9)
    assert time(structure, 3.8, 1.0) == approx(1e-3 * log(9.0 / 5.2), rel=1e-10)
    assert time(structure, level, 1.0) == approx(starts + tau * log(2.0), rel=1e-10)
    assert solved(structure, CASE).signal.final() == approx([end], rel=1e-12)


def test_a_half_wave_charges_through_the_diode_and_discharges_without_it():
    """5 V for 1 ms through 0.6 V and 100 Ω, beside it 10 kΩ; then nothing but 10 kΩ."""
    source = through(0.0, (0.0, 5.0), (1e-3, 5.0), (1e-3, 0.0))
    structure = one_node((diode(3, 0, 0.6, 100.0),), (still(0.0), source))
    tau, end = 100e-9 * 100.0 * 10e3 / 10100.0, 4.4 * 10e3 / 10100.0
    peak = end * (1.0 - exp(-1e-3 / tau))
    assert volts(structure, 0, 0.3e-5) == approx(end * (1.0 - exp(-0.3e-5 / tau)), rel=1e-10)
    assert volts(structure, 0, 2e-3) == approx(peak * exp(-1.0), rel=1e-10)
    assert solved(structure, CASE).signal.extremes()[1] == approx([peak], rel=1e-12)


def test_the_higher_of_two_supplies_feeds_a_node_through_diodes():
    """5 V and 3.3 V through 0.3 V and 10 Ω into 10 kΩ: 4.7 V less the drop on 10 Ω; the other diode blocks."""
    structure = one_node((diode(3, 0, 0.3), diode(4, 0, 0.3)), (still(0.0), still(3.3), still(5.0)))
    assert solved(structure, CASE).volts_before[0, 0] == approx(4.7 * 10e3 / 10010.0, rel=1e-12)


def test_each_dc_state_has_its_own_conducting_diodes():
    states = tuple(tuple(constant(v) for v in row) for row in ((5.0, 0.0), (-5.0, 0.0)))
    structure = replace(one_node((diode(2, 0, 0.6, 10.0),), (still(0.0),)), states=states)
    found = steady_states(structure, CASE)[0, :, 0]
    assert found == approx([5.0, -0.6 - 4.4 * 10.0 / 10010.0], rel=1e-12)


def test_a_node_without_capacitor_follows_through_a_diode():
    """A source that ramps to 5 V in 1 ms, 1 kΩ to it, a diode of 0.5 V and 1 kΩ to 0 V: half of what exceeds 0.5 V."""
    shape = Shape(1, 2, ((0, 1),), ())
    ramp = through(0.0, (0.0, 0.0), (1e-3, 5.0))
    structure = Structure(shape=shape, ohms=(constant(1e3),), farads=(), waveforms=(ramp, still(0.0)))
    structure = replace(structure, diodes=(diode(0, 2, 0.5, 1e3),))
    assert [volts(structure, 0, t) for t in (0.05e-3, 0.1e-3, 0.5e-3, 1.0)] == approx([0.25, 0.5, 1.5, 2.75], rel=1e-9)


def test_a_diode_that_rests_at_its_drop_does_not_chatter():
    """0 V of drop between equal voltages: open or conducting, nothing moves."""
    structure = one_node((diode(0, 3, 0.0), diode(3, 0, 0.0)), (steps(0.0, 3.3), still(3.3)))
    assert time(structure, 3.3 - 1e-6, 1.0) < 1e-3 * log(3.3e6)
    assert solved(structure, CASE).signal.final() == approx([3.3], rel=1e-11)


def test_the_current_of_a_diode_can_be_watched():
    structure = one_node((diode(0, 1),), (steps(3.3, 0.0),))
    amps = solved(structure, CASE).watch(np.zeros((1, 3)), np.zeros(1), [1.0])
    assert amps.initial() == approx([2.7 / 10.0], rel=1e-12)
    assert amps.final() == approx([0.0], abs=1e-15)


def test_what_does_not_settle_has_no_bounds():
    """A square wave of 40 edges at a diode: it starts and stops with each of them."""
    edges = [(1e-3 * k, 5.0 * ((k + late) % 2)) for k in range(41) for late in (1, 0) if k or not late]
    structure = one_node((diode(3, 0),), (still(0.0), through(0.0, *edges)))
    found = solve_bounds([(Problem(structure=structure, parameters=()), registry()["peak_voltage"])])[0]
    assert found == Failure(reason="it does not settle after 32 switchings of its diodes")


def test_beyond_its_breakdown_nothing_is_said_of_a_diode():
    waves = (steps(0.0, 12.0),)
    structure = one_node((diode(2, 0, breakdown=4.6),), waves)
    found = solve_bounds([(Problem(structure=structure, parameters=()), registry()["peak_voltage"])])[0]
    assert isinstance(found, Failure)
    assert found.reason == "more than 4.6 V in reverse across D1: its breakdown is not modelled"
    within = replace(structure, diodes=(diode(2, 0, breakdown=12.5),))
    assert volts(within, 0, 1e-3) == approx(12.0 * (1.0 - exp(-1.0)), rel=1e-12)


def test_bounds_with_diodes_are_searched_and_hold_their_corners():
    """The longest discharge has the most resistance, capacitance and drop; the shortest the least of each."""
    ranges = {"R": (9e3, 11e3), "C": (90e-9, 110e-9), "drop": (0.4, 0.9), "on": (0.1, 10.0)}
    parameters = tuple(
        Parameter(name=name, unit="", low=a, nominal=0.5 * (a + b), high=b, given_low=a, given_high=b, origin="test")
        for name, (a, b) in ranges.items()
    )
    structure = one_node((Junction(anode=0, cathode=1, drop=column(2), ohms=column(3)),), (steps(3.3, 0.0),))
    level = LevelForm(kind="voltage", offset=constant(0.2))
    structure = replace(structure, ohms=(column(0),), farads=(column(1),), levels=(("to", level),), rising=False)
    found = solve_bounds([(Problem(structure=structure, parameters=parameters), registry()["delay"])])[0]
    assert isinstance(found, Bounds)
    assert not found.proved
    assert (found.low_at, found.high_at) == ((9e3, 90e-9, 0.4, 0.1), (11e3, 110e-9, 0.9, 10.0))


def test_cases_of_one_call_do_not_disturb_one_another():
    """Cases that switch at different times, or never, as each by itself."""
    structure = one_node((Junction(anode=0, cathode=1, drop=column(0), ohms=column(1)),), (steps(3.3, 0.0),))
    cases = np.array([[0.2, 1.0], [0.6, 100.0], [5.0, 10.0], [0.6, 1e4]])
    together = solved(structure, cases).watch(np.tile([1.0, 0.0, 0.0], (4, 1)), np.full(4, 0.5))
    for index in range(4):
        alone = solved(structure, cases[[index]]).watch(np.array([[1.0, 0.0, 0.0]]), np.array([0.5]))
        assert together.first_crossing(-1.0)[index] == approx(alone.first_crossing(-1.0)[0], rel=1e-13)
        assert together.energy()[index] == approx(alone.energy()[0], rel=1e-12)
        assert [edge[index] for edge in together.extremes()] == approx([edge[0] for edge in alone.extremes()])


def random_structure(rng: np.random.Generator) -> Structure:
    """One to four nodes, each with a capacitor, three sources that rest, step, ramp or pulse, one to three diodes."""
    free, total = int(rng.integers(1, 5)), 3
    total += free
    resistors = [(node, int(rng.choice([*range(node), *range(free, total)]))) for node in range(free)]
    capacitors = [(node, free + int(rng.integers(3))) for node in range(free)]
    for pairs in (resistors, capacitors):
        for _ in range(int(rng.integers(0, 3))):
            pairs.append(tuple(int(x) for x in rng.choice(total, 2, replace=False)))
    return Structure(
        shape=Shape(free, 3, tuple(resistors), tuple(capacitors)),
        ohms=tuple(constant(10 ** rng.uniform(3, 5)) for _ in resistors),
        farads=tuple(constant(10 ** rng.uniform(-8, -6)) for _ in capacitors),
        waveforms=tuple(random_wave(rng) for _ in range(3)),
        diodes=tuple(random_diode(rng, free, total) for _ in range(int(rng.integers(1, 4)))),
        empty=bool(rng.random() < 0.3),
    )


def random_diode(rng: np.random.Generator, free: int, total: int) -> Junction:
    node = int(rng.integers(free))
    other = int(rng.choice([terminal for terminal in range(total) if terminal != node]))
    ends = (node, other) if rng.random() < 0.5 else (other, node)
    return diode(*ends, rng.uniform(0.1, 1.0), 10 ** rng.uniform(0, 3))


def random_wave(rng: np.random.Generator) -> Waveform:
    first, second, third = rng.uniform(-1.0, 6.0, 3)
    end = rng.uniform(0.2e-3, 4e-3)
    return [
        still(first),
        steps(first, second),
        through(first, (0.0, first), (end, second)),
        through(first, (0.0, second), (end, third), (end, first)),
    ][int(rng.integers(4))]


def responses(structure: Structure, times: Array) -> tuple[Array, Array]:
    """Free voltages (time, free) by switching and by the stiff integrator."""
    case, stiff, free = solved(structure, CASE), Stiff(structure), structure.shape.free
    before = np.zeros(3) if structure.empty else numbers(wave.before for wave in structure.waveforms)
    start = np.zeros(free) if structure.empty else stiff.at_rest(before)
    assert structure.empty or case.volts_before[0, :free] == approx(start, abs=1e-9)
    signals = [case.watch(np.eye(free + 3)[[node]], np.zeros(1)) for node in range(free)]
    mine = np.array([[float(signal.at(np.array([t]))[0]) for signal in signals] for t in times])
    return mine, stiff.run(start, before, times)


def test_random_networks_agree_with_a_stiff_integrator():
    """To a millionth of a volt; the integrator's own tolerance leaves a hundred-millionth."""
    rng, times = np.random.default_rng(11), np.array([0.0, *np.geomspace(1e-6, 0.2, 25)])
    switchings = 0
    for _ in range(50):
        structure = random_structure(rng)
        mine, theirs = responses(structure, times)
        assert np.abs(mine - theirs).max() < 1e-6
        switchings += len(solved(structure, CASE).response.intervals) - 1  # type: ignore[union-attr]  # it has diodes
    assert switchings > 50
