"""Time constant of a network: its slowest mode.

The largest τ with (G - C/τ) x = 0, G and C the conductance and capacitance matrices of all free nodes; sources held
at 0 V. For one resistor and one capacitor τ = RC. Proved monotone in every R and C (T2). Source: natural frequencies
of RC networks, e.g. Desoer and Kuh, Basic Circuit Theory, chapter 15 (from memory).
"""

from rcrules.measures._measure import Measure
from rcrules.measures._theory import slowest_mode
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Slowest time constant [s] (case,); cases: (case, column), SI."""
    taus: Array = solved(structure, cases).modes.taus
    return taus[:, 0]


MEASURE = Measure(
    name="time_constant",
    subject="node",
    unit="s",
    summary="Slowest time constant of the network that the node belongs to.",
    compute=compute,
    theory=slowest_mode,
    poses="network",
    scale_free=True,
)
