"""The exact solution of an RC network: its natural modes, in every case.

C v' + G v = B u + D u' - i, with u the held voltages, B and D the conductances and capacitances to them, i the currents
drawn out of the nodes. With Y G Yᵀ = 1 and an orthogonal U that makes U Y C Yᵀ Uᵀ diagonal (the time constants tau),
the modes q, with v = (U Y)ᵀ q, obey tau q' + q = U Y (B u + D u' - i).
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from rcrules.engine._elimination import factor
from rcrules.engine._jacobi import orthogonalise
from rcrules.engine._response import Drive, Response, respond
from rcrules.engine._shape import Array, Column, Flags, Indices, Shape, floating_groups, layout


@dataclass(frozen=True, slots=True, kw_only=True)
class Modes:
    """Natural modes of a network in every case. Inside, the case is the last axis."""

    shape: Shape
    siemens: Array
    """Conductance of each resistor. [S], (r, case)"""
    farads: Array
    """Capacitance of each capacitor. [F], (c, case)"""
    sizes: Array
    """Capacitance of each column, that is of parallel capacitors together. [F], (column, case)"""
    root: Array
    """Y of the elimination: Yᵀ Y is the inverse of the conductance matrix. [Ω^½], (n, node, case)"""
    stores: Array
    """U Y A sqrt(c), A the incidence of the columns; row length² = time constant. [s^½], (n, column, case)"""
    vectors: Array
    """U Y: node voltages of each mode, normed to the conductances. [Ω^½], (n, node, case)"""
    decays: Array
    """Time constants, slowest first, the structural zeros last. [s], (n, case)"""
    rates: Array
    """Their inverses; 1 for time constants of zero. [1/s], (n, case)"""
    instant: Flags | None
    """Which time constants are zero. (n, case); None = none"""

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
        found: Array = np.einsum("kic,kc->ic", self.root, np.einsum("kic,ic->kc", self.root, currents))
        return found

    def pull(self, volts: Array, amps: Array | None) -> Array:
        """Current into each free node held at 0 V. [A], (free, case)

        volts: voltages of the held terminals. [V], (held, case)
        amps: currents drawn out of the free nodes. [A], (free, case); None = none
        """
        cases = self.decays.shape[1]
        currents = np.zeros((self.shape.free, cases)) if amps is None else np.negative(amps)
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
    if not ((ohms > 0.0).all() and (farads >= 0.0).all() and np.isfinite(farads).all()):
        raise ValueError("resistances must be positive, capacitances finite and not negative")
    siemens, farads = np.ascontiguousarray(1.0 / ohms.T), np.ascontiguousarray(farads.T)
    columns = layout(shape).columns
    sizes = _sizes(columns, farads)
    root = factor(*_conductances(shape, siemens), _node_capacitance(shape, columns, sizes))
    own = _own(shape, columns, sizes)
    rows = orthogonalise(_rows(columns, sizes, root, own), len(columns))
    stores, vectors = rows[:, : len(columns)], _vectors(rows, sizes, own)
    decays = np.einsum("kmc,kmc->kc", stores, stores)
    instant = _instant(shape, columns, sizes, decays)
    if instant is not None:
        decays, stores = np.where(instant, 0.0, decays), np.where(instant[:, None], 0.0, stores)
    rates = 1.0 / (decays if instant is None else np.where(instant, 1.0, decays))
    return Modes(
        shape=shape,
        siemens=siemens,
        farads=farads,
        sizes=sizes,
        root=root,
        stores=stores,
        vectors=vectors,
        decays=decays,
        rates=rates,
        instant=instant,
    )


def _sizes(columns: Sequence[Column], farads: Array) -> Array:
    """Capacitance of each column. [F], (column, case)

    farads: capacitance of each capacitor. [F], (c, case)
    """
    total = np.zeros((len(columns), farads.shape[1]))
    for row, column in enumerate(columns):
        for index, _, _ in column.members:
            total[row] += farads[index]
    return total


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


def _own(shape: Shape, columns: Sequence[Column], sizes: Array) -> list[int | None]:
    """For each free node the column of its capacitor to held terminals, where it has one in every case."""
    own: list[int | None] = [None] * shape.free
    for index, column in enumerate(columns):
        if column.other is None and (sizes[index] > 0.0).all():
            own[column.node] = index
    return own


def _rows(columns: Sequence[Column], sizes: Array, root: Array, own: list[int | None]) -> Array:
    """Y A sqrt(c), one column per merged capacitor, and beside it Y for the nodes without a column of their own."""
    apart = [node for node, index in enumerate(own) if index is None]
    rows = np.empty((len(root), len(columns) + len(apart), root.shape[2]))
    rows[:, len(columns) :] = root[:, apart]
    for index, column in enumerate(columns):
        voltage = root[:, column.node] if column.other is None else root[:, column.node] - root[:, column.other]
        np.multiply(voltage, np.sqrt(sizes[index]), out=rows[:, index])
    return rows


def _vectors(rows: Array, sizes: Array, own: list[int | None]) -> Array:
    """U Y from the rotated rows: a node's own column is its voltage times the root of its size. (n, node, case)"""
    vectors = np.empty((len(rows), len(own), rows.shape[2]))
    apart = len(sizes)
    for node, index in enumerate(own):
        if index is None:
            vectors[:, node], apart = rows[:, apart], apart + 1
        else:
            np.divide(rows[:, index], np.sqrt(sizes[index]), out=vectors[:, node])
    return vectors


def _instant(shape: Shape, columns: Sequence[Column], sizes: Array, decays: Array) -> Flags | None:
    """Which time constants are exactly zero, by which capacitors are there, or too small. (n, case); None = none

    decays: time constants, slowest first. [s], (n, case)
    """
    patterns, which = _patterns(sizes > 0.0)
    counts = np.array([_zeros(shape, columns, pattern) for pattern in patterns], dtype=np.intp)
    found: Flags = (np.arange(shape.free)[:, None] >= shape.free - counts[which]) | (decays == 0.0)
    return found if found.any() else None


def _patterns(present: Flags) -> tuple[Flags, Indices]:
    """The different columns of the flags (column, case) as rows, and which of them each case has."""
    if present.all():
        return np.ones((1, len(present)), dtype=bool), np.zeros(present.shape[1], dtype=np.intp)
    patterns, which = np.unique(present, axis=1, return_inverse=True)
    return patterns.T, which.reshape(-1)


def _zeros(shape: Shape, columns: Sequence[Column], present: Flags) -> int:
    """Number of time constants that are zero when only these columns are there."""
    kept = [column for column, there in zip(columns, present, strict=True) if there]
    return len(floating_groups(shape.free, kept))
