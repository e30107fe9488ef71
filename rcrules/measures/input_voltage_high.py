"""Input voltage high: the highest steady voltage of an input while all supplies are on, leakage included.

v = G⁻¹ (sources - leakage) with drivers high and the nearest contact, or the weakest pin that pulls, where it makes the
voltage highest; a pull-up R against leakage I loses R I. Leakage comes from a rail and cannot push beyond the
outermost one. Pins with a stated drive count as a resistor, volts over amperes. To be held against V_IH of the pin.
Source: nodal analysis; UM10204 (2012), section 7.1 for pull-ups.
"""

from rcrules.measures._measure import Measure
from rcrules.measures._stress import of_states
from rcrules.problems import Array, Structure, steady_states


def compute(structure: Structure, cases: Array) -> Array:
    """Voltage [V] (case,); cases: (case, column), SI."""
    found: Array = steady_states(structure, cases)[:, :, structure.at].max(axis=1)
    return found


MEASURE = Measure(
    name="input_voltage_high",
    subject="pin",
    unit="V",
    summary="Highest steady voltage of the pin with all supplies on, leakage included.",
    compute=compute,
    theory=of_states,
    poses="level",
)
