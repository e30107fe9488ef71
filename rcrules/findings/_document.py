"""The findings document: everything a report needs, and nothing it does not. Mirrors the JSON, key for key."""

from dataclasses import dataclass, field
from typing import Any

Json = dict[str, Any]


@dataclass(frozen=True, slots=True, kw_only=True)
class Quantity:
    """Bounds of a number."""

    low: float
    nominal: float
    high: float
    unit: str
    low_case: dict[str, float] = field(default_factory=dict)
    """Parameter name -> value at the lowest case; only parameters off nominal."""
    high_case: dict[str, float] = field(default_factory=dict)
    method: str = "proved"
    """``proved`` or ``searched``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Finding:
    """One rule held against one subject."""

    rule: str
    title: str
    pack: str
    level: str
    outcome: str
    """One of vocabulary.OUTCOMES."""
    subject: str
    """``node``, ``capacitor``, ``resistor``, ``supply``."""
    net: str | None
    parts: list[str]
    feeds: list[str]
    measure: str
    options: Json
    """As printed: ``{"event": "power-up", "to": "may switch"}``."""
    measured: Quantity | None
    limit: Json | None
    """``{"at_least": 0.03, "unit": "s"}``."""
    margin: float | None
    """Worst distance to the limit; negative = broken; may be inf."""
    margin_case: dict[str, float]
    reason: str | None
    """Why undecided."""
    ask: list[str]
    """Project lines that would decide it, most useful first."""
    why: str
    source: str
    places: list[Json]
    fingerprint: str
    """Two keys joined by a dot: references and pins; topology around the fed pin. No values, no automatic net names."""
    assumptions: list[int]
    """Indexes into Document.assumptions."""
    cause: str = ""
    """Findings of equal rule and cause are one group in reports; '' = alone."""
    detail: Json = field(default_factory=dict)
    """Derivation data: ``worst`` = list of {parameter, value, unit, relative, why}, most influential first;
    ``deciding`` = {parameter, text, flips_at, unit} of an undecided finding; ``never`` = the level is not reached."""
    baseline: str | None = None
    """Against the saved document of a comparison: ``new`` (fails now, did not), ``unchanged``, ``moved``; None = not
    compared."""
    waiver: int | None = None
    """Index into Document.waivers, of a waived finding."""
    derivation: Json | None = None
    """Where asked, how the number comes about: ``{measure, summary, picture, sources, voltages, modes, cases,
    parameters}``, see ``derivation.derive``."""
    response: Json | None = None
    """Where asked, the observed voltage over time: ``{unit, time, nominal, low_case, high_case, thresholds, limit,
    crossing}``, see ``derivation.response``."""
    statistics: Json | None = None
    """Where asked: ``{samples, seed, failing, fraction, quantiles, root_sum_square, distributions}``; the fraction with
    its 95 % confidence interval, quantiles of 0.135 %, 50 % and 99.865 %."""
    proposals: Json | None = None
    """Of a failing finding, where asked: ``{found: [{changes, needs, findings}], reason}`` with the changes as ``{ref,
    what, was, now, source}``, the network's findings as they would be, and why nothing was found."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Document:
    """One run on one board. Every list is sorted; no clock, no absolute path."""

    tool: str
    board: Json
    inputs: list[Json]
    conditions: Json
    parts: list[Json]
    held: list[Json]
    packs: list[Json]
    networks: list[Json]
    findings: list[Finding]
    assumptions: list[Json]
    """``{"about": "R12", "text": "no tolerance given, 5 % assumed", "ask": "[part.\\"R12\\"] tolerance = …"}``."""
    coverage: Json
    waivers: list[Json]
    """As written, with ``state`` (``used``, ``lapsed``, ``expired``, ``unused``) and what was ``told`` about it."""
    problems: list[Json]
    """Remarks about inputs: ``{"place": {...}, "text": …}``; the place is empty where it is none of an input."""
    comparison: Json | None = None
    """Against a saved document: ``{board, tool, share, networks: {added, removed}, changes: [{about, what, was, now}],
    findings: [{change, rule, net, parts, was, now, causes, finding}]}``."""
    schema: int = 1
    settled: bool = field(default=False, init=False, compare=False, repr=False)
    """Whether it is as it reads after saving; a changed copy is not. No key of the JSON."""
