"""Findings in words: failing ones in full, undecided ones by the line that decides most, holding ones on request."""

from collections.abc import Iterable, Mapping
from typing import Final

from rcrules.findings import Document, Finding, Json
from rcrules.reports._lines import Line
from rcrules.reports._proposals import proposal_texts
from rcrules.reports._statistics import statistics_texts
from rcrules.reports._text_holding import holding_lines
from rcrules.reports._text_undecided import undecided_lines
from rcrules.reports._words import (
    asked,
    badness,
    bounds,
    extreme,
    in_percent,
    limit_text,
    margin_text,
    number,
    part_texts,
    parts_text,
    subjects_text,
)
from rcrules.vocabulary import SEVERITIES

_INDENT: Final = " " * 8
_SHOWN_CASES: Final = 4
_SHOWN_ALIKE: Final = 12
_MOST_RELATIVE: Final = 10.0
"""A number more than so many times its nominal value off is shown as it is."""


def findings_lines(document: Document, *, verbose: bool) -> list[Line]:
    """All blocks, each after an empty line."""
    texts = part_texts(document)
    lines: list[Line] = []
    for group in groups(item for item in document.findings if item.outcome == "fails" and (verbose or is_news(item))):
        lines += [(), *_block(group, texts, limit=len(group) if verbose else _SHOWN_ALIKE)]
    lines += [*undecided_lines(document, texts, verbose=verbose), *_cautions(document, verbose=verbose)]
    return lines + holding_lines(document, texts) if verbose else lines


def is_news(finding: Finding) -> bool:
    """Whether it is told in full: against a saved document only what is new."""
    return finding.baseline in (None, "new")


def groups(findings: Iterable[Finding]) -> list[list[Finding]]:
    """Findings of one rule and one cause together; the gravest level first, then what is broken most."""
    groups: dict[tuple[str, ...], list[Finding]] = {}
    for item in findings:
        alone = () if item.cause else (item.net or "", *item.parts)
        groups.setdefault((item.rule, item.cause, *alone), []).append(item)
    return sorted(groups.values(), key=lambda group: _order(group[0]))


def _order(finding: Finding) -> tuple[object, ...]:
    worst = -round(badness(finding), 9)
    return (SEVERITIES.index(finding.level), worst, finding.rule, finding.net or "", finding.parts)


def _block(group: list[Finding], texts: Mapping[str, str], *, limit: int) -> list[Line]:
    """One failing group: heading, numbers, the worst case, why."""
    first = group[0]
    lines = [_heading(first, texts), _numbers(first)]
    if first.detail.get("worst"):
        lines.append((_INDENT, f"{extreme(first)} at  ", case_text(first.detail["worst"])))
    if len(group) > 1:
        lines.append((_INDENT, f"the same on  {subjects_text(group[1:], texts, limit=limit)}"))
    lines += [(_INDENT, "statistics  ", text) for text in statistics_texts(first)]
    word = "would hold  " if first.proposals and first.proposals["found"] else "no proposal  "
    lines += [(_INDENT, word, text) for text in proposal_texts(first)]
    return [*lines, _why(first)]


def _heading(finding: Finding, texts: Mapping[str, str]) -> Line:
    """``error  rule   NRST   R12 10 kΩ, C7 10 µF -> U3.NRST``."""
    fed = f" -> {', '.join(finding.feeds)}" if finding.feeds else ""
    net = f"   {finding.net}" if finding.net else ""
    word = (f"{finding.level:<8}", f"{finding.outcome} {finding.level}")
    return (word, (finding.rule, "name"), f"{net}   {parts_text(finding.parts, texts)}{fed}")


def _numbers(finding: Finding) -> Line:
    """What was measured, its bounds, the limit, by how much, how sure."""
    measured = finding.measured
    if measured is None:
        return (_INDENT, asked(finding), f"   {finding.reason}" if finding.reason else "")
    percent = in_percent(finding)
    spread = bounds(measured.low, measured.nominal, measured.high, measured.unit, percent=percent)
    return (
        _INDENT,
        "   ".join(filter(None, (asked(finding), spread, limit_text(finding), margin_text(finding), measured.method))),
    )


def case_text(worst: list[Json]) -> str:
    """``C7 -38 % (tolerance -20 %, X5R -15 %), R12, R13 -1 %``: what moves alike together, the rest counted."""
    alike: dict[tuple[str, str], list[str]] = {}
    for item in worst:
        alike.setdefault((_amount(item), item["why"]), []).append(item["parameter"])
    texts = [
        f"{', '.join(names)} {amount}" + (f" ({why})" if why else "")
        for (amount, why), names in list(alike.items())[:_SHOWN_CASES]
    ]
    rest = sum(len(names) for names in list(alike.values())[_SHOWN_CASES:])
    return ", ".join(texts) + (f", {rest} more" if rest else "")


def _amount(item: Json) -> str:
    """How far off nominal; the number itself where a share would say little."""
    relative = item["relative"]
    plain = relative is None or abs(relative) > _MOST_RELATIVE
    return number(item["value"], item["unit"]) if plain else f"{100 * relative:+.3g} %"


def _why(finding: Finding) -> Line:
    source = f"   (source: {finding.source})" if finding.source else ""
    return (_INDENT, "why  ", finding.why or finding.title, (source, "dim"))


def _cautions(document: Document, *, verbose: bool) -> list[Line]:
    """What packs whose findings are shown warn of, each once."""
    shown = {item.pack for item in document.findings if verbose or item.outcome in ("fails", "undecided", "waived")}
    told = [pack for pack in document.packs if pack["name"] in shown and pack["caution"]]
    lines: list[Line] = [((f"caution {pack['name']}", "name"), "   ", pack["caution"]) for pack in told]
    return [(), *lines] if lines else []
