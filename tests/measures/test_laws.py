"""Laws of networks, each under its true conditions, held against measures of random problems."""

from dataclasses import replace
from math import isinf

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rcrules.engine import Shape
from rcrules.measures import registry
from rcrules.problems import Form, LevelForm, Structure, Waveform, column, constant

SEEDS = st.integers(min_value=0, max_value=10**6)
FACTORS = st.floats(min_value=1e-3, max_value=1e3)


def network(seed: int, *, bridged: bool = True, sources: int = 1) -> tuple[Structure, np.ndarray]:
    """A random network from rest: a source that steps to 1 V (column 0 … ), 0 V, and resistors and capacitors."""
    rng = np.random.default_rng(seed)
    free, held = int(rng.integers(1, 5)), sources + 1
    zero, resistors, capacitors = free + sources, [], []
    for node in range(free):
        resistors.append((node, int(rng.integers(0, node)) if node else free))
        capacitors.append((node, zero))
        if rng.random() < 0.4:
            resistors.append((node, zero))
        if bridged and node and rng.random() < 0.5:
            capacitors.append((node, int(rng.integers(0, node))))
    resistors += [(int(rng.integers(0, free)), free + number) for number in range(sources)]
    count = len(resistors)
    columns = [*10 ** rng.uniform(2, 5, count), *10 ** rng.uniform(-9, -6, len(capacitors))]
    waves = [Waveform(before=(), points=(((), constant(1.0)),)) for _ in range(sources)]
    structure = Structure(
        shape=Shape(free, held, tuple(resistors), tuple(capacitors)),
        ohms=tuple(column(index) for index in range(count)),
        farads=tuple(column(count + index) for index in range(len(capacitors))),
        waveforms=(*waves, Waveform(before=(), points=(((), ()),))),
        empty=True,
        at=int(rng.integers(0, free)),
    )
    return structure, np.array([columns])


def fixed(structure: Structure, **options: float | str | Form) -> Structure:
    """With a level of each kind of measure, and plain options."""
    level = LevelForm(kind="step", fraction=constant(0.4))
    levels = tuple((name, level) for name in ("to", "low", "near"))
    levels += tuple((name, LevelForm(kind="step", fraction=constant(0.8))) for name in ("high", "far"))
    plain = tuple((name, value) for name, value in options.items())
    return replace(structure, levels=levels, options=plain)  # type: ignore[arg-type]  # plain values only


def measured(name: str, structure: Structure, cases: np.ndarray) -> float:
    return float(registry()[name].compute(structure, cases)[0])


TIMES = ("delay", "rise_time", "settling_time", "time_to_63", "time_constant")


@given(SEEDS, FACTORS)
@settings(max_examples=60, deadline=None)
def test_resistance_times_k_and_capacitance_over_k_leave_times_alone(seed: int, k: float):
    structure, cases = network(seed)
    scaled = cases.copy()
    scaled[:, : len(structure.ohms)] *= k
    scaled[:, len(structure.ohms) :] /= k
    for name in TIMES:
        found = fixed(structure, band=0.01)
        assert measured(name, found, scaled) == pytest.approx(measured(name, found, cases), rel=1e-9), name


@given(SEEDS, FACTORS, st.floats(min_value=-1e-6, max_value=1e-6))
@settings(max_examples=40, deadline=None)
def test_leakage_over_k_goes_with_them(seed: int, k: float, amps: float):
    """A current I through k R is the voltage of I/k through R."""
    structure, cases = network(seed, bridged=False)
    leaking = fixed(replace(structure, amps=((structure.at, constant(amps)),)), band=0.01)
    divided = replace(leaking, amps=((structure.at, constant(amps / k)),))
    scaled = cases.copy()
    scaled[:, : len(structure.ohms)] *= k
    scaled[:, len(structure.ohms) :] /= k
    one, other = measured("delay", leaking, cases), measured("delay", divided, scaled)
    assert one == other if isinf(one) or np.isnan(one) else other == pytest.approx(one, rel=1e-8)


@given(SEEDS, st.floats(min_value=1.0, max_value=10.0))
@settings(max_examples=60, deadline=None)
def test_more_capacitance_to_ground_never_shortens_a_first_crossing_from_rest(seed: int, factor: float):
    structure, cases = network(seed, bridged=False)
    level = LevelForm(kind="voltage", offset=constant(0.3))
    found = replace(structure, levels=(("to", level),), options=())
    before = measured("delay", found, cases)
    for index in range(len(structure.farads)):
        more = cases.copy()
        more[:, len(structure.ohms) + index] *= factor
        assert measured("delay", found, more) >= before * (1 - 1e-9)


@given(SEEDS)
@settings(max_examples=60, deadline=None)
def test_the_effects_of_two_sources_add(seed: int):
    structure, cases = network(seed, sources=2)
    still = Waveform(before=(), points=(((), ()),))
    first, second, ground = structure.waveforms
    found = [
        measured("voltage_at", replace(fixed(structure, time=1e-4), waveforms=waves), cases)
        for waves in ((first, second, ground), (first, still, ground), (still, second, ground))
    ]
    assert found[0] == pytest.approx(found[1] + found[2], abs=1e-10)


@given(SEEDS)
@settings(max_examples=60, deadline=None)
def test_the_charge_of_a_jump_is_kept(seed: int):
    """Just after the step, Σ C v over the free nodes is what the bridging capacitors brought from the source."""
    structure, cases = network(seed)
    free, farads = structure.shape.free, cases[0, len(structure.ohms) :]
    pairs = (*structure.shape.capacitors, (0, free))
    whole = replace(structure.shape, capacitors=pairs)
    grown = replace(structure, shape=whole, farads=(*structure.farads, constant(3e-8)))
    volts = np.array([measured("initial_voltage", replace(grown, at=node), cases) for node in range(free)])
    everything = np.concatenate([volts, [1.0, 0.0]])
    for node in range(free):
        charge = 0.0
        for (a, b), size in zip(pairs, [*farads, 3e-8], strict=True):
            if node in (a, b):
                charge += size * (everything[node] - everything[a + b - node])
        assert abs(charge) <= 1e-9 * 3e-8


@given(SEEDS)
@settings(max_examples=60, deadline=None)
def test_energy_in_is_energy_stored_and_energy_turned_to_heat(seed: int):
    """From rest, one source of 1 V and no way to ground: the source gives Q V, half of it stays where C V² / 2 is."""
    structure, cases = network(seed, bridged=False)
    zero = structure.shape.free + 1
    kept = [index for index, pair in enumerate(structure.shape.resistors) if zero not in pair]
    shape = replace(structure.shape, resistors=tuple(structure.shape.resistors[index] for index in kept))
    found = replace(structure, shape=shape, ohms=tuple(structure.ohms[index] for index in kept))
    heat = 0.0
    for index, (a, b) in enumerate(shape.resistors):
        heat += measured("pulse_energy", replace(found, at=a, against=b, element=index), cases)
    assert heat == pytest.approx(0.5 * cases[0, len(structure.ohms) :].sum(), rel=1e-9)


@given(SEEDS, st.floats(min_value=10.0, max_value=1e6))
@settings(max_examples=40, deadline=None)
def test_a_gain_never_exceeds_what_resistors_and_grounded_capacitors_allow(seed: int, hertz: float):
    structure, cases = network(seed, bridged=False)
    found = fixed(structure, frequency=hertz, source=float(structure.shape.free))
    assert (
        measured("gain", found, cases)
        <= measured("gain", fixed(structure, frequency=0.0, source=float(structure.shape.free)), cases) + 1e-12
    )
