"""The whole check: subjects of every rule, posed, solved together, judged, told."""

from collections import Counter
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass

from rcrules.checks._asked import Asked
from rcrules.checks._ends import at_nominal
from rcrules.checks._finding import Judged, finding
from rcrules.checks._resolve import Case, is_joint, resolve
from rcrules.checks._select import selected
from rcrules.checks._subject import Subject
from rcrules.checks._subjects import Subjects
from rcrules.checks._value import pose_value
from rcrules.checks._verdict import Verdict, decide
from rcrules.checks._words import worded
from rcrules.checks._yield import by_yield
from rcrules.design import natural
from rcrules.events import Unmeasurable, pose
from rcrules.findings import Finding, Json
from rcrules.inventory import Key, assumptions_of, listed_assumptions
from rcrules.networks import Board
from rcrules.problems import Parameter, Problem
from rcrules.project import Project
from rcrules.rulebook import Rule


@dataclass(frozen=True, slots=True, kw_only=True)
class Checked:
    """Everything that rules found on a board."""

    findings: list[Finding]
    """By rule, net and parts; exactly one per rule and subject."""
    assumptions: list[Json]
    met: Mapping[str, int]
    """Rule id -> number of subjects."""
    unclear: Mapping[str, int]
    """Rule id -> number of subjects left out because a fact is missing that decides whether the rule meets them."""


def check(
    board: Board,
    project: Project,
    rules: Sequence[Rule],
    *,
    also: Iterable[Parameter] = (),
    sure_only: bool = False,
    only: Callable[[Subject], bool] | None = None,
    asked: Asked = Asked(),  # noqa: B008 - it cannot change
) -> Checked:
    """Hold every rule against every subject that it selects.

    also: parameters of other quantities of the document, whose assumptions are listed as well.
    only: which subjects to look at; None = all.
    asked: what findings tell besides their verdict.
    sure_only: leave out subjects of which it is not known whether a rule meets them, instead of calling them undecided.
    """
    subjects = Subjects(board, project)
    found = [case for rule in rules for case in _cases(rule, subjects, board, project, only)]
    cases = [case for case in found if case.sure or not sure_only]
    judged = _judge(cases, subjects, board, project, asked)
    posed = (item.problem.parameters for item in judged if item.problem)
    listed, numbers = listed_assumptions(key for parameters in (also, *posed) for key in assumptions_of(parameters))
    findings = [finding(item, board, project, _indexes(item, numbers), asked=asked) for item in judged]
    met = Counter(case.rule.id for case in cases)
    unclear = Counter(case.rule.id for case in found if not case.sure) if sure_only else Counter[str]()
    return Checked(findings=sorted(findings, key=_order), assumptions=listed, met=met, unclear=unclear)


def _cases(
    rule: Rule, subjects: Subjects, board: Board, project: Project, only: Callable[[Subject], bool] | None
) -> list[Case]:
    """A case per subject that the rule meets, or may meet."""
    looked_at = [item for item in subjects.of(rule.held_against) if only is None or only(item)]
    chosen = [(item, selected(rule.selection, item, board)) for item in looked_at]
    return [resolve(rule, item, board, project, sure=met is True) for item, met in chosen if met is not False]


def _judge(cases: Iterable[Case], subjects: Subjects, board: Board, project: Project, asked: Asked) -> list[Judged]:
    """Pose what can be posed, decide all of it in one go."""
    judged: list[Judged] = []
    posed: list[tuple[Case, Problem]] = []
    known: dict[object, Problem | Unmeasurable] = {}
    for case in cases:
        if case.rule.fact and not case.missing:
            judged.append(Judged(case=case, problem=None, verdict=worded(case, board)))
            continue
        question = None if case.missing else _asked(case, subjects, board, project, known)
        if isinstance(question, tuple):
            posed.append(question)
        else:
            judged.append(Judged(case=case, problem=None, verdict=_open(case, question)))
    verdicts = by_yield(posed, decide(posed), board, project, asked)
    judged += [
        Judged(case=case, problem=problem, verdict=verdict)
        for (case, problem), verdict in zip(posed, verdicts, strict=True)
    ]
    return judged


def _asked(
    case: Case, subjects: Subjects, board: Board, project: Project, known: dict[object, Problem | Unmeasurable]
) -> tuple[Case, Problem] | Unmeasurable:
    """The case and its problem; of a rule about nominal values with nothing spread."""
    if case.rule.value is not None or any(is_joint(limit) for limit in case.rule.limits):
        try:
            case, problem = pose_value(case, subjects, board, project)
        except Unmeasurable as error:
            return error.with_traceback(None)
    else:
        found = _posed(case, board, project, known)
        if isinstance(found, Unmeasurable):
            return found
        problem = found
    return case, at_nominal(problem) if case.rule.nominal else problem


def _posed(
    case: Case, board: Board, project: Project, known: dict[object, Problem | Unmeasurable]
) -> Problem | Unmeasurable:
    """The problem of a case; rules that ask the same of a subject share one."""
    key = (
        case.rule.measure.name,
        id(case.subject.target),
        tuple(sorted(case.options.items(), key=lambda item: item[0])),
    )
    if key not in known:
        try:
            known[key] = pose(board, project, case.subject.target, case.rule.measure, case.options)
        except Unmeasurable as error:
            known[key] = error.with_traceback(None)  # the frames on it would keep the board
    return known[key]


def _open(case: Case, error: Unmeasurable | None) -> Verdict:
    """Undecided because something is missing, or cannot be measured."""
    reasons = [item.reason for item in case.missing] if error is None else [error.reason]
    return Verdict(outcome="undecided", solution=None, reason="; ".join(reasons), ask=_asks(case, error))


def _asks(case: Case, error: Unmeasurable | None) -> tuple[str, ...]:
    asked = [line for item in case.missing for line in item.ask]
    if error is not None and error.ask:
        asked += [error.ask] if isinstance(error.ask, str) else list(error.ask)
    return tuple(dict.fromkeys(asked))


def _indexes(item: Judged, numbers: Mapping[Key, int]) -> list[int]:
    return sorted({numbers[key] for key in assumptions_of(item.problem.parameters)}) if item.problem else []


def _order(item: Finding) -> tuple[object, ...]:
    return (item.rule, natural(item.net or ""), [natural(ref) for ref in item.parts], item.fingerprint)
