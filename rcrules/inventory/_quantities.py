"""Bounds of the quantities of every node, all solved in one go."""

from collections.abc import Iterable, Mapping, Sequence
from typing import Final

from rcrules.events import Unmeasurable, pose
from rcrules.findings import Quantity
from rcrules.measures import Measure, registry
from rcrules.networks import Board, Network, Node
from rcrules.problems import Bounds, Failure, Problem, solve_bounds
from rcrules.project import Project

Quantities = Mapping[tuple[str, str], Mapping[str, Quantity | str]]
"""(network id, net) -> measure -> bounds, or why there are none."""

NODE_MEASURES: Final = ("time_constant",)


def node_quantities(board: Board, project: Project) -> Quantities:
    """What the document tells of every node, whatever the rules."""
    chosen = [registry()[name] for name in NODE_MEASURES]
    found: dict[tuple[str, str], dict[str, Quantity | str]] = {}
    posed: list[tuple[tuple[str, str], Measure, Problem]] = []
    for network, node, measure in _wanted(board, chosen):
        key = (network.id, node.net)
        try:
            posed.append((key, measure, pose(board, project, node, measure, _defaults(measure))))
        except Unmeasurable as error:
            found.setdefault(key, {})[measure.name] = error.reason
    solved = solve_bounds([(problem, measure) for _, measure, problem in posed])
    for (key, measure, problem), bounds in zip(posed, solved, strict=True):
        found.setdefault(key, {})[measure.name] = (
            bounds.reason if isinstance(bounds, Failure) else as_quantity(bounds, problem, measure.unit)
        )
    return found


def _wanted(board: Board, chosen: Iterable[Measure]) -> Iterable[tuple[Network, Node, Measure]]:
    return ((network, node, measure) for network in board.networks for node in network.nodes for measure in chosen)


def _defaults(measure: Measure) -> Mapping[str, float | str]:
    return {name: option.default for name, option in measure.options.items() if option.default is not None}


def as_quantity(bounds: Bounds, problem: Problem, unit: str) -> Quantity:
    """Bounds as the document holds them: of each case only the parameters off nominal, by name."""
    return Quantity(
        low=float(bounds.low),
        nominal=float(bounds.nominal),
        high=float(bounds.high),
        unit=unit,
        low_case=case_json(bounds.low_at, problem),
        high_case=case_json(bounds.high_at, problem),
        method="proved" if bounds.proved else "searched",
    )


def case_json(case: Sequence[float], problem: Problem) -> dict[str, float]:
    """Parameter name -> value, by name; parameters at nominal left out."""
    pairs = zip(problem.parameters, case, strict=True)
    off = {item.name: value for item, value in pairs if abs(value - item.nominal) > 1e-12 * abs(item.nominal)}
    return dict(sorted(off.items()))
