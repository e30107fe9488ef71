"""How a number comes about, as kept with its finding: the circuit as used, the steps by hand, who makes the spread."""

import math
from dataclasses import dataclass

from rcrules.findings import Finding, Json
from rcrules.reports._words import bounds, number


@dataclass(frozen=True, slots=True, kw_only=True)
class Bar:
    """One parameter of the spread."""

    name: str
    range: str
    share: str
    """In per cent; '' where it is not known."""
    width: float
    """Of the bar, in per cent of the widest."""
    given: bool
    origin: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Case:
    """One case worked out: nominal, lowest or highest."""

    name: str
    value: str
    by_hand: bool
    """False: some number of it comes from the engine."""
    off: list[str]
    """Parameters off nominal."""
    steps: list[Json]
    """``{symbol, formula, put_in, text, note}``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Working:
    """All of it."""

    summary: str
    sources: list[tuple[str, str, str]]
    """Held net, where it is in the end, and its way there at nominal."""
    voltages: list[tuple[str, ...]]
    """Free net; before the event, just after it, in the end, at nominal."""
    modes: list[tuple[str, str]]
    """Time constant, and its part in what is seen."""
    cases: list[Case]
    bars: list[Bar]


def working(finding: Finding) -> Working | None:
    """None where the document keeps nothing of it."""
    kept = finding.derivation
    if not kept:
        return None
    unit = finding.measured.unit if finding.measured else ""
    return Working(
        summary=kept["summary"],
        sources=[(row["net"], _range(row, "V"), _way(row)) for row in kept["sources"]],
        voltages=[
            (row["net"], *(number(row[key], "V") for key in ("before", "start", "final"))) for row in kept["voltages"]
        ],
        modes=[(number(row["tau"], "s"), f"{100 * row['share']:.3g} %") for row in kept["modes"]],
        cases=[_case(row, unit) for row in kept["cases"]],
        bars=_bars(kept["parameters"]),
    )


def _way(row: Json) -> str:
    """``0 V before; 0 V at 0 s, 3.3 V at 1.25 ms``."""
    points = ", ".join(f"{number(volts, 'V')} at {number(time, 's')}" for time, volts in row["way"])
    return "; ".join(filter(None, (f"{number(row['before'], 'V')} before", points)))


def _case(row: Json, unit: str) -> Case:
    return Case(
        name=row["case"], value=number(row["value"], unit), by_hand=row["by_hand"], off=row["off"], steps=row["steps"]
    )


def _range(row: Json, unit: str) -> str:
    if row["nominal"] is None:
        return "not known"
    low, nominal, high = (math.nan if row[key] is None else float(row[key]) for key in ("low", "nominal", "high"))
    return bounds(low, nominal, high, unit)


def _bars(rows: list[Json]) -> list[Bar]:
    """The most influential first; those without influence are left out."""
    shares = [row["share"] if isinstance(row["share"], int | float) else math.nan for row in rows]
    widest = max((share for share in shares if share > 0), default=1.0)
    return [
        Bar(
            name=row["parameter"],
            range=_range(row, row["unit"]),
            share=f"{100 * share:.3g} %" if math.isfinite(share) else "",
            width=round(100 * share / widest, 1) if math.isfinite(share) else 0.0,
            given=bool(row["given"]),
            origin=row["from"],
        )
        for row, share in zip(rows, shares, strict=True)
        if share != 0
    ]
