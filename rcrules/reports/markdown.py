"""The report for a pull request: short, what broke first, in Markdown.

Names come from strangers: letters that mean something in Markdown or HTML, and what would become a link or call a
person, are escaped.
"""

from collections.abc import Iterable, Iterator, Mapping
from typing import Final

from rcrules.findings import Document, Finding
from rcrules.reports._markdown_comparison import comparison_items
from rcrules.reports._markdown_words import code, plain
from rcrules.reports._proposals import proposal_texts
from rcrules.reports._report import Report
from rcrules.reports._statistics import statistics_texts
from rcrules.reports._text_findings import case_text, groups, is_news
from rcrules.reports._text_summary import coverage_texts, found_text, share_text, totals
from rcrules.reports._text_undecided import entries
from rcrules.reports._text_waivers import waiver_subject, waiver_told
from rcrules.reports._words import (
    asked,
    bounds,
    count,
    extreme,
    in_percent,
    limit_text,
    margin_text,
    names_text,
    part_texts,
    parts_text,
    subjects_text,
)
from rcrules.vocabulary import ROLES

_SHOWN_LINES: Final = 8
_SHOWN_SUBJECTS: Final = 4


def render(
    document: Document,
    *,
    verbose: bool = False,
    color: bool = False,  # noqa: ARG001 - Markdown has none
    width: int | None = None,  # noqa: ARG001 - lines are folded where they are shown
) -> str:
    """Headings and lists; with verbose every line that would decide something and every remark."""
    texts = part_texts(document)
    blocks = [
        [f"# {plain(str(document.board['name']))}", ""],
        [plain(_summary(document)), ""],
        comparison_items(document, texts),
        _list("Networks", () if document.packs else _networks(document)),
        _list("Fails", _failing(document, texts)),
        _list("Undecided", _undecided(document, texts, verbose=verbose)),
        _list("Waivers that no longer count", _waivers(document)),
        _list("Caution", _cautions(document)),
        _list("Remarks", (plain(str(row["text"])) for row in document.problems) if verbose else ()),
        [plain(text) + "  " for text in coverage_texts(document)],
    ]
    return "\n".join(line for block in blocks for line in block).rstrip() + "\n"


def _summary(document: Document) -> str:
    """Counts of findings and the share decided; without rules the counts of the board."""
    if document.packs:
        return f"{totals(document, verbose=True)}{share_text(document)}".replace("   ", "; ")
    return found_text(document)


def _networks(document: Document) -> Iterator[str]:
    """One item a role, with the nets of its nodes."""
    nodes = [node for network in document.networks for node in network["nodes"]]
    for role in dict.fromkeys((*ROLES, *sorted(node["role"] for node in nodes))):
        nets = sorted(str(node["net"]) for node in nodes if node["role"] == role)
        if nets:
            yield f"{role} {len(nets)}: {plain(', '.join(nets))}"


def _list(heading: str, items: Iterable[str]) -> list[str]:
    """A section; none without items."""
    lines = [f"- {item}" for item in items]
    return [f"## {heading}", "", *lines, ""] if lines else []


def _failing(document: Document, texts: Mapping[str, str]) -> Iterator[str]:
    """One item a group: level, rule and subject; below it the numbers, the worst case and why."""
    for group in groups(item for item in document.findings if item.outcome == "fails" and is_news(item)):
        first = group[0]
        below = [_numbers(first)]
        if first.detail.get("worst"):
            below.append(plain(f"{extreme(first)} at {case_text(first.detail['worst'])}"))
        if len(group) > 1:
            below.append(plain(f"the same on {subjects_text(group[1:], texts, limit=12)}"))
        below += [plain(f"statistics: {text}") for text in statistics_texts(first)]
        word = "would hold with " if first.proposals and first.proposals["found"] else ""
        below += [plain(word + text) for text in proposal_texts(first)]
        below.append(plain(first.why or first.title))
        yield "\n  - ".join([f"**{first.level}** {code(first.rule)} at {plain(_subject(first, texts))}", *below])


def _subject(finding: Finding, texts: Mapping[str, str]) -> str:
    """``NRST (R12 10 kΩ, C7 10 µF, feeds U3.NRST)``, or the part."""
    parts = parts_text(finding.parts, texts)
    fed = f", feeds {', '.join(finding.feeds)}" if finding.feeds else ""
    return f"{finding.net} ({parts}{fed})" if finding.net else parts + fed


def _numbers(finding: Finding) -> str:
    """What was measured, its bounds and the limit; by how much it is missed in bold."""
    measured, margin = finding.measured, margin_text(finding)
    words = [asked(finding)]
    if measured is not None:
        percent = in_percent(finding)
        words[0] += f": {bounds(measured.low, measured.nominal, measured.high, measured.unit, percent=percent)}"
    told = ", ".join(plain(text) for text in (*words, limit_text(finding)) if text)
    method = f" ({measured.method})" if measured is not None else ""
    return told + (f", **{plain(margin)}**" if margin else "") + plain(method)


def _undecided(document: Document, texts: Mapping[str, str], *, verbose: bool) -> Iterator[str]:
    """One item for each line of the project file that would decide something, the most useful first."""
    found = entries([item for item in document.findings if item.outcome == "undecided"])
    shown = found if verbose else found[:_SHOWN_LINES]
    for entry in shown:
        number = count(len(entry.findings), "finding")
        subjects = plain(names_text(_distinct(entry.findings, texts), limit=_SHOWN_SUBJECTS))
        if not entry.asks[0]:
            yield f"{number} that no line of the project file would decide: {subjects}"
        elif len(entry.asks) == 1:
            yield f"{code(entry.asks[0])} in {code('rcrules.toml')} decides {number}: {subjects}"
        else:
            others = f"{len(entry.asks) - 1} like it in {code('rcrules.toml')}"
            yield f"{code(entry.asks[0])} and {others} decide {number}: {subjects}"
    if len(found) > len(shown):
        yield f"{len(found) - len(shown)} more"


def _waivers(document: Document) -> Iterator[str]:
    """Lapsed and expired ones, with what changed."""
    for row in document.waivers:
        if row["state"] in ("lapsed", "expired"):
            yield f"{row['state']}: {code(row['rule'])} at {plain(waiver_subject(row))}: {plain(waiver_told(row))}"


def _distinct(findings: list[Finding], texts: Mapping[str, str]) -> list[str]:
    return list(dict.fromkeys(item.net or parts_text(item.parts, texts) for item in findings))


def _cautions(document: Document) -> Iterator[str]:
    """What packs whose findings are shown warn of."""
    shown = {item.pack for item in document.findings if item.outcome in ("fails", "undecided", "waived")}
    for pack in document.packs:
        if pack["name"] in shown and pack["caution"]:
            yield f"{code(pack['name'])} {plain(pack['caution'])}"


REPORT = Report(name="markdown", suffix=".md", summary="For a comment on a pull request.", render=render)
