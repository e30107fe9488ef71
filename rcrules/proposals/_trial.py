"""What the rules say with changed parts: quickly at one network, and wholly on the board."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import Final

from rcrules.checks import check
from rcrules.findings import Finding
from rcrules.networks import Board, recognise
from rcrules.parts import rate
from rcrules.project import Project
from rcrules.proposals._change import Change, changed
from rcrules.proposals._group import Group
from rcrules.rulebook import Rule

_RANKS: Final = {"holds": 0, "waived": 0, "undecided": 1, "fails": 2}
Key = tuple[str, str]


@dataclass(frozen=True, slots=True, kw_only=True)
class Trials:
    """The board, the project and the rules that every trial shares."""

    board: Board
    project: Project
    rules: Sequence[Rule]
    sure_only: bool
    before: Mapping[Key, Finding]
    """Rule and fingerprint -> the finding as it is."""
    outcomes: dict[tuple[tuple[str, str, str], ...], list[Finding]] = field(default_factory=dict)
    """Of changes tried already."""

    def quick(self, changes: Sequence[Change], group: Group) -> list[Finding]:
        """The findings of the group, with the network as it was recognised before."""
        key = tuple((change.ref, change.what, change.now) for change in changes)
        if key not in self.outcomes:
            project = changed(self.project, changes)
            design = self.board.design
            own = {change.ref: design.parts[change.ref] for change in changes}
            rated = rate(replace(design, parts=own), project)
            networks = (group.network,) if group.network else ()
            board = replace(self.board, parts={**self.board.parts, **rated}, networks=networks)
            self.outcomes[key] = self.checked(board, project, group)
        return self.outcomes[key]

    def with_changes(self, changes: Sequence[Change]) -> tuple[Board, Project]:
        """Board and project with the changes, everything worked out anew."""
        project, design = changed(self.project, changes), self.board.design
        return recognise(design, rate(design, project), project), project

    def checked(self, board: Board, project: Project, group: Group | None = None) -> list[Finding]:
        """The findings of a group, or of the whole board."""
        only = group.touches if group else None
        return check(board, project, self.rules, sure_only=self.sure_only, only=only).findings

    def broken(self, findings: Sequence[Finding], mended: Sequence[Finding]) -> list[str]:
        """In words, findings that are worse than before, or were to be mended and do not hold: ``settles too high``."""
        wanted = {(item.rule, item.fingerprint) for item in mended}
        worse = (item for item in findings if self._worse(item, (item.rule, item.fingerprint) in wanted))
        return [f"{item.rule} {_how(item)}" for item in worse]

    def _worse(self, item: Finding, wanted: bool) -> bool:
        before = self.before.get((item.rule, item.fingerprint))
        if wanted or before is None:
            return item.outcome not in ("holds", "waived")
        return _RANKS[item.outcome] > _RANKS[before.outcome]


def _how(item: Finding) -> str:
    """Which way a finding is broken; where two limits are set, the way from one to the other leads past good values."""
    if item.outcome == "undecided":
        return "undecided"
    return "too low" if item.detail.get("side") == "at_least" else "too high"
