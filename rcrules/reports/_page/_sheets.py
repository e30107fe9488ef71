"""A network too large for one drawing as several: neighbours together, parallel parts as one symbol."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Final

from rcrules.reports._page._chain import chain
from rcrules.reports._page._layout import Branch

_ALONE: Final = 60
"""Parts of a network that is drawn as it is."""
_MOST: Final = 24
"""Parts on one sheet of a larger one, where those of one net alone are not more."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Sheet:
    """What one drawing shows."""

    branches: list[Branch]
    held: Mapping[str, str]
    """Net -> kind; nets that are drawn on another sheet are ``driven`` here."""


def sheets(branches: Sequence[Branch], held: Mapping[str, str]) -> list[Sheet]:
    """One sheet where everything fits; else free nets in drawing order, as many together as fit.

    A part between nets of two sheets stands on both, its far net as a mark with its name.
    """
    if len(branches) <= _ALONE:
        return [Sheet(branches=list(branches), held=held)]
    drawn = merged(branches)
    bridges = [item for item in drawn if set(item.nets) <= set(held)]
    groups = _groups(drawn, held) or [[]]
    found = [_sheet(drawn, group, held) for group in groups if group]
    parts = [bridges[start : start + _MOST] for start in range(0, len(bridges), _MOST)]
    return found + [Sheet(branches=part, held=held) for part in parts]


def merged(branches: Sequence[Branch]) -> list[Branch]:
    """Parts of one kind and value between the same two nets as one symbol: ``C1 … C24``, ``24 × 100 nF``."""
    alike: dict[tuple[str, str, frozenset[str]], list[Branch]] = {}
    for branch in branches:
        alike.setdefault((branch.kind, branch.value, frozenset(branch.nets)), []).append(branch)
    return [_as_one(items) for items in alike.values()]


def _as_one(items: Sequence[Branch]) -> Branch:
    first = items[0]
    if len(items) == 1:
        return first
    refs = f"{first.ref}, {items[1].ref}" if len(items) == 2 else f"{first.ref} … {items[-1].ref}"
    return Branch(ref=refs, value=f"{len(items)} × {first.value}", kind=first.kind, nets=first.nets)


def _groups(branches: Sequence[Branch], held: Mapping[str, str]) -> list[list[str]]:
    """Free nets in the order of the chain, cut where the parts at them would be too many."""
    free = list(dict.fromkeys(net for branch in branches for net in branch.nets if net not in held))
    resistors, capacitors = (
        [branch.nets for branch in branches if branch.kind == kind] for kind in ("resistor", "capacitor")
    )
    groups: list[list[str]] = []
    seen: set[int] = set()
    at: dict[str, list[int]] = {net: [] for net in free}
    for index, branch in enumerate(branches):
        for net in branch.nets:
            if net in at:
                at[net].append(index)
    for net in chain(free, resistors, capacitors, held):
        if not groups or len(seen.union(at[net])) > _MOST:
            groups.append([])
            seen = set()
        groups[-1].append(net)
        seen.update(at[net])
    return groups


def _sheet(branches: Sequence[Branch], group: Sequence[str], held: Mapping[str, str]) -> Sheet:
    own = set(group)
    shown = [branch for branch in branches if own & set(branch.nets)]
    others = {net: "driven" for branch in shown for net in branch.nets if net not in own and net not in held}
    return Sheet(branches=shown, held={**held, **others})
