"""Thermal noise: the rms voltage that the resistors of a network leave at the node over all frequencies.

sqrt(k T (C⁻¹)ᵢᵢ), C the capacitance matrix of the network, sources without noise; sqrt(kT/C) for one capacitor,
whatever the resistance. Infinite where no capacitor ends the bandwidth. Proved: C⁻¹ falls with every capacitance.
Source: equipartition theorem; k = 1.380649e-23 J/K exactly (SI, 2019).
"""

import numpy as np

from rcrules.measures._measure import Measure, Theory
from rcrules.measures._theory import Slopes
from rcrules.measures._topology import columns, increasing
from rcrules.problems import Array, Structure, elastance

BOLTZMANN = 1.380649e-23
"""[J/K]"""


def compute(structure: Structure, cases: Array) -> Array:
    """Noise [V rms] (case,); the temperature [K] is the column of option ``kelvin``; cases: (case, column), SI."""
    kelvin = cases[:, int(structure.option("kelvin"))]
    return np.sqrt(BOLTZMANN * kelvin * elastance(structure, cases))


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """(C + E)⁻¹ <= C⁻¹ in the order of positive definite matrices where E >= 0, hence on the diagonal."""
    del high
    slopes = Slopes([0] * len(low))
    for form in structure.farads:
        slopes.add(columns([form]), -1 if increasing(form, low) else None)
    slopes.add([int(structure.option("kelvin"))], 1)
    return slopes.theory()


MEASURE = Measure(
    name="thermal_noise",
    subject="node",
    unit="V",
    summary="Thermal noise of the network at the node, rms.",
    compute=compute,
    theory=theory,
    poses="noise",
    scale_free=True,
)
