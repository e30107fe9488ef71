"""A network with diodes over time: exact between the instants at which a diode starts or stops to conduct.

All cases advance together from switching to switching; each round is one call of the engine, in which a diode that is
open has infinite resistance. The next switching is the first crossing of a diode's forward voltage through its drop.
Capacitor voltages carry the state over; they do not depend on which diodes conduct when a source jumps, because a
diode's resistance passes no impulse.
"""

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from rcrules.engine import Drive, Response, Signal, solve
from rcrules.problems._junctions import MOST_FLIPS, Flags, Indices, Junctions, Passive, Unsettled
from rcrules.problems._pieces import Stretch, joined
from rcrules.problems._structure import Array

MOST_SWITCHINGS = 32
"""Instants of switching after which a network does not settle."""


@dataclass(frozen=True, slots=True, kw_only=True)
class _Interval:
    """Some cases from one switching to the next."""

    cases: Indices
    begin: Array
    """[s] (case,)"""
    cut: Array
    """Time of the next switching since the begin [s] (case,); inf = none"""
    on: Flags
    """Which diodes conduct (case, diode)"""
    response: Response


@dataclass(frozen=True, slots=True, kw_only=True)
class Switching:
    """All voltages of a network with diodes over time, in every case."""

    found: Junctions
    intervals: tuple[_Interval, ...]

    def observe(self, weights: Array, offset: Array, through: Sequence[float] = ()) -> Signal:
        """The signal ``weights . v - offset + through . i``, i the currents of the diodes.

        weights: of every terminal [1] (case, terminal). offset: [V] (case,). through: [Ω] (diode,); empty = none
        """
        stretches = []
        for item in self.intervals:
            own, rest = self._with_currents(item, weights[item.cases], offset[item.cases], through)
            signal = item.response.observe(own, rest)
            stretches.append(Stretch(cases=item.cases, begin=item.begin, cut=item.cut, signal=signal))
        return joined(stretches, len(weights))

    def _with_currents(
        self, item: _Interval, weights: Array, offset: Array, through: Sequence[float]
    ) -> tuple[Array, Array]:
        """Weights and offset with the currents of the diodes that conduct."""
        some = self.found.take(item.cases)
        weights, offset = weights.copy(), np.asarray(offset, float).copy()
        for index, factor in enumerate(through):
            per_volt = np.where(item.on[:, index], factor / some.ohms[:, index], 0.0)
            weights[:, some.anodes[index]] += per_volt
            weights[:, some.cathodes[index]] -= per_volt
            offset += per_volt * some.drops[:, index]
        return weights, offset


def follow(passive: Passive, found: Junctions, drive: Drive, charged: Array, on: Flags) -> Switching:
    """The response to sources over time.

    charged: capacitor voltages just before the first instant [V] (case, capacitor). on: diodes that may conduct first
    (case, diode). Raises FloatingNode, Unsettled.
    """
    cases = np.arange(len(charged))
    now, switched, flips = np.zeros(len(cases)), np.zeros(len(cases)), np.zeros(len(cases))
    on, charged, intervals = on.copy(), charged.copy(), []
    while len(cases):
        some = found.take(cases)
        part = some.joined(passive.take(cases), on[cases])
        later = _from(_taken(drive, cases), now[cases], part.amps)
        response = solve(part.shape, part.ohms, part.farads).respond(later, charged[cases])
        cut, which = _next(response, some, on[cases])
        item = _Interval(cases=cases, begin=now[cases], cut=cut, on=on[cases], response=response)
        if (cut > 0.0).any():
            intervals.append(item)
        again = np.flatnonzero(np.isfinite(cut))
        cases, cut, which = cases[again], cut[again], which[again]
        if len(again):
            charged[cases] = _charges(response, part, item.cut)[again]
            now[cases] = _advanced(now[cases], cut, drive.starts[cases], later.starts[again])
            on[cases, which] ^= True
            switched[cases] += cut > 0.0
            flips[cases] = np.where(cut > 0.0, 0.0, flips[cases] + 1.0)
        if (switched > MOST_SWITCHINGS).any() or (flips > MOST_FLIPS).any():
            raise Unsettled(f"it does not settle after {MOST_SWITCHINGS} switchings of its diodes")
    whole = Switching(found=found, intervals=tuple(intervals))
    _check_reverse(whole, passive)
    return whole


def _taken(drive: Drive, cases: Indices) -> Drive:
    return Drive(
        starts=drive.starts[cases], levels=drive.levels[cases], slopes=drive.slopes[cases], amps=drive.amps[cases]
    )


def _from(drive: Drive, now: Array, amps: Array) -> Drive:
    """The sources from a time on; pieces that are over have no length and the values of the present one.

    now: [s] (case,). amps: drawn out of the free terminals [A] (case, free)
    """
    since = np.maximum(now[:, None] - drive.starts, 0.0)
    place = np.maximum((drive.starts <= now[:, None]).sum(axis=1) - 1, 0)
    row = np.arange(len(now))
    over = (np.arange(drive.starts.shape[1])[None, :] < place[:, None])[:, :, None]
    levels = drive.levels + drive.slopes * since[:, :, None]
    return Drive(
        starts=np.maximum(drive.starts - now[:, None], 0.0),
        levels=np.where(over, levels[row, place][:, None], levels),
        slopes=np.where(over, drive.slopes[row, place][:, None], drive.slopes),
        amps=amps,
    )


def _next(response: Response, found: Junctions, on: Flags) -> tuple[Array, Indices]:
    """When the next diode switches [s] (case,), inf = never, and which; of several the first."""
    times = np.empty(on.shape)
    for index in range(on.shape[1]):
        sign = np.where(on[:, index], -1.0, 1.0)
        times[:, index] = _forward(response, found, index, sign * found.slack).first_crossing(sign)
    which = times.argmin(axis=1)
    return times[np.arange(len(times)), which], which


def _forward(response: Response | Switching, found: Junctions, index: int, beyond: Array) -> Signal:
    """Forward voltage of a diode above its drop and more."""
    weights = _between(response, found.anodes[index], found.cathodes[index], len(beyond))
    return response.observe(weights, found.drops[:, index] + beyond)


def _between(response: Response | Switching, first: int, second: int, cases: int) -> Array:
    modes = (response if isinstance(response, Response) else response.intervals[0].response).modes
    weights = np.zeros((cases, modes.shape.free + modes.shape.held))
    weights[:, first] += 1.0
    weights[:, second] -= 1.0
    return weights


def _charges(response: Response, part: Passive, time: Array) -> Array:
    """Capacitor voltages at a time, after the jump where there is one [V] (case, capacitor)."""
    time = np.where(np.isfinite(time), time, 0.0)
    found = np.empty(part.farads.shape)
    for index, (a, b) in enumerate(part.shape.capacitors):
        found[:, index] = response.observe(_between(response, a, b, len(time)), 0.0).at(time)
    return found


def _advanced(now: Array, cut: Array, starts: Array, later: Array) -> Array:
    """The time of a switching; exactly that of a bend of the sources where it is there.

    starts: of the pieces [s] (case, piece). later: the same since now
    """
    found = now + cut
    for piece in range(starts.shape[1]):
        found = np.where((cut == later[:, piece]) & (starts[:, piece] > now), starts[:, piece], found)
    return found


def _check_reverse(whole: Switching, passive: Passive) -> None:
    for index, _, _ in whole.found.breakdowns:
        reverse = replace(whole.found, drops=np.zeros_like(whole.found.drops))
        lowest, _ = _forward(whole, reverse, index, np.zeros(len(passive.farads))).extremes()
        whole.found.check_reverse(index, -lowest)
