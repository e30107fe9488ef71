"""Speed of the engine: cases a second with first crossing, and the same circuits stepped by LSODA, in one run.

Run by ``python -m tests.bench.bench_engine`` from the root of the project.
"""

from dataclasses import dataclass
from time import perf_counter

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import solve_ivp

from rcrules.engine import Drive, Shape, solve
from tests.bench._bars import held

Array = NDArray[np.float64]

NODES = (1, 2, 3, 4, 6, 8)
CASES = 8192
"""Per call: the arrays of a small network then stay in the cache."""
STEPPED = 40
"""Circuits stepped by LSODA."""
LEVEL = 0.7
BARRED = 2
"""Nodes of the circuit that the bars are about."""
LEAST_CASES = 600_000
"""Cases a second."""
LEAST_RATIO = 1000
"""Times the speed of LSODA."""
ROUNDS = 7
"""Timed calls; the fastest counts, as the machine may be shared."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Circuits:
    """Ladders driven by a step of 1 V, the far end observed; every value random within a decade."""

    shape: Shape
    ohms: Array
    """[Ω], (case, n)"""
    farads: Array
    """[F], (case, n)"""


def circuits(nodes: int, cases: int, rng: np.random.Generator) -> Circuits:
    """Random ladders of so many sections."""
    series = tuple((nodes if node == 0 else node - 1, node) for node in range(nodes))
    shunt = tuple((node, nodes + 1) for node in range(nodes))
    ohms, farads = 10.0 ** rng.uniform(3.0, 4.0, (cases, nodes)), 10.0 ** rng.uniform(-9.0, -8.0, (cases, nodes))
    return Circuits(shape=Shape(nodes, 2, series, shunt), ohms=ohms, farads=farads)


def by_engine(found: Circuits) -> Array:
    """First crossing of the level at the far end. [s], (case,)"""
    cases, nodes = found.ohms.shape
    drive = Drive(
        starts=np.zeros((cases, 1)),
        levels=np.broadcast_to(np.array([1.0, 0.0]), (cases, 1, 2)),
        slopes=np.zeros((cases, 1, 2)),
        amps=np.zeros((cases, nodes)),
    )
    response = solve(found.shape, found.ohms, found.farads).respond(drive, np.zeros((cases, nodes)))
    return response.observe(np.eye(nodes + 2)[nodes - 1], LEVEL).first_crossing(1.0)


def by_stepping(found: Circuits, case: int) -> float:
    """The same by LSODA at 1e-9 with an event. [s]"""
    ohms, farads = found.ohms[case], found.farads[case]

    def slope(_: float, volts: Array) -> Array:
        current = -np.diff(np.concatenate([[1.0], volts])) / ohms
        return (current - np.append(current[1:], 0.0)) / farads

    def beyond(_: float, volts: Array) -> float:
        return float(volts[-1] - LEVEL)

    beyond.terminal = True  # type: ignore[attr-defined]  # how solve_ivp is told to stop there
    end = 10.0 * float(ohms.sum() * farads.sum())
    run = solve_ivp(slope, (0.0, end), np.zeros(len(ohms)), method="LSODA", rtol=1e-9, atol=1e-12, events=beyond)
    return float(run.t_events[0][0])


def measure(nodes: int) -> tuple[float, float, float]:
    """Cases a second by the engine and by LSODA, and the greatest relative difference of the two."""
    found = circuits(nodes, CASES, np.random.default_rng(nodes))
    by_engine(found)
    fastest = np.inf
    for _ in range(ROUNDS):
        start = perf_counter()
        times = by_engine(found)
        fastest = min(fastest, perf_counter() - start)
    start = perf_counter()
    stepped = np.array([by_stepping(found, case) for case in range(STEPPED)])
    slow = perf_counter() - start
    return CASES / fastest, STEPPED / slow, float(np.abs(stepped / times[:STEPPED] - 1.0).max())


def main() -> None:
    """Print the table."""
    bars = ""
    print(f"{'nodes':>5}  {'engine, cases/s':>15}  {'LSODA, cases/s':>14}  {'ratio':>7}  {'largest difference':>18}")
    for nodes in NODES:
        engine, stepped, difference = measure(nodes)
        print(f"{nodes:>5}  {engine:>15,.0f}  {stepped:>14,.0f}  {engine / stepped:>7,.0f}  {difference:>18.1e}")
        if nodes == BARRED:
            fast, beside = held(engine, LEAST_CASES, least=True), held(engine / stepped, LEAST_RATIO, least=True)
            bars = f"       cases a second {fast}; against LSODA {beside}"
    print(bars)


if __name__ == "__main__":
    main()
