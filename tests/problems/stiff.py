"""Networks with diodes by a stiff integrator of a general-purpose library: the oracle for switching.

Every free node has a capacitor, so that C v' = i(v) is an ordinary differential equation; the diodes are part of i. The
integration stops at each change of a diode's state and at each bend of the sources and starts again there, because no
integrator keeps its order across a kink.
"""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise, product

import numpy as np
from scipy.integrate import solve_ivp

from rcrules.engine import Array
from rcrules.problems import Form, Structure, evaluate

CASE = np.zeros((1, 0))


def numbers(forms: Iterable[Form]) -> Array:
    """Forms of a structure without columns."""
    return np.array([float(evaluate(form, CASE)[0]) for form in forms])


@dataclass(frozen=True)
class Stiff:
    """A structure without columns as an ordinary differential equation."""

    structure: Structure

    @cached_property
    def free(self) -> int:
        return self.structure.shape.free

    @cached_property
    def incidence(self) -> Array:
        """Anode minus cathode of each diode (diode, terminal)."""
        eye = np.eye(self.free + self.structure.shape.held)
        return np.array([eye[diode.anode] - eye[diode.cathode] for diode in self.structure.diodes])

    @cached_property
    def drops(self) -> Array:
        return numbers(diode.drop for diode in self.structure.diodes)

    @cached_property
    def siemens(self) -> Array:
        return 1.0 / numbers(diode.ohms for diode in self.structure.diodes)

    @cached_property
    def conductance(self) -> Array:
        return self._nodal(self.structure.shape.resistors, 1.0 / numbers(self.structure.ohms))

    @cached_property
    def capacitance(self) -> Array:
        return self._nodal(self.structure.shape.capacitors, numbers(self.structure.farads))

    @cached_property
    def inverse(self) -> Array:
        return np.linalg.inv(self.capacitance[: self.free, : self.free])

    def _nodal(self, pairs: Sequence[tuple[int, int]], values: Array) -> Array:
        size = self.free + self.structure.shape.held
        matrix = np.zeros((size, size))
        for (a, b), value in zip(pairs, values, strict=True):
            matrix[[a, b], [a, b]] += value
            matrix[a, b] -= value
            matrix[b, a] -= value
        return matrix

    def beyond(self, volts: Array) -> Array:
        """Forward voltage of each diode above its drop."""
        return np.asarray(self.incidence @ volts - self.drops)

    def into(self, volts: Array) -> Array:
        """Current into each free node through resistors and diodes."""
        amps = np.maximum(self.beyond(volts), 0.0) * self.siemens
        return np.asarray(-self.conductance @ volts - self.incidence.T @ amps)[: self.free]

    def at_rest(self, held: Array) -> Array:
        """DC: of all states of the diodes the one that contradicts itself least."""
        best, least = np.zeros(self.free), np.inf
        for on in product((0.0, 1.0), repeat=len(self.drops)):
            lines = self.incidence.T * (self.siemens * on)
            matrix = (self.conductance + lines @ self.incidence)[: self.free]
            pushed = (lines @ self.drops)[: self.free]
            volts = np.linalg.solve(matrix[:, : self.free], pushed - matrix[:, self.free :] @ held)
            beyond = self.beyond(np.concatenate([volts, held]))
            wrong = float(np.max(np.where(on, -beyond, beyond)))
            if wrong < least:
                best, least = volts, wrong
        return best

    def sources(self, t: float) -> tuple[Array, Array]:
        """Voltages of the held terminals just after t, and their slopes."""
        volts, slopes = [], []
        for wave in self.structure.waveforms:
            times, levels = (numbers(forms) for forms in zip(*wave.points, strict=True))
            place = int((times <= t).sum()) - 1
            span = times[place + 1] - times[place] if place + 1 < len(times) else 0.0
            slope = (levels[place + 1] - levels[place]) / span if span else 0.0
            volts.append(levels[place] + slope * (t - times[place]))
            slopes.append(slope)
        return np.array(volts), np.array(slopes)

    def run(self, start: Array, before: Array, times: Array) -> Array:
        """Free voltages at each time (time, free), from those of all terminals just before the event."""
        bends = {float(t) for wave in self.structure.waveforms for t in numbers(time for time, _ in wave.points)}
        volts, held, rows = start, before, []
        across = self.inverse @ self.capacitance[: self.free, self.free :]
        for begin, end in pairwise([*sorted({0.0} | bends), 1.01 * float(times[-1])]):
            after, slopes = self.sources(begin)
            volts = volts - across @ (after - held)
            found, volts = self._piece(volts, (begin, end), (after, slopes), times)
            rows += found
            held = after + slopes * (end - begin)
        return np.array(rows)

    def _piece(
        self, volts: Array, span: tuple[float, float], sources: tuple[Array, Array], times: Array
    ) -> tuple[list[Array], Array]:
        """From one bend to the next, from switching to switching."""
        (now, end), (first, slope), begin = span, sources, span[0]
        pushed = self.inverse @ self.capacitance[: self.free, self.free :] @ slope

        def everything(t: float, v: Array) -> Array:
            return np.concatenate([v, first + slope * (t - begin)])

        def slopes(t: float, v: Array) -> Array:
            return np.asarray(self.inverse @ self.into(everything(t, v)) - pushed)

        rows: list[Array] = []
        for _ in range(60):
            later = self.beyond(everything(now + 1e-9 * (end - now), volts + 1e-9 * (end - now) * slopes(now, volts)))
            here = self.beyond(everything(now, volts))
            signs = np.where(np.where(np.abs(here) > 1e-9, here, later) > 0.0, -1.0, 1.0)
            events = [_event(self, everything, index, sign) for index, sign in enumerate(signs)]
            found = solve_ivp(
                slopes, (now, end), volts, "LSODA", events=events, rtol=1e-10, atol=1e-12, dense_output=True
            )
            last = found.t[-1] if found.status else end
            rows += [found.sol(t) for t in times[(times >= now) & (times < last)]]
            now, volts = float(last), found.y[:, -1]
            if not found.status:
                return rows, volts
        raise AssertionError("the oracle does not settle")


def _event(stiff: Stiff, everything: object, index: int, sign: float) -> object:
    """A diode's forward voltage, as the library wants an event that ends the integration."""

    def event(t: float, v: Array) -> float:
        return float(stiff.beyond(everything(t, v))[index])  # type: ignore[operator]  # a function of time and state

    event.terminal, event.direction = True, sign  # type: ignore[attr-defined]  # how the library is told
    return event
