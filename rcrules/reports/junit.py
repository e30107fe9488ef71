"""The report for CI servers: JUnit XML, the part of it that all of them read.

A suite a rule, a case a subject. Failing = failure; undecided, waived, and failing as it did before = skipped, with
the reason. Names carry no values and no line numbers, so that a case keeps its history.
"""

from collections import Counter
from collections.abc import Mapping
from typing import Final
from xml.etree.ElementTree import Element, SubElement, indent, tostring

from rcrules.findings import Document, Finding
from rcrules.reports._lines import safe
from rcrules.reports._report import Report
from rcrules.reports._told import numbers_text, paragraphs, subject_text, waiver_text
from rcrules.reports._words import part_texts

_KNOWN: Final = ("unchanged", "moved")
"""Baselines of a finding that failed in the saved document too."""


def render(
    document: Document,
    *,
    verbose: bool = False,  # noqa: ARG001 - every case is told
    color: bool = False,  # noqa: ARG001 - a file for programs
    width: int | None = None,  # noqa: ARG001
) -> str:
    """One ``testsuites`` element with a ``testsuite`` for each rule that met something."""
    board = safe(str(document.board["name"]))
    texts = part_texts(document)
    whole = Element("testsuites", name=board)
    for rule in sorted({item.rule for item in document.findings}):
        _suite(whole, board, document, [item for item in document.findings if item.rule == rule], texts)
    _count(whole)
    indent(whole, " ")
    return "<?xml version='1.0' encoding='UTF-8'?>\n" + tostring(whole, encoding="unicode") + "\n"


def _suite(whole: Element, board: str, document: Document, findings: list[Finding], texts: Mapping[str, str]) -> None:
    first = findings[0]
    suite = SubElement(whole, "testsuite", name=safe(first.rule))
    told = SubElement(suite, "properties")
    for name, value in (("pack", first.pack), ("level", first.level), ("title", first.title), ("source", first.source)):
        SubElement(told, "property", name=name, value=safe(value))
    seen: Counter[str] = Counter()
    for item in findings:
        name = _name(item)
        seen[name] += 1
        number = f" ({seen[name]})" if seen[name] > 1 else ""
        classname = f"{board.replace('.', '_')}.{safe(item.rule)}"
        case = SubElement(suite, "testcase", classname=classname, name=safe(name) + number, time="0")
        _place(case, item)
        _verdict(case, document, item, texts)
    _count(suite)


def _name(finding: Finding) -> str:
    """``NRST: R12, C7 -> U3.NRST``; no values."""
    parts = ", ".join(finding.parts)
    fed = f" -> {', '.join(finding.feeds)}" if finding.feeds else ""
    return (f"{finding.net}: {parts}" if finding.net else parts) + fed


def _place(case: Element, finding: Finding) -> None:
    """File and line of the part, which some servers link."""
    place = finding.places[-len(finding.parts) :][:1] if finding.parts else finding.places[:1]
    for row in place:
        case.set("file", safe(row["file"]))
        if row.get("line"):
            case.set("line", str(row["line"]))


def _verdict(case: Element, document: Document, finding: Finding, texts: Mapping[str, str]) -> None:
    """Nothing where it holds; else one element with a short message."""
    if finding.outcome == "holds":
        return
    if finding.outcome == "fails" and not (document.comparison is not None and finding.baseline in _KNOWN):
        failure = SubElement(case, "failure", message=safe(numbers_text(finding)), type=finding.level)
        failure.text = "\n".join(safe(text) for text in (subject_text(finding, texts), *paragraphs(finding)))
        return
    SubElement(case, "skipped", message=safe(_reason(document, finding)))


def _reason(document: Document, finding: Finding) -> str:
    if finding.outcome == "waived":
        return waiver_text(document, finding)
    if finding.outcome == "fails":
        return f"failed before too: {numbers_text(finding)}"
    ask = f"; one line decides it: {finding.ask[0]}" if finding.ask else ""
    return f"undecided: {finding.reason or 'no reason kept'}{ask}"


def _count(element: Element) -> None:
    """The counts that the content has, the time that nothing is said about."""
    for key, path in (("tests", "testcase"), ("failures", "failure"), ("errors", "error"), ("skipped", "skipped")):
        element.set(key, str(sum(1 for _ in element.iter(path))))
    element.set("time", "0")


REPORT = Report(name="junit", suffix=".xml", summary="For CI servers (JUnit XML).", render=render, for_programs=True)
