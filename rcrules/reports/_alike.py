"""Sentences that say the same about different names, told once: ``amplifier U1 and 15 more inside the loop``."""

import re
from collections.abc import Iterable
from itertools import groupby
from typing import Final

_WORD: Final = re.compile(r"[a-z]+[,;.]?|[a-z ]+:")
"""A plain word; everything else in a sentence is a name or a number."""

Pieces = tuple[tuple[bool, str], ...]
"""Alternating runs of plain words and of names, with whether a run is one of names."""


def merged(sentences: Iterable[str]) -> list[tuple[str, list[str]]]:
    """Each sentence once, in order, with those it stands for; names that differ in one place are counted."""
    groups: list[tuple[Pieces, list[str]]] = [(_pieces(text), [text]) for text in dict.fromkeys(sentences)]
    for place in reversed(range(max((len(pieces) for pieces, _ in groups), default=0))):
        groups = _merged_at(groups, place)
    return [(" ".join(text for _, text in pieces), members) for pieces, members in groups]


def _merged_at(groups: list[tuple[Pieces, list[str]]], place: int) -> list[tuple[Pieces, list[str]]]:
    """The groups, with those put together that differ only by the names in one place."""
    together: dict[object, list[tuple[Pieces, list[str]]]] = {}
    for pieces, members in groups:
        named = place < len(pieces) and pieces[place][0] and ":" not in pieces[place][1]
        key = (*pieces[:place], *pieces[place + 1 :], len(pieces)) if named else (pieces, None)
        together.setdefault(key, []).append((pieces, members))
    return [_one(found, place) for found in together.values()]


def _one(found: list[tuple[Pieces, list[str]]], place: int) -> tuple[Pieces, list[str]]:
    first = found[0][0]
    members = [text for _, texts in found for text in texts]
    others = len({pieces[place] for pieces, _ in found}) - 1 if len(found) > 1 else 0
    if not others:
        return first, members
    names = f"{first[place][1]} and {others} more"
    return (*first[:place], (True, names), *first[place + 1 :]), members


def _pieces(text: str) -> Pieces:
    words = text.split(" ")
    runs = groupby(words, key=lambda word: _WORD.fullmatch(word) is None)
    return tuple((named, " ".join(run)) for named, run in runs)
