"""Each finding as the page shows it: a row of the table, and a block that tells all about it."""

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Final

from markupsafe import Markup

from rcrules.findings import Document, Finding, Json
from rcrules.reports._page._plot import plot
from rcrules.reports._page._working import Working, working
from rcrules.reports._proposals import proposal_texts
from rcrules.reports._statistics import statistics_texts
from rcrules.reports._text_findings import case_text
from rcrules.reports._told import subject_text, waiver_text
from rcrules.reports._words import (
    asked,
    badness,
    bounds,
    extreme,
    in_percent,
    limit_text,
    margin_text,
    part_texts,
)
from rcrules.vocabulary import OUTCOMES, SEVERITIES

_MOST_WHOLE: Final = 600
"""Findings that the page holds in the open, all of them."""
_GRAVEST: Final = 100
"""Of more, those that it does; the others, and those that hold, are kept packed until they are opened."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Shown:
    """One finding in words."""

    id: str
    """Of its block on the page."""
    finding: Finding
    subject: str
    question: str
    measured: str
    limit: str
    limit_from: str
    margin: str
    gravity: int
    """Place in the order of what to look at first."""
    nominal: float
    """For sorting."""
    badness: float
    worst: str
    """Where the worst case lies; '' where it is not kept."""
    statistics: list[str]
    """What random cases and the root-sum-square say, where asked for."""
    proposals: list[str]
    """Changes of parts that would make it hold, or why there are none."""
    waiver: str
    assumptions: list[Json]
    places: list[str]
    plot: Markup | None
    working: Working | None
    packed: bool
    """Whether all but its headline is kept packed."""


def shown(document: Document) -> list[Shown]:
    """Every finding, the gravest first."""
    texts = part_texts(document)
    ordered = sorted(document.findings, key=_order)
    return [_shown(document, item, texts, index) for index, item in enumerate(ordered)]


def _order(finding: Finding) -> tuple[Any, ...]:
    worst = -round(badness(finding), 9)
    subject = (finding.rule, finding.net or "", finding.parts)
    return (OUTCOMES.index(finding.outcome), SEVERITIES.index(finding.level), worst, subject)


def _shown(document: Document, finding: Finding, texts: Mapping[str, str], index: int) -> Shown:
    measured = finding.measured
    spread = ""
    if measured is not None:
        percent = in_percent(finding)
        spread = bounds(measured.low, measured.nominal, measured.high, measured.unit, percent=percent)
    worst = finding.detail.get("worst")
    return Shown(
        id=f"f{index}",
        finding=finding,
        subject=subject_text(finding, texts),
        question=asked(finding),
        measured=spread,
        limit=limit_text(finding),
        limit_from=str((finding.limit or {}).get("from", "")),
        margin=margin_text(finding),
        gravity=index,
        nominal=_sortable(measured.nominal if measured else math.nan),
        badness=badness(finding) if finding.outcome in ("fails", "waived") else -1.0,
        worst=f"{extreme(finding)} at {case_text(worst)}" if worst else "",
        statistics=list(statistics_texts(finding)),
        proposals=list(proposal_texts(finding)),
        waiver=waiver_text(document, finding) if finding.outcome == "waived" else "",
        assumptions=[document.assumptions[number] for number in finding.assumptions],
        places=[_place(row) for row in finding.places],
        plot=plot(finding),
        working=working(finding),
        packed=len(document.findings) > _MOST_WHOLE and (finding.outcome == "holds" or index >= _GRAVEST),
    )


def _sortable(value: float) -> float:
    return value if math.isfinite(value) else math.copysign(1e300, value)


def _place(row: Json) -> str:
    return ":".join(str(row[key]) for key in ("file", "line", "column") if row.get(key) is not None)
