"""Numbers at one place of the board, whatever the rules ask, and how they come about."""

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from difflib import get_close_matches
from typing import Final

from rcrules.checks._asked import Asked
from rcrules.checks._check import check
from rcrules.checks._nowhere import why_nothing
from rcrules.checks._place import stands_at
from rcrules.checks._subject import Subject
from rcrules.checks._subjects import Subjects
from rcrules.checks._worst import made_of
from rcrules.derivation import derive
from rcrules.events import Unmeasurable, pose
from rcrules.findings import Derived, Finding
from rcrules.inventory import as_quantity
from rcrules.measures import Measure, registry
from rcrules.networks import Board
from rcrules.problems import Failure, Request, solve_bounds
from rcrules.project import Project
from rcrules.rulebook import Rule

_Options = Mapping[str, str]

PLAIN: Final[Mapping[str, Mapping[str, tuple[_Options, ...]]]] = {
    "node": {
        "time_constant": ({},),
        "corner_frequency": ({},),
        "time_to_63": ({"event": "power-up"}, {"event": "step-up"}),
        "final_voltage": ({"event": "power-up"}, {"event": "step-up"}),
    },
    "capacitor": {"applied_voltage": ({},), "stored_energy": ({},)},
    "resistor": {"applied_voltage": ({},), "power": ({},)},
    "pin": {"pin_voltage": ({},)},
    "supply": {"total_capacitance": ({},), "stored_energy": ({},)},
}
"""What is told of each kind of subject without a rule: of each measure the first options with which it has a number."""


def numbers_at(
    board: Board,
    project: Project,
    rules: Sequence[Rule],
    at: str,
    *,
    asked: Asked = Asked(derived=True),  # noqa: B008
) -> list[Derived]:
    """What the rules ask of the net, part or pin, then plain numbers that none of them asked for; else why none.

    at: a net, a reference, or a pin as ``U3.NRST``.
    """
    checked = check(board, project, rules, only=lambda item: stands_at(item, at), asked=asked)
    told = [_of_finding(item, at) for item in checked.findings]
    known_already = {(item.subject, item.measure) for item in told}
    subjects = Subjects(board, project)
    plain = [
        _plain(board, project, subject, registry()[name], at, options)
        for kind, measures in PLAIN.items()
        for subject in subjects.of(kind)
        if stands_at(subject, at)
        for name, options in measures.items()
        if (kind, name) not in known_already
    ]
    return [*told, *plain] or [_nothing(board, at)]


def near(board: Board, at: str) -> list[str]:
    """Names of nets, parts and pins like one that is not there."""
    return get_close_matches(at, [*board.design.nets, *board.parts, *_pins(board)], n=3)


def known(board: Board, at: str) -> bool:
    """Whether the board has a net, part or pin of that name."""
    nodes = (node.net for network in board.networks for node in network.nodes)
    return at in board.design.nets or at in board.parts or at in nodes or at in _pins(board)


def _pins(board: Board) -> Iterator[str]:
    """Every pin by its name and by its number."""
    for net in board.design.nets.values():
        for pin in net.pins:
            yield from (pin.key, f"{pin.ref}.{pin.number}")


def _of_finding(item: Finding, at: str) -> Derived:
    return Derived(
        at=at,
        of=item.net or ", ".join(item.parts),
        subject=item.subject,
        measure=item.measure,
        options=dict(item.options),
        finding=item,
        measured=item.measured,
        derivation=item.derivation,
        reason=item.reason if item.measured is None else None,
        ask=item.ask,
    )


def _nothing(board: Board, at: str) -> Derived:
    """That there is no number, and why."""
    reason, ask = why_nothing(board, at)
    return Derived(
        at=at, of=at, subject="place", measure="", finding=None, measured=None, derivation=None, reason=reason, ask=ask
    )


def _plain(
    board: Board, project: Project, subject: Subject, measure: Measure, at: str, tried: Sequence[_Options]
) -> Derived:
    """A measure with the first of some options that fit, or why it cannot be told with them."""
    found = [_with(board, project, subject, measure, at, options) for options in tried]
    defined = (item for item in found if item.measured is not None and not math.isnan(item.measured.nominal))
    return next(defined, found[0])


def _with(board: Board, project: Project, subject: Subject, measure: Measure, at: str, options: _Options) -> Derived:
    nothing = Derived(
        at=at,
        of=subject.net or ", ".join(subject.refs),
        subject=subject.kind,
        measure=measure.name,
        options=dict(options),
        finding=None,
        measured=None,
        derivation=None,
        reason=None,
        ask=[],
    )
    try:
        problem = pose(board, project, subject.target, measure, options)
    except Unmeasurable as error:
        return replace(nothing, reason=error.reason, ask=[error.ask] if error.ask else [])
    (solved,) = solve_bounds([Request(problem, measure)])
    if isinstance(solved, Failure):
        return replace(nothing, reason=solved.reason)
    measured = as_quantity(solved, problem, measure.unit)
    derivation = derive(problem, measure, solved, lambda item, value: made_of(item, value, board))
    return replace(nothing, measured=measured, derivation=derivation)
