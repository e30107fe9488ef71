"""When a signal passes a level for the first time, or for good where it starts beyond it."""

import numpy as np

from rcrules.problems import Array, LevelForm, Solved

LEAST_STEP = 1e-12
"""Step below which a node does not move, in parts of the greatest voltage around it: the rounding of the solution."""


def passed(case: Solved, level: LevelForm) -> Array:
    """Time at which the observed voltage passes a level in the structure's direction [s] (case,).

    inf = never; nan = not defined: a part of a step that is not there. A voltage that is beyond the level before the
    event already (a pulse that returns) passes it when it leaves the other side for the last time.
    """
    rising = case.structure.rising
    signal, before = case.above(level)
    found = signal.first_crossing(1 if rising else -1)
    beyond = before > 0.0 if rising else before < 0.0
    if beyond.any():
        lowest, highest = signal.extremes()
        last = signal.last_exit(0.0, highest + 1.0) if rising else signal.last_exit(lowest - 1.0, 0.0)
        found = np.where(beyond, last, found)
    return found if level.kind == "voltage" else np.where(np.isnan(step(case)), np.nan, found)


def step(case: Solved) -> Array:
    """Size of the step [V] (case,): the end against the voltage before or just after the event; nan where none."""
    size = np.maximum(np.abs(case.final - case.start), np.abs(case.final - case.initial))
    greatest = np.maximum(np.abs(case.volts_before).max(axis=1), np.abs(case.sources[1]).max(axis=(1, 2), initial=0.0))
    return np.where(size > LEAST_STEP * greatest, size, np.nan)
