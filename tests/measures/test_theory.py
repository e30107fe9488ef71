"""What a theory claims is never beaten by random cases of the box."""

from collections.abc import Callable
from dataclasses import replace
from itertools import product

import numpy as np
import pytest

from rcrules.engine import Shape
from rcrules.measures import Measure, registry
from rcrules.problems import Form, LevelForm, Structure, Waveform, column, constant

ROUNDS = 25
CASES = 12


def joined(free: int, held: int, rng: np.random.Generator, *, bridges: bool) -> Shape:
    """A random network in which every free terminal has a resistive path and a capacitor."""
    resistors = [(node, int(rng.integers(node + 1, free + held))) for node in range(free - 1)] + [(free - 1, free)]
    resistors += [tuple(sorted(rng.choice(free + held, 2, replace=False))) for _ in range(rng.integers(0, 3))]  # type: ignore[misc]
    capacitors = [(node, free + held - 1) for node in range(free) if node == 0 or rng.random() < 0.8]
    if bridges and free > 1:
        capacitors.append((0, 1))
    return Shape(free, held, tuple((int(a), int(b)) for a, b in resistors), tuple(capacitors))


def build(rng: np.random.Generator, **traits: bool) -> tuple[Structure, np.ndarray, np.ndarray]:
    """A structure of one moved supply (terminal ``free``) and grounds, and its box. Columns: R, C, supply, time."""
    free, held = int(rng.integers(1, 4)), int(rng.integers(2, 4))
    shape = joined(free, held, rng, bridges=traits.get("bridges", False))
    r, c = len(shape.resistors), len(shape.capacitors)
    supply, time = column(r + c), column(r + c + 1)
    points: tuple[tuple[Form, Form], ...] = (((), supply),)
    if traits.get("ramp"):
        points = (((), ()), (time, supply))
    moved = Waveform(before=(), points=points)
    if traits.get("falls"):
        moved = Waveform(before=supply, points=tuple((when, () if volts else supply) for when, volts in points))
    still = Waveform(before=(), points=(((), ()),))
    if traits.get("falls") and traits.get("held_up"):
        still = Waveform(before=supply, points=(((), supply),))
    structure = Structure(
        shape=shape,
        ohms=tuple(column(index) for index in range(r)),
        farads=tuple(column(r + index) for index in range(c)),
        waveforms=(moved, *(still for _ in range(held - 1))),
        empty=not traits.get("falls", False),
        rising=not traits.get("falls", False),
        at=int(rng.integers(free)),
    )
    middle = np.concatenate([10.0 ** rng.uniform(-1, 1, r), 10.0 ** rng.uniform(-1, 1, c), [3.0, 2.0]])
    share = rng.uniform(0.05, 0.6, len(middle))
    return structure, middle * (1 - share), middle * (1 + share)


TRAITS = [
    {},
    {"ramp": True},
    {"falls": True},
    {"falls": True, "held_up": True},
    {"bridges": True},
    {"falls": True, "ramp": True},
]


def with_level(level: LevelForm, name: str = "to") -> Callable[[Structure], Structure]:
    return lambda structure: replace(structure, levels=((name, level),))


def left_open(structure: Structure) -> Structure:
    """The supply's terminal becomes a further pinned free one: here the first free terminal is what was held."""
    shape = structure.shape
    last = shape.free + shape.held - 1
    pairs = tuple((a, last if b == shape.free else b) for a, b in shape.resistors)
    still = Waveform(before=(), points=(((), ()),))
    return replace(
        structure,
        shape=replace(shape, resistors=pairs),
        waveforms=tuple(still for _ in structure.waveforms),
        pinned=((0, structure.waveforms[0].points[-1][1] or structure.waveforms[0].before),),
        empty=False,
        rising=False,
        levels=(("to", LevelForm(kind="voltage", offset=constant(0.4))),),
    )


def optioned(**options: float | str) -> Callable[[Structure], Structure]:
    return lambda structure: replace(structure, options=tuple(options.items()))


def passing(structure: Structure) -> Structure:
    return replace(structure, options=(("source", float(structure.shape.free)), ("passes", "low")))


QUESTIONS: list[tuple[str, Callable[[Structure], Structure]]] = [
    ("time_constant", lambda structure: structure),
    ("delay", with_level(LevelForm(kind="voltage", offset=constant(0.7)))),
    ("delay", with_level(LevelForm(kind="final", fraction=constant(0.5)))),
    ("delay", with_level(LevelForm(kind="step", fraction=constant(0.3)))),
    ("time_to_63", lambda structure: structure),
    ("settling_time", optioned(band=0.03)),
    ("residual", optioned(time=1.3)),
    ("final_voltage", lambda structure: structure),
    ("voltage_at", optioned(time=1.3)),
    ("corner_frequency", passing),
    ("discharge_time", left_open),
]


@pytest.mark.parametrize("traits", TRAITS, ids=lambda traits: "-".join(traits) or "steps")
@pytest.mark.parametrize(("name", "ask"), QUESTIONS, ids=[f"{n}-{i}" for i, (n, _) in enumerate(QUESTIONS)])
def test_claimed_signs_hold_everywhere(name: str, ask: Callable[[Structure], Structure], traits: dict[str, bool]):
    rng = np.random.default_rng(20260)
    for _ in range(ROUNDS):
        structure, low, high = build(rng, **traits)
        check_signs(registry()[name], ask(structure), low, high, rng)


@pytest.mark.parametrize("traits", TRAITS[:2], ids=["steps", "ramp"])
def test_vertices_hold_the_extremes_of_a_dc_voltage(traits: dict[str, bool]):
    rng = np.random.default_rng(7)
    measure = registry()["final_voltage"]
    for _ in range(20):
        structure, low, high = build(rng, **traits)
        assert measure.theory(structure, low, high).vertices
        corners = np.array(list(product(*zip(low, high, strict=True))))
        ends = measure.compute(structure, corners)
        inside = measure.compute(structure, rng.uniform(low, high, (200, len(low))))
        assert inside.max() <= ends.max() + 1e-12
        assert inside.min() >= ends.min() - 1e-12


def test_most_plain_circuits_are_proved():
    """One resistor and one capacitor from a stepped supply: nothing is left to search."""
    shape = Shape(1, 2, ((0, 1),), ((0, 2),))
    waves = (Waveform(before=(), points=(((), column(2)),)), Waveform(before=(), points=(((), ()),)))
    structure = Structure(shape=shape, ohms=(column(0),), farads=(column(1),), waveforms=waves, empty=True)
    low, high = np.array([1.0, 1.0, 3.0]), np.array([2.0, 2.0, 3.6])
    structure = with_level(LevelForm(kind="voltage", offset=constant(1.0)))(structure)
    assert registry()["delay"].theory(structure, low, high).signs == (1, 1, -1)
    assert registry()["settling_time"].theory(structure, low, high).signs == (1, 1, 0)


def check_signs(measure: Measure, structure: Structure, low: np.ndarray, high: np.ndarray, rng: np.random.Generator):
    """Move one column at a time between two values; the quantity must follow the sign."""
    signs = measure.theory(structure, low, high).signs
    for index, sign in enumerate(signs):
        if sign is None:
            continue
        cases = rng.uniform(low, high, (CASES, len(low)))
        less, more = cases.copy(), cases.copy()
        less[:, index], more[:, index] = low[index], high[index]
        a, b = measure.compute(structure, less), measure.compute(structure, more)
        scale = np.where(np.isfinite(a), np.abs(a), 0.0) + 1e-2
        both = (np.isinf(a) & np.isinf(b)) | (np.isnan(a) & np.isnan(b))
        change = np.where(both, 0.0, np.subtract(b, a, out=np.zeros_like(a), where=~both))
        if sign == 0:
            assert (np.abs(change) <= 1e-7 * scale).all(), (structure, index)
        else:
            assert (sign * change >= -1e-7 * scale).all(), (structure, index, sign)
