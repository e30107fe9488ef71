"""Step 6: a structure and its parameter columns in, solved cases and bounds out."""

from rcrules.engine import Bounds
from rcrules.problems._bounds import Failure, Quantity, Request, solve_bounds
from rcrules.problems._junctions import Unsettled
from rcrules.problems._rest import elastance, gain_at
from rcrules.problems._solved import Solved, corner_omega, solved, steady_states
from rcrules.problems._structure import (
    Array,
    Form,
    Junction,
    LevelForm,
    Names,
    Parameter,
    Problem,
    Structure,
    Swing,
    Waveform,
    column,
    constant,
    evaluate,
)

__all__ = [
    "Array",
    "Bounds",
    "Failure",
    "Form",
    "Junction",
    "LevelForm",
    "Names",
    "Parameter",
    "Problem",
    "Quantity",
    "Request",
    "Solved",
    "Structure",
    "Swing",
    "Unsettled",
    "Waveform",
    "column",
    "constant",
    "corner_omega",
    "elastance",
    "evaluate",
    "gain_at",
    "solve_bounds",
    "solved",
    "steady_states",
]
