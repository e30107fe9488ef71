"""Cases of a structure, solved: what measures read their quantities from."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Literal

import numpy as np

from rcrules.engine import Amplified, Modes, Oscillation, Response, Signal, corner, solve
from rcrules.problems._junctions import Flags, Passive, Unsettled, at_rest, junctions
from rcrules.problems._pinned import pinned_state
from rcrules.problems._structure import Array, Form, LevelForm, Structure, evaluate
from rcrules.problems._switching import Switching, follow
from rcrules.problems._waves import before, currents, drive, reached, stack


@dataclass(frozen=True, kw_only=True)
class Solved:
    """The cases of a structure and, as far as they are asked for, their modes and response.

    One of these lives as long as one call of a measure; what it has worked out it keeps.
    """

    structure: Structure
    cases: Array
    """(case, column)"""

    @cached_property
    def ohms(self) -> Array:
        """[Ω] (case, resistor)"""
        return stack([evaluate(form, self.cases) for form in self.structure.ohms], self.cases)

    @cached_property
    def farads(self) -> Array:
        """[F] (case, capacitor)"""
        return stack([evaluate(form, self.cases) for form in self.structure.farads], self.cases)

    @cached_property
    def amps(self) -> Array:
        """Currents drawn out of the free terminals [A] (case, free)"""
        return currents(self.structure, self.cases)

    @cached_property
    def modes(self) -> Modes:
        """Modes after the event. Raises FloatingNode."""
        return solve(self.structure.shape, self.ohms, self.farads)

    @cached_property
    def earlier(self) -> Modes:
        """Modes before the event. Raises FloatingNode."""
        if self.structure.earlier is None:
            return self.modes
        shape, forms = self.structure.earlier
        return solve(shape, stack([evaluate(form, self.cases) for form in forms], self.cases), self.farads)

    @cached_property
    def volts_before(self) -> Array:
        """All terminals just before the event [V] (case, terminal). Raises FloatingNode, Unsettled."""
        return self._before[0]

    @cached_property
    def _before(self) -> tuple[Array, Flags]:
        """All terminals just before the event [V] (case, terminal), and which diodes conduct (case, diode)."""
        structure, held = self.structure, before(self.structure, self.cases)
        none = np.zeros((len(self.cases), len(structure.diodes)), dtype=bool)
        if structure.empty or not structure.shape.free:
            return np.concatenate([np.zeros((len(self.cases), structure.shape.free)), held], axis=1), none
        if structure.amplifiers:
            return np.concatenate([self.amplified.steady(held), held], axis=1), none
        if structure.pinned:
            return pinned_state(structure, self.cases, held, self.passive)
        if structure.diodes:
            return self.rest(held, earlier=True)
        return np.concatenate([self.earlier.steady(held, self.amps), held], axis=1), none

    @cached_property
    def amplified(self) -> Amplified:
        """The network with its ideal amplifiers. Raises FloatingNode, Unsettled where one does not settle."""
        shape, amplifiers = self.structure.shape, self.structure.amplifiers
        found = Amplified(shape=shape, amplifiers=amplifiers, ohms=self.ohms, farads=self.farads)
        if not found.settles.all():
            raise Unsettled("an amplifier does not settle with this feedback")
        return found

    def _swing(self, weights: Array, offset: Array) -> Oscillation:
        """What an amplified network does after sources that jump at once. Raises FloatingNode, Unsettled."""
        starts, levels, slopes = self.sources
        if starts.shape[1] > 1 or slopes.any() or self.structure.amps:
            raise Unsettled("around an amplifier only steps are worked out, without ramps and leakage")
        found = self.amplified.step(weights, before(self.structure, self.cases), levels[:, 0])
        return replace(found, constant=found.constant - offset)

    def rest(self, held: Array, *, earlier: bool = False) -> tuple[Array, Flags]:
        """DC voltages of all terminals [V] (case, terminal), and which diodes conduct (case, diode).

        held: voltages of the held terminals [V] (case, held). earlier: with contacts as before the event. Raises
        FloatingNode, Unsettled.
        """
        passive = self.passive
        if earlier and self.structure.earlier is not None:
            shape, forms = self.structure.earlier
            ohms = stack([evaluate(form, self.cases) for form in forms], self.cases)
            passive = replace(passive, shape=shape, ohms=ohms)
        return at_rest(passive, junctions(self.structure, self.cases, held), held)

    @cached_property
    def passive(self) -> Passive:
        """The network after the event without its diodes."""
        return Passive(shape=self.structure.shape, ohms=self.ohms, farads=self.farads, amps=self.amps)

    @cached_property
    def response(self) -> Response | Switching:
        """The response to the event. Raises FloatingNode, Unsettled."""
        ends = np.array(self.structure.shape.capacitors, dtype=int).reshape(-1, 2)
        charged = self.volts_before[:, ends[:, 0]] - self.volts_before[:, ends[:, 1]]
        if self.structure.empty:
            charged = np.zeros_like(charged)
        for index, form in self.structure.charged:
            charged[:, index] = evaluate(form, self.cases)
        sources = drive(self.structure, self.cases)
        if not self.structure.diodes:
            return self.modes.respond(sources, charged)
        found = junctions(self.structure, self.cases, self.volts_before, sources.levels)
        return follow(self.passive, found, sources, charged, self._before[1])

    @cached_property
    def sources(self) -> tuple[Array, Array, Array]:
        """Starts of the pieces [s] (case, piece), volts and slopes [V/s] (case, piece, held) of the sources."""
        found = drive(self.structure, self.cases)
        return found.starts, found.levels, found.slopes

    @cached_property
    def signal(self) -> Signal:
        """Voltage of the observed terminal against its reference."""
        return self.watch(self.weights(), np.zeros(len(self.cases)))

    @cached_property
    def start(self) -> Array:
        """The observed voltage just before the event [V] (case,)"""
        watched: Array = (self.weights() * self.volts_before).sum(axis=1)
        return watched

    @cached_property
    def final(self) -> Array:
        """The observed voltage at the end [V] (case,)"""
        return self._observed.final()

    @cached_property
    def initial(self) -> Array:
        """The observed voltage just after the event [V] (case,)"""
        return self._observed.initial()

    @cached_property
    def _observed(self) -> Signal | Oscillation:
        return self._swing(self.weights(), np.zeros(len(self.cases))) if self.structure.amplifiers else self.signal

    def settled(self, band: Array) -> Array:
        """When the observed voltage is within a band around its end for good [s] (case,)"""
        if self.structure.amplifiers:
            return self._swing(self.weights(), self.final).last_exit(-band, band)
        return self.watch(self.weights(), self.final).last_exit(-band, band)

    @cached_property
    def reference(self) -> Array:
        """The time from which delays count [s] (case,); inf where the supply never becomes valid."""
        if self.structure.reference is None:
            return np.zeros(len(self.cases))
        terminal, level = self.structure.reference
        wave = self.structure.waveforms[terminal - self.structure.shape.free]
        return reached(wave, evaluate(level.offset, self.cases), self.cases)

    def form(self, form: Form) -> Array:
        """A form in each case; shape (case,)."""
        return evaluate(form, self.cases)

    def weights(self) -> Array:
        """Which terminals make up the observed voltage; shape (case, terminal)."""
        terminals = self.structure.shape.free + self.structure.shape.held
        weights = np.zeros((len(self.cases), terminals))
        weights[:, self.structure.at] += 1.0
        if self.structure.against is not None:
            weights[:, self.structure.against] -= 1.0
        return weights

    def watch(self, weights: Array, offset: Array, through: Sequence[float] = ()) -> Signal:
        """weights . v - offset + through . i over time, i the currents of the diodes."""
        if isinstance(self.response, Switching):
            return self.response.observe(weights, offset, through)
        return self.response.observe(weights, offset)

    def above(self, level: LevelForm, *, turned: bool = False) -> tuple[Signal, Array]:
        """The observed voltage minus a level (turned: the reverse) over time, and its value just before the event."""
        weights, offset = self.weights(), self._fixed(level)
        for terminal, fraction in level.follows:
            weights[:, terminal] -= evaluate(fraction, self.cases)
        if turned:
            weights, offset = -weights, -offset
        past = (weights * self.volts_before).sum(axis=1) - offset
        return self.watch(weights, offset), past

    def _fixed(self, level: LevelForm) -> Array:
        fraction = evaluate(level.fraction, self.cases)
        if level.kind == "final":
            return fraction * self.final
        if level.kind == "step":
            return self.start + fraction * (self.final - self.start)
        return evaluate(level.offset, self.cases)


def solved(structure: Structure, cases: Array) -> Solved:
    """Cases (case, column) of a structure, ready to be measured."""
    return Solved(structure=structure, cases=cases)


def steady_states(structure: Structure, cases: Array) -> Array:
    """DC voltages of all terminals in each of the structure's states [V] (case, state, terminal).

    States are those of ``structure.states``; where there is an ``earlier`` shape (another position of a contact), those
    of that shape follow. What pins leak comes from their rails: where currents are drawn and the option ``railed`` says
    that all rails are among the sources, free terminals stay within the outermost. Raises FloatingNode, Unsettled.
    """
    case = Solved(structure=structure, cases=cases)
    found = []
    for earlier in (False, True) if structure.earlier is not None else (False,):
        for sources in structure.states:
            held = stack([evaluate(form, cases) for form in sources], cases)
            if structure.diodes:
                found.append(case.rest(held, earlier=earlier)[0])
                continue
            free = np.zeros((len(cases), 0))
            if structure.shape.free:
                free = (case.earlier if earlier else case.modes).steady(held, case.amps)
            if structure.amps and structure.shape.held and ("railed", 1.0) in structure.options:
                free = np.clip(free, held.min(axis=1, keepdims=True), held.max(axis=1, keepdims=True))
            found.append(np.concatenate([free, held], axis=1))
    return np.stack(found, axis=1)


def corner_omega(structure: Structure, cases: Array) -> Array:
    """Angular frequency 3 dB below the pass band [rad/s] (case,).

    From the terminal in option ``source`` to the observed one; ``passes``: ``low`` or ``high``. Raises FloatingNode.
    """
    case = Solved(structure=structure, cases=cases)
    passes: Literal["low", "high"] = "low" if structure.option("passes") == "low" else "high"
    source = int(structure.option("source"))
    if structure.amplifiers:
        return case.amplified.corner(source, structure.at, passes)
    return corner(structure.shape, case.ohms, case.farads, source, structure.at, passes)
