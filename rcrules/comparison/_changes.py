"""What of the board itself differs between two documents: parts, connections, held nets, conditions."""

from collections.abc import Iterator, Mapping
from typing import Any, Final

from rcrules.findings import Document, Json
from rcrules.quantities import show

_DIGITS: Final = 6
"""Significant digits: a part of 10.02 kΩ is not one of 10 kΩ."""


def changes(old: Document, new: Document) -> list[Json]:
    """``{about, what, was, now}`` in the order parts, held nets, conditions; ``was`` or ``now`` None = not there."""
    return [
        *_parts(_by(old.parts, "ref"), _by(new.parts, "ref"), connections(old), connections(new)),
        *_held(_by(old.held, "net"), _by(new.held, "net")),
        *_conditions(old.conditions, new.conditions),
    ]


def _by(rows: list[Json], key: str) -> dict[str, Json]:
    return {row[key]: row for row in rows}


def _change(about: str, what: str, was: str | None, now: str | None) -> Iterator[Json]:
    if was != now:
        yield {"about": about, "what": what, "was": was, "now": now}


def _parts(
    old: Mapping[str, Json], new: Mapping[str, Json], was: Mapping[str, str], now: Mapping[str, str]
) -> Iterator[Json]:
    for ref in sorted({*old, *new}):
        before, after = old.get(ref), new.get(ref)
        if before is None or after is None:
            was_there, is_there = (None if row is None else value(row) for row in (before, after))
            yield from _change(ref, "part", was_there, is_there)
            continue
        yield from _part(ref, before, after)
        if ref in was and ref in now:
            yield from _change(ref, "connection", was[ref], now[ref])


def _part(ref: str, old: Json, new: Json) -> Iterator[Json]:
    """A changed value tells its spread with it; a spread alone is told alone."""
    yield from _change(ref, "fitted", _yes(old["fitted"]), _yes(new["fitted"]))
    if value(old) != value(new):
        yield from _change(ref, "value", value(old), value(new))
    else:
        yield from _change(ref, "spread", spread(old), spread(new))
    for key, unit in (("rated_voltage", "V"), ("rated_power", "W")):
        yield from _change(ref, key.replace("_", " "), number(old[key], unit), number(new[key], unit))
    yield from _change(ref, "dielectric", old["dielectric"], new["dielectric"])


def _yes(fitted: bool) -> str:
    return "fitted" if fitted else "not fitted"


def value(row: Json) -> str:
    """The number, else the text of the schematic."""
    if row["value"] is None or row["unit"] is None:
        return f'"{row["text"]}"'
    return show(row["value"], row["unit"], _DIGITS)


def number(value: float | None, unit: str) -> str | None:
    """None stays None."""
    return None if value is None else show(value, unit, _DIGITS)


def spread(row: Json) -> str | None:
    """From lowest to highest."""
    if row["low"] is None or row["high"] is None:
        return None
    return " .. ".join(dict.fromkeys(show(row[end], row["unit"], _DIGITS) for end in ("low", "high")))


def connections(document: Document) -> dict[str, str]:
    """Reference -> the nets at its ends, of the parts in networks."""
    branches = [branch for network in document.networks for branch in network["branches"]]
    return {branch["part"]: " to ".join(branch["nets"]) for branch in branches}


def _held(old: Mapping[str, Json], new: Mapping[str, Json]) -> Iterator[Json]:
    for net in sorted({*old, *new}):
        yield from _change(net, "held net", source(old.get(net)), source(new.get(net)))


def source(row: Json | None) -> str | None:
    """``supply 3.2 V .. 3.4 V``."""
    if row is None:
        return None
    ends = spread(row)
    return f"{row['kind']} {ends}" if ends else str(row["kind"])


def _conditions(old: Mapping[str, Any], new: Mapping[str, Any]) -> Iterator[Json]:
    for name in sorted({*old, *new}):
        was, now = (spread(rows[name]) if name in rows else None for rows in (old, new))
        yield from _change(name, "condition", was, now)
