"""Random networks for the tests of the engine, and the sources that drive them."""

import numpy as np

from rcrules.engine import Array, Drive, Shape


def random_shape(rng: np.random.Generator, free: int, held: int = 2) -> Shape:
    """Every free node has a resistive path to a held terminal; some nodes have no capacitor, some capacitors bridge."""
    resistors = [(node, int(rng.choice([*range(node), *range(free, free + held)]))) for node in range(free)]
    capacitors = [(node, free + int(rng.integers(held))) for node in range(free) if rng.random() < 0.8]
    for pairs, count in ((resistors, int(rng.integers(free + 1))), (capacitors, int(rng.integers(free)))):
        for _ in range(count):
            a, b = rng.choice(free + held, size=2, replace=False)
            pairs.append((int(a), int(b)))
    return Shape(free, held, tuple(resistors), tuple(capacitors))


def random_values(rng: np.random.Generator, shape: Shape, cases: int, decades: float) -> tuple[Array, Array]:
    """Resistances around 10 kΩ and capacitances around 10 nF, evenly spread over so many decades."""
    ohms = 10.0 ** (4.0 + rng.uniform(-decades / 2.0, decades / 2.0, (cases, len(shape.resistors))))
    farads = 10.0 ** (-8.0 + rng.uniform(-decades / 2.0, decades / 2.0, (cases, len(shape.capacitors))))
    return ohms, farads


def step(shape: Shape, volts: Array | list[float], cases: int = 1) -> Drive:
    """Held terminals at these voltages from t = 0 on."""
    levels = np.broadcast_to(np.asarray(volts, float), (cases, 1, shape.held))
    return Drive(
        starts=np.zeros((cases, 1)), levels=levels, slopes=np.zeros(levels.shape), amps=np.zeros((cases, shape.free))
    )


def ramp(shape: Shape, volts: Array | list[float], seconds: float, cases: int = 1) -> Drive:
    """Held terminals from 0 to these voltages in this time, then constant."""
    end = np.broadcast_to(np.asarray(volts, float), (cases, shape.held))
    zero = np.zeros_like(end)
    return Drive(
        starts=np.tile([0.0, seconds], (cases, 1)),
        levels=np.stack([zero, end], axis=1),
        slopes=np.stack([end / seconds, zero], axis=1),
        amps=np.zeros((cases, shape.free)),
    )


def at_node(shape: Shape, node: int) -> Array:
    """Weights that observe one terminal."""
    return np.eye(shape.free + shape.held)[node]
