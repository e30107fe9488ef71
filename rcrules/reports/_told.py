"""One finding in one paragraph, for reports that give each finding a single text."""

from collections.abc import Iterator, Mapping

from rcrules.findings import Document, Finding
from rcrules.reports._proposals import proposal_texts
from rcrules.reports._text_findings import case_text
from rcrules.reports._words import asked, bounds, extreme, in_percent, limit_text, margin_text, parts_text


def subject_text(finding: Finding, texts: Mapping[str, str]) -> str:
    """``NRST (R12 10 kΩ, C7 10 µF, feeds U3.NRST)``, or the part."""
    parts = parts_text(finding.parts, texts)
    fed = f", feeds {', '.join(finding.feeds)}" if finding.feeds else ""
    return f"{finding.net} ({parts}{fed})" if finding.net else parts + fed


def numbers_text(finding: Finding) -> str:
    """``delay at power-up: 21.9 ms .. 49.7 ms, must be at least 30 ms, short by 8.1 ms (proved)``."""
    measured = finding.measured
    words = [asked(finding)]
    if measured is not None:
        percent = in_percent(finding)
        words[0] += f": {bounds(measured.low, measured.nominal, measured.high, measured.unit, percent=percent)}"
    told = ", ".join(filter(None, (*words, limit_text(finding), margin_text(finding))))
    return told + (f" ({measured.method})" if measured is not None else "")


def paragraphs(finding: Finding) -> Iterator[str]:
    """The numbers; where the worst case lies, or why it is undecided and what would decide it; why the rule is."""
    yield numbers_text(finding)
    if finding.outcome == "undecided":
        yield f"undecided: {finding.reason or 'no reason kept'}"
        if finding.ask:
            yield f"one of these lines in rcrules.toml would decide it: {'; '.join(finding.ask)}"
    elif finding.outcome != "holds" and finding.detail.get("worst"):
        yield f"{extreme(finding)} at {case_text(finding.detail['worst'])}"
    word = "would hold with " if finding.proposals and finding.proposals["found"] else ""
    yield from (word + text for text in proposal_texts(finding))
    yield f"why: {finding.why or finding.title}" + (f" (source: {finding.source})" if finding.source else "")


def waiver_text(document: Document, finding: Finding) -> str:
    """Who accepted a waived finding, when, until when and why."""
    if finding.waiver is None:
        return "waived"
    entry = document.waivers[finding.waiver]
    until = f", until {entry['expires']}" if entry["expires"] else ""
    return f"waived by {entry['who']} on {entry['date']}{until}: {entry['reason']}"
