"""Rules tried on a board: what each meets, what it nearly meets, and at which limit its verdict would turn."""

import math
from collections.abc import Sequence
from dataclasses import dataclass

from rcrules.checks._check import check
from rcrules.checks._near import Excluded, excluded
from rcrules.checks._select import selected
from rcrules.checks._subject import Subject
from rcrules.checks._subjects import Subjects
from rcrules.findings import Finding
from rcrules.networks import Board
from rcrules.project import Project
from rcrules.rulebook import Rule


@dataclass(frozen=True, slots=True, kw_only=True)
class NearMiss:
    """A subject that one key alone leaves out."""

    subject: str
    """Net, reference or pin."""
    excluded: Excluded


@dataclass(frozen=True, slots=True, kw_only=True)
class Trial:
    """One rule on one board."""

    rule: Rule
    findings: Sequence[Finding]
    near: Sequence[NearMiss]
    far: int
    """Subjects of its kind that more than one key leaves out."""

    @property
    def subjects(self) -> int:
        """All of its kind on the board."""
        return len(self.findings) + len(self.near) + self.far


def trials(board: Board, project: Project, rules: Sequence[Rule]) -> list[Trial]:
    """Every rule tried, in order."""
    findings = check(board, project, rules).findings
    subjects = Subjects(board, project)
    return [_trial(rule, board, subjects, [item for item in findings if item.rule == rule.id]) for rule in rules]


def _trial(rule: Rule, board: Board, subjects: Subjects, findings: Sequence[Finding]) -> Trial:
    missed = [
        (item, excluded(rule.selection, item, board))
        for item in subjects.of(rule.held_against)
        if selected(rule.selection, item, board) is False
    ]
    near = [NearMiss(subject=called(item), excluded=keys[0]) for item, keys in missed if len(keys) == 1]
    return Trial(rule=rule, findings=findings, near=near, far=len(missed) - len(near))


def called(subject: Subject) -> str:
    """What a subject is called in a line."""
    if subject.kind == "pin":
        return subject.feeds[0]
    return subject.net or ", ".join(subject.refs) or subject.kind


def turning(finding: Finding) -> float | None:
    """The limit up to which (or down to which) the finding holds; None where no finite number is known."""
    side = str(finding.detail.get("side", ""))
    limit = (finding.limit or {}).get(side)
    if finding.margin is None or limit is None or not math.isfinite(finding.margin):
        return None
    if (finding.limit or {}).get("at_least") == (finding.limit or {}).get("at_most"):
        return None  # it must be one number
    return float(limit + finding.margin if side == "at_least" else limit - finding.margin)
