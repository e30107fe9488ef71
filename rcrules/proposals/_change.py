"""One change of one part, and the project as it would read with it."""

from collections.abc import Iterable
from dataclasses import dataclass, replace
from typing import Final

from rcrules.errors import Place
from rcrules.findings import Json
from rcrules.parts import RatedPart
from rcrules.project import PartFacts, Project
from rcrules.quantities import Spread, show

UNITS: Final = {"resistor": "Ω", "capacitor": "F"}


@dataclass(frozen=True, slots=True, kw_only=True)
class Change:
    """Another value, rating, tolerance or dielectric of a part."""

    ref: str
    what: str
    """``value``, ``rated voltage``, ``rated power``, ``tolerance``, ``dielectric``."""
    was: str
    now: str
    """Both in words."""
    number: float | None
    """SI; None for a dielectric."""
    source: str
    """``on the BOM as R31``, ``E12``."""
    distance: float
    """How far from the present one: natural logarithm of the ratio, without sign."""

    def json(self) -> Json:
        """As the document holds it."""
        return {"ref": self.ref, "what": self.what, "was": self.was, "now": self.now, "source": self.source}


def value_change(part: RatedPart, was: float, now: float, source: str, distance: float) -> Change:
    """Another value of a resistor or capacitor."""
    unit = UNITS[part.kind]
    texts = (show(was, unit, 4), show(now, unit, 4))
    return Change(ref=part.ref, what="value", was=texts[0], now=texts[1], number=now, source=source, distance=distance)


def changed(project: Project, changes: Iterable[Change]) -> Project:
    """The project with the changes said of the parts by name; what it said of them otherwise stays."""
    parts = dict(project.parts)
    for change in changes:
        before = parts.get(change.ref, PartFacts(place=Place(file=project.file or "proposal")))
        parts[change.ref] = _with(before, change)
    return replace(project, parts=parts)


def _with(facts: PartFacts, change: Change) -> PartFacts:
    number = change.number
    if number is None:
        return replace(facts, dielectric=change.now)
    if change.what == "tolerance":
        return replace(facts, tolerance=(-number, number))
    spread = Spread(low=number, nominal=number, high=number, unit="")
    if change.what == "rated voltage":
        return replace(facts, rated_voltage=spread)
    return replace(facts, rated_power=spread) if change.what == "rated power" else replace(facts, value=spread)
