"""Dielectric absorption: the share of its voltage that a capacitor takes or gives back long after it seems settled."""

from collections.abc import Iterable
from typing import Final

from rcrules.parts._dielectrics import class_one, class_two
from rcrules.parts._model import Absorption
from rcrules.project import PartFacts
from rcrules.quantities import show

_TYPICAL: Final = {
    "PET film": 0.0025,
    "PP film": 0.001,
    "PEN film": 0.01,
    "PPS film": 0.0005,
    "film": 0.01,
    "tantalum": 0.05,
    "polymer": 0.05,
    "niobium": 0.05,
    "aluminium": 0.10,
}
"""Films: a maker's comparison of dielectrics, wima.de; electrolytics: from memory."""
_CLASS_ONE: Final = 0.006
_CLASS_TWO: Final = 0.025
"""Ceramics by the same comparison."""


def absorption(
    tables: Iterable[tuple[str, PartFacts]], dielectric: str | None, ask: str, *, polarised: bool
) -> Absorption:
    """What the project says, else what is typical of the dielectric, which is an assumption.

    ask: head of the project line that would give it.
    """
    for origin, table in tables:
        if table.absorption is not None:
            share = table.absorption.high
            return Absorption(share=share, given=True, origin=f"{show(share, '%')} from {origin}")
    share, told = _typical(dielectric, polarised=polarised)
    words = f"{told}, whose dielectric absorbs up to {show(share, '%')}"
    return Absorption(share=share, given=False, origin=words, ask=f'{ask} absorption = "…"')


def _typical(dielectric: str | None, *, polarised: bool) -> tuple[float, str]:
    if dielectric is None:
        return (0.10, "electrolytic") if polarised else (_CLASS_TWO, "of no given dielectric, as if a class 2 ceramic")
    if class_one(dielectric) is not None:
        return _CLASS_ONE, dielectric
    if class_two(dielectric) is not None:
        return _CLASS_TWO, dielectric
    return _TYPICAL.get(dielectric, _CLASS_TWO), dielectric
