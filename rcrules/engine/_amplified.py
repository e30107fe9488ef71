"""Networks with ideal amplifiers: the amplifier's constraint in place of the balance of currents at its output.

An ideal amplifier (a nullor) draws no input current, and gives its output whatever voltage keeps its inputs equal. The
rows of E v' + A v = sources are the balances of currents at the free nodes but for the outputs, where the row says
v(plus) = v(minus). Modes may oscillate: time constants are complex, with positive real part where the network settles.
Source: Carlin, Singular network elements, 1964 (nullor); modified nodal analysis (both from memory).
"""

from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from rcrules.engine._oscillation import Oscillation
from rcrules.engine._shape import Array, FloatingNode, Shape

Complex = NDArray[np.complex128]
Triples = tuple[tuple[int, int, int], ...]

INSTANT = 1e-10
"""Share of the largest time constant at and below which a mode counts as instantaneous."""
FAST = 1e4
"""How many times faster than the fastest mode the amplifier is when its feedback is tried."""
PER_DECADE = 60
BEYOND = 1e4
"""How far beyond the outermost time constants is scanned for a corner."""
NOTHING = 1e-8
"""Share of the greatest gain at and below which a pass band has no gain."""
STEPS = 60


@dataclass(frozen=True, kw_only=True)
class Amplified:
    """A network with ideal amplifiers in many cases."""

    shape: Shape
    amplifiers: Triples
    """(plus, minus, output) terminals of each; an output is free."""
    ohms: Array
    """[Ω] (case, r), > 0"""
    farads: Array
    """[F] (case, c), >= 0"""

    @cached_property
    def _matrices(self) -> tuple[Array, Array, Array, Array]:
        """A and E at the free nodes, and what the held terminals add to each. [S], [F]; (case, free, free or held)"""
        with np.errstate(divide="ignore"):
            conductance = _stamped(self.shape, self.shape.resistors, 1.0 / self.ohms)
        capacitance = _stamped(self.shape, self.shape.capacitors, self.farads)
        size = np.maximum(conductance.max(axis=(1, 2), initial=0.0), np.finfo(float).tiny)
        for plus, minus, output in self.amplifiers:
            conductance[:, output], capacitance[:, output] = 0.0, 0.0
            conductance[:, output, plus] += size
            conductance[:, output, minus] -= size
        free = self.shape.free
        rows, stored = conductance[:, :free], capacitance[:, :free]
        return rows[:, :, :free], stored[:, :, :free], -rows[:, :, free:], -stored[:, :, free:]

    @cached_property
    def _modes(self) -> tuple[Complex, Complex, Complex, Array]:
        """Time constants [s] (case, mode), vectors (case, free, mode), their duals (case, mode, free), inverse of A.

        As many modes as capacitors store independently: what E leaves alone follows at once, and is split off by the
        range of A⁻¹E, so that no eigenvalue is a multiple zero. Raises FloatingNode where there is no DC state.
        """
        rows, stored, _, _ = self._matrices
        inverse = np.asarray(_inverse(rows), float)
        full = inverse @ stored
        basis = np.linalg.svd(full)[0][:, :, : self._rank]
        across = np.swapaxes(basis, 1, 2) @ full
        taus, vectors = np.linalg.eig(across @ basis)
        largest = np.abs(taus).max(axis=1, keepdims=True, initial=0.0)
        taus = np.where(np.abs(taus) <= INSTANT * largest, 0.0, taus).astype(np.complex128)
        duals = np.asarray(_inverse(vectors.astype(np.complex128)) @ across, np.complex128)
        return taus, np.asarray(basis @ vectors, np.complex128), duals, inverse

    @cached_property
    def _rank(self) -> int:
        """Number of independent capacitor voltages that the balances of currents hold."""
        stored = _stamped(self.shape, self.shape.capacitors, np.ones((1, len(self.shape.capacitors))))[0]
        stored[[output for _, _, output in self.amplifiers]] = 0.0
        free = self.shape.free
        return int(np.linalg.matrix_rank(stored[:free, :free])) if free else 0

    @property
    def taus(self) -> Complex:
        """Time constants, complex where a mode oscillates. [s], (case, mode)"""
        return self._modes[0]

    @cached_property
    def settles(self) -> NDArray[np.bool_]:
        """Whether all modes die away and the feedback is negative: also with an amplifier of finite speed. (case,)"""
        rows, stored, _, _ = self._matrices
        size = np.abs(self.taus)
        fastest = np.where(size > 0.0, size, np.inf).min(axis=1, initial=np.inf)
        fastest = np.where(np.isfinite(fastest), fastest, 1.0)
        slow = stored.copy()
        for _, _, output in self.amplifiers:
            slow[:, output, output] -= np.abs(rows[:, output]).max(axis=1) * fastest / FAST
        full = np.asarray(_inverse(rows), float) @ slow
        basis = np.linalg.svd(full)[0][:, :, : self._rank + len(self.amplifiers)]
        real = np.linalg.eigvals(np.swapaxes(basis, 1, 2) @ full @ basis).real
        alive = np.abs(real) > 1e-14 * np.abs(real).max(axis=1, keepdims=True, initial=0.0)
        decays: NDArray[np.bool_] = np.all((self.taus.real > 0.0) | (size == 0.0), axis=1)
        found: NDArray[np.bool_] = decays & np.all((real > 0.0) | ~alive, axis=1)
        return found

    def steady(self, volts: Array) -> Array:
        """DC voltages of the free nodes. [V], (case, free); volts (case, held). Raises FloatingNode."""
        rows, _, conducted, _ = self._matrices
        found: Array = np.einsum("cij,cj->ci", _inverse(rows) @ conducted, volts)
        return found

    def transfer(self, source: int, omega: Array | float) -> Complex:
        """Voltage of every free node per volt at one held terminal, the others at rest. [1], (case, free)

        source: terminal number; omega: angular frequency [rad/s], (case,) or one number.
        """
        rows, stored, conducted, pushed = self._matrices
        turn = 1j * np.broadcast_to(np.asarray(omega, float), len(rows))[:, None, None]
        index = source - self.shape.free
        right = conducted[:, :, [index]] + turn * pushed[:, :, [index]]
        found: Complex = np.asarray(np.linalg.solve(rows + turn * stored, right)[:, :, 0], np.complex128)
        return found

    def corner(self, source: int, at: int, passes: Literal["low", "high"] = "low") -> Array:
        """Angular frequency at which the gain is 3 dB (1/sqrt(2)) below the pass band. [rad/s], (case,)

        ``low``: the first from DC upwards, inf if none; ``high``: from the top downwards, 0 if none; nan where the pass
        band has no gain.
        """
        constant, rising = self._terms(at, self._unit(source))
        scanned = self._scanned()
        scanned = scanned if passes == "low" else scanned[::-1]
        gains = np.stack([_gain(constant, rising, self._every, omega) for omega in scanned])
        edge = 0.0 * scanned[0] if passes == "low" else scanned[0] * BEYOND
        level = _gain(constant, rising, self._every, edge) / np.sqrt(2.0)
        below = gains < level
        first = below.argmax(axis=0)
        case = np.arange(len(level))
        inside, outside = scanned[np.maximum(first - 1, 0), case], scanned[first, case]
        for _ in range(STEPS):
            middle = np.sqrt(inside * outside)
            above = _gain(constant, rising, self._every, middle) >= level
            inside, outside = np.where(above, middle, inside), np.where(above, outside, middle)
        found = np.where(below.any(axis=0), inside, np.inf if passes == "low" else 0.0)
        return np.where(level > NOTHING * gains.max(axis=0), found, np.nan)

    def step(self, weights: Array, before: Array, after: Array) -> Oscillation:
        """weights . v over time when the held terminals jump at 0 from a steady state.

        weights (case, terminal); before, after [V] (case, held).
        """
        free = self.shape.free
        start = (weights * np.concatenate([self.steady(before), after], axis=1)).sum(axis=1)
        jump = after - before
        found = [self._terms(node, jump) for node in range(free)]
        constant = sum(weights[:, [node]] * terms[0] for node, terms in enumerate(found))
        rising = sum(weights[:, [node]] * terms[1] for node, terms in enumerate(found))
        every = self._every
        lasting = np.abs(every) > 0.0
        size = np.where(lasting, np.abs(every), np.inf).min(axis=1, keepdims=True)
        taus: Complex = np.where(lasting, every, np.where(np.isfinite(size), size, 1.0)).astype(np.complex128)
        sizes = np.where(lasting, rising / taus - constant, 0.0)
        final = start + np.asarray(constant).sum(axis=1).real
        return Oscillation(constant=final, sizes=sizes, rates=np.asarray(-1.0 / taus, np.complex128))

    @property
    def _every(self) -> Complex:
        """The time constants, that of what follows at once first. [s], (case, 1 + mode)"""
        return np.concatenate([np.zeros((len(self.ohms), 1)), self.taus], axis=1)

    def _unit(self, source: int) -> Array:
        volts = np.zeros((len(self.ohms), self.shape.held))
        volts[:, source - self.shape.free] = 1.0
        return volts

    def _terms(self, at: int, volts: Array) -> tuple[Complex, Complex]:
        """Constant [V] and rising [V s]: node voltage = sum of (constant + s rising)/(1 + s tau). (case, 1 + mode)

        The first is what follows at once, tau = 0. From (1 + sM)⁻¹ = 1 - sM (1 + sM)⁻¹ with M = A⁻¹E.
        """
        _, _, conducted, pushed = self._matrices
        taus, vectors, duals, inverse = self._modes
        still = np.einsum("cij,cj->ci", inverse @ conducted, volts)
        swept = np.einsum("cij,cj->ci", inverse @ pushed, volts)
        lasting = np.abs(taus) > 0.0
        share = np.where(lasting, vectors[:, at] / np.where(lasting, taus, 1.0), 0.0)
        later = share * np.einsum("cki,ci->ck", duals, swept)
        rising = later - share * taus * np.einsum("cki,ci->ck", duals, still)
        constant = np.concatenate([still[:, [at]], np.zeros_like(rising)], axis=1)
        first = swept[:, [at]] - later.sum(axis=1, keepdims=True)
        size = np.abs(swept).max(axis=1, keepdims=True) + np.abs(rising).sum(axis=1, keepdims=True)
        first = np.where(np.abs(first) > NOTHING * size, first, 0.0)  # the rest is rounding
        return constant, np.concatenate([first, rising], axis=1)

    def _scanned(self) -> Array:
        """Angular frequencies from well below to well above all modes, rising. [rad/s], (k, case)"""
        size = np.abs(self.taus)
        slowest = np.where(size.max(axis=1, initial=0.0) > 0.0, size.max(axis=1, initial=0.0), 1.0)
        fastest = np.where(size > 0.0, size, slowest[:, None]).min(axis=1)
        low, high = 1.0 / (BEYOND * slowest), BEYOND / fastest
        count = int(np.log10(high / low).max(initial=1.0) * PER_DECADE) + 2
        scanned: Array = low * (high / low) ** np.linspace(0.0, 1.0, count)[:, None]
        return scanned


def _stamped(shape: Shape, pairs: tuple[tuple[int, int], ...], values: Array) -> Array:
    """The matrix of a kind of branch over all terminals. (case, terminal, terminal)"""
    terminals = shape.free + shape.held
    matrix = np.zeros((len(values), terminals, terminals))
    for index, (a, b) in enumerate(pairs):
        value = values[:, index]
        matrix[:, a, a] += value
        matrix[:, b, b] += value
        matrix[:, a, b] -= value
        matrix[:, b, a] -= value
    return matrix


def _inverse(matrix: NDArray[np.inexact]) -> NDArray[np.inexact]:
    """Raises FloatingNode where a matrix is singular, or so close to it that nothing of its inverse is right."""
    try:
        found = np.linalg.inv(matrix)
    except np.linalg.LinAlgError:
        raise FloatingNode(0, 0) from None
    size = np.abs(matrix).sum(axis=2).max(axis=1) * np.abs(found).sum(axis=2).max(axis=1)
    if np.any(~np.isfinite(size)) or np.any(size > 1.0 / np.finfo(float).eps):
        raise FloatingNode(0, int(np.argmax(np.nan_to_num(size, nan=np.inf))))
    return found


def _gain(constant: Complex, rising: Complex, taus: Complex, omega: Array) -> Array:
    turn = 1j * omega[:, None]
    found: Array = np.abs(((constant + turn * rising) / (1.0 + turn * taus)).sum(axis=1))
    return found
