"""Hold-up time of a supply: from its voltage down to a level on what its capacitors hold, once nothing feeds it.

The load of the project file draws a constant current, C (V - v)/I, or a constant power, C (V² - v²)/(2 P), and every
resistor right between supply and ground draws along (G = Σ 1/R): C/G ln(1 + G (V - v)/(I + G v)), and
C/(2 G) ln(1 + G (V² - v²)/(P + G v²)). 0 where it starts below the level; infinite where nothing is drawn.
Source: charge and energy balance of a capacitor; worked examples of supply makers.
"""

import numpy as np

from rcrules.measures._measure import Measure
from rcrules.measures._options import level
from rcrules.measures._theory_supply import hold_up
from rcrules.measures.total_capacitance import compute as total
from rcrules.problems import Array, Structure, evaluate


def compute(structure: Structure, cases: Array) -> Array:
    """Time [s] (case,); cases: (case, column), SI."""
    power = 2 if structure.option("draws") == "power" else 1
    start = np.abs(evaluate(structure.states[0][0], cases)) ** power
    end = np.abs(evaluate(structure.level("to").offset, cases)) ** power
    leak = sum((1.0 / evaluate(form, cases) for form in structure.ohms), np.zeros(len(cases)))
    drawn = evaluate(structure.load, cases) + leak * end
    fallen = np.maximum(start - end, 0.0)
    shares = np.divide(fallen, drawn, out=np.where(fallen > 0.0, np.inf, 0.0), where=drawn > 0.0)
    x = leak * np.where(np.isfinite(shares), shares, 0.0)
    slowed = np.divide(np.log1p(x), x, out=np.ones_like(x), where=x > 0.0)
    found: Array = total(structure, cases) / power * shares * slowed
    return found


MEASURE = Measure(
    name="hold_up_time",
    subject="supply",
    unit="s",
    summary="Time that the supply's capacitors carry its load down to a level.",
    compute=compute,
    theory=hold_up,
    options={"to": level(None, "the lowest voltage that still serves")},
    poses="supply",
    lasting=True,
)
