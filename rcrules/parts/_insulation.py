"""Insulation of a capacitor: the least resistance of its dielectric, from what is said of its leakage."""

from collections.abc import Iterable

from rcrules.parts._model import Insulation, Known, Unknown
from rcrules.project import PartFacts
from rcrules.quantities import show


def insulation(tables: Iterable[tuple[str, PartFacts]], rated: Known | Unknown) -> Insulation | Unknown | None:
    """Of the first table that says something; None = nothing is said.

    A leakage current is one at rated voltage, as electrolytic capacitors are specified: R = V/I.
    """
    for origin, table in tables:
        if table.insulation_resistance is not None and table.insulation_resistance.low > 0.0:
            least = table.insulation_resistance.low
            return Insulation(least=least, given=True, origin=f"at least {show(least, 'Ω')} from {origin}")
        if table.leakage is not None and table.leakage.high > 0.0:
            if not isinstance(rated, Known):
                return Unknown(why=f"its leakage is one at rated voltage, which is {rated.why}")
            told = f"at most {show(table.leakage.high, 'A')} at {show(rated.si, 'V')} from {origin}"
            return Insulation(least=rated.si / table.leakage.high, given=True, origin=told)
    return None
