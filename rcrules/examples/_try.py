"""A rule held against its own examples."""

from collections.abc import Sequence
from dataclasses import dataclass

from rcrules.checks import check
from rcrules.design import build
from rcrules.examples._circuit import bom_export, circuit_export
from rcrules.findings import Finding
from rcrules.networks import Board, recognise
from rcrules.parts import rate
from rcrules.project import Project, load
from rcrules.rulebook import Example, Rule


@dataclass(frozen=True, slots=True, kw_only=True)
class Tried:
    """One example and what became of it."""

    rule: Rule
    example: Example
    findings: Sequence[Finding]

    @property
    def right(self) -> bool:
        """Whether the rule met something, and every finding has the outcome that the author expects."""
        return bool(self.findings) and all(item.outcome == self.example.outcome for item in self.findings)


def tried(rule: Rule) -> list[Tried]:
    """Every example of the rule. Raises UserMistake where a circuit or its project text is not understood."""
    return [_tried(rule, example) for example in rule.examples]


def _tried(rule: Rule, example: Example) -> Tried:
    board, project = board_of(example)
    return Tried(rule=rule, example=example, findings=check(board, project, [rule]).findings)


def board_of(example: Example) -> tuple[Board, Project]:
    """The board of an example, with what its project text says."""
    project = load(f"{example.place}: project", example.project) if example.project else Project()
    listed = [bom_export(example.bom, example.place)] if example.bom else []
    design = build([circuit_export(example.circuit, example.place), *listed])
    return recognise(design, rate(design, project), project), project
