"""Numbers that no input gave: listed once each, and named by the findings that rest on them."""

from collections.abc import Iterable

from rcrules.design import natural
from rcrules.findings import Json
from rcrules.problems import Parameter

Key = tuple[str, str, str]
"""About, text, ask."""


def assumptions_of(parameters: Iterable[Parameter]) -> list[Key]:
    """Every assumption that the parameters rest on, each with the line that would replace it."""
    return [
        (item.name, text, ask)
        for item in parameters
        for text, ask in zip(item.assumed, item.asks or (item.ask,) * len(item.assumed), strict=True)
    ]


def listed_assumptions(found: Iterable[Key]) -> tuple[list[Json], dict[Key, int]]:
    """One object per assumption, in the order of what they are about, and the index of each."""
    ordered = sorted(set(found), key=lambda key: (natural(key[0]), key[1:]))
    listed: list[Json] = [{"about": about, "text": text, "ask": ask} for about, text, ask in ordered]
    return listed, {key: index for index, key in enumerate(ordered)}
