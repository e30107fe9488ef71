"""Which finding of the older document is which of the newer."""

from collections.abc import Callable, Hashable, Iterable, Sequence
from typing import Final

from rcrules.findings import Finding

Pair = tuple[Finding | None, Finding | None]
"""Of the older and of the newer document; None = only the other has it."""


def _whole(item: Finding) -> Hashable:
    return item.rule, item.fingerprint, item.net


def _own(item: Finding) -> Hashable:
    return item.rule, item.fingerprint.partition(".")[0]


def _place(item: Finding) -> Hashable:
    return item.rule, item.fingerprint.partition(".")[2], item.net


def _topology(item: Finding) -> Hashable:
    return item.rule, item.fingerprint.partition(".")[2]


_KEYS: Final[Sequence[Callable[[Finding], Hashable]]] = (_whole, _own, _place, _topology)
"""From the surest to the last: a key pairs findings only where both documents have equally many of it."""


def pairs(old: Sequence[Finding], new: Sequence[Finding]) -> list[Pair]:
    """Every finding of both once, in the order of the newer document; those of the older alone come last."""
    partner: dict[int, int] = {}
    left, right = list(range(len(old))), list(range(len(new)))
    for key in _KEYS:
        partner |= _paired(key, old, new, left, right)
        left = [index for index in left if index not in set(partner.values())]
        right = [index for index in right if index not in partner]
    found: list[Pair] = [(old[partner[index]] if index in partner else None, item) for index, item in enumerate(new)]
    return found + [(old[index], None) for index in left]


def _paired(
    key: Callable[[Finding], Hashable],
    old: Sequence[Finding],
    new: Sequence[Finding],
    left: Iterable[int],
    right: Iterable[int],
) -> dict[int, int]:
    """Index of the newer -> index of the older."""
    before, after = _grouped(key, old, left), _grouped(key, new, right)
    alike = [(mine, before[own]) for own, mine in after.items() if len(before.get(own, ())) == len(mine)]
    return {number: other for mine, others in alike for number, other in zip(mine, others, strict=True)}


def _grouped(
    key: Callable[[Finding], Hashable], findings: Sequence[Finding], indexes: Iterable[int]
) -> dict[Hashable, list[int]]:
    found: dict[Hashable, list[int]] = {}
    for index in indexes:
        found.setdefault(key(findings[index]), []).append(index)
    return found
