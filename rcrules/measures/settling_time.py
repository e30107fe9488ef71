"""Settling time: after it the node stays within a band around its final value.

The last time at which |v(t) - v(∞)| > band * step, with step the larger of |v(∞) - v(before)| and |v(∞) - v(0+)|. For
one resistor and one capacitor t = RC ln(1/band). A dielectric that absorbs more than the band may move the node out of
it again, within seconds to minutes: then no settling is promised. Source: IEC 60050-351-45-37, settling time (from
memory); dielectric absorption by makers' comparisons of dielectrics.
"""

import numpy as np

from rcrules.measures._measure import Measure, Option
from rcrules.measures._options import event
from rcrules.measures._passing import step
from rcrules.measures._theory import fraction_left
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Settling time [s] (case,); nan where nothing moves; cases: (case, column), SI."""
    case = solved(structure, cases)
    size = step(case)
    band = np.abs(float(structure.option("band"))) * np.nan_to_num(size)
    settled = case.settled(band)
    return np.where(np.isnan(size), np.nan, settled)


MEASURE = Measure(
    name="settling_time",
    subject="node",
    unit="s",
    summary="Time after which the node stays within a band around its final value.",
    compute=compute,
    theory=fraction_left,
    options={
        "event": event("step-up"),
        "band": Option(
            kind="quantity", default=0.01, unit="1", summary="half width of the band, as a part of the step"
        ),
    },
    settles="by a band",
    scale_free=True,
    amplified=True,
)
