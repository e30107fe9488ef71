"""Undecided findings in words: by the line that decides most, the most useful first."""

import re
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

from rcrules.findings import Document, Finding
from rcrules.reports._alike import merged
from rcrules.reports._lines import Line
from rcrules.reports._words import count, names_text, subjects_text

_INDENT: Final = " " * 8
_SHOWN_SUBJECTS: Final = 3
_SHOWN_REASONS: Final = 6
_SHOWN_NAMES: Final = 8
_OWN_ENTRY: Final = 3
"""A line that decides this many findings stands alone; lesser ones that differ only in the name share an entry."""
_FILE: Final = ("   (rcrules.toml)", "dim")
_LINE: Final = re.compile(r'\[(?P<table>\w+)\."(?P<name>.+)"\] (?P<fact>\S+) = .*')


@dataclass(frozen=True, slots=True, kw_only=True)
class Entry:
    """Lines of the project file that ask for the same fact, and what they decide."""

    asks: list[str]
    findings: list[Finding]


def undecided_lines(document: Document, texts: Mapping[str, str], *, verbose: bool) -> list[Line]:
    """Every entry after an empty line; what no line would decide comes last."""
    lines: list[Line] = []
    for entry in entries([item for item in document.findings if item.outcome == "undecided"]):
        lines += [(), _heading(entry), *_details(entry.findings, texts, verbose=verbose)]
    return lines


def entries(findings: list[Finding]) -> list[Entry]:
    by_ask: dict[str, list[Finding]] = {}
    for item in findings:
        by_ask.setdefault(item.ask[0] if item.ask else "", []).append(item)
    shared: dict[str, list[str]] = {}
    for ask, own in by_ask.items():
        shared.setdefault(ask if len(own) >= _OWN_ENTRY else _same_fact(ask), []).append(ask)
    found = [Entry(asks=asks, findings=[item for ask in asks for item in by_ask[ask]]) for asks in shared.values()]
    return sorted(found, key=lambda entry: (not entry.asks[0], -len(entry.findings) / len(entry.asks), entry.asks[0]))


def _same_fact(ask: str) -> str:
    """Table and key of a line, without the name; of settings the line itself."""
    found = _LINE.fullmatch(ask)
    return f"{found['table']} {found['fact']}" if found and found["table"] != "settings" else ask


def _heading(entry: Entry) -> Line:
    word, number = ("undecided", "open"), count(len(entry.findings), "finding")
    if not entry.asks[0]:
        return (word, f": {number} that no line of the project file would decide")
    if len(entry.asks) == 1:
        return (word, f": one line decides {number}   ", (entry.asks[0], "name"), _FILE)
    names = [found["name"] for ask in entry.asks if (found := _LINE.fullmatch(ask))]
    others = names_text(names[1:], limit=_SHOWN_NAMES)
    return (word, f": one line each decides {number}   ", (entry.asks[0], "name"), f"   and so for {others}", _FILE)


def _details(findings: list[Finding], texts: Mapping[str, str], *, verbose: bool) -> list[Line]:
    """Rule, subjects and reason; findings of one rule and reason on one line, the largest groups first."""
    ordered = sorted(together(findings, verbose=verbose), key=lambda entry: -len(entry[2]))
    shown = ordered if verbose else ordered[:_SHOWN_REASONS]
    limit = len(findings) if verbose else _SHOWN_SUBJECTS
    lines: list[Line] = [
        (_INDENT, f"{rule}   {subjects_text(group, texts, limit=limit)}   {reason}") for rule, reason, group in shown
    ]
    rest = sum(len(group) for *_, group in ordered[len(shown) :])
    return [*lines, (_INDENT, f"and {rest} more (--verbose lists them)")] if rest else lines


def together(findings: list[Finding], *, verbose: bool) -> list[tuple[str, str, list[Finding]]]:
    """Rule, reason, findings; where not everything is asked for, reasons that differ only by a name count as one."""
    found: list[tuple[str, str, list[Finding]]] = []
    for rule in dict.fromkeys(item.rule for item in findings):
        by_reason: dict[str, list[Finding]] = {}
        for item in findings:
            if item.rule == rule:
                by_reason.setdefault(_reason(item), []).append(item)
        reasons = [(reason, [reason]) for reason in by_reason] if verbose else merged(by_reason)
        found += [(rule, told, [item for reason in own for item in by_reason[reason]]) for told, own in reasons]
    return found


def _reason(finding: Finding) -> str:
    """The reason without the subject's own reference, so that equal reasons of many parts read the same."""
    own = "|".join(re.escape(ref) for ref in finding.parts)
    return re.sub(rf" of (?:{own})(?![\w])", "", finding.reason or "") if own else finding.reason or ""
