"""How numbers at one place come about, apart from what rules ask of the whole board."""

import json
from collections.abc import Iterable
from dataclasses import dataclass, field, fields

from rcrules.findings._document import Finding, Json, Quantity
from rcrules.findings._encode import SCHEMA, plain


@dataclass(frozen=True, slots=True, kw_only=True)
class Derived:
    """One measure of one subject."""

    at: str
    """The net, part or pin that was asked for."""
    of: str
    """Net of the node, the pin or the supply; reference of the part."""
    subject: str
    """``node``, ``capacitor``, ``resistor``, ``pin``, ``supply``; ``place`` where nothing is measured."""
    measure: str
    """'' where nothing is measured."""
    finding: Finding | None
    """The finding that asks for it; None = asked by no rule."""
    measured: Quantity | None
    """None = it cannot be told."""
    derivation: Json | None
    reason: str | None
    """Why there is no number."""
    ask: list[str]
    """Project lines that would give one."""
    options: Json = field(default_factory=dict)
    """Options of the measure, as texts; those of the event, and those that a rule sets."""


def derived_text(found: Iterable[Derived]) -> str:
    """JSON: ``{"rcrules": 1, "derivations": [...]}``, numbers as in the findings document."""
    rows = [{item.name: plain(getattr(row, item.name)) for item in fields(row)} for row in found]
    return json.dumps({"rcrules": SCHEMA, "derivations": rows}, ensure_ascii=False, allow_nan=False, indent=1) + "\n"
