"""Response of the modes to sources that are piecewise linear in time."""

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from rcrules.engine._exponential import ExponentialSum, phi
from rcrules.engine._shape import Array, layout
from rcrules.engine._signal import Signal

if TYPE_CHECKING:
    from rcrules.engine._modes import Modes

Terms = list[tuple[int, Array]]
"""Rows and their weights. [1], (case,) or (1,)"""


ROUNDING = 1e-15
"""Share of its parts at and below which a sum counts as zero."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Drive:
    """Sources of a network over time, piecewise linear; a step between two pieces is a jump."""

    starts: Array
    """Start of each piece, not decreasing, the first 0. [s], (case, s)"""
    levels: Array
    """Voltage of each held terminal at the start of each piece. [V], (case, s, held)"""
    slopes: Array
    """Slope of each held terminal in each piece. [V/s], (case, s, held)"""
    amps: Array
    """Constant current drawn out of each free node. [A], (case, free)"""


@dataclass(frozen=True, slots=True, kw_only=True)
class Piece:
    """One piece of a response; within it each mode q follows one exponential and one ramp."""

    length: Array
    """[s], (case,); inf in the last piece"""
    volts: Array
    """Held terminals at the start. [V], (held, case)"""
    slopes: Array
    """[V/s], (held, case)"""
    state: Array
    """Modes just after the start. [W^½], (n, case)"""
    target: Array
    """What each mode would settle to, were the sources to stop. [W^½], (n, case)"""
    drift: Array | None
    """Slope of the target. [W^½/s], (n, case); None = no source ramps"""


@dataclass(frozen=True, slots=True, kw_only=True)
class Response:
    """All voltages of a network over time, in every case."""

    modes: "Modes"
    starts: Array
    """[s], (s, case)"""
    pieces: tuple[Piece, ...]
    rest: Array | None
    """Node voltages in the end. [V], (free, case); None when a source ramps for ever"""

    def observe(self, weights: Array, offset: Array | float) -> Signal:
        """The signal ``weights . v - offset``.

        weights: of every terminal, the free ones first. [1], (case, terminals), or (terminals,) for all cases alike
        offset: [V], (case,), or one number for all cases
        """
        free, cases = self.modes.shape.free, self.starts.shape[1]
        rows = [(k, row) for k, row in enumerate(np.atleast_2d(np.asarray(weights, float)).T) if row.any()]
        held = [(k - free, row) for k, row in rows if k >= free]
        nodes = [(k, row) for k, row in rows if k < free]
        shares = np.zeros((free, cases))
        for k, row in nodes:
            shares += self.modes.vectors[:, k] * row
        sums = [self._piece(piece, shares, held, offset) for piece in self.pieces]
        if self.rest is not None and free:
            end = np.zeros(cases) + _summed(nodes, self.rest) + _summed(held, self.pieces[-1].volts) - offset
            sums[-1] = sums[-1].ending_at(end if self.modes.instant is None else self._kept(end, sums[-1]))
        return Signal(starts=self.starts, sums=tuple(sums), lengths=tuple(piece.length for piece in self.pieces))

    def _kept(self, end: Array, found: ExponentialSum) -> Array:
        """The end, but as it is where no mode takes time."""
        return np.where(self.modes.decays[0] > 0.0, end, found.end())

    def _piece(self, piece: Piece, shares: Array, held: Terms, offset: Array | float) -> ExponentialSum:
        """One piece of the signal; modes without time constant follow their target."""
        instant, rates = self.modes.instant, self.modes.rates
        start = _start(shares * piece.state, _summed(held, piece.volts) - offset, offset)
        amps = shares * (piece.state - piece.target)
        if instant is not None:
            amps[instant] = 0.0
        if piece.drift is None:
            return ExponentialSum(start=start, slope=np.zeros_like(start), amps=amps, rates=rates, ramps=None)
        ramps = shares * piece.drift
        slope = np.zeros_like(start) + _summed(held, piece.slopes)
        if instant is not None:
            slope += np.where(instant, ramps, 0.0).sum(axis=0)
            ramps[instant] = 0.0
        return ExponentialSum(start=start, slope=slope, amps=amps, rates=rates, ramps=ramps)


def _start(parts: Array, others: Array | float, offset: Array | float) -> Array:
    """Sum of all parts, exactly 0 where rounding has decided its sign.

    parts: of the modes. [V], (n, case)
    others: of the held terminals, less the offset. [V], (case,)
    offset: [V], (case,)
    """
    start = np.asarray(parts.sum(axis=0) + others)
    size = np.abs(parts).sum(axis=0) + np.abs(others) + np.abs(offset)
    return np.where(np.abs(start) <= ROUNDING * size, 0.0, start)


def _summed(terms: Terms, values: Array) -> Array | float:
    """Sum of weighted rows of values (row, case)."""
    return sum((row * values[k] for k, row in terms), 0.0)


def respond(modes: "Modes", drive: Drive, charged: Array) -> Response:
    """Follow the modes from piece to piece.

    modes: of the network
    drive: sources
    charged: capacitor voltages just before the first instant. [V], (c, case)
    Charge is conserved over a jump; where capacitors at a node contradict each other they share it.
    """
    starts = np.ascontiguousarray(np.asarray(drive.starts, float).T)
    levels, slopes = (
        np.ascontiguousarray(np.asarray(x, float).transpose(1, 2, 0)) for x in (drive.levels, drive.slopes)
    )
    amps = np.asarray(drive.amps, float).T
    drawn = amps if amps.any() else None
    lengths = [*np.diff(starts, axis=0), np.full(starts.shape[1], np.inf)]
    state = _initial(modes, charged, levels[0])
    pieces: list[Piece] = []
    for index, length in enumerate(lengths):
        if index:
            state = _after(modes, pieces[-1]) + _jump(modes, levels[index] - _end(pieces[-1]))
        pieces.append(_started(modes, state, levels[index], slopes[index], drawn, length))
    last = pieces[-1]
    rest = modes.at_rest(modes.pull(last.volts, drawn)) if last.drift is None else None
    return Response(modes=modes, starts=starts, pieces=tuple(pieces), rest=rest)


def _started(modes: "Modes", state: Array, volts: Array, slopes: Array, amps: Array | None, length: Array) -> Piece:
    """The piece that begins with these modes; modes without time constant are at their target."""
    target = weighted(modes.vectors, modes.pull(volts, amps))
    drift = None
    if slopes.any():
        drift = weighted(modes.vectors, modes.pull(slopes, None))
        target += pushed_by(modes, slopes)
    if modes.instant is not None:
        state = np.where(modes.instant, target, state)
    return Piece(length=length, volts=volts, slopes=slopes, state=state, target=target, drift=drift)


def _end(piece: Piece) -> Array:
    """Held voltages at the end of a piece of finite length. [V], (held, case)"""
    return piece.volts + piece.slopes * piece.length


def _after(modes: "Modes", piece: Piece) -> Array:
    """Modes at the end of a piece of finite length."""
    x = piece.length * modes.rates
    state = piece.state + (piece.state - piece.target) * np.expm1(-x)
    return state if piece.drift is None else state + piece.drift * piece.length * phi(x)


def _initial(modes: "Modes", charged: Array, volts: Array) -> Array:
    """Modes just after the first instant: each keeps the charge of its capacitors."""
    charge = np.zeros_like(modes.sizes)
    for row, column in enumerate(layout(modes.shape).columns):
        for index, sign, terminal in column.members:
            held = 0.0 if terminal is None else volts[terminal]
            charge[row] += modes.farads[index] * (held + sign * charged[index])
    return _seen(modes, charge) * modes.rates


def _jump(modes: "Modes", change: Array) -> Array:
    """Jump of the modes when held voltages jump. [W^½], (n, case)

    change: of each held voltage. [V], (held, case)
    """
    return pushed_by(modes, change) * modes.rates


def pushed_by(modes: "Modes", volts: Array) -> Array:
    """Charge that held voltages push into each mode through the capacitors to them. (n, case)

    volts: of the held terminals. [V], (held, case)
    """
    charge = np.zeros_like(modes.sizes)
    if volts.any():
        for row, column in enumerate(layout(modes.shape).columns):
            for index, _, terminal in column.members:
                if terminal is not None:
                    charge[row] += modes.farads[index] * volts[terminal]
    return _seen(modes, charge)


def _seen(modes: "Modes", charge: Array) -> Array:
    """Charges of the merged capacitors, as the modes see them. (n, case)

    charge: [C], (column, case)
    """
    if not charge.any():
        return np.zeros_like(modes.decays)
    shares = charge / np.where(modes.sizes > 0.0, np.sqrt(modes.sizes), 1.0)
    seen: Array = np.einsum("kmc,mc->kc", modes.stores, shares)
    return seen


def weighted(vectors: Array, weights: Array) -> Array:
    """Sum over nodes of vectors (n, node, case) times weights (node, case)."""
    found: Array = np.einsum("kic,ic->kc", vectors, weights)
    return found
