"""All zeros of sums of exponentials on an interval that starts at 0.

The sign changes of the partial sums of the amplitudes, in order of rising rate, bound the number of zeros (Laguerre's
rule). Where that leaves at most one, a bracket and a bracketed Newton iteration find it; else the interval is split
until bounds exclude a zero or the slope keeps its sign.
"""

import numpy as np

from rcrules.engine._exponential import ExponentialSum
from rcrules.engine._isolate import isolate
from rcrules.engine._refine import refine
from rcrules.engine._shape import Array, Flags, Indices

NOTHING = 1e-14
"""Share of the whole below which a limit counts as zero: rounding has decided its sign."""
FADED = 1e-13
"""Share of the whole below which a sum that decays to zero is not searched further."""


def zeros(found: ExponentialSum, length: Array) -> tuple[Indices, Array]:
    """Zeros on 0 < t <= length, sorted by case, then time; a zero at t = 0 is none.

    found: the function; its amplitudes are merged (no ramps apart)
    length: [s], (case,), inf allowed
    Returns case of each zero, and its time [s].
    """
    sizes = np.abs(found.amps)
    size = sizes.sum(axis=0)
    rest = found.start - found.amps.sum(axis=0)
    rest = np.where(np.abs(rest) <= NOTHING * size, 0.0, rest)
    first, last, changes = _signs(found, rest)
    if not changes.any():
        return np.zeros(0, dtype=np.intp), np.zeros(0)
    low, high = _bracket(found, sizes, np.abs(rest), length)
    finite = np.isfinite(length)
    if finite.any():
        last = np.where(finite, np.sign(found.at(np.where(finite, length, 0.0))), last)
    single = (changes == 1) & (last != first) & (first != 0.0) & (length > 0.0)
    several = (changes > 1) & (length > low)
    return _both(found, first, low, high, single, several)


def _both(
    found: ExponentialSum, first: Array, low: Array, high: Array, single: Flags, several: Flags
) -> tuple[Indices, Array]:
    """Zeros of the cases with exactly one, and of those with perhaps several."""
    cases = np.flatnonzero(single)
    if len(cases) == len(single):
        return cases, refine(found.times(-first), low, high)
    times = refine(found.take(cases).times(-first[cases]), low[cases], high[cases])
    if not several.any():
        return cases, times
    where = np.flatnonzero(several)
    inner, left, right, sign = isolate(found.take(where), low[where], high[where], first[where])
    more = where[inner]
    cases = np.concatenate([cases, more])
    times = np.concatenate([times, refine(found.take(more).times(sign), left, right)])
    order = np.lexsort((times, cases))
    return cases[order], times[order]


def _signs(found: ExponentialSum, rest: Array) -> tuple[Array, Array, Array]:
    """Sign just after 0, sign in the end, and number of sign changes of the partial sums."""
    current = np.sign(found.slope) if found.ramping else np.zeros_like(rest)
    last, changes, total = current, np.zeros_like(rest), rest
    for place in range(len(found.amps) + 1):
        sign = np.sign(total if place < len(found.amps) else found.start)
        changes += current * sign < 0.0
        current = np.where(sign != 0.0, sign, current)
        last = np.where(last != 0.0, last, sign)
        total = total + found.amps[place] if place < len(found.amps) else total
    first = np.sign(found.start)
    if (first == 0.0).any():
        first = np.where(first != 0.0, first, np.sign(found.initial_slope()))
        first = np.where(first != 0.0, first, np.sign(found.initial_bend()))
    return first, last, changes


def _bracket(found: ExponentialSum, sizes: Array, rest: Array, length: Array) -> tuple[Array, Array]:
    """Times between which all zeros lie. [s]

    sizes: of the amplitudes. [V], (n, case)
    rest: size of the limit. [V], (case,)
    """
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        speeds = sizes * found.rates
        low = np.abs(found.start) / (speeds.sum(axis=0) + np.abs(found.slope))
        if (found.start == 0.0).any():
            by_slope = 2.0 * np.abs(found.initial_slope()) / (speeds * found.rates).sum(axis=0)
            low = np.where(found.start == 0.0, by_slope, low)
        size = sizes.sum(axis=0)
        slowest = 1.0 / np.where(sizes > 0.0, found.rates, np.inf).min(axis=0, initial=np.inf)
        high = slowest * np.log(size / np.maximum(rest, FADED * (size + np.abs(found.start))))
        if found.ramping:
            high = np.where(found.slope == 0.0, high, (rest + size) / np.abs(found.slope))
        high = np.minimum(length, high * (1.0 + 1e-12))
    low = np.where(np.isfinite(low), low, 0.0)
    return np.minimum(low * (1.0 - 1e-12), high), high
