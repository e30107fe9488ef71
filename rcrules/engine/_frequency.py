"""Response to sinusoidal sources: transfer function and corner frequency."""

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from rcrules.engine._modes import Modes, solve
from rcrules.engine._response import pushed_by, weighted
from rcrules.engine._shape import Array, Shape

Complex = NDArray[np.complex128]

PER_DECADE = 12
"""Frequencies scanned per decade; poles are real, so nothing happens within less than an octave."""
BEYOND = 1e3
"""How far beyond the outermost poles is scanned."""
NOTHING = 1e-8
"""Share of the greatest gain at and below which a pass band has no gain."""
STEPS = 48
"""Most steps of the search between two scanned frequencies."""
CLOSE = 1e-15
"""Relative step after which the search ends."""


def transfer(shape: Shape, ohms: Array, farads: Array, source: int, omega: Array | float) -> Complex:
    """Voltage of every free node per volt at one held terminal, the other sources at rest. [1], (case, free)

    shape: topology
    ohms: resistances, > 0, inf = open. [Ω], (case, r)
    farads: capacitances, >= 0. [F], (case, c)
    source: number of the held terminal, ``free .. free+held-1``
    omega: angular frequency. [rad/s], (case,) or one number
    Raises FloatingNode when a free node has no resistive path to a held terminal.
    """
    modes = solve(shape, ohms, farads)
    conducted, pushed = _excitation(modes, source)
    omega = np.broadcast_to(np.asarray(omega, float), modes.decays.shape[1:])
    return _voltages(modes, conducted, pushed, omega).T.copy()


def corner(
    shape: Shape, ohms: Array, farads: Array, source: int, at: int, passes: Literal["low", "high"] = "low"
) -> Array:
    """Angular frequency at which the gain is 3 dB (1/sqrt(2)) below the pass band. [rad/s], (case,)

    shape: topology
    ohms: resistances, > 0, inf = open. [Ω], (case, r)
    farads: capacitances, >= 0. [F], (case, c)
    source: number of the held terminal that is driven
    at: observed free node
    passes: ``low``: the first such frequency from DC upwards, inf if none; ``high``: from the top downwards, 0 if none
    nan where the pass band has no gain. Raises FloatingNode when a free node has no resistive path to a held terminal.
    """
    modes = solve(shape, ohms, farads)
    conducted, pushed = _excitation(modes, source)
    share = modes.vectors[:, at]
    line = _Line(constant=share * conducted, rising=share * pushed, taus=modes.decays)
    scanned = _scanned(modes.decays)
    if passes == "high":
        scanned = scanned[::-1]
    gains = line.gain(scanned)
    level = line.gain(0.0 * scanned[0] if passes == "low" else scanned[0] / NOTHING) / np.sqrt(2.0)
    below = gains < level
    first = below.argmax(axis=0)
    case = np.flatnonzero(below.any(axis=0))
    found = np.full(len(level), np.inf if passes == "low" else 0.0)
    inside, outside = scanned[np.maximum(first[case] - 1, 0), case], scanned[first[case], case]
    found[case] = line.take(case).falling(level[case], inside, outside)
    return np.where(level > NOTHING * gains.max(axis=0), found, np.nan)


@dataclass(frozen=True, slots=True, kw_only=True)
class _Line:
    """Transfer to one node: sum over modes of (constant + j w rising)/(1 + j w tau)."""

    constant: Array
    """[1], (n, case)"""
    rising: Array
    """[s], (n, case)"""
    taus: Array
    """[s], (n, case)"""

    def gain(self, omega: Array) -> Array:
        """Magnitude. [1], shape of omega

        omega: [rad/s], (case,) or (k, case)
        """
        real, imaginary = np.zeros(omega.shape), np.zeros(omega.shape)
        square = omega * omega
        for constant, rising, tau in zip(self.constant, self.rising, self.taus, strict=True):
            size = 1.0 + square * (tau * tau)
            real += (constant + square * (rising * tau)) / size
            imaginary += (rising - constant * tau) / size
        found: Array = np.sqrt(real * real + square * (imaginary * imaginary))
        return found

    def take(self, case: NDArray[np.intp]) -> "_Line":
        """These cases only."""
        return _Line(constant=self.constant[:, case], rising=self.rising[:, case], taus=self.taus[:, case])

    def falling(self, level: Array, inside: Array, outside: Array) -> Array:
        """Angular frequency between two at which the gain is the level. [rad/s], (case,)

        Regula falsi over the logarithm; an end that is kept twice counts half (Illinois rule), so that both ends move.
        """
        near, far = np.zeros(len(level)), np.log(outside / inside)
        over, under = self.gain(inside) - level, self.gain(outside) - level
        found, side = near, np.zeros(len(level), dtype=int)
        for _ in range(STEPS):
            last, found = found, _meeting(near, far, over, under)
            value = self.gain(inside * np.exp(found)) - level
            above = value >= 0.0
            over = np.where(above, value, np.where(side < 0, 0.5 * over, over))
            under = np.where(above, np.where(side > 0, 0.5 * under, under), value)
            near, far = np.where(above, found, near), np.where(above, far, found)
            side = np.where(above, 1, -1)
            if np.all(np.abs(found - last) <= CLOSE):
                break
        return inside * np.exp(found)


def _meeting(near: Array, far: Array, over: Array, under: Array) -> Array:
    """Where the straight line from (near, over >= 0) to (far, under < 0) is 0; near where there is no such line."""
    fall = over - under
    share = np.maximum(over, 0.0) / np.where(fall > 0.0, fall, 1.0)
    return np.where(fall > 0.0, near + (far - near) * share, near)


def _excitation(modes: Modes, source: int) -> tuple[Array, Array]:
    """What one volt at the source drives into each mode: by conductance, and per rad/s by capacitance. (n, case)"""
    volts = np.zeros((modes.shape.held, modes.decays.shape[1]))
    volts[source - modes.shape.free] = 1.0
    conducted = weighted(modes.vectors, modes.pull(volts, np.zeros_like(modes.decays)))
    return conducted, pushed_by(modes, volts)


def _voltages(modes: Modes, conducted: Array, pushed: Array, omega: Array) -> Complex:
    """Node voltages at one angular frequency per case. (free, case)"""
    state = (conducted + 1j * omega * pushed) / (1.0 + 1j * omega * modes.decays)
    found: Complex = np.einsum("kic,kc->ic", modes.vectors, state)
    return found


def _scanned(taus: Array) -> Array:
    """Angular frequencies from well below to well above all poles, rising. [rad/s], (k, case)

    taus: time constants. [s], (n, case)
    """
    slowest = taus.max(axis=0, initial=0.0)
    slowest = np.where(slowest > 0.0, slowest, 1.0)
    fastest = np.where(taus > 0.0, taus, slowest).min(axis=0, initial=np.inf)
    low, high = 1.0 / (BEYOND * slowest), BEYOND / np.minimum(fastest, slowest)
    decades = float(np.log10(high / low).max(initial=1.0))
    shares = np.linspace(0.0, 1.0, int(decades * PER_DECADE) + 2)[:, None]
    scanned: Array = low * (high / low) ** shares
    return scanned
