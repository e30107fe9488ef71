"""Laws that hold for every network, on random networks."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rcrules.engine import Shape, solve
from tests.engine.networks import at_node, random_shape, random_values, step

approx = pytest.approx
quick = settings(max_examples=40, deadline=None, derandomize=True)
seeds = st.integers(0, 2**32 - 1)
factors = st.floats(1e-3, 1e3)


def network(seed: int, decades: float = 6.0):
    """A random shape with the values of one case."""
    rng = np.random.default_rng(seed)
    shape = random_shape(rng, int(rng.integers(1, 6)))
    return rng, shape, *random_values(rng, shape, 1, decades)


@quick
@given(seeds, factors)
def test_k_times_the_resistance_and_a_kth_of_the_capacitance_leave_all_times(seed, factor):
    rng, shape, ohms, farads = network(seed)
    node, charged = int(rng.integers(shape.free)), np.zeros((1, len(shape.capacitors)))
    one = solve(shape, ohms, farads).respond(step(shape, [1.0, 0.0]), charged)
    other = solve(shape, ohms * factor, farads / factor).respond(step(shape, [1.0, 0.0]), charged)
    times = [response.observe(at_node(shape, node), 0.31).first_crossing(1.0) for response in (one, other)]
    assert times[0] == approx(times[1], rel=1e-8)


@quick
@given(seeds, factors)
def test_k_times_the_capacitance_makes_all_times_k_times_as_long(seed, factor):
    _, shape, ohms, farads = network(seed)
    assert solve(shape, ohms, farads * factor).taus == approx(solve(shape, ohms, farads).taus * factor, rel=1e-12)


@quick
@given(seeds)
def test_responses_to_two_sources_add(seed):
    rng, shape, ohms, farads = network(seed)
    modes, charged = solve(shape, ohms, farads), np.zeros((1, len(shape.capacitors)))
    node, t = at_node(shape, int(rng.integers(shape.free))), modes.taus[:, 0] * rng.uniform(0.0, 2.0)
    values = [
        modes.respond(step(shape, volts), charged).observe(node, 0.0).at(t)
        for volts in ([1.0, 0.0], [0.0, 1.0], [2.0, -3.0])
    ]
    assert values[2] == approx(2.0 * values[0] - 3.0 * values[1], abs=1e-10)


@quick
@given(seeds)
def test_the_effect_of_one_node_on_another_is_mutual(seed):
    rng, shape, ohms, farads = network(seed, 12.0)
    modes = solve(shape, ohms, farads)
    a, b = (int(node) for node in rng.integers(shape.free, size=2))
    one, other = (modes.steady(np.zeros((1, 2)), np.eye(shape.free)[None, node])[0] for node in (a, b))
    assert one[b] == approx(other[a], rel=1e-12)


@quick
@given(seeds)
def test_steady_voltages_lie_between_the_sources(seed):
    _, shape, ohms, farads = network(seed, 15.0)
    volts = solve(shape, ohms, farads).steady(np.array([[5.0, -1.0]]), np.zeros((1, shape.free)))
    assert np.all(volts <= 5.0 + 1e-12)
    assert np.all(volts >= -1.0 - 1e-12)


@quick
@given(seeds)
def test_a_jump_moves_no_charge_onto_a_node_without_resistors_to_carry_it(seed):
    """Just after a step the charge that the capacitors at each node hold together is as before."""
    rng = np.random.default_rng(seed)
    free = int(rng.integers(1, 6))
    shape = random_shape(rng, free)
    shape = Shape(free, 2, shape.resistors, (*shape.capacitors, *((node, free) for node in range(free))))
    ohms, farads = random_values(rng, shape, 1, 4.0)
    charged = rng.uniform(-1.0, 1.0, (1, len(shape.capacitors)))
    response = solve(shape, ohms, farads).respond(step(shape, [1.0, -2.0]), charged)
    volts = np.array([*(response.observe(at_node(shape, k), 0.0).initial()[0] for k in range(free)), 1.0, -2.0])
    before, after = np.zeros(free + 2), np.zeros(free + 2)
    for (a, b), farad, volt in zip(shape.capacitors, farads[0], charged[0], strict=True):
        before[[a, b]] += [farad * volt, -farad * volt]
        after[[a, b]] += [farad * (volts[a] - volts[b]), farad * (volts[b] - volts[a])]
    assert after[:free] == approx(before[:free], abs=1e-9 * np.abs(farads).sum())


@quick
@given(seeds)
def test_energy_in_is_energy_stored_and_energy_turned_to_heat(seed):
    """From empty, one source stepping to 1 V: its charge times 1 V = stored + heat; both integrals in closed form."""
    rng = np.random.default_rng(seed)
    free = int(rng.integers(1, 5))
    shape = Shape(
        free,
        1,
        tuple((node, int(rng.choice([*range(node), free]))) for node in range(free)),
        tuple((node, int(rng.choice([*range(node), free]))) for node in range(free)),
    )
    ohms, farads = random_values(rng, shape, 1, 3.0)
    charged = rng.uniform(-1.0, 1.0, (1, free))
    response = solve(shape, ohms, farads).respond(step(shape, [0.0]), charged)
    weights = [at_node(shape, a) - at_node(shape, b) for a, b in shape.resistors]
    heat = sum(response.observe(weight, 0.0).energy()[0] / ohm for weight, ohm in zip(weights, ohms[0], strict=True))
    volts = [response.observe(at_node(shape, a) - at_node(shape, b), 0.0).initial()[0] for a, b in shape.capacitors]
    assert heat == approx(0.5 * float(farads[0] @ np.square(volts)), rel=1e-9)


@quick
@given(seeds, st.floats(1.01, 10.0))
def test_every_time_constant_rises_with_every_resistance_and_capacitance(seed, factor):
    """The min-max principle, for any topology."""
    rng, shape, ohms, farads = network(seed)
    before = solve(shape, ohms, farads).taus
    row = (ohms, farads)[len(farads[0]) > 0 and rng.random() < 0.5]
    row[0, int(rng.integers(row.shape[1]))] *= factor
    assert np.all(solve(shape, ohms, farads).taus >= before * (1.0 - 1e-13))


@quick
@given(seeds, st.floats(1.01, 10.0))
def test_without_bridging_capacitors_a_grounded_capacitor_delays(seed, factor):
    """A cooperative system: from rest, one source stepping up, a first crossing is later with a larger capacitor."""
    rng = np.random.default_rng(seed)
    shape = random_shape(rng, int(rng.integers(1, 6)))
    shape = Shape(shape.free, 2, shape.resistors, tuple((node, shape.free + 1) for node in range(shape.free)))
    ohms, farads = random_values(rng, shape, 2, 4.0)
    ohms[1], farads[1] = ohms[0], farads[0]
    farads[1, int(rng.integers(shape.free))] *= factor
    modes, node = solve(shape, ohms, farads), at_node(shape, int(rng.integers(shape.free)))
    level = rng.uniform(0.0, 1.0) * modes.steady(np.array([[1.0, 0.0]] * 2), np.zeros((2, shape.free)))[0] @ node[:-2]
    signal = modes.respond(step(shape, [1.0, 0.0], 2), np.zeros((2, shape.free))).observe(node, level)
    times = signal.first_crossing(1.0)
    assert times[1] >= times[0] * (1.0 - 1e-12)
