"""When a signal passes a level for the first time, or for good where it starts beyond it."""

import numpy as np

from rcrules.problems import Array, LevelForm, Solved


def passed(case: Solved, level: LevelForm) -> Array:
    """Time at which the observed voltage passes a level in the structure's direction [s] (case,); inf = never.

    A voltage that is already beyond the level before the event (a pulse that returns) passes it when it leaves the other
    side for the last time.
    """
    rising = case.structure.rising
    signal, before = case.above(level)
    first = signal.first_crossing(1 if rising else -1)
    beyond = before > 0.0 if rising else before < 0.0
    if not beyond.any():
        return first
    lowest, highest = signal.extremes()
    last = signal.last_exit(0.0, highest + 1.0) if rising else signal.last_exit(lowest - 1.0, 0.0)
    return np.where(beyond, last, first)


def step(case: Solved) -> Array:
    """Size of the step [V] (case,): how far the voltage before or just after the event is from the end, whichever is more."""
    initial = case.signal.initial()
    return np.maximum(np.abs(case.final - case.start), np.abs(case.final - initial))
