"""Findings that hold, or are waived, in words: a heading for each rule and question, one line each."""

from collections.abc import Mapping

from rcrules.findings import Document, Finding
from rcrules.reports._columns import aligned
from rcrules.reports._lines import Line, Span
from rcrules.reports._words import asked, bounds, in_percent, limit_text, margin_text, parts_text

_INDENT = " " * 8


def holding_lines(document: Document, texts: Mapping[str, str]) -> list[Line]:
    """What holds, then what is waived; findings that ask the same stand under one heading, in columns."""
    lines: list[Line] = []
    for outcome in ("holds", "waived"):
        groups: dict[tuple[str, str, str], list[Finding]] = {}
        for item in document.findings:
            if item.outcome == outcome:
                groups.setdefault((item.rule, asked(item), limit_text(item)), []).append(item)
        for (rule, question, limit), group in groups.items():
            lines += [(), ((f"{outcome:<8}", "good"), (rule, "name"), f"   {question}   {limit}")]
            lines += aligned((_cells(item, texts) for item in group), _INDENT)
    return lines


def _cells(finding: Finding, texts: Mapping[str, str]) -> list[Span]:
    """Node, parts and pins; bounds, margin, method."""
    measured = finding.measured
    fed = f" -> {', '.join(finding.feeds)}" if finding.feeds else ""
    subject = [finding.net or "", parts_text(finding.parts, texts) + fed]
    if measured is None:
        return [*subject, "", margin_text(finding), ""]
    percent = in_percent(finding)
    spread = bounds(measured.low, measured.nominal, measured.high, measured.unit, percent=percent)
    return [*subject, spread, margin_text(finding), measured.method]
