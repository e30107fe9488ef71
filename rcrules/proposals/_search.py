"""The smallest change of a group: one part, then two; what is on the BOM first, then the coarsest series."""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, field
from itertools import combinations, pairwise, product
from math import inf
from typing import Final

from rcrules.findings import Finding
from rcrules.parts import RatedPart
from rcrules.proposals._candidates import coarse_values, ratings, tighter, values_of_series, values_on_bom
from rcrules.proposals._change import UNITS, Change
from rcrules.proposals._group import Group
from rcrules.proposals._trial import Trials
from rcrules.quantities import show

_PAIRED: Final = 3
"""Parts of a group of which two are changed at once."""
_RATED: Final = ("voltage_ratio", "power_ratio")
"""Measures that a rating mends."""

Scan = list[tuple[float, frozenset[str]]]
"""Values of one part with what is then broken, in words."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Search:
    """One group's search; what was seen on the way explains why there is nothing."""

    trials: Trials
    group: Group
    mended: Sequence[Finding]
    """The failing findings of the group."""
    scans: dict[str, Scan] = field(default_factory=dict)

    def found(self) -> Iterator[tuple[Change, ...]]:
        """Changes that hold in quick trials, stage by stage; within a stage one for each part, the nearest first.

        Of the same part a later one only where it is nearer to what is there.
        """
        nearest: dict[tuple[str, str], float] = {}
        for stage in self._stages():
            hits = [hit for changes in stage if (hit := self._first(changes)) is not None]
            for (change,) in sorted(hits, key=lambda hit: hit[0].distance):
                if change.distance < nearest.get((change.ref, change.what), inf):
                    nearest[change.ref, change.what] = change.distance
                    yield (change,)
        for first, second in combinations(self._parts[:_PAIRED], 2):
            hit = self._first(_pairs(first, second))
            if hit is not None:
                yield hit

    @property
    def _parts(self) -> list[RatedPart]:
        return [self.trials.board.parts[ref] for ref in self.group.refs]

    def _stages(self) -> Iterator[list[Iterable[tuple[Change, ...]]]]:
        """Lists of candidates, one for each part; a finer series only where rules change places between two values."""
        if any(item.measure in _RATED for item in self.mended):
            yield [_alone(ratings(part)) for part in self._parts]
        yield [_alone(values_on_bom(part, self.trials.board.parts)) for part in self._parts]
        series = [values_of_series(part) for part in self._parts]
        yield [_alone(next(values, [])) for values in series]
        while any(rows := [next(values, []) for values in series]):
            yield [self._between(part, row) for part, row in zip(self._parts, rows, strict=True)]
        yield [_alone(tighter(part)) for part in self._parts]

    def _between(self, part: RatedPart, row: list[Change]) -> Iterable[tuple[Change, ...]]:
        """Of a finer series those between neighbours at which other things are broken."""
        scan = sorted(self.scans.get(part.ref, ()), key=lambda item: item[0])
        gaps = [(low, high) for (low, one), (high, other) in pairwise(scan) if one != other]
        return _alone([item for item in row if item.number and any(low < item.number < high for low, high in gaps)])

    def _first(self, candidates: Iterable[tuple[Change, ...]]) -> tuple[Change, ...] | None:
        return next((changes for changes in candidates if not self._fails(changes)), None)

    def _fails(self, changes: tuple[Change, ...]) -> list[str]:
        failing = self.trials.broken(self.trials.quick(changes, self.group), self.mended)
        if len(changes) == 1 and changes[0].what == "value" and changes[0].number is not None:
            self.scans.setdefault(changes[0].ref, []).append((changes[0].number, frozenset(failing)))
        return failing

    def reason(self) -> str:
        """Why nothing was found, in words."""
        if not self.group.refs:
            return "no resistor or capacitor of known value to change there"
        told = [_told(self.trials.board.parts[ref], scan) for ref, scan in self.scans.items() if scan]
        return "no standard value of one part or of two holds: " + "; ".join(filter(None, told))


def _alone(changes: Iterable[Change]) -> list[tuple[Change, ...]]:
    return [(change,) for change in changes]


def _pairs(first: RatedPart, second: RatedPart) -> list[tuple[Change, ...]]:
    """Values of the coarsest series for both, the least moved first."""
    both = product(coarse_values(first), coarse_values(second))
    return sorted(both, key=lambda pair: sum(change.distance for change in pair))


def _told(part: RatedPart, scan: Scan) -> str:
    """``R12: reset-late-enough too low from 330 Ω to 10 kΩ, reset-soon-enough too high from 33 kΩ to 330 kΩ``."""
    broken = sorted({word for _, failing in scan for word in failing})
    values = {word: [value for value, failing in scan if word in failing] for word in broken}
    ranges = [f"{word} {_range(found, UNITS[part.kind])}" for word, found in values.items()]
    return f"{part.ref}: {', '.join(ranges)}"


def _range(values: Sequence[float], unit: str) -> str:
    """``from 330 Ω to 10 kΩ``, or ``at 330 Ω``."""
    ends = list(dict.fromkeys(show(value, unit) for value in (min(values), max(values))))
    return f"from {ends[0]} to {ends[1]}" if len(ends) > 1 else f"at {ends[0]}"
