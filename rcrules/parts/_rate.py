"""Rates every part of a design: kind, value, spread, ratings, each fact from its strongest source."""

import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from itertools import chain
from typing import Final

from rcrules.design import Design, Part
from rcrules.errors import Place
from rcrules.parts._asks import asks
from rcrules.parts._dielectrics import class_two, code_of
from rcrules.parts._facts import Facts, Said, disagreements, gather, tables_for, tables_say, texts_say
from rcrules.parts._kinds import kind_of
from rcrules.parts._model import Known, RatedPart, Share, Unknown
from rcrules.parts._shares import age, bias, capacitor_drift, curve_share, drift, is_electrolytic, resistor_drift
from rcrules.parts._shares import tolerance as tolerance_share
from rcrules.parts._spelling import SIZES
from rcrules.parts._texts import ValueKind
from rcrules.project import PartFacts, Project
from rcrules.quantities import Spread

_SIZE: Final = re.compile(rf"(?<!\d)({'|'.join(sorted(SIZES))})(?!\d)")
_POLAR: Final = re.compile(r"(?:^|[:_\s])(?:CP\d?|C_?POL\w*|CAPAPOL|CAP_?POL\w*|POL|CP_\w+)(?:$|_)", re.IGNORECASE)
_READ: Final[dict[str, ValueKind]] = {
    "resistor": "resistor",
    "resistor-array": "resistor",
    "capacitor": "capacitor",
    "capacitor-array": "capacitor",
}
"""Kinds with a value -> how their texts are read."""
_UNITS: Final = {"resistor": "Ω", "capacitor": "F"}
_NOT_GIVEN: Final = Unknown(why="not given")


def rate(design: Design, project: Project) -> Mapping[str, RatedPart]:
    """Every part by reference, in the order of the design.

    Precedence: project part, BOM field, netlist field, value text, description, project default, and last an
    assumption, which is marked as such and carries the project line that would replace it.
    """
    asked = asks(design.parts.values())
    return {ref: _rated(part, project, asked[ref]) for ref, part in design.parts.items()}


def _rated(part: Part, project: Project, ask: str) -> RatedPart:
    tables = tables_for(part, project)
    kind, why = next(((table.kind, origin) for origin, table in tables if table.kind is not None), kind_of(part))
    fitted, fitted_why = _fitted(part, tables)
    reads = _READ.get(kind)
    if reads is None:
        text = next((fact.text for fact in part.values), "")
        unknown = Unknown(why="not a resistor or capacitor")
        return RatedPart(
            part=part, kind=kind, kind_why=why, text=text, value=unknown, fitted=fitted, fitted_why=fitted_why
        )
    facts = gather(part, reads, tables, project)
    marked = next((source.read for source in facts.values if not source.read.fitted), None)
    if marked is not None and fitted and not any(table.fitted for _, table in tables):
        fitted, fitted_why = False, marked.fitted_why
    rated = _with_value(part, kind, why, facts, _UNITS[reads])
    rated = replace(rated, fitted=fitted, fitted_why=fitted_why)
    return replace(rated, shares=_shares(rated, reads, facts, project, ask))


def _fitted(part: Part, tables: Sequence[tuple[str, PartFacts]]) -> tuple[bool, str]:
    said = next(((table.fitted, origin) for origin, table in tables if table.fitted is not None), None)
    return said if said is not None else (part.fitted, part.fitted_why)


def _with_value(part: Part, kind: str, why: str, facts: Facts, unit: str) -> RatedPart:
    """The part with value and ratings, their origins, and what lost."""
    values = [*_spreads(facts.project, "value"), *texts_say((*facts.values, *facts.descriptions), "value")]
    winner = next((s.text for s in (*facts.values, *facts.descriptions) if s.read.value is not None), None)
    text = winner if winner is not None else next((source.text for source in facts.values), "")
    voltages = [*_spreads(facts.project, "rated_voltage"), *texts_say(facts.sources, "rated_voltage")]
    powers = [*_spreads(facts.project, "rated_power"), *texts_say(facts.sources, "rated_power")]
    dielectrics = list(_dielectrics(facts))
    shares = list(_tolerances(facts))
    voltages += _spreads(facts.defaults, "rated_voltage")
    powers += _spreads(facts.defaults, "rated_power")
    found = {"value": values, "tolerance": shares, "rated_voltage": voltages, "rated_power": powers}
    named: dict[str, Sequence[Said[object]]] = {**found, "dielectric": dielectrics}
    units = {"value": unit, "rated_voltage": "V", "rated_power": "W"}
    dielectric = dielectrics[0].fact if dielectrics else None
    return RatedPart(
        part=part,
        kind=kind,
        kind_why=why,
        text=text,
        value=_known(values) or _unread(facts),
        rated_voltage=_known(voltages) or _NOT_GIVEN,
        rated_power=_known(powers) or _NOT_GIVEN,
        dielectric=str(dielectric) if dielectric is not None else None,
        bias_curve=next((table.bias_curve for _, table in facts.project if table.bias_curve), ()),
        polarised=unit == "F" and (is_electrolytic(str(dielectric)) or _polar(part)),
        size=_size(part, facts),
        origins=_origins(named),
        disagreements=tuple(chain(*(disagreements(_word(n), s, units.get(n, "1")) for n, s in named.items() if s))),
    )


def _word(name: str) -> str:
    return name.replace("_", " ")


def _origins(named: Mapping[str, Sequence[Said[object]]]) -> dict[str, tuple[str, Place | None]]:
    return {name: (said[0].origin, said[0].place) for name, said in named.items() if said}


def _spreads(tables: Sequence[tuple[str, PartFacts]], attribute: str) -> list[Said[object]]:
    """Nominal of a quantity that the project file gives."""
    said = tables_say(tables, attribute)
    return [replace(item, fact=item.fact.nominal) for item in said if isinstance(item.fact, Spread)]


def _dielectrics(facts: Facts) -> Iterator[Said[object]]:
    """Letter codes first within each source; ``ceramic`` alone names no dielectric."""
    for item in tables_say(facts.project, "dielectric"):
        yield replace(item, fact=code_of(str(item.fact)) or str(item.fact))
    said = [item for item in texts_say(facts.sources, "dielectric") if item.fact != "ceramic"]
    yield from said
    for item in tables_say(facts.defaults, "dielectric"):
        yield replace(item, fact=code_of(str(item.fact)) or str(item.fact))


def _tolerances(facts: Facts) -> Iterator[Said[object]]:
    yield from tables_say(facts.project, "tolerance")
    yield from texts_say(facts.sources, "tolerance")
    yield from tables_say(facts.defaults, "tolerance")


def _known(said: Sequence[Said[object]]) -> Known | None:
    if not said or not isinstance(said[0].fact, float):
        return None
    return Known(si=said[0].fact, origin=said[0].origin, place=said[0].place)


def _unread(facts: Facts) -> Unknown:
    """Why there is no value: what the first value text says."""
    return Unknown(why=next((source.read.why_unknown for source in facts.values), "no value text"))


def _polar(part: Part) -> bool:
    names = {pin.name for pin in part.pins}
    return bool(_POLAR.search(part.symbol)) or "+" in names or any(_POLAR.fullmatch(f.text) for f in part.values)


def _size(part: Part, facts: Facts) -> str:
    in_footprint = _SIZE.search(part.footprint)
    if in_footprint is not None:
        return in_footprint[1]
    return next((source.read.size for source in facts.sources if source.read.size), "")


def _shares(part: RatedPart, kind: ValueKind, facts: Facts, project: Project, ask: str) -> tuple[Share, ...]:
    if not isinstance(part.value, Known) or part.value.si == 0:
        return ()
    said = next(_tolerances(facts), None)
    given = said.fact if said is not None and isinstance(said.fact, tuple) else None
    first = tolerance_share(kind, given, said.origin if said is not None else "", ask)
    if kind == "resistor":
        coefficient, origin = _coefficient(facts)
        return first, resistor_drift(part.value.si, coefficient, origin, project, ask)
    return (first, *_capacitor_shares(part, part.value.si, facts, project, ask))


def _capacitor_shares(part: RatedPart, farads: float, facts: Facts, project: Project, ask: str) -> Iterator[Share]:
    coefficient, origin = _coefficient(facts, project_only=True)
    letters = part.dielectric or ""
    if coefficient is not None:
        yield drift(-coefficient, coefficient, f"tcr from {origin}", project, given=True, ask="")
    else:
        yield capacitor_drift(part.dielectric, project, ask, electrolytic=part.polarised)
    unknown = part.dielectric is None and not part.polarised
    if part.bias_curve or unknown or class_two(letters):
        named = next((origin for origin, table in facts.project if table.bias_curve), "")
        yield bias(farads, part.bias_curve, named, ask)
    if unknown or class_two(letters):
        yield age(part.dielectric, project, ask)


def _coefficient(facts: Facts, *, project_only: bool = False) -> tuple[float | None, str]:
    """Temperature coefficient [1/K], both ways, and its origin."""
    for origin, table in facts.project:
        if table.tcr is not None:
            return max(abs(table.tcr.low), abs(table.tcr.high)), origin
    for item in () if project_only else texts_say(facts.sources, "coefficient"):
        if isinstance(item.fact, float):
            return item.fact, item.origin
    for origin, table in facts.defaults:
        if table.tcr is not None:
            return max(abs(table.tcr.low), abs(table.tcr.high)), origin
    return None, ""


def at_bias(part: RatedPart, volts: float) -> RatedPart:
    """The part with its bias share narrowed to what happens between 0 V and ``volts`` across it.

    A given curve is taken from 0 V to ``volts``. The assumed envelope holds at rated voltage and is scaled down in
    proportion below it where the rating is known.
    """
    return replace(part, shares=tuple(_narrowed(part, share, abs(volts)) for share in part.shares))


def _narrowed(part: RatedPart, share: Share, volts: float) -> Share:
    if share.name != "bias":
        return share
    if part.bias_curve:
        named = share.origin.partition("bias curve from ")[2].partition(", 0 V")[0]
        return curve_share(part.bias_curve, named, volts)
    if not isinstance(part.rated_voltage, Known) or part.rated_voltage.si <= 0:
        return share
    ratio = min(1.0, volts / part.rated_voltage.si)
    return replace(share, low=share.low * ratio, origin=f"{share.origin}, taken in proportion to the voltage")
