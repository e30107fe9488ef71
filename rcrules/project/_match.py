"""Which table of the project file speaks about a net, pin or part.

A table may name one thing, several (``C7, C8``), or many by a glob (``*``, ``?``, ``[…]``; upper and lower case
differ). For each key the most specific table that has it wins: an exact name before any glob, a glob with more letters
of its own before one with fewer, the later of two equals. So ``[net."AIN*"]`` may give the swing of all, and
``[net."AIN0"]`` one more key of one.
"""

import re
from collections.abc import Collection, Iterable, Iterator, Mapping
from dataclasses import fields, replace
from difflib import get_close_matches
from fnmatch import fnmatchcase
from typing import Final, TypeVar

from rcrules.errors import Place
from rcrules.project._model import NetFacts, Notice, PartFacts, PinFacts, Project, SupplyFacts

Facts = TypeVar("Facts", SupplyFacts, NetFacts, PinFacts, PartFacts)

_WILD: Final = re.compile(r"\[[^\]]*\]|[*?]")


def match(pattern: str, name: str) -> bool:
    """Whether a name is meant by a name, a glob, or a list of them with a comma and a blank between."""
    if name == pattern:
        return True
    if ", " in pattern:
        return any(match(one.strip(), name) for one in pattern.split(", "))
    return ("*" in pattern or "?" in pattern or "[" in pattern) and fnmatchcase(name, pattern)


def supply_for(project: Project, net: str) -> SupplyFacts | None:
    """What ``[supply]`` says about a net."""
    return _merged(project.supplies, (net,))


def net_facts(project: Project, net: str) -> NetFacts | None:
    """What ``[net]`` says about a net."""
    return _merged(project.nets, (net,))


def pin_facts(project: Project, keys: Iterable[str]) -> PinFacts | None:
    """What ``[pin]`` says about a pin; ``keys`` are its names: ``U3.NRST``, ``U3.7``."""
    return _merged(project.pins, tuple(keys))


def part_facts(project: Project, ref: str) -> PartFacts | None:
    """What ``[part]`` says about a part, without the defaults of its kind."""
    return _merged(project.parts, (ref,))


def is_ground(project: Project, net: str) -> bool:
    """Whether ``[ground]`` names a net."""
    return any(match(pattern, net) for pattern in project.grounds)


def ranked(tables: Mapping[str, Facts], names: Collection[str]) -> list[tuple[str, Facts]]:
    """The tables that mean one of the names, the most specific first."""
    order = {pattern: number for number, pattern in enumerate(tables)}
    found = [pattern for pattern in tables if any(match(pattern, name) for name in names)]
    found.sort(key=lambda pattern: (pattern in names, len(_WILD.sub("", pattern)), order[pattern]), reverse=True)
    return [(pattern, tables[pattern]) for pattern in found]


def _merged(tables: Mapping[str, Facts], names: Collection[str]) -> Facts | None:
    """One table of all that speak about a thing, key by key."""
    if not tables:
        return None
    found = [facts for _, facts in ranked(tables, names)]
    if len(found) < 2:
        return found[0] if found else None
    merged = found[0]
    for weaker in found[1:]:
        merged = _filled(merged, weaker)
    return merged


def _filled(strong: Facts, weak: Facts) -> Facts:
    """``strong``, with what it does not say taken from ``weak``."""
    changes: dict[str, object] = {}
    for item in fields(strong):
        own, other = getattr(strong, item.name), getattr(weak, item.name)
        if isinstance(own, Mapping):
            changes[item.name] = {**other, **own}
        elif own is None or own == ():
            changes[item.name] = other
    return replace(strong, **changes)  # type: ignore[arg-type]  # names and types are those of the same class


def unmatched(project: Project, nets: Collection[str], pins: Collection[str], parts: Collection[str]) -> list[Notice]:
    """Names and globs that mean nothing on this board, with the nearest name; ``pins`` by name and by number."""
    wanted = {"supply": nets, "ground": nets, "net": nets, "pin": pins, "part": parts}
    words = {"pin": "pin", "part": "part"}
    notices = [
        _nothing(place, words.get(table, "net"), f"[{table}]", name, wanted[table])
        for (table, name), place in project.places.items()
        if not _means_any(name, wanted[table])
    ]
    notices += [
        _nothing(facts.place, "net", f'[supply."{name}"] after', facts.after, nets)
        for name, facts in project.supplies.items()
        if facts.after is not None and facts.after not in nets
    ]
    notices += [
        _nothing(facts.place, "net", f'[pin."{name}"] {key}', net, nets)
        for name, facts in project.pins.items()
        for key, net in _nets_of(facts)
        if net not in nets
    ]
    return notices


def _nets_of(facts: PinFacts) -> Iterator[tuple[str, str]]:
    """The nets that a pin's levels follow and its pulls go to, each with its key."""
    for key, level in (("low", facts.low), ("high", facts.high), ("max-voltage", facts.max_voltage)):
        yield from ((key, net) for _, net in (level.nets if level else ()))
    for key, pull in (("pull-up", facts.pull_up), ("pull-down", facts.pull_down)):
        if pull is not None:
            yield key, pull[1]


def _means_any(pattern: str, names: Collection[str]) -> bool:
    listed = ", " in pattern or _WILD.search(pattern) is not None
    return pattern in names or (listed and any(match(pattern, name) for name in names))


def _nothing(place: Place, word: str, table: str, name: str, names: Collection[str]) -> Notice:
    near = get_close_matches(name, names, n=1, cutoff=0.6) if len(names) <= 20_000 else []
    nearest = f"; nearest: {near[0]}" if near else ""
    kind = "matches" if _WILD.search(name) else "names"
    return Notice(place=place, text=f"{table} {name} {kind} no {word} of this board ({len(names)} {word}s{nearest})")
