"""Why findings are undecided: each missing fact once, what it decides, the line to add and the file to add it to."""

from dataclasses import dataclass

from rcrules.findings import Document
from rcrules.reports._page._findings import Shown
from rcrules.reports._text_undecided import entries


@dataclass(frozen=True, slots=True, kw_only=True)
class Missing:
    """One fact that no input gave."""

    lines: list[str]
    """Lines that would give it, one for each name it is asked of; [''] where none would."""
    findings: list[Shown]


def missing_facts(document: Document, found: list[Shown]) -> list[Missing]:
    """What decides most comes first, what no line would decide last."""
    by_finding = {id(item.finding): item for item in found}
    undecided = [item for item in document.findings if item.outcome == "undecided"]
    return [
        Missing(
            lines=[line for line in entry.asks if line],
            findings=[by_finding[id(item)] for item in entry.findings],
        )
        for entry in entries(undecided)
    ]
