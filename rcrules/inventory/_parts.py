"""Resistors and capacitors with what is known about them, and from where."""

import re
from collections.abc import Mapping
from typing import Final

from rcrules.errors import Place
from rcrules.findings import Json
from rcrules.inventory._place import shown
from rcrules.networks import Board
from rcrules.parts import Known, RatedPart, Unknown

_LISTED: Final = re.compile(r"[RC]\d")
_KINDS: Final = ("resistor", "capacitor")
_UNITS: Final = {"resistor": "Ω", "resistor-array": "Ω", "capacitor": "F", "capacitor-array": "F"}


def listed(board: Board) -> tuple[RatedPart, ...]:
    """Every reference that starts with R or C and a digit, and every other resistor or capacitor, in order."""
    return tuple(part for part in board.parts.values() if part.kind in _KINDS or _LISTED.match(part.ref))


def parts(board: Board, coverage: Mapping[str, str]) -> list[Json]:
    """One object per listed part; coverage gives the class of each reference."""
    return [_row(part, coverage[part.ref], board.reasons.get(part.ref)) for part in listed(board)]


def _row(part: RatedPart, coverage: str, reason: str | None) -> Json:
    low, value, high = part.bounds() if isinstance(part.value, Known) else (None, None, None)
    return {
        "ref": part.ref,
        "kind": part.kind,
        "text": part.text,
        "value": value,
        "low": low,
        "high": high,
        "unit": _UNITS.get(part.kind),
        "rated_voltage": _number(part.rated_voltage),
        "rated_power": _number(part.rated_power),
        "dielectric": part.dielectric,
        "fitted": part.fitted,
        "origins": {name: _origin(*origin) for name, origin in sorted((part.origins or {}).items())},
        "shares": [
            {"name": share.name, "low": share.low, "high": share.high, "given": share.given, "from": share.origin}
            for share in part.shares
        ],
        "why_unknown": part.value.why if isinstance(part.value, Unknown) else None,
        "coverage": coverage,
        "reason": reason,
    }


def _number(fact: Known | Unknown) -> float | None:
    return fact.si if isinstance(fact, Known) else None


def _origin(origin: str, place: Place | None) -> Json:
    """Where a fact comes from; file, line and column are null for what no file says."""
    return {
        "from": origin,
        "file": shown(place.file) if place else None,
        "line": place.line if place else None,
        "column": place.column if place else None,
    }
