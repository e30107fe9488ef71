"""Bounds attacked: every vertex, random cases, a grid where it is small, and ascent from the best of them.

A bound that is proved may not be beaten at all; a searched one by a thousandth of what it bounds.
"""

from collections.abc import Callable
from dataclasses import replace
from itertools import product

import numpy as np
import pytest
from scipy.optimize import minimize

from rcrules.engine import Shape
from rcrules.measures import Measure, registry
from rcrules.problems import Bounds, LevelForm, Parameter, Problem, Structure, Waveform, column, constant, solve_bounds
from tests.measures.test_theory import QUESTIONS, TRAITS, build, optioned, with_level

ROUNDS = 1
"""Problems of each measure and kind of circuit; 16 were run by hand: 2 112 problems."""
RANDOM = 200
STARTS = 3
PROVED = 1e-9
SEARCHED = 1e-3

Ask = Callable[[Structure], Structure]


def two_levels(structure: Structure) -> Structure:
    low, high = (LevelForm(kind="step", fraction=constant(part)) for part in (0.1, 0.9))
    return replace(structure, levels=(("low", low), ("high", high)))


def above(structure: Structure) -> Structure:
    level = with_level(LevelForm(kind="voltage", offset=constant(0.9)), "level")
    return replace(level(structure), options=(("side", "above"),))


def at_a_frequency(structure: Structure) -> Structure:
    source = float(structure.shape.free)
    return replace(structure, options=(("source", source), ("passes", "low"), ("frequency", 0.2)))


def element(kind: str) -> Ask:
    """The first resistor or capacitor, over the states that both supplies are on and off."""

    def asked(structure: Structure) -> Structure:
        pairs = structure.shape.resistors if kind == "resistor" else structure.shape.capacitors
        held = structure.shape.held
        states = tuple(tuple(column(_supply(structure)) if on else () for on in ons) for ons in _subsets(held))
        a, b = pairs[0]
        options = (("transient", 0.0), ("signed", 0.0), ("extreme", "most"))
        return replace(structure, at=a, against=b, element=0, states=states, options=options, rating=constant(5.0))

    return asked


def _supply(structure: Structure) -> int:
    return len(structure.ohms) + len(structure.farads)


def _subsets(held: int) -> list[tuple[bool, ...]]:
    return [ons for ons in product((False, True), repeat=held) if any(ons)]


FURTHER: list[tuple[str, Ask]] = [
    ("rise_time", two_levels),
    ("initial_voltage", lambda structure: structure),
    ("peak_voltage", lambda structure: structure),
    ("pulse_width", above),
    ("power", element("resistor")),
    ("applied_voltage", element("capacitor")),
    ("voltage_ratio", element("capacitor")),
    ("stored_energy", element("capacitor")),
    ("stored_charge", element("capacitor")),
    ("gain", at_a_frequency),
    ("settling_time", optioned(band=0.3)),
]


def posed(structure: Structure, low: np.ndarray, high: np.ndarray) -> Problem:
    nominal = np.sqrt(low * high)
    parameters = tuple(
        Parameter(name=f"p{i}", unit="1", low=a, nominal=n, high=b, given_low=a, given_high=b, origin="test")
        for i, (a, n, b) in enumerate(zip(low, nominal, high, strict=True))
    )
    return Problem(structure=structure, parameters=parameters)


Box = tuple[np.ndarray, np.ndarray]


def attacked(measure: Measure, structure: Structure, box: Box, rng: np.random.Generator) -> tuple[float, float]:
    """The lowest and the highest value that any attack finds."""
    low, high = box
    cases = [rng.uniform(low, high, (RANDOM, len(low)))]
    if len(low) <= 12:
        cases.append(np.array(list(product(*zip(low, high, strict=True)))))
    if len(low) <= 3:
        axes = [np.linspace(a, b, 21) for a, b in zip(low, high, strict=True)]
        cases.append(np.stack(np.meshgrid(*axes), axis=-1).reshape(-1, len(low)))
    every = np.concatenate(cases)
    values = measure.compute(structure, every)
    known = ~np.isnan(values)
    least, most = values[known].min(), values[known].max()
    for sign, best in ((1.0, least), (-1.0, most)):
        if np.isfinite(best):
            starts = every[known][np.argsort(sign * values[known])[:STARTS]]
            found = climbed(measure, structure, box, sign, starts)
            least, most = (min(least, found), most) if sign > 0 else (least, max(most, -found))
    return float(least), float(most)


def climbed(measure: Measure, structure: Structure, box: Box, sign: float, starts: np.ndarray) -> float:
    """The lowest of sign * value that a bounded quasi-Newton search reaches (scipy.optimize)."""

    def value(place: np.ndarray) -> float:
        found = float(measure.compute(structure, np.clip(place, *box)[None, :])[0])
        return sign * found if np.isfinite(found) else 1e30

    walls, most = list(zip(*box, strict=True)), {"maxfun": 60}
    found = [minimize(value, start, method="L-BFGS-B", bounds=walls, options=most).fun for start in starts]
    return float(min(found))


def beaten(found: Bounds, least: float, most: float) -> float:
    """By how much of its size the worse of both bounds is beaten; 0 = not."""
    scale = max(*(abs(end) for end in (found.low, found.high) if np.isfinite(end)), 1e-6, 0.0)
    over = [most - found.high if np.isfinite(most) else 0.0, found.low - least if np.isfinite(least) else 0.0]
    if np.isinf(most) and not np.isinf(found.high):
        return np.inf
    return max(0.0, *(amount for amount in over if np.isfinite(amount))) / scale


def attack(name: str, ask: Ask, traits: dict[str, bool], seed: int, rounds: int) -> list[tuple[float, bool, Problem]]:
    """Every problem of which a bound is beaten by more than it may be."""
    rng, measure = np.random.default_rng(seed), registry()[name]
    bad = []
    for _ in range(rounds):
        structure, low, high = build(rng, **traits)
        structure = ask(structure)
        problem = posed(structure, low, high)
        (found,) = solve_bounds([(problem, measure)])
        if not isinstance(found, Bounds) or np.isnan(found.low) or np.isnan(found.high):
            continue
        least, most = attacked(measure, structure, (low, high), rng)
        excess = beaten(found, least, most)
        if excess > (PROVED if found.proved else SEARCHED):
            bad.append((excess, found.proved, problem))
    return bad


ALL = QUESTIONS + FURTHER


@pytest.mark.parametrize("traits", TRAITS, ids=lambda traits: "-".join(traits) or "steps")
@pytest.mark.parametrize(("name", "ask"), ALL, ids=[f"{name}-{number}" for number, (name, _) in enumerate(ALL)])
def test_no_bound_is_beaten(name: str, ask: Ask, traits: dict[str, bool]) -> None:
    assert [(excess, proved) for excess, proved, _ in attack(name, ask, traits, 20261, ROUNDS)] == []


def test_the_extreme_of_power_inside_the_box_is_found() -> None:
    """A load of 1 Ω to 9 Ω on 6 V behind 3 Ω takes most where it matches: (6 V)² / (4 · 3 Ω) = 3 W (maximum power)."""
    structure = Structure(
        shape=Shape(1, 2, ((0, 1), (0, 2)), ()),
        ohms=(constant(3.0), column(0)),
        farads=(),
        waveforms=(still(6.0), still(0.0)),
        at=0,
        against=2,
        element=1,
        states=((constant(6.0), ()),),
        options=(("transient", 0.0), ("signed", 0.0), ("extreme", "most")),
    )
    (found,) = solve_bounds([(posed(structure, np.array([1.0]), np.array([9.0])), registry()["power"])])
    assert isinstance(found, Bounds)
    assert found.high == pytest.approx(3.0, rel=1e-6)
    assert found.high_at[0] == pytest.approx(3.0, rel=1e-2)
    assert found.low == pytest.approx(36.0 * 1.0 / 16.0)
    assert not found.proved


def still(volts: float) -> Waveform:
    level = constant(volts) if volts else ()
    return Waveform(before=level, points=(((), level),))
