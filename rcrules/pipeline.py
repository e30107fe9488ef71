"""The whole flow on one page: inputs and project in, one findings document out."""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace
from typing import TYPE_CHECKING

from rcrules import __version__
from rcrules.errors import Mistake, Place, UserMistake
from rcrules.job import Job, read_job

__all__ = ["Job", "derive", "run", "run_all", "try_on"]

if TYPE_CHECKING:
    from rcrules.checks import Trial
    from rcrules.findings import Derived, Document
    from rcrules.networks import Board
    from rcrules.problems import Parameter
    from rcrules.project import Project
    from rcrules.rulebook import Rule
    from rcrules.waivers import Waiver

    _Outcome = tuple[Document | None, Sequence[Mistake]]


def run_all(jobs: Sequence[Job], processes: int = 1, done: Callable[[], None] | None = None) -> "list[Document]":
    """The documents of several boards, in order; mistakes of all of them at once. ``done`` is called after each."""
    outcomes = []
    for outcome in _outcomes(jobs, processes):
        outcomes.append(outcome)
        if done is not None:
            done()
    mistakes = [mistake for _, wrong in outcomes for mistake in wrong]
    if mistakes:
        raise UserMistake(*mistakes)
    return [document for document, _ in outcomes if document is not None]


def _outcomes(jobs: Sequence[Job], processes: int) -> "Iterator[_Outcome]":
    """One after the other, or several at a time; in the order of the jobs."""
    if processes == 1 or len(jobs) == 1:
        yield from map(_attempt, jobs)
        return
    from concurrent.futures import ProcessPoolExecutor

    with ProcessPoolExecutor(min(processes, len(jobs))) as pool:
        yield from pool.map(_attempt, jobs)


def _attempt(job: Job) -> "_Outcome":
    """The document of one board, or what is wrong with its inputs."""
    try:
        return run(job), ()
    except UserMistake as error:
        return None, error.mistakes


def run(job: Job) -> "Document":
    """Read, recognise, judge, tell. Raises UserMistake with all mistakes of project, inputs and rules."""
    from rcrules.design import build
    from rcrules.events import let_go
    from rcrules.networks import recognise
    from rcrules.parts import rate

    project, exports, rules, waivers = read_job(job)
    design = build(exports)
    board = recognise(design, rate(design, project), project)
    try:
        found = _document(job, project, board, rules)
    finally:
        let_go()  # reports need the document alone
    return _waived(found, waivers)


def derive(job: Job, at: str) -> "tuple[Document, list[Derived]]":
    """How the numbers at a net, part or pin come about; the document has no findings. Raises UserMistake."""
    from rcrules.checks import Asked, known, near, numbers_at
    from rcrules.design import build
    from rcrules.networks import recognise
    from rcrules.parts import rate

    project, exports, rules, _ = read_job(job)
    design = build(exports)
    board = recognise(design, rate(design, project), project)
    if not known(board, at):
        expected, do = "a net, a part, or a pin such as U3.NRST", _like(near(board, at))
        place = Place(file="--at")
        raise UserMistake(Mistake(place=place, problem="nothing on this board", found=at, expected=expected, do=do))
    document = _document(replace(job, with_rules=False), project, board, [])
    asked = Asked(derived=True, samples=job.samples, seed=job.seed)
    return document, numbers_at(board, project, rules, at, asked=asked)


def try_on(job: Job) -> "list[Trial]":
    """What each rule meets on a board, nearly meets, and at which limit it would turn. Raises UserMistake."""
    from rcrules.checks import trials
    from rcrules.design import build
    from rcrules.networks import recognise
    from rcrules.parts import rate

    project, exports, rules, _ = read_job(job)
    design = build(exports)
    return trials(recognise(design, rate(design, project), project), project, rules)


def _like(names: Sequence[str]) -> str:
    return f"did you mean {' or '.join(names)}?" if names else "look for it with: rcrules networks"


def _waived(found: "Document", waivers: "list[Waiver]") -> "Document":
    """The document with what the waivers cover."""
    if not waivers:
        return found
    from rcrules.waivers import today, waived

    return waived(found, waivers, today())


def _document(job: Job, project: "Project", board: "Board", rules: "list[Rule]") -> "Document":
    """Everything found, as one document; what rules add stays empty without them."""
    from rcrules import inventory
    from rcrules.findings import Document, settled

    quantities, parameters = inventory.node_quantities(board, project)
    found = Document(
        tool=__version__,
        board=inventory.board_counts(board, project.name, project.variant),
        inputs=inventory.inputs(board.design.exports),
        conditions=inventory.conditions(project),
        parts=[],
        held=inventory.held(board),
        packs=[],
        networks=inventory.networks(board, quantities),
        findings=[],
        assumptions=inventory.listed_assumptions(inventory.assumptions_of(parameters))[0],
        coverage={},
        waivers=[],
        problems=inventory.problems(board, project, _judged_inputs(board, rules) if job.with_rules else ()),
    )
    if job.with_rules:
        found = _judged(job, found, project, board, rules, parameters)
    classes = inventory.coverage(board, found.findings)
    return settled(replace(found, parts=inventory.parts(board, classes), coverage=inventory.counts(classes)))


def _judged_inputs(board: "Board", rules: "list[Rule]") -> frozenset[str]:
    """Parts of which rules judge whether the inputs agree."""
    from rcrules.checks import agreeing

    return agreeing(rules, board)


def _judged(
    job: Job, found: "Document", project: "Project", board: "Board", rules: "list[Rule]", also: "list[Parameter]"
) -> "Document":
    """The document with what the rules find."""
    from rcrules.checks import Asked, astray, check, packs, unclear, unmet

    asked = job.rules or project.rules
    beside = Asked(derived=job.derived, samples=job.samples, seed=job.seed)
    checked = check(board, project, rules, also=also, sure_only=not asked, asked=beside)
    findings = checked.findings
    if job.proposals:
        from rcrules.proposals import propose

        findings = propose(board, project, rules, findings, sure_only=not asked)
    return replace(
        found,
        packs=packs(rules, checked.met),
        findings=findings,
        assumptions=checked.assumptions,
        problems=[
            *found.problems,
            *(() if job.rules else astray(project, rules)),
            *unclear(rules, checked.unclear),
            *unmet(rules, checked.met, own=asked),
        ],
    )
