"""Sample error: what a converter still misses when its acquisition ends, in parts of full scale.

The sampling capacitor, charged one full scale away from the settled node (the channel before), is switched onto it; the
error is |v(t) - v(∞)| across that capacitor. With an ideal switch, one resistor R and one capacitor C:
Cs/(C + Cs) e^(-t/(R (C + Cs))), which starts at the kick by charge sharing. Times 2^N it counts in LSB.
Source: charge conservation; the buffer design of successive-approximation converters uses the same (from memory).
"""

import numpy as np

from rcrules.measures._measure import Measure, Option, Theory
from rcrules.measures._theory import Slopes
from rcrules.measures._topology import columns, increasing, single_mode
from rcrules.problems import Array, Structure, solved


def compute(structure: Structure, cases: Array) -> Array:
    """Error in parts of full scale [1] (case,) at option ``time`` [s]; cases: (case, column), SI."""
    signal = solved(structure, cases).signal
    return np.abs(signal.at(np.full(len(cases), float(structure.option("time")))))


def theory(structure: Structure, low: Array, high: Array) -> Theory:
    """T2 for one exponential: it starts higher and decays slower the larger the sampling capacitor."""
    del high
    slopes = Slopes([0] * len(low))
    passives = (*structure.ohms, *structure.farads)
    single = single_mode(structure) and all(increasing(form, low) for form in passives)
    at_once = float(structure.option("time")) == 0.0
    slopes.add(columns(structure.ohms), (0 if at_once else 1) if single else None)
    sampling = structure.charged[0][0]
    for index, form in enumerate(structure.farads):
        sign = 1 if index == sampling else -1 if at_once else None
        slopes.add(columns([form]), sign if single else None)
    return slopes.theory()


MEASURE = Measure(
    name="sample_error",
    subject="node",
    unit="1",
    summary="Part of full scale that a converter still misses at a time after it starts to sample.",
    compute=compute,
    theory=theory,
    options={
        "event": Option(kind="event", default="sample", choices=("sample",), summary="what starts the transient"),
        "time": Option(
            kind="quantity", default=None, unit="s", summary="time after the start, such as the acquisition"
        ),
    },
    poses="sample",
    scale_free=True,
)
