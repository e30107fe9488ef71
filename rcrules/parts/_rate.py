"""Rates every part of a design: kind, value, spread, ratings, each fact from its strongest source."""

import re
from collections.abc import Hashable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from itertools import chain
from typing import Final

from rcrules.design import Design, Part
from rcrules.parts._absorption import absorption
from rcrules.parts._alike import asked_at_once, asks, moved, written
from rcrules.parts._dielectrics import ELECTROLYTIC, code_of
from rcrules.parts._elements import Elements, elements
from rcrules.parts._facts import Facts, Said, disagreements, gather, tables_for, tables_say, texts_say
from rcrules.parts._insulation import insulation
from rcrules.parts._kinds import kind_of
from rcrules.parts._model import Known, RatedPart, Unknown
from rcrules.parts._shares import Conditions, conditions
from rcrules.parts._spelling import SIZES
from rcrules.parts._spread import Written, spread
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
_UNITS: Final = {"value": "", "rated_voltage": "V", "rated_power": "W"}
_NOT_GIVEN: Final = Unknown(why="not given")
_NO_VALUE: Final = Unknown(why="not a resistor or capacitor")


Tables = Sequence[tuple[str, PartFacts]]
"""Tables of the project file that name a part, with their origin in words."""
_Named = Mapping[str, Sequence[Said[object]]]
"""Fact name -> every source that gives it, the strongest first."""


@dataclass(frozen=True, slots=True, kw_only=True)
class _Told:
    """What a part is, and whether it is there."""

    kind: str
    why: str
    fitted: bool
    fitted_why: str


def rate(design: Design, project: Project) -> Mapping[str, RatedPart]:
    """Every part by reference, in the order of the design.

    Precedence: project part, BOM field, netlist field, value text, description, project default, and last an
    assumption, which is marked as such and carries the project line that would replace it.
    """
    parts = [(part, written(part)) for part in design.parts.values()]
    asked, around = asks(parts), conditions(project)
    known: dict[Hashable, RatedPart] = {}
    rated = {}
    for part, writing in parts:
        tables = tables_for(part, project) if project.parts else ()
        alike = writing, tuple(origin for origin, _ in tables)
        model = known.get(alike)
        if model is None:
            known[alike] = model = _rated(part, tables, project, around, asked[writing])
        rated[part.ref] = model if model.part is part else moved(model, part)
    return asked_at_once(rated)


def _rated(part: Part, tables: Tables, project: Project, around: Conditions, ask: str) -> RatedPart:
    kind, why = next(((table.kind, origin) for origin, table in tables if table.kind is not None), kind_of(part))
    fitted, fitted_why = _fitted(part, tables)
    reads = _READ.get(kind)
    if reads is not None:
        facts = gather(part, reads, tables, project)
        if fitted and not any(table.fitted for _, table in tables):
            marks = (source.read.fitted_why for source in facts.values if not source.read.fitted)
            fitted_why = next(marks, "") or fitted_why
            fitted = all(source.read.fitted for source in facts.values)
        told = _Told(kind=kind, why=why, fitted=fitted, fitted_why=fitted_why)
        return _valued(part, told, reads, facts, around, ask)
    text = next((fact.text for fact in part.values), "")
    return RatedPart(
        part=part, kind=kind, kind_why=why, text=text, value=_NO_VALUE, fitted=fitted, fitted_why=fitted_why
    )


def _fitted(part: Part, tables: Tables) -> tuple[bool, str]:
    said = next(((table.fitted, origin) for origin, table in tables if table.fitted is not None), None)
    return said if said is not None else (part.fitted, part.fitted_why)


def _valued(part: Part, told: _Told, reads: ValueKind, facts: Facts, around: Conditions, ask: str) -> RatedPart:
    """A resistor or capacitor with value, ratings and spread, their origins, and what lost."""
    named = _named(facts)
    value = _known(named["value"]) or _unread(facts)
    count = next((source.read.count for source in facts.valued if source.read.count), None)
    if told.kind == reads and count and isinstance(value, Known) and "project" not in value.origin:
        value = Unknown(why=f"'{_text(facts)}' may be one part or {count}")
    array = elements(part, (table for _, table in facts.tables), count) if told.kind != reads else Elements()
    depends = _depends(part, reads, value, named, facts, ask)
    return RatedPart(
        part=part,
        kind=told.kind,
        kind_why=told.why,
        text=_text(facts),
        value=value,
        shares=spread(depends, around),
        across=next((t.voltage_across for _, t in facts.project if t.voltage_across is not None), None),
        rated_voltage=_known(named["rated_voltage"]) or _NOT_GIVEN,
        rated_power=_known(named["rated_power"]) or _NOT_GIVEN,
        dielectric=depends.dielectric,
        bias_curve=depends.curve,
        insulation=insulation(facts.tables, _known(named["rated_voltage"]) or _NOT_GIVEN),
        absorption=absorption(facts.tables, depends.dielectric, ask, polarised=depends.polarised),
        polarised=depends.polarised,
        size=_size(part.footprint) or next((s.read.size for s in facts.sources if s.read.size), ""),
        elements=array.pairs,
        fitted=told.fitted,
        fitted_why=told.fitted_why,
        origins={name: (said[0].origin, said[0].place) for name, said in named.items() if said},
        disagreements=(*_lost(named, "Ω" if reads == "resistor" else "F"), *_unheard(facts, named), *array.notes),
    )


def _depends(part: Part, reads: ValueKind, value: Known | Unknown, named: _Named, facts: Facts, ask: str) -> Written:
    """What the spread depends on."""
    dielectric = next((str(said.fact) for said in named["dielectric"]), None)
    curve, curve_from = next(((t.bias_curve, origin) for origin, t in facts.tables if t.bias_curve), ((), ""))
    return Written(
        kind=reads,
        value=value.si if isinstance(value, Known) else 0.0,
        tolerance=_pair(named["tolerance"]),
        coefficient=_coefficient(facts, tables_only=reads == "capacitor"),
        load_life=next(((t.load_life.high, origin) for origin, t in facts.tables if t.load_life is not None), None),
        dielectric=dielectric,
        polarised=reads == "capacitor" and (dielectric in ELECTROLYTIC or _polar(part)),
        curve=curve,
        curve_from=curve_from,
        ask=ask,
    )


def _named(facts: Facts) -> _Named:
    """Every fact by name, each with all its sources, the strongest first."""
    return {
        "value": [*_nominals(facts.project, "value"), *texts_say(facts.valued, "value")],
        "tolerance": [
            *tables_say(facts.project, "tolerance"),
            *texts_say(facts.sources, "tolerance"),
            *tables_say(facts.defaults, "tolerance"),
        ],
        "rated_voltage": _quantity(facts, "rated_voltage"),
        "rated_power": _quantity(facts, "rated_power"),
        "dielectric": list(_dielectrics(facts)),
    }


def _quantity(facts: Facts, attribute: str) -> list[Said[object]]:
    texts = texts_say(facts.sources, attribute)
    return [*_nominals(facts.project, attribute), *texts, *_nominals(facts.defaults, attribute)]


def _nominals(tables: Tables, attribute: str) -> Iterator[Said[object]]:
    """Nominal of a quantity that the project file gives."""
    for item in tables_say(tables, attribute):
        if isinstance(item.fact, Spread):
            yield replace(item, fact=item.fact.nominal)


def _dielectrics(facts: Facts) -> Iterator[Said[object]]:
    """Letter codes in one spelling; ``ceramic`` alone names no dielectric."""
    for item in tables_say(facts.project, "dielectric"):
        yield replace(item, fact=code_of(str(item.fact)) or str(item.fact))
    yield from (item for item in texts_say(facts.sources, "dielectric") if item.fact != "ceramic")
    for item in tables_say(facts.defaults, "dielectric"):
        yield replace(item, fact=code_of(str(item.fact)) or str(item.fact))


def _coefficient(facts: Facts, *, tables_only: bool) -> tuple[float, str] | None:
    """Temperature coefficient [1/K], both ways, and its origin."""
    sources = () if tables_only else facts.sources
    said = chain(tables_say(facts.project, "tcr"), texts_say(sources, "coefficient"), tables_say(facts.defaults, "tcr"))
    for item in said:
        if isinstance(item.fact, Spread):
            return max(abs(item.fact.low), abs(item.fact.high)), item.origin
        if isinstance(item.fact, float):
            return item.fact, item.origin
    return None


def _pair(said: Sequence[Said[object]]) -> tuple[float, float, str] | None:
    """Relative low and high of a tolerance, and its origin."""
    if not said or not isinstance(said[0].fact, tuple):
        return None
    low, high = said[0].fact
    return low, high, said[0].origin


def _known(said: Sequence[Said[object]]) -> Known | None:
    if not said or not isinstance(said[0].fact, float):
        return None
    return Known(si=said[0].fact, origin=said[0].origin, place=said[0].place)


def _unread(facts: Facts) -> Unknown:
    """Why there is no value: what the first value text says."""
    return Unknown(why=next((source.read.why_unknown for source in facts.values), "no value text"))


def _text(facts: Facts) -> str:
    """The text that gave the value, else the first value text."""
    winner = next((source.text for source in facts.valued if source.read.value is not None), None)
    return winner if winner is not None else next((source.text for source in facts.values), "")


def _lost(named: _Named, unit: str) -> tuple[str, ...]:
    several = ((name, said) for name, said in named.items() if len(said) > 1)
    words = (disagreements(name.replace("_", " "), said, _UNITS.get(name, "1") or unit) for name, said in several)
    return tuple(chain(*words))


def _unheard(facts: Facts, named: _Named) -> Iterator[str]:
    """What sources say that is not taken: part numbers that nearly fit, a tolerance letter with several meanings."""
    yield from facts.stops
    why = next((source.read.tolerance_why for source in facts.sources if source.read.tolerance_why), "")
    if why and not named["tolerance"]:
        yield f'{why}, so none is taken; its [part] can tell it: tolerance = "…"'


def _polar(part: Part) -> bool:
    names = any(pin.name == "+" for pin in part.pins)
    return names or _is_polar(part.symbol) or any(_POLAR.fullmatch(fact.text) for fact in part.values)


@lru_cache(maxsize=4096)
def _is_polar(symbol: str) -> bool:
    return _POLAR.search(symbol) is not None


@lru_cache(maxsize=4096)
def _size(footprint: str) -> str:
    found = _SIZE.search(footprint)
    return found[1] if found is not None else ""
