"""The exact solution of an RC network: its natural modes, in every case.

C v' + G v = B u + D u' - i with u the held voltages, B and D the conductances and capacitances to them, i the currents drawn
out of the nodes. With Y G Yᵀ = 1 and U Y C Yᵀ Uᵀ = diag(tau), the modes q = (U Y)⁻ᵀ v obey tau q' + q = U Y (B u + D u' - i).
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from rcrules.engine._elimination import factor
from rcrules.engine._jacobi import orthogonalise
from rcrules.engine._response import Drive, Response, respond
from rcrules.engine._shape import Array, Column, Shape, floating_groups, layout, merged


@dataclass(frozen=True, slots=True, kw_only=True)
class Modes:
    """Natural modes of a network in every case. Inside, the case is the last axis."""

    shape: Shape
    siemens: Array
    """Conductance of each resistor. [S], (r, case)"""
    farads: Array
    """Capacitance of each capacitor. [F], (c, case)"""
    root: Array
    """Y of the elimination: Yᵀ Y is the inverse of the conductance matrix. [Ω^½], (n, node, case)"""
    stores: Array
    """Rows of the modes over the merged capacitors: the length of a row is the root of its time constant. [s^½], (n, column, case)"""
    vectors: Array
    """Node voltages of each mode, normed to the conductances. [Ω^½], (n, node, case)"""
    decays: Array
    """Time constants, slowest first. [s], (n, case)"""

    @property
    def taus(self) -> Array:
        """Time constants, slowest first, the structural zeros last. [s], (case, free)"""
        return self.decays.T.copy()

    def steady(self, volts: Array, amps: Array) -> Array:
        """DC node voltages. [V], (case, free)

        volts: voltages of the held terminals. [V], (case, held)
        amps: currents drawn out of the free nodes. [A], (case, free)
        """
        return self.at_rest(self.pull(np.asarray(volts, float).T, np.asarray(amps, float).T)).T.copy()

    def at_rest(self, currents: Array) -> Array:
        """DC node voltages. [V], (free, case)

        currents: into each free node. [A], (free, case)
        """
        return np.einsum("kic,kc->ic", self.root, np.einsum("kic,ic->kc", self.root, currents))

    def pull(self, volts: Array, amps: Array) -> Array:
        """Current into each free node held at 0 V. [A], (free, case)

        volts: voltages of the held terminals. [V], (held, case)
        amps: currents drawn out of the free nodes. [A], (free, case)
        """
        currents = np.negative(amps)
        for index, node, terminal in layout(self.shape).slacks:
            currents[node] += self.siemens[index] * volts[terminal]
        return currents

    def respond(self, drive: Drive, charged: Array) -> Response:
        """Response to sources over time.

        drive: the sources, voltages [V] and currents [A] over time [s]
        charged: capacitor voltages (first minus second terminal) just before the first instant. [V], (case, c)
        """
        return respond(self, drive, np.asarray(charged, float).T)


def solve(shape: Shape, ohms: Array, farads: Array) -> Modes:
    """Natural modes in every case.

    shape: topology
    ohms: resistances, > 0, inf = open. [Ω], (case, r)
    farads: capacitances, >= 0. [F], (case, c)
    Valid: resistors and capacitors only; any spread of values.
    Raises FloatingNode when a free node has no resistive path to a held terminal, ValueError on values out of range.
    """
    ohms, farads = np.asarray(ohms, float), np.asarray(farads, float)
    if not (ohms > 0.0).all() or not (farads >= 0.0).all() or np.isinf(farads).any():
        raise ValueError("resistances must be positive, capacitances finite and not negative")
    siemens, capacitances = np.ascontiguousarray(1.0 / ohms.T), np.ascontiguousarray(farads.T)
    columns = layout(shape).columns
    sizes = merged(columns, capacitances)
    root = factor(*_conductances(shape, siemens), _node_capacitance(shape, columns, sizes))
    rows = orthogonalise(np.concatenate([_stores(columns, sizes, root), root], axis=1), len(columns))
    return _sorted(shape, siemens, capacitances, root, rows)


def _sorted(shape: Shape, siemens: Array, farads: Array, root: Array, rows: Array) -> Modes:
    """Modes from the rotated rows, the structural zeros set to zero."""
    columns = layout(shape).columns
    stores, vectors = rows[:, : len(columns)], rows[:, len(columns) :]
    taus = np.einsum("kmc,kmc->kc", stores, stores)
    zero = np.arange(shape.free)[:, None] >= shape.free - _zeros(shape, columns, merged(columns, farads))
    if zero.any():
        taus = np.where(zero, 0.0, taus)
        stores = np.where(zero[:, None], 0.0, stores)
    return Modes(shape=shape, siemens=siemens, farads=farads, root=root, stores=stores, vectors=vectors, decays=taus)


def _zeros(shape: Shape, columns: Sequence[Column], sizes: Array) -> np.ndarray[tuple[int, ...], np.dtype[np.intp]]:
    """Number of time constants that are exactly zero, from which capacitors are there. (case,)"""
    present = sizes > 0.0
    count = np.zeros(sizes.shape[1], dtype=np.intp)
    if present.all():
        count[:] = len(floating_groups(shape.free, columns))
        return count
    patterns, which = np.unique(present, axis=1, return_inverse=True)
    for index, pattern in enumerate(patterns.T):
        kept = [column for column, there in zip(columns, pattern, strict=True) if there]
        count[which.reshape(-1) == index] = len(floating_groups(shape.free, kept))
    return count


def _conductances(shape: Shape, siemens: Array) -> tuple[Array, Array]:
    """Conductances between free nodes (n, n, case) and slacks to held terminals (n, case). [S]

    siemens: conductance of each resistor. [S], (r, case)
    """
    cases = siemens.shape[1]
    between, slack = np.zeros((shape.free, shape.free, cases)), np.zeros((shape.free, cases))
    branches = layout(shape)
    for index, a, b in branches.bridges:
        between[a, b] += siemens[index]
        between[b, a] += siemens[index]
    for index, node, _ in branches.slacks:
        slack[node] += siemens[index]
    return between, slack


def _node_capacitance(shape: Shape, columns: Sequence[Column], sizes: Array) -> Array:
    """Sum of the capacitances at each free node. [F], (free, case)"""
    total = np.zeros((shape.free, sizes.shape[1]))
    for row, column in enumerate(columns):
        total[column.node] += sizes[row]
        if column.other is not None:
            total[column.other] += sizes[row]
    return total


def _stores(columns: Sequence[Column], sizes: Array, root: Array) -> Array:
    """Y A_C sqrt(c): one column per merged capacitor. [s^½], (n, column, case)"""
    found = np.empty((len(root), len(columns), root.shape[2]))
    for index, column in enumerate(columns):
        voltage = root[:, column.node] if column.other is None else root[:, column.node] - root[:, column.other]
        np.multiply(voltage, np.sqrt(sizes[index]), out=found[:, index])
    return found
