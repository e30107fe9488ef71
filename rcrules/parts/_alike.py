"""Parts written alike: rated once, and given by one line of the project file."""

from collections.abc import Hashable, Iterable, Mapping
from dataclasses import replace
from itertools import chain
from typing import Final

from rcrules.design import Part
from rcrules.errors import Place
from rcrules.parts._kinds import prefix
from rcrules.parts._model import Known, RatedPart, Unknown
from rcrules.parts._part_numbers import BY_PATTERN

_MOST: Final = 12
"""References in one table name; beyond it the line gives the default of the kind."""
_KINDS: Final = {"R": "resistor", "C": "capacitor"}


def written(part: Part) -> Hashable:
    """Everything about a part that its rating depends on, but not its reference and places."""
    return (
        prefix(part.ref),
        tuple([(fact.text, fact.origin) for fact in part.values]),
        tuple([(name, *[(fact.text, fact.origin) for fact in facts]) for name, facts in part.fields.items()]),
        part.footprint,
        part.symbol,
        part.description,
        part.fitted,
        part.fitted_why,
        tuple([(pin.number, pin.name) for pin in part.pins]),
    )


def asks(parts: Iterable[tuple[Part, Hashable]]) -> dict[Hashable, str]:
    """Writing -> head of the project line that gives a missing fact of all parts written so.

    ``[part."C7, C8"]``, or ``[defaults.capacitor]`` where they are many.
    """
    groups: dict[Hashable, list[str]] = {}
    for part, writing in parts:
        groups.setdefault(writing, []).append(part.ref)
    return {writing: _head(refs) for writing, refs in groups.items()}


def _head(refs: list[str]) -> str:
    kind = _KINDS.get(refs[0][:1].upper())
    if len(refs) > _MOST and kind is not None:
        return f"[defaults.{kind}]"
    return f'[part."{", ".join(refs)}"]'


def asked_at_once(rated: Mapping[str, RatedPart]) -> Mapping[str, RatedPart]:
    """The parts; where many of a kind lack a rating, one line for all of that kind is asked for it."""
    parts = [part for part in rated.values() if part.fitted and isinstance(part.value, Known)]
    volts = [part for part in parts if part.kind == "capacitor" and isinstance(part.rated_voltage, Unknown)]
    watts = [part for part in parts if part.kind == "resistor" and isinstance(part.rated_power, Unknown)]
    asked = dict(rated)
    if len(volts) > _MOST:
        unknown = Unknown(why="not given", ask='[defaults.capacitor] rated-voltage = "…"')
        asked.update((part.ref, replace(part, rated_voltage=unknown)) for part in volts)
    if len(watts) > _MOST:
        unknown = Unknown(why="not given", ask='[defaults.resistor] rated-power = "…"')
        asked.update((part.ref, replace(part, rated_power=unknown)) for part in watts)
    return asked


def moved(model: RatedPart, part: Part) -> RatedPart:
    """The rating of a part written like ``model``, with its own reference and places."""
    facts = [*part.values, *chain(*part.fields.values())]
    places = {fact.origin: fact.place for fact in reversed(facts)}
    return replace(
        model,
        part=part,
        value=_known_at(model.value, places),
        rated_voltage=_known_at(model.rated_voltage, places),
        rated_power=_known_at(model.rated_power, places),
        origins={name: (origin, _at(places, origin, at)) for name, (origin, at) in (model.origins or {}).items()},
    )


def _at(places: Mapping[str, Place], origin: str, place: Place | None) -> Place | None:
    """The part's own place of an origin; what a pattern reads stands where its part number stands."""
    return places.get(origin.partition(BY_PATTERN)[0], place)


def _known_at(fact: Known | Unknown, places: Mapping[str, Place]) -> Known | Unknown:
    if isinstance(fact, Unknown):
        return fact
    return Known(si=fact.si, origin=fact.origin, place=_at(places, fact.origin, fact.place))
