"""Diodes in numbers, and the DC state of a network with them.

A diode is open while its forward voltage is below its drop; above, it is the drop in series with a resistance. Which
diodes conduct is a linear complementarity problem, whose matrix is that of a passive network (a P-matrix): it has one
solution, and flipping the first wrong diode again and again finds it (Murty's least-index method).
"""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from rcrules.engine import Shape, solve
from rcrules.problems._structure import Array, Structure, evaluate

Flags = NDArray[np.bool_]
Indices = NDArray[np.intp]

SLACK = 1e-12
"""Share of the greatest voltage within which a diode at its drop may be open or conduct: well above rounding, and a
current below what counts."""
MOST_FLIPS = 64
"""Flips of diodes in search of a consistent state, after which there is none."""


class Unsettled(Exception):  # noqa: N818 - what it says about a network is its name
    """The model of a network's diodes gives no answer in some case."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Passive:
    """A network without its diodes, in every case."""

    shape: Shape
    ohms: Array
    """[Ω] (case, resistor)"""
    farads: Array
    """[F] (case, capacitor)"""
    amps: Array
    """Currents drawn out of the free terminals [A] (case, free)"""

    def steady(self, held: Array) -> Array:
        """DC voltages of the free terminals [V] (case, free); held: of the others [V] (case, held)."""
        modes = solve(replace(self.shape, capacitors=()), self.ohms, np.zeros((len(held), 0)))
        return modes.steady(held, self.amps)

    def take(self, cases: Indices | Flags) -> "Passive":
        """Some of the cases."""
        return replace(self, ohms=self.ohms[cases], farads=self.farads[cases], amps=self.amps[cases])


@dataclass(frozen=True, slots=True, kw_only=True)
class Junctions:
    """The diodes of a network, in every case."""

    anodes: tuple[int, ...]
    cathodes: tuple[int, ...]
    drops: Array
    """Forward drop [V] (case, diode)"""
    ohms: Array
    """Resistance while it conducts [Ω] (case, diode)"""
    breakdowns: tuple[tuple[int, float, str], ...]
    """(diode, reverse voltage beyond which it is not modelled [V], its name)"""
    slack: Array
    """[V] (case,)"""

    def take(self, cases: Indices | Flags) -> "Junctions":
        """Some of the cases."""
        return replace(self, drops=self.drops[cases], ohms=self.ohms[cases], slack=self.slack[cases])

    def none(self) -> Flags:
        """No diode conducts (case, diode)."""
        return np.zeros(self.drops.shape, dtype=bool)

    def joined(self, passive: Passive, on: Flags) -> Passive:
        """The network with each diode that conducts as a resistor and the current that its drop makes.

        on: which diodes conduct (case, diode)
        """
        shape = passive.shape
        pairs = tuple(zip(self.anodes, self.cathodes, strict=True))
        amps = passive.amps.copy()
        pushed = np.where(on, self.drops / self.ohms, 0.0)
        for index, (anode, cathode) in enumerate(pairs):
            for terminal, sign in ((anode, -1.0), (cathode, 1.0)):
                if terminal < shape.free:
                    amps[:, terminal] += sign * pushed[:, index]
        ohms = np.concatenate([passive.ohms, np.where(on, self.ohms, np.inf)], axis=1)
        whole = Shape(shape.free, shape.held, (*shape.resistors, *pairs), shape.capacitors)
        return Passive(shape=whole, ohms=ohms, farads=passive.farads, amps=amps)

    def wrong(self, volts: Array, on: Flags) -> Flags:
        """Diodes that should be in the other state (case, diode).

        volts: of all terminals [V] (case, terminal)
        """
        beyond = volts[:, self.anodes] - volts[:, self.cathodes] - self.drops
        found: Flags = np.where(on, -beyond, beyond) > self.slack[:, None]
        return found

    def check_reverse(self, diode: int, volts: Array) -> None:
        """Raises Unsettled where a reverse voltage [V] (case,) exceeds the diode's breakdown."""
        for index, limit, name in self.breakdowns:
            if index == diode and (volts > limit).any():
                raise Unsettled(f"more than {limit:.3g} V in reverse across {name}: its breakdown is not modelled")


def junctions(structure: Structure, cases: Array, *volts: Array) -> Junctions:
    """The diodes of a structure in numbers.

    volts: whatever voltages of sources there are [V] (case, …)
    """
    diodes = structure.diodes
    drops = np.stack([evaluate(diode.drop, cases) for diode in diodes], axis=1)
    sizes = [np.abs(each).reshape(len(cases), -1).max(axis=1, initial=0.0) for each in (drops, *volts)]
    return Junctions(
        anodes=tuple(diode.anode for diode in diodes),
        cathodes=tuple(diode.cathode for diode in diodes),
        drops=drops,
        ohms=np.stack([evaluate(diode.ohms, cases) for diode in diodes], axis=1),
        breakdowns=tuple(
            (index, diode.breakdown, diode.name) for index, diode in enumerate(diodes) if diode.breakdown is not None
        ),
        slack=SLACK * np.maximum.reduce(sizes),
    )


def at_rest(passive: Passive, found: Junctions, held: Array) -> tuple[Array, Flags]:
    """DC voltages of all terminals [V] (case, terminal), and which diodes conduct (case, diode).

    held: voltages of the held terminals [V] (case, held). Raises FloatingNode, Unsettled.
    """
    shape = replace(passive.shape, capacitors=())
    bare = replace(passive, shape=shape, farads=np.zeros((len(held), 0)))
    volts = np.concatenate([np.zeros((len(held), shape.free)), held], axis=1)
    on, open_cases = found.none(), np.arange(len(held))
    for _ in range(MOST_FLIPS):
        some = found.take(open_cases)
        joined = some.joined(bare.take(open_cases), on[open_cases])
        modes = solve(joined.shape, joined.ohms, joined.farads)
        volts[open_cases, : shape.free] = modes.steady(held[open_cases], joined.amps)
        wrong = some.wrong(volts[open_cases], on[open_cases])
        again = np.flatnonzero(wrong.any(axis=1))
        if not len(again):
            _check_reverse(found, volts)
            return volts, on
        open_cases, first = open_cases[again], wrong[again].argmax(axis=1)
        on[open_cases, first] ^= True
    raise Unsettled(f"no DC state after {MOST_FLIPS} switchings of its diodes")


def _check_reverse(found: Junctions, volts: Array) -> None:
    for index, _, _ in found.breakdowns:
        found.check_reverse(index, volts[:, found.cathodes[index]] - volts[:, found.anodes[index]])
