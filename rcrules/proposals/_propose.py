"""Proposals for every failing finding, each verified on the whole board."""

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Final

from rcrules.findings import Finding, Json
from rcrules.networks import Board
from rcrules.project import Project
from rcrules.proposals._change import Change
from rcrules.proposals._group import Group, groups
from rcrules.proposals._needs import needs
from rcrules.proposals._search import Search
from rcrules.proposals._trial import Trials
from rcrules.rulebook import Rule

_MOST: Final = 3
"""Proposals of a group."""
_MOST_VERIFIED: Final = 8
"""Changes that held in quick trials and are tried on the whole board."""


def propose(
    board: Board, project: Project, rules: Sequence[Rule], findings: Sequence[Finding], *, sure_only: bool = False
) -> list[Finding]:
    """The findings; each that fails has ``proposals``: ``{found: [{changes, needs, findings}], reason}``.

    A proposal makes every finding at the network hold in the worst case and no finding of the board worse.
    ``reason`` says why there is none.
    """
    before = {(item.rule, item.fingerprint): item for item in findings}
    trials = Trials(board=board, project=project, rules=rules, sure_only=sure_only, before=before)
    told = list(findings)
    known: dict[object, _Answer] = {}
    for group in groups(board, findings):
        proposals = _of(group, trials, findings, known)
        for index in group.findings:
            told[index] = replace(told[index], proposals=proposals)
        trials.outcomes.clear()
    return told


@dataclass(frozen=True, slots=True, kw_only=True)
class _Answer:
    """What a group alike got: tried first at the next."""

    refs: tuple[str, ...]
    changes: tuple[tuple[Change, ...], ...]
    reason: str | None

    def at(self, refs: tuple[str, ...]) -> "_Answer":
        """The same answer at a group of other references."""
        names = dict(zip(self.refs, refs, strict=True))
        changes = tuple(tuple(replace(item, ref=names[item.ref]) for item in pair) for pair in self.changes)
        reason = self.reason and re.sub(
            r"\b[A-Za-z]+\d+\b(?=:)", lambda found: names.get(found[0], found[0]), self.reason
        )
        return _Answer(refs=refs, changes=changes, reason=reason)


def _of(group: Group, trials: Trials, findings: Sequence[Finding], known: dict[object, _Answer]) -> Json:
    """The proposals of a group; one alike that was answered before saves the search."""
    mended = [findings[index] for index in group.findings]
    search = Search(trials=trials, group=group, mended=mended)
    alike = (tuple((item.rule, item.cause) for item in mended), tuple(trials.board.parts[r].text for r in group.refs))
    if alike in known and len(known[alike].refs) == len(group.refs):
        answer = known[alike].at(group.refs)
        found = [proposal for item in answer.changes if (proposal := _verified(item, group, trials, search))]
        if found or answer.reason:
            return {"found": found, "reason": None if found else answer.reason}
    answer, found = _searched(group, trials, search)
    known[alike] = answer
    return {"found": found, "reason": answer.reason}


def _searched(group: Group, trials: Trials, search: Search) -> tuple[_Answer, list[Json]]:
    found: list[Json] = []
    good: list[tuple[Change, ...]] = []
    for tried, changes in enumerate(search.found()):
        if tried >= _MOST_VERIFIED or len(found) >= _MOST or (good and len(changes) > len(good[0])):
            break
        if (verified := _verified(changes, group, trials, search)) is not None:
            found.append(verified)
            good.append(changes)
    return _Answer(refs=group.refs, changes=tuple(good), reason=None if found else search.reason()), found


def _verified(changes: tuple[Change, ...], group: Group, trials: Trials, search: Search) -> Json | None:
    """The proposal with what the group's findings then are; None where the whole board says otherwise."""
    board, project = trials.with_changes(changes)
    after = trials.checked(board, project)
    if trials.broken(after, search.mended):
        return None
    keys = {(item.rule, item.fingerprint) for item in trials.quick(changes, group)}
    return {
        "changes": [change.json() for change in changes],
        "needs": [text for item in changes if (text := needs(board, project, trials.board.parts[item.ref], item))],
        "findings": [_after(item) for item in after if (item.rule, item.fingerprint) in keys],
    }


def _after(item: Finding) -> Json:
    measured = item.measured
    bounds = {name: getattr(measured, name) for name in ("low", "nominal", "high", "unit")} if measured else None
    return {
        "rule": item.rule, "net": item.net, "parts": item.parts, "outcome": item.outcome, "measured": bounds,
        "margin": item.margin,
    }  # fmt: skip
