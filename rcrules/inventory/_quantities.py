"""Bounds of quantities as the document holds them."""

import math
from collections.abc import Mapping, Sequence

from rcrules.events import Measured, quantities
from rcrules.findings import Quantity
from rcrules.networks import Board
from rcrules.problems import Bounds, Parameter, Problem
from rcrules.project import Project

Quantities = Mapping[tuple[str, str], Mapping[str, Quantity | str]]
"""(network id, net) -> measure -> bounds, or why there are none."""


def node_quantities(board: Board, project: Project) -> tuple[Quantities, list[Parameter]]:
    """What the document tells of every node, whatever the rules; and the parameters that it rests on."""
    found = quantities(board, project)
    told = {key: {name: _told(item) for name, item in measured.items()} for key, measured in found.items()}
    problems = (item.problem for measured in found.values() for item in measured.values() if item.problem)
    return told, [parameter for problem in problems for parameter in problem.parameters]


def _told(item: Measured) -> Quantity | str:
    if item.bounds is None or item.problem is None:
        return item.reason
    return as_quantity(item.bounds, item.problem, item.unit)


def as_quantity(bounds: Bounds, problem: Problem, unit: str) -> Quantity:
    """Bounds with the case of each: only the parameters off nominal, by name."""
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
    off = {item.name: value for item, value in pairs if _off(value, item.nominal)}
    return dict(sorted(off.items()))


def _off(value: float, nominal: float) -> bool:
    return value != nominal if math.isinf(nominal) else abs(value - nominal) > 1e-12 * abs(nominal)
