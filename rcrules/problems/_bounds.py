"""Bounds of many problems at once: every search advances a step, and equal structures share one call."""

from collections import defaultdict
from collections.abc import Callable, Generator, Sequence
from contextlib import nullcontext
from dataclasses import dataclass, replace
from typing import NamedTuple, Protocol

import numpy as np

from rcrules.engine import MANY, Bounds, FloatingNode, roughly, search
from rcrules.problems._junctions import Unsettled
from rcrules.problems._structure import Array, Problem, Structure

Compute = Callable[[Structure, Array], Array]


class Proved(Protocol):
    """What is known of a quantity's slopes: signs per column, and whether vertices suffice for the others."""

    @property
    def signs(self) -> tuple[int | None, ...]:
        """+1, -1, 0 per column; None = not known."""

    @property
    def vertices(self) -> bool:
        """True: extremes over the columns of unknown sign lie at vertices."""


class Quantity(Protocol):
    """Anything that can be computed over cases and about which something may be proved: a measure, or a margin."""

    @property
    def compute(self) -> Compute:
        """Structure and cases (case, column) -> values (case,)."""

    @property
    def theory(self) -> Callable[[Structure, Array, Array], Proved]:
        """Structure, lowest and highest of the columns -> what is proved."""


class Request(NamedTuple):
    """One quantity of one problem over one box."""

    problem: Problem
    quantity: Quantity
    given_only: bool = False
    """True: over what the inputs give; else over everything, assumed effects too."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Failure:
    """No bounds, and why."""

    reason: str


Search = Generator[Array, Array, Bounds]


@dataclass(slots=True)
class _Running:
    structure: int
    compute: Compute
    search: Search
    nominal: Array
    """(column,)"""
    rough: bool
    """True: the search is on its way through a network of many nodes, which needs no exact values yet."""
    cases: Array | None = None
    result: Bounds | Failure | None = None

    def advance(self, values: Array | None) -> None:
        """Hand the search its values; it asks for more cases or ends."""
        if isinstance(self.result, Bounds) and values is not None:
            low, nominal, high = values
            self.cases, self.result = None, replace(self.result, low=low, nominal=nominal, high=high)
            return
        try:
            self.cases = next(self.search) if values is None else self.search.send(values)
        except StopIteration as stop:
            self._end(stop.value)

    def _end(self, found: Bounds) -> None:
        """Ask for the exact values of what a rough search found."""
        self.result, self.cases = found, None
        if self.rough:
            self.rough, self.cases = False, np.array([found.low_at, self.nominal, found.high_at])

    def fail(self, reason: str) -> None:
        """End without bounds."""
        self.search.close()
        self.cases, self.result = None, Failure(reason=reason)


def solve_bounds(
    requests: Sequence[Request | tuple[Problem, Quantity] | tuple[Problem, Quantity, bool]],
) -> list[Bounds | Failure]:
    """Lowest, nominal and highest of every request, in order."""
    numbers: dict[Structure, int] = {}
    started: dict[tuple[object, ...], _Running] = {}
    asked = [_ask(Request(*item), numbers, started) for item in requests]
    running, structures = list(started.values()), list(numbers)
    while waiting := [item for item in running if item.cases is not None]:
        groups: dict[tuple[int, Compute, bool], list[_Running]] = defaultdict(list)
        for item in waiting:
            groups[item.structure, item.compute, item.rough].append(item)
        for (number, compute, rough), members in groups.items():
            with roughly() if rough else nullcontext():
                _advance(structures[number], compute, members)
    return [item.result for item in asked if item.result is not None]


def _ask(request: Request, numbers: dict[Structure, int], started: dict[tuple[object, ...], _Running]) -> _Running:
    """The search of a request; equal ones share it."""
    problem, quantity, given_only = request
    low, nominal, high = problem.given_box() if given_only else problem.box()
    number = numbers.setdefault(problem.structure, len(numbers))
    key = (number, quantity.compute, low.tobytes(), nominal.tobytes(), high.tobytes())
    if key not in started:
        signs, vertices = _proved(problem.structure, quantity, low, high)
        rough = problem.structure.shape.free >= MANY
        started[key] = _Running(number, quantity.compute, search(low, nominal, high, signs, vertices), nominal, rough)
        started[key].advance(None)
    return started[key]


def _proved(structure: Structure, quantity: Quantity, low: Array, high: Array) -> tuple[tuple[int | None, ...], bool]:
    """What is known of the slopes; with diodes or amplifiers nothing is.

    A diode keeps the system cooperative, so that the signs of T3 should survive, but that is argued, not proved.
    """
    if structure.diodes or structure.amplifiers:
        return (None,) * len(low), False
    theory = quantity.theory(structure, low, high)
    return theory.signs, theory.vertices


def _advance(structure: Structure, compute: Compute, members: list[_Running]) -> None:
    """One call for all cases that the members wait for; where it fails, each by itself."""
    tables = [item.cases for item in members if item.cases is not None]
    try:
        values = compute(structure, np.concatenate(tables) if len(tables) > 1 else tables[0])
    except (FloatingNode, Unsettled) as error:
        if len(members) == 1:
            members[0].fail(str(error) or "a node has no resistive path to a source")
            return
        for item in members:
            _advance(structure, compute, [item])
        return
    ends = np.cumsum([len(table) for table in tables])[:-1]
    for item, part in zip(members, np.split(values, ends), strict=True):
        item.advance(part)
