"""The waveforms of all held terminals as one list of straight pieces."""

import numpy as np

from rcrules.engine import Drive
from rcrules.problems._structure import Array, Form, Structure, Waveform, evaluate


def before(structure: Structure, cases: Array) -> Array:
    """Volts of the held terminals before the event; shape (case, held)."""
    return stack([evaluate(wave.before, cases) for wave in structure.waveforms], cases)


def drive(structure: Structure, cases: Array) -> Drive:
    """Sources after the event: a piece starts where any waveform bends; of two points at one time the later counts."""
    starts = _starts(structure, cases)
    levels = np.empty((*starts.shape, len(structure.waveforms)))
    slopes = np.empty_like(levels)
    for index, wave in enumerate(structure.waveforms):
        levels[:, :, index], slopes[:, :, index] = _sampled(wave, starts, cases)
    return Drive(starts=starts, levels=levels, slopes=slopes, amps=currents(structure, cases))


def currents(structure: Structure, cases: Array) -> Array:
    """Currents drawn out of the free terminals [A]; shape (case, free)."""
    amps = np.zeros((len(cases), structure.shape.free))
    for terminal, form in structure.amps:
        amps[:, terminal] += evaluate(form, cases)
    return amps


def reached(wave: Waveform, level: Array, cases: Array) -> Array:
    """First time at which a rising waveform reaches a level [s], inf = never; shape (case,)."""
    times, volts = points(wave, cases)
    found = np.where(volts[:, 0] >= level, 0.0, np.inf)
    for k in range(1, times.shape[1]):
        rise, span = volts[:, k] - volts[:, k - 1], times[:, k] - times[:, k - 1]
        share = np.divide(level - volts[:, k - 1], rise, out=np.ones_like(rise), where=rise > 0)
        here = times[:, k - 1] + span * np.clip(share, 0.0, 1.0)
        found = np.minimum(found, np.where(volts[:, k] >= level, here, np.inf))
    return found


def points(wave: Waveform, cases: Array) -> tuple[Array, Array]:
    """Times and volts of a waveform, shape (case, point) each."""
    times = stack([evaluate(time, cases) for time, _ in wave.points], cases)
    return times, stack([evaluate(volts, cases) for _, volts in wave.points], cases)


def stack(columns: list[Array], cases: Array) -> Array:
    """Columns side by side; shape (case, 0) where there is none."""
    return np.stack(columns, axis=1) if columns else np.zeros((len(cases), 0))


def _starts(structure: Structure, cases: Array) -> Array:
    forms: dict[Form, None] = {(): None}
    for wave in structure.waveforms:
        forms.update((time, None) for time, _ in wave.points if any(factor for factor, _ in time))
    return np.sort(stack([evaluate(form, cases) for form in forms], cases), axis=1)


def _sampled(wave: Waveform, starts: Array, cases: Array) -> tuple[Array, Array]:
    """Value and slope at each start, just after it; shape (case, start) each."""
    times, volts = points(wave, cases)
    span, rise = np.diff(times, axis=1), np.diff(volts, axis=1)
    slope = np.divide(rise, span, out=np.zeros_like(rise), where=span > 0)
    slope = np.concatenate([slope, np.zeros((len(cases), 1))], axis=1)
    passed = np.maximum((times[:, None, :] <= starts[:, :, None]).sum(axis=2) - 1, 0)
    here = np.take_along_axis(slope, passed, axis=1)
    since = starts - np.take_along_axis(times, passed, axis=1)
    return np.take_along_axis(volts, passed, axis=1) + here * since, here
