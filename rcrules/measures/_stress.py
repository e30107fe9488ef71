"""Voltages across a part over all its DC states, and through the transient where that may go beyond them."""

from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from rcrules.measures._measure import Theory
from rcrules.measures._theory import Slopes, unproved
from rcrules.measures._topology import columns
from rcrules.problems import Array, LevelForm, Structure, Swing, Waveform, evaluate, solved, steady_states

_ROUNDING = 1e-14
"""Part of the greatest voltage around a part below which nothing lies across it: differences of equal numbers."""
ACROSS = LevelForm(kind="voltage")
"""Nothing but the observed voltage."""


def across(structure: Structure, cases: Array, level: LevelForm = ACROSS) -> tuple[Array, Array]:
    """Lowest and highest voltage across the observed part [V] (case,), signed from its first terminal to its second.

    level: what it counts from; cases: (case, column), SI. Over all states; where a transient may go beyond them, also
    from empty to all sources on, back to all off, while one source switches in any state, and while contacts move.
    """
    volts = _steady(structure, cases, level)
    found = [(volts.min(axis=1), volts.max(axis=1))]
    if ("transient", 1.0) in structure.options:
        found += list(_transients(structure, cases, level, volts))
    return np.minimum.reduce([low for low, _ in found]), np.maximum.reduce([high for _, high in found])


def _steady(structure: Structure, cases: Array, level: LevelForm) -> Array:
    """The observed voltage in every state [V] (case, state), those with contacts the other way last."""
    states = steady_states(structure, cases)
    volts = states[:, :, structure.at] - evaluate(level.offset, cases)[:, None]
    if structure.against is not None:
        volts = volts - states[:, :, structure.against]
    for terminal, fraction in level.follows:
        volts = volts - states[:, :, terminal] * evaluate(fraction, cases)[:, None]
    rounding = _ROUNDING * np.abs(states).max(axis=2, initial=0.0)
    return np.where(np.abs(volts) <= rounding, 0.0, volts)


def _transients(structure: Structure, cases: Array, level: LevelForm, volts: Array) -> Iterator[tuple[Array, Array]]:
    yield solved(structure, cases).above(level)[0].extremes()
    yield solved(replace(structure, waveforms=_back(structure), empty=False), cases).above(level)[0].extremes()
    for position, turned in enumerate(_positions(structure)):
        own = volts[:, position * len(structure.states) :][:, : len(structure.states)]
        for swing in structure.swings if not structure.diodes else ():  # a step and a state do not add beside diodes
            yield from _switching(turned, swing, cases, level, own)
        if structure.earlier is not None:
            for state in structure.states:
                still = tuple(Waveform(before=form, points=(((), form),)) for form in state)
                moved = replace(turned, waveforms=still, empty=False)
                yield solved(moved, cases).above(level)[0].extremes()


def _back(structure: Structure) -> tuple[Waveform, ...]:
    """All sources from their highest to 0 V, each in its time."""
    down = {swing.held: swing.down for swing in structure.swings}
    found = []
    for number, wave in enumerate(structure.waveforms):
        high, takes = wave.points[-1][1], down.get(number, ())
        found.append(Waveform(before=high, points=(((), high), (takes, ())) if takes else (((), ()),)))
    return tuple(found)


def _positions(structure: Structure) -> tuple[Structure, ...]:
    """The structure, and where contacts may be the other way the same from there."""
    if structure.earlier is None:
        return (structure,)
    shape, ohms = structure.earlier
    return structure, replace(structure, shape=shape, ohms=ohms, earlier=(structure.shape, structure.ohms))


def _switching(
    structure: Structure, swing: Swing, cases: Array, level: LevelForm, volts: Array
) -> Iterator[tuple[Array, Array]]:
    """One source goes up, or down, in every state in which it is there: the state and the response to the step add."""
    step = (*swing.high, *((-factor, term) for factor, term in swing.low))
    still = replace(level, offset=())
    for takes, start, sign in ((swing.up, swing.low, 1.0), (swing.down, swing.high, -1.0)):
        wave = Waveform(before=(), points=(((), ()), (takes, step)) if takes else (((), step),))
        waves = tuple(
            wave if number == swing.held else Waveform(before=(), points=(((), ()),))
            for number in range(structure.shape.held)
        )
        alone = replace(structure, waveforms=waves, amps=(), empty=True, earlier=None)
        least, most = (sign * end for end in solved(alone, cases).above(still)[0].extremes())
        from_here = [index for index, state in enumerate(structure.states) if state[swing.held] == start]
        if from_here:
            begun = volts[:, from_here]
            yield begun.min(axis=1) + np.minimum(least, most), begun.max(axis=1) + np.maximum(least, most)


def most(structure: Structure, cases: Array) -> Array:
    """Greatest magnitude of the voltage across the part [V] (case,)."""
    low, high = across(structure, cases)
    return np.maximum(high, -low)


def of_states(structure: Structure, low: Array, high: Array) -> Theory:
    """T1 where a single DC state decides; capacitances matter in a transient only."""
    both_leak = structure.amps and structure.against is not None and structure.against < structure.shape.free
    if ("transient", 1.0) in structure.options or both_leak:
        return unproved(structure, low, high)
    slopes = Slopes([0] * len(low))
    forms = [*structure.ohms, *(form for _, form in structure.amps), *(structure.earlier or ((), ()))[1]]
    slopes.add(columns([*forms, *(form for state in structure.states for form in state), structure.rating or ()]), None)
    states = len(structure.states) * (2 if structure.earlier else 1)
    return slopes.theory(vertices=states == 1)


def with_capacitance(structure: Structure, low: Array, high: Array) -> Theory:
    """The same for a product with the part's own capacitance, or all of a supply; the voltage does not depend on it."""
    found = of_states(structure, low, high)
    slopes = Slopes(list(found.signs))
    own = structure.farads if structure.element is None else (structure.farads[structure.element],)
    if ("transient", 1.0) not in structure.options:
        slopes.signs = [1 if index in columns(own) else sign for index, sign in enumerate(slopes.signs)]
    return slopes.theory(vertices=found.vertices)
