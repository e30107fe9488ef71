"""Which line of the project file would give a missing fact: one line for all parts that are written alike."""

from collections import defaultdict
from collections.abc import Iterable
from typing import Final

from rcrules.design import Part

_MOST: Final = 8
"""References in one table name; beyond it the line names the first part only."""


def asks(parts: Iterable[Part]) -> dict[str, str]:
    """Reference -> head of the project line, ``[part."C7, C8"]``: parts with the same texts share a line."""
    groups: dict[tuple[object, ...], list[str]] = defaultdict(list)
    for part in parts:
        groups[_written(part)].append(part.ref)
    return {ref: _head(ref, refs) for refs in groups.values() for ref in refs}


def _head(ref: str, refs: list[str]) -> str:
    names = ", ".join(refs) if len(refs) <= _MOST else ref
    return f'[part."{names}"]'


def _written(part: Part) -> tuple[object, ...]:
    """All texts of a part but its reference."""
    fields = tuple(sorted((name, *(fact.text for fact in facts)) for name, facts in part.fields.items()))
    return part.ref[:1], tuple(fact.text for fact in part.values), part.footprint, part.symbol, fields
