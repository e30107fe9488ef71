"""Capacitors in series whose middle no resistor holds: leakage alone divides the voltage, and each may take it all."""

from dataclasses import replace

from rcrules.events._bench import Bench
from rcrules.networks import OPEN_END, Branch
from rcrules.parts import RatedPart


def alone_between(bench: Bench, part: RatedPart) -> tuple[str, str] | None:
    """The two held joints between which a capacitor is in series with others and nothing else, + side first.

    None where it is not: an end of it is open, a resistor or anything but capacitors hangs on the string, or more than
    two held joints are reached.
    """
    branch = bench.branch(part)
    if branch is None or part.kind != "capacitor" or bench.board.reasons.get(part.ref) == OPEN_END:
        return None
    if all(bench.held(joint) is not None for joint in (branch.a, branch.b)):
        return None
    first, second = _beyond(bench, branch, branch.a), _beyond(bench, branch, branch.b)
    return (first, second) if first is not None and second is not None and first != second else None


def between(branch: Branch, ends: tuple[str, str]) -> Branch:
    """The branch as if it lay between these joints alone."""
    return replace(branch, a=ends[0], b=ends[1])


def _beyond(bench: Bench, branch: Branch, end: str) -> str | None:
    """The held joint that capacitors alone lead to from one end of a branch; None = no or no single one."""
    waiting, seen, reached = [end], {branch.a, branch.b}, set()
    while waiting:
        joint = waiting.pop()
        if bench.held(joint) is not None:
            reached.add(joint)
            continue
        if bench.pins(joint):
            return None
        for item in bench.branches.get(joint, ()):
            if item.kind != "capacitor":
                return None
            there = item.b if item.a == joint else item.a
            if there not in seen:
                seen.add(there)
                waiting.append(there)
    return reached.pop() if len(reached) == 1 else None
