"""Rules tried on a board, in words: what each meets and nearly meets, and at which limit its verdict turns."""

from collections.abc import Iterator
from typing import TYPE_CHECKING, Final

from rcrules.reports import Line, Span, aligned, in_percent, limit_text, measured_text, number
from rcrules.rulebook import plural, sentence

if TYPE_CHECKING:
    from rcrules.checks import Trial
    from rcrules.findings import Finding

_INDENT: Final = "  "
_SHOWN: Final = 20
_STYLES: Final = {"holds": "good", "undecided": "open"}


def on_lines(packs: tuple[str, ...], inputs: tuple[str, ...], project: str | None) -> "list[Line]":
    """Every rule of the packs and files, else of the board's project. Raises UserMistake."""
    from rcrules.pipeline import Job, try_on

    found = try_on(Job(inputs=inputs, project=project, rules=packs))
    lines = [line for trial in found for line in _trial(trial)]
    return lines[:-1]


def _trial(trial: "Trial") -> "Iterator[Line]":
    """The rule, what it met, what it nearly met."""
    rule = trial.rule
    kind = plural(rule.held_against)
    yield ((rule.id, "name"), f"   meets {len(trial.findings)} of {trial.subjects} {kind}")
    yield (_INDENT, (sentence(rule), "dim"))
    rows: list[list[Span]] = [
        [(finding.outcome, _STYLES.get(finding.outcome, f"fails {finding.level}")), _where(finding), _told(finding)]
        for finding in trial.findings
    ]
    yield from aligned(rows, _INDENT) if rows else []
    near: list[list[Span]] = [
        [("near miss", "dim"), item.subject, f"{item.excluded.key}: {item.excluded.there or 'does not fit'}"]
        for item in trial.near[:_SHOWN]
    ]
    yield from aligned(near, _INDENT) if near else []
    rest = len(trial.near) - len(near)
    if rest:
        yield (_INDENT, f"and {rest} more near misses")
    if trial.far:
        yield (_INDENT, (f"differ in more than one key: {trial.far}", "dim"))
    yield ()


def _where(finding: "Finding") -> str:
    return finding.net or ", ".join(finding.parts) or finding.subject


def _told(finding: "Finding") -> str:
    """Numbers, limit, and the limit at which the verdict turns; or why there are none."""
    told = numbers(finding)
    return "   ".join(filter(None, (told, finding.reason or "")))


def numbers(finding: "Finding") -> str:
    """``19.6 ms .. 35.2 ms .. 54 ms   must be at least 30 ms   holds for a limit of up to 19.6 ms``."""
    from rcrules.checks import turning

    if finding.measured is None:
        return ""
    turns = turning(finding)
    words = ""
    if turns is not None:
        way = "up to" if finding.detail.get("side") == "at_least" else "from"
        told = number(turns, finding.measured.unit, percent=in_percent(finding))
        words = f"holds for a limit {way} {told}"
    return "   ".join(filter(None, (measured_text(finding), limit_text(finding), words)))
