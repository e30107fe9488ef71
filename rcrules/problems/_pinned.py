"""The steady state of a network of which sources hold some free terminals until the event."""

import numpy as np

from rcrules.engine import Shape, solve
from rcrules.problems._structure import Array, Structure, evaluate


def pinned_state(structure: Structure, cases: Array, held: Array, ohms: Array, amps: Array) -> Array:
    """All terminals just before the event [V] (case, terminal).

    held: voltages of the held terminals [V] (case, held). ohms: [Ω] (case, resistor). amps: drawn [A] (case, free).
    Raises FloatingNode.
    """
    shape = structure.shape
    pinned = dict(structure.pinned)
    loose = [terminal for terminal in range(shape.free) if terminal not in pinned]
    fixed = [*pinned, *range(shape.free, shape.free + shape.held)]
    volts = np.concatenate([*(evaluate(form, cases)[:, None] for form in pinned.values()), held], axis=1)
    found = np.empty((len(cases), shape.free + shape.held))
    found[:, fixed] = volts
    if loose:
        number = {terminal: index for index, terminal in enumerate([*loose, *fixed])}
        pairs = tuple((number[a], number[b]) for a, b in shape.resistors)
        modes = solve(Shape(len(loose), len(fixed), pairs, ()), ohms, np.zeros((len(cases), 0)))
        found[:, loose] = modes.steady(volts, amps[:, loose])
    return found
