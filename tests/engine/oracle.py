"""The textbook solution in many digits: nodal matrices summed, eigenvectors of the pencil, no care for rounding."""

from collections.abc import Sequence
from dataclasses import dataclass

import mpmath as mp

from rcrules.engine import Shape

DIGITS = 90


@dataclass(frozen=True)
class Exact:
    """Natural modes of one network in many digits."""

    taus: list[mp.mpf]
    vectors: mp.matrix
    conductance: mp.matrix
    capacitance: mp.matrix
    free: int

    def steady(self, volts: Sequence[float]) -> mp.matrix:
        """DC node voltages."""
        return mp.lu_solve(self.conductance[: self.free, : self.free], self._pull(self.conductance, volts))

    def step(self, before: Sequence[float], after: Sequence[float], t: float) -> list[mp.mpf]:
        """Node voltages at t after the held terminals jumped at t = 0 from a steady state."""
        with mp.workdps(DIGITS):
            start, end = self.steady(before), self.steady(after)
            charge = self.capacitance[: self.free, : self.free] * start - self._pull(self.capacitance, before)
            charge += self._pull(self.capacitance, after)
            modal = self.vectors.T * charge
            rest = self.vectors.T * (self.conductance[: self.free, : self.free] * end)
            state = mp.matrix(self.free, 1)
            for k, tau in enumerate(self.taus):
                state[k] = rest[k] + ((modal[k] / tau - rest[k]) * mp.exp(-mp.mpf(t) / tau) if tau else 0)
            return list(self.vectors * state)

    def _pull(self, matrix: mp.matrix, volts: Sequence[float]) -> mp.matrix:
        """What the held terminals put into the free nodes, as current or charge."""
        return -matrix[: self.free, self.free :] * mp.matrix([mp.mpf(float(volt)) for volt in volts])


def exact(shape: Shape, ohms: Sequence[float], farads: Sequence[float]) -> Exact:
    """Modes by Cholesky of G and the symmetric eigenproblem, in many digits; zeros told by their number."""
    with mp.workdps(DIGITS):
        free = shape.free
        conductance = _nodal(shape, shape.resistors, [1 / mp.mpf(float(ohm)) for ohm in ohms])
        capacitance = _nodal(shape, shape.capacitors, [mp.mpf(float(farad)) for farad in farads])
        lower = mp.cholesky(conductance[:free, :free])
        inverse = lower**-1
        values, turned = mp.eigsy(inverse * capacitance[:free, :free] * inverse.T)
        order = sorted(range(free), key=lambda k: -values[k])
        taus = [values[k] if values[k] > values[order[0]] * mp.mpf(10) ** (-DIGITS + 25) else mp.mpf(0) for k in order]
        vectors = inverse.T * turned
        columns = mp.matrix(free, free)
        for place, k in enumerate(order):
            for node in range(free):
                columns[node, place] = vectors[node, k]
        return Exact(taus, columns, conductance, capacitance, free)


def _nodal(shape: Shape, pairs: Sequence[tuple[int, int]], values: Sequence[mp.mpf]) -> mp.matrix:
    """The indefinite nodal matrix over all terminals."""
    size = shape.free + shape.held
    matrix = mp.zeros(size, size)
    for (a, b), value in zip(pairs, values, strict=True):
        matrix[a, a] += value
        matrix[b, b] += value
        matrix[a, b] -= value
        matrix[b, a] -= value
    return matrix
