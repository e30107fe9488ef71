"""What the part of a proposal must be besides its value: what the present one is, and what the board does to it."""

from collections.abc import Iterator
from typing import Final

from rcrules.events import Unmeasurable, pose
from rcrules.measures import registry
from rcrules.networks import Board
from rcrules.parts import Known, RatedPart
from rcrules.problems import Bounds, Problem, Request, solve_bounds
from rcrules.project import Project
from rcrules.proposals._change import Change
from rcrules.quantities import show

_STRESS: Final = {"resistor": "power", "capacitor": "applied_voltage"}
_TOLD: Final = {"resistor": 1e-3, "capacitor": 0.1}
"""[W], [V]: less is no matter for the choice of a part."""


def needs(board: Board, project: Project, part: RatedPart, change: Change) -> str:
    """``C7: X5R, 16 V, ±20 %, stands 3.4 V``, or ''; board and project are those with the change."""
    words = [*_kept(part, change), *_stress(board, project, part.ref)]
    return f"{part.ref}: {', '.join(words)}" if words else ""


def _kept(part: RatedPart, change: Change) -> Iterator[str]:
    share = next((share for share in part.shares if share.name == "tolerance"), None)
    kept = {
        "dielectric": part.dielectric or "",
        "rated voltage": show(part.rated_voltage.si, "V") if isinstance(part.rated_voltage, Known) else "",
        "rated power": show(part.rated_power.si, "W") if isinstance(part.rated_power, Known) else "",
        "tolerance": f"±{show(share.high, '%')}" if share is not None else "",
        "bias": "as much left under bias" if part.bias_curve else "",
    }
    yield from (word for what, word in kept.items() if word and what != change.what)


def _stress(board: Board, project: Project, ref: str) -> Iterator[str]:
    """The most that the part sees in the worst case, where it can be worked out."""
    part = board.parts[ref]
    measure = registry()[_STRESS[part.kind]]
    try:
        problem: Problem = pose(board, project, part, measure)
    except Unmeasurable:
        return  # what the rules could not judge either has been told as undecided
    solved = solve_bounds([Request(problem, measure)])[0]
    most = max(abs(float(solved.low)), abs(float(solved.high))) if isinstance(solved, Bounds) else 0.0
    if most >= _TOLD[part.kind]:
        yield f"{'takes' if part.kind == 'resistor' else 'stands'} {show(most, measure.unit)}"
