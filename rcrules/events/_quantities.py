"""What can be said of every node without a rule."""

from collections.abc import Mapping
from dataclasses import dataclass

from rcrules.events._pose import pose
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import registry
from rcrules.networks import Board, Node
from rcrules.problems import Bounds, Failure, Problem, solve_bounds
from rcrules.project import Project

FILTERS = ("low-pass", "divider-low-pass", "high-pass", "supply-filter")
"""Roles of which the corner frequency is told too."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Measured:
    """Bounds of a quantity of a node; where there are none, the reason."""

    unit: str
    problem: Problem | None
    bounds: Bounds | None
    reason: str = ""


def quantities(board: Board, project: Project) -> Mapping[tuple[str, str], Mapping[str, Measured]]:
    """(network id, net of the node) -> measure name -> bounds; everything is solved in one go."""
    wanted = [(network.id, node, name) for network in board.networks for node in network.nodes for name in _names(node)]
    found: dict[tuple[str, str], dict[str, Measured]] = {}
    posed: list[tuple[tuple[str, str], str, Problem]] = []
    for network, node, name in wanted:
        key = network, node.net
        found.setdefault(key, {})
        try:
            posed.append((key, name, pose(board, project, node, registry()[name])))
        except Unmeasurable as error:
            found[key][name] = Measured(unit=registry()[name].unit, problem=None, bounds=None, reason=error.reason)
    results = solve_bounds([(problem, registry()[name]) for _, name, problem in posed])
    for (key, name, problem), result in zip(posed, results, strict=True):
        found[key][name] = _measured(registry()[name].unit, problem, result)
    return found


def _names(node: Node) -> tuple[str, ...]:
    if node.active is not None:
        return ()
    if node.amplifier is not None:
        return ("corner_frequency",)
    return ("time_constant", "corner_frequency") if node.role in FILTERS else ("time_constant",)


def _measured(unit: str, problem: Problem, result: Bounds | Failure) -> Measured:
    if isinstance(result, Failure):
        return Measured(unit=unit, problem=problem, bounds=None, reason=result.reason)
    return Measured(unit=unit, problem=problem, bounds=result)
