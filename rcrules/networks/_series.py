"""Resistors in series with nothing between them act as one."""

from collections.abc import Callable, Sequence
from typing import Final

from rcrules.networks._model import Branch

PLAIN: Final = frozenset(("resistor", "thermistor", "potentiometer", "resistor-array", "test-point"))
"""Kinds of parts that a joint between resistors in series may hold."""
_MOST: Final = 64
"""Resistors in series that are looked through."""


def follow(
    branch: Branch, joint: str, at: Callable[[str], Sequence[Branch]], plain: Callable[[str], bool]
) -> tuple[tuple[Branch, ...], str]:
    """The resistors in series from a joint on, and the joint where they end.

    at: all branches at a joint; plain: whether a joint may be looked through, so that only its branches matter.
    """
    found, far = [branch], other_end(branch, joint)
    while branch.kind == "resistor" and len(found) < _MOST:
        branches = at(far)
        if len(branches) != 2 or any(item.kind != "resistor" for item in branches) or not plain(far):
            break
        onward = next((item for item in branches if item is not branch), None)
        if onward is None or other_end(onward, far) == joint:
            break
        branch, far = onward, other_end(onward, far)
        found.append(branch)
    return tuple(found), far


def other_end(branch: Branch, joint: str) -> str:
    """The joint at the other end of a branch."""
    return branch.b if branch.a == joint else branch.a
