"""Everything that hangs on a capacitor through resistors and capacitors once all supplies are open."""

from collections import deque
from collections.abc import Iterable
from dataclasses import dataclass

from rcrules.design import natural
from rcrules.events._bench import Bench
from rcrules.events._circuit import LARGEST, ZERO
from rcrules.events._sources import Sources
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.networks import Branch

MOST_JOINTS = 2000
"""Joints after which the search for bleeders stops."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Wires:
    """Branches between joints; every ground is ``0 V``."""

    branches: tuple[Branch, ...]
    live: frozenset[str]
    """Joints from which resistors lead to 0 V."""

    def order(self, first: Iterable[str]) -> list[str]:
        """Joints, some of them first."""
        found = dict.fromkeys(joint for joint in first if joint != ZERO)
        found.update((joint, None) for item in self.branches for joint in (item.a, item.b) if joint != ZERO)
        return list(found)


def bleeders(bench: Bench, sources: Sources, branch: Branch) -> Wires:
    """Branches through which charge of a capacitor can move. Raises Unmeasurable where there are too many.

    Left out, because no current flows there: dead ends without a capacitor, and capacitors to nets without a way to 0
    V. What drives a net counts as open, and so do contacts and diodes.
    """
    branches = _reached(bench, sources, branch)
    ends = {branch.a, branch.b}
    while True:
        kept = without_dead_ends(branches, ends)
        live = _joined([ZERO], [item for item in kept if item.kind == "resistor"]) - {ZERO}
        lasting = [item for item in kept if {item.a, item.b} <= live | {ZERO}]
        if len(lasting) == len(branches):
            break
        branches = lasting
    if len(live) > LARGEST:
        raise Unmeasurable(f"{len(live)} nets hang on {branch.ref}; more than {LARGEST} are not solved")
    ordered = sorted(branches, key=lambda item: (item.kind, natural(item.ref)))
    return Wires(branches=tuple(ordered), live=frozenset(live))


def _reached(bench: Bench, sources: Sources, branch: Branch) -> list[Branch]:
    found: dict[str, Branch] = {}
    queue = deque(joint for joint in (branch.a, branch.b) if sources.kind(joint) != "ground")
    seen = set(queue)
    while queue:
        if len(seen) > MOST_JOINTS:
            raise Unmeasurable(f"more than {MOST_JOINTS} nets hang on {branch.ref}")
        for item in bench.branches.get(queue.popleft(), ()):
            a, b = (ZERO if sources.kind(end) == "ground" else end for end in (item.a, item.b))
            found[item.ref] = Branch(ref=item.ref, kind=item.kind, a=a, b=b)
            for end in {a, b} - seen - {ZERO}:
                seen.add(end)
                queue.append(end)
    return list(found.values())


def without_dead_ends(branches: list[Branch], ends: set[str]) -> list[Branch]:
    """Branches without those that lead only to one another or to nothing."""
    while True:
        count: dict[str, int] = {}
        for item in branches:
            for joint in (item.a, item.b):
                count[joint] = count.get(joint, 0) + 1
        kept = [item for item in branches if all(count[j] > 1 or j == ZERO or j in ends for j in (item.a, item.b))]
        if len(kept) == len(branches):
            return kept
        branches = kept


def _joined(start: Iterable[str], branches: list[Branch]) -> set[str]:
    near: dict[str, list[str]] = {}
    for item in branches:
        near.setdefault(item.a, []).append(item.b)
        near.setdefault(item.b, []).append(item.a)
    found = set(start)
    queue = deque(found)
    while queue:
        for there in near.get(queue.popleft(), ()):
            if there not in found:
                found.add(there)
                queue.append(there)
    return found
