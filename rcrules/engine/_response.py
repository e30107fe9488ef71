"""Response of the modes to sources that are piecewise linear in time."""

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from rcrules.engine._exponential import ExponentialSum, phi
from rcrules.engine._shape import Array, layout, merged
from rcrules.engine._signal import Signal

if TYPE_CHECKING:
    from rcrules.engine._modes import Modes


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
    drift: Array
    """Slope of the target. [W^½/s], (n, case)"""


@dataclass(frozen=True, slots=True, kw_only=True)
class Response:
    """All voltages of a network over time, in every case."""

    modes: "Modes"
    starts: Array
    """[s], (s, case)"""
    pieces: tuple[Piece, ...]
    rest: Array | None
    """Node voltages in the end. [V], (free, case); None when a source ramps for ever"""

    def observe(self, weights: Array, offset: Array) -> Signal:
        """The signal ``weights . v - offset``.

        weights: of every terminal, the free ones first. [1], (case, terminals); may be one row for all cases
        offset: [V], (case,) or one number
        """
        free, cases = self.modes.shape.free, self.starts.shape[1]
        weights = np.broadcast_to(
            np.asarray(weights, float).T.reshape(free + self.modes.shape.held, -1),
            (free + self.modes.shape.held, cases),
        )
        offset = np.broadcast_to(np.asarray(offset, float), (cases,))
        shares = weighted(self.modes.vectors, weights[:free])
        rest = None if self.rest is None else (weights[:free] * self.rest).sum(axis=0)
        sums = tuple(self._piece(piece, shares, weights[free:], offset) for piece in self.pieces)
        if rest is not None and free:
            end = rest + (weights[free:] * self.pieces[-1].volts).sum(axis=0) - offset
            end = np.where(self.modes.decays[0] > 0.0, end, sums[-1].end())
            sums = (*sums[:-1], sums[-1].ending_at(end))
        return Signal(starts=self.starts, sums=sums, lengths=tuple(piece.length for piece in self.pieces))

    def _piece(self, piece: Piece, shares: Array, held: Array, offset: Array) -> ExponentialSum:
        """One piece of the signal; modes without time constant follow their target."""
        taus = self.modes.decays
        slow = taus > 0.0
        amps = np.where(slow, shares * (piece.state - piece.target), 0.0)
        start = (shares * piece.state).sum(axis=0) + (held * piece.volts).sum(axis=0) - offset
        rates = 1.0 / np.where(slow, taus, 1.0)
        if not piece.slopes.any():
            return ExponentialSum(start=start, slope=np.zeros_like(start), amps=amps, rates=rates, ramps=None)
        ramps = shares * piece.drift
        slope = (held * piece.slopes).sum(axis=0) + np.where(slow, 0.0, ramps).sum(axis=0)
        return ExponentialSum(start=start, slope=slope, amps=amps, rates=rates, ramps=np.where(slow, ramps, 0.0))


def respond(modes: "Modes", drive: Drive, charged: Array) -> Response:
    """Follow the modes from piece to piece.

    modes: of the network
    drive: sources
    charged: capacitor voltages just before the first instant. [V], (c, case)
    Charge on the capacitors of a mode is conserved over a jump; where the capacitors at a node contradict each other it is shared.
    """
    starts = np.ascontiguousarray(np.asarray(drive.starts, float).T)
    levels = np.moveaxis(np.asarray(drive.levels, float), 0, -1)
    slopes = np.moveaxis(np.asarray(drive.slopes, float), 0, -1)
    amps = np.asarray(drive.amps, float).T
    lengths = [*np.diff(starts, axis=0), np.full(starts.shape[1], np.inf)]
    state, pieces = _initial(modes, charged, levels[0]), []
    for index, length in enumerate(lengths):
        if index:
            state = _after(modes, pieces[-1]) + _jump(modes, levels[index] - _end(pieces[-1]))
        pieces.append(_started(modes, state, levels[index], slopes[index], amps, length))
        state = pieces[-1].state
    last = pieces[-1]
    rest = None if last.slopes.any() else modes.at_rest(modes.pull(last.volts, amps))
    return Response(modes=modes, starts=starts, pieces=tuple(pieces), rest=rest)


def _started(modes: "Modes", state: Array, volts: Array, slopes: Array, amps: Array, length: Array) -> Piece:
    """The piece that begins with these modes; modes without time constant are at their target."""
    target = weighted(modes.vectors, modes.pull(volts, amps))
    drift = np.zeros_like(target)
    if slopes.any():
        drift = weighted(modes.vectors, modes.pull(slopes, np.zeros_like(amps)))
        target = target + pushed_by(modes, slopes)
    state = np.where(modes.decays > 0.0, state, target)
    return Piece(length=length, volts=volts, slopes=slopes, state=state, target=target, drift=drift)


def _end(piece: Piece) -> Array:
    """Held voltages at the end of a piece of finite length. [V], (held, case)"""
    return piece.volts + piece.slopes * piece.length


def _after(modes: "Modes", piece: Piece) -> Array:
    """Modes at the end of a piece of finite length."""
    x = piece.length / np.where(modes.decays > 0.0, modes.decays, 1.0)
    return piece.state + (piece.state - piece.target) * np.expm1(-x) + piece.drift * piece.length * phi(x)


def _initial(modes: "Modes", charged: Array, volts: Array) -> Array:
    """Modes just after the first instant: each keeps the charge of its capacitors."""
    pulled = np.zeros((modes.stores.shape[1], modes.decays.shape[1]))
    for row, column in enumerate(layout(modes.shape).columns):
        for index, sign, terminal in column.members:
            held = 0.0 if terminal is None else volts[terminal]
            pulled[row] += modes.farads[index] * (held + sign * charged[index])
    safe = np.where(modes.decays > 0.0, modes.decays, 1.0)
    return _seen(modes, pulled) / safe


def _jump(modes: "Modes", change: Array) -> Array:
    """Jump of the modes when held voltages jump. [W^½], (n, case)

    change: of each held voltage. [V], (held, case)
    """
    if not change.any():
        return np.zeros_like(modes.decays)
    safe = np.where(modes.decays > 0.0, modes.decays, 1.0)
    return pushed_by(modes, change) / safe


def pushed_by(modes: "Modes", volts: Array) -> Array:
    """Charge that held voltages push into each mode through the capacitors to them. (n, case)

    volts: of the held terminals. [V], (held, case)
    """
    charge = np.zeros((modes.stores.shape[1], modes.decays.shape[1]))
    for row, column in enumerate(layout(modes.shape).columns):
        for index, _, terminal in column.members:
            if terminal is not None:
                charge[row] += modes.farads[index] * volts[terminal]
    return _seen(modes, charge)


def _seen(modes: "Modes", charge: Array) -> Array:
    """Charges of the merged capacitors, as the modes see them. (n, case)

    charge: [C], (column, case)
    """
    size = np.sqrt(merged(layout(modes.shape).columns, modes.farads))
    return np.einsum("kmc,mc->kc", modes.stores, charge / np.where(size > 0.0, size, 1.0))


def weighted(vectors: Array, weights: Array) -> Array:
    """Sum over nodes of vectors (n, node, case) times weights (node, case)."""
    return np.einsum("kic,ic->kc", vectors, weights)
