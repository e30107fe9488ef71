"""The steady state of a network of which sources hold some free terminals until the event."""

from collections.abc import Iterable
from dataclasses import replace

import numpy as np

from rcrules.engine import Shape
from rcrules.problems._junctions import Flags, Passive, at_rest, junctions
from rcrules.problems._structure import Array, Structure, evaluate


def pinned_state(structure: Structure, cases: Array, held: Array, passive: Passive) -> tuple[Array, Flags]:
    """All terminals just before the event [V] (case, terminal), and which diodes conduct (case, diode).

    held: voltages of the held terminals [V] (case, held). Raises FloatingNode, Unsettled.
    """
    shape, pinned = structure.shape, dict(structure.pinned)
    loose = [terminal for terminal in range(shape.free) if terminal not in pinned]
    fixed = [*pinned, *range(shape.free, shape.free + shape.held)]
    volts = np.concatenate([*(evaluate(form, cases)[:, None] for form in pinned.values()), held], axis=1)
    number = {terminal: index for index, terminal in enumerate([*loose, *fixed])}
    found = np.empty((len(cases), shape.free + shape.held))
    found[:, fixed] = volts
    if not loose:
        return found, np.zeros((len(cases), len(structure.diodes)), dtype=bool)
    own = Shape(len(loose), len(fixed), _renumbered(shape.resistors, number), ())
    bare = replace(passive, shape=own, farads=np.zeros((len(cases), 0)), amps=passive.amps[:, loose])
    diodes = tuple(replace(item, anode=number[item.anode], cathode=number[item.cathode]) for item in structure.diodes)
    if diodes:
        at, on = at_rest(bare, junctions(replace(structure, diodes=diodes), cases, volts), volts)
    else:
        at, on = bare.steady(volts), np.zeros((len(cases), 0), dtype=bool)
    found[:, loose] = at[:, : len(loose)]
    return found, on


def _renumbered(pairs: Iterable[tuple[int, int]], number: dict[int, int]) -> tuple[tuple[int, int], ...]:
    return tuple((number[a], number[b]) for a, b in pairs)
