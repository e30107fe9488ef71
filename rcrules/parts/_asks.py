"""Which line of the project file would give a missing fact: one line for all parts that are written alike."""

from collections import defaultdict
from collections.abc import Iterable
from typing import Final

from rcrules.design import Part

_MOST: Final = 12
"""References in one table name; beyond it the line gives the default of the kind."""
_KINDS: Final = {"R": "resistor", "C": "capacitor"}


def asks(parts: Iterable[Part]) -> dict[str, str]:
    """Reference -> head of the project line; parts written alike share ``[part."C7, C8"]``, many share the default."""
    groups: dict[tuple[object, ...], list[str]] = defaultdict(list)
    for part in parts:
        groups[_written(part)].append(part.ref)
    return {ref: head for refs in groups.values() for head in [_head(refs)] for ref in refs}


def _head(refs: list[str]) -> str:
    kind = _KINDS.get(refs[0][:1].upper())
    if len(refs) > _MOST and kind is not None:
        return f"[defaults.{kind}]"
    return f'[part."{", ".join(refs)}"]'


def _written(part: Part) -> tuple[object, ...]:
    """All texts of a part but its reference."""
    fields = tuple(sorted((name, *(fact.text for fact in facts)) for name, facts in part.fields.items()))
    return part.ref[:1], tuple(fact.text for fact in part.values), part.footprint, part.symbol, fields
