"""What is proved about a supply with its capacitors: monotone in every number, by the closed forms.

S1  Σ C, Σ C V/rise: rise with each C and V, fall with the rise.
S2  The voltage of capacitors that a load and resistors draw from never rises, and falls faster the smaller C, the
    larger the load and the smaller each R (comparison of C v' = -f(v)): the time rises with C, V and R, and falls with
    load and level.
"""

from rcrules.measures._measure import Theory
from rcrules.measures._theory import Slopes
from rcrules.measures._topology import columns, increasing
from rcrules.problems import Array, Form, Structure

Signed = tuple[tuple[tuple[Form, ...], int], ...]


def total(structure: Structure, low: Array, high: Array) -> Theory:
    """S1 for the sum of capacitances."""
    del high
    return _signed(((structure.farads, 1),), low)


def inrush(structure: Structure, low: Array, high: Array) -> Theory:
    """S1 for a ramp."""
    del high
    rise, volts = structure.waveforms[0].points[-1]
    return _signed((((*structure.farads, volts), 1), ((rise,), -1)), low)


def hold_up(structure: Structure, low: Array, high: Array) -> Theory:
    """S2."""
    del high
    volts, to = structure.states[0][0], structure.level("to").offset
    return _signed((((*structure.farads, *structure.ohms, volts), 1), ((structure.load, to), -1)), low)


def _signed(forms: Signed, low: Array) -> Theory:
    """Signs of forms that rise with their columns; no sign where one may be negative."""
    slopes = Slopes([0] * len(low))
    for group, sign in forms:
        for form in group:
            slopes.add(columns([form]), sign if increasing(form, low) else None)
    return slopes.theory()
