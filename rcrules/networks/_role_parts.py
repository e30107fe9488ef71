"""Which resistors and capacitors set the time at a joint: its own, and those on the way up to the sources."""

from collections import deque
from collections.abc import Iterable
from dataclasses import dataclass, field
from heapq import heappop, heappush
from typing import Final

from rcrules.networks._role import Judged
from rcrules.networks._role_legs import cr_leg, rc_leg
from rcrules.networks._spot import SMALL, Arm, Spot, View, greatest, least

FAR: Final = 64
"""Joints looked at on the way to a source; a way that is longer counts as one that arrives."""
LIGHT: Final = 10.0
"""A load of this many times the resistance that feeds a joint does not set its time."""


@dataclass(slots=True)
class Ways:
    """What the walk from a joint up to its sources met."""

    resistors: dict[str, Arm] = field(default_factory=dict)
    capacitors: dict[str, Arm] = field(default_factory=dict)
    sources: dict[str, str] = field(default_factory=dict)
    """Held joint that feeds through a resistor -> its kind."""
    visited: set[str] = field(default_factory=set)

    @property
    def parts(self) -> tuple[str, ...]:
        """References, resistors first."""
        series = [ref for arm in self.resistors.values() for ref in (arm.ref, *arm.behind)]
        return (*dict.fromkeys(series), *self.capacitors)


def ways(view: View, here: Spot, judged: Judged) -> Ways:
    """All parts that set the time at the joint in its role."""
    found = Ways(visited={here.joint})
    if judged.alone:
        found.resistors.update((arm.ref, arm) for arm in here.resistors)
        found.capacitors.update((arm.ref, arm) for arm in here.capacitors)
        found.sources.update((arm.far, arm.to) for arm in here.resistors + here.capacitors if arm.held is not None)
        return found
    chosen = None if judged.only is None else {arm.ref for arm in judged.only}
    own = [
        arm for arm in here.resistors if (chosen is None and _acts(view, here, arm)) or (chosen and arm.ref in chosen)
    ]
    for arm in own or here.resistors:
        stiff = judged.role == "high-pass" and _is_stiff(view, here, arm)
        _take(view, found, here, arm, onward=not stiff)
    found.resistors.update((arm.ref, arm) for arm in judged.also)
    _take_capacitors(view, found, here, [arm for arm in here.capacitors if chosen is None or arm.ref in chosen])
    return found


def _take_capacitors(view: View, found: Ways, here: Spot, arms: Iterable[Arm]) -> None:
    for arm in arms:
        if arm.held is not None:
            found.capacitors.setdefault(arm.ref, arm)
        elif signal_above(view, arm.far, here.joint):
            found.capacitors.setdefault(arm.ref, arm)
            _climb(view, found, arm.far, here.joint)
        elif not _light(view, here, arm):
            found.capacitors.setdefault(arm.ref, arm)
            found.resistors.update((leg.ref, leg) for leg in cr_leg(view, arm, here.joint))


def ends(view: View, start: str, but: str) -> dict[str, float]:
    """Held joints that resistors reach from a free joint without passing ``but``, with the resistance to each. [Ω]

    A way of more than FAR joints counts as one that arrives: the start stands for its end.
    """
    if (start, but) not in view.ends:
        view.ends[start, but] = _ends(view, start, but)
    return view.ends[start, but]


def _ends(view: View, start: str, but: str) -> dict[str, float]:
    found: dict[str, float] = {}
    best, todo = {start: 0.0}, [(0.0, start)]
    while todo and len(best) < FAR:
        ohms, joint = heappop(todo)
        if view.at(joint).hub:
            found[joint] = min(found.get(joint, ohms), ohms)
            continue
        for arm in view.at(joint).resistors:
            total = ohms + (arm.value or 0.0)
            if arm.held is not None:
                found[arm.far] = min(found.get(arm.far, total), total)
            elif arm.far != but and total < best.get(arm.far, float("inf")):
                best[arm.far] = total
                heappush(todo, (total, arm.far))
    return found if found or not todo else {start: 0.0}


def kinds_at(view: View, arm: Arm, but: str) -> set[str]:
    """What an arm leads to: ``ground``, ``supply``, ``driven``; ways much longer than the shortest do not count."""
    if arm.held is not None:
        return {arm.to}
    held = (view.draft.held_joint(joint) for joint in strong_ends(view, arm.far, but))
    return {one.kind if one is not None else "free" for one in held}


def strong_ends(view: View, start: str, but: str) -> tuple[str, ...]:
    """The held joints that resistors reach, but for those much farther than the nearest."""
    reached = ends(view, start, but)
    limit = LIGHT * min(reached.values(), default=0.0)
    return tuple(joint for joint, ohms in reached.items() if ohms <= limit or limit == 0.0)


def signal_above(view: View, start: str, but: str) -> bool:
    """Whether resistors or capacitors reach a driven net from a free joint without passing ``but``."""
    if (start, but) not in view.signals:
        view.signals[start, but] = _signal_above(view, start, but)
    return view.signals[start, but]


def _signal_above(view: View, start: str, but: str) -> bool:
    seen, todo = {but, start}, deque([start])
    while todo and len(seen) < FAR:
        joint = todo.popleft()
        here = view.at(joint)
        for arm in () if view.at(joint).hub else here.resistors + here.capacitors:
            if arm.to == "driven":
                return True
            if arm.held is None and arm.far not in seen:
                seen.add(arm.far)
                todo.append(arm.far)
    return False


def way(view: View, arm: Arm, but: str) -> float:
    """Resistance through an arm to the nearest held joint, infinite without a way. [Ω]"""
    beyond = 0.0 if arm.held is not None else min(ends(view, arm.far, but).values(), default=float("inf"))
    return (arm.value or 0.0) + beyond


def least_way(view: View, arms: Iterable[Arm], but: str) -> float:
    """The least resistance through any of the arms to a held joint, infinite where there is none. [Ω]"""
    return min((way(view, arm, but) for arm in arms), default=float("inf"))


def _kind(view: View, joint: str) -> str:
    held = view.draft.held_joint(joint)
    return held.kind if held is not None else "free"


def _acts(view: View, here: Spot, arm: Arm) -> bool:
    if arm.held is not None:
        return not (here.local and _is_load(here, arm))
    if rc_leg(view, arm, here.joint) or view.at(arm.far).contacts:
        return True
    return bool(ends(view, arm.far, here.joint)) and not (here.local or _is_heavy(view, here, arm))


def _is_load(here: Spot, arm: Arm) -> bool:
    return arm.to == "ground" or (arm.to == "driven" and any(other.to == "supply" for other in here.resistors))


def _is_heavy(view: View, here: Spot, arm: Arm) -> bool:
    """Whether a resistor into a free joint is a light load beside what feeds this joint from held ones."""
    feeding = [other.value for other in here.resistors if other.held is not None and other.value]
    return bool(feeding) and way(view, arm, here.joint) >= LIGHT * min(feeding)


def _is_stiff(view: View, here: Spot, arm: Arm) -> bool:
    """Whether a capacitor to a fixed net much larger than the coupling one keeps the bias behind a resistor."""
    if arm.held is not None:
        return False
    return least(leg for leg in view.at(arm.far).capacitors if leg.fixed) >= LIGHT * greatest(here.capacitors) and any(
        leg.fixed for leg in view.at(arm.far).capacitors
    )


def _is_negligible(view: View, arm: Arm, below: Arm) -> bool:
    """Whether a resistor to a held net is a shunt in a transistor's lead, far below the one that taps it."""
    small = arm.value is not None and below.value is not None and arm.value <= SMALL * below.value
    return small and arm.held is not None and view.has_kind(view.at(below.far), "transistor")


def _take(view: View, found: Ways, here: Spot, arm: Arm, *, onward: bool) -> None:
    found.resistors.setdefault(arm.ref, arm)
    if arm.held is not None:
        found.sources.setdefault(arm.far, arm.to)
        return
    if any(_is_negligible(view, leg, arm) for leg in view.at(arm.far).resistors) or not onward:
        found.sources.update((joint, _kind(view, joint)) for joint in strong_ends(view, arm.far, here.joint))
        return
    for leg in rc_leg(view, arm, here.joint):
        found.capacitors.setdefault(leg.ref, leg)
    if ends(view, arm.far, here.joint):
        _climb(view, found, arm.far, here.joint)


def _climb(view: View, found: Ways, joint: str, below: str) -> None:
    """Take what stands between a joint and its sources."""
    todo = [(joint, below)]
    while todo and len(found.visited) < FAR:
        joint, below = todo.pop()
        if joint in found.visited:
            continue
        found.visited.add(joint)
        if view.at(joint).hub:
            continue
        lowest = min((way(view, arm, joint) for arm in view.at(joint).resistors), default=0.0)
        for arm in view.at(joint).resistors:
            if arm.held is not None or way(view, arm, joint) < LIGHT * lowest or lowest == 0.0:
                _climb_resistor(view, found, arm, joint, todo)
        for arm in view.at(joint).capacitors:
            _climb_capacitor(view, found, arm, joint, todo)


def _climb_resistor(view: View, found: Ways, arm: Arm, joint: str, todo: list[tuple[str, str]]) -> None:
    if arm.far in found.visited:
        return
    if arm.held is not None:
        found.sources.setdefault(arm.far, arm.to)
    elif not ends(view, arm.far, joint):
        return
    else:
        todo.append((arm.far, joint))
    found.resistors.setdefault(arm.ref, arm)


def _climb_capacitor(view: View, found: Ways, arm: Arm, joint: str, todo: list[tuple[str, str]]) -> None:
    if arm.far in found.visited:
        return
    if arm.held is None:
        if not signal_above(view, arm.far, joint):
            return
        todo.append((arm.far, joint))
    found.capacitors.setdefault(arm.ref, arm)


def _light(view: View, here: Spot, arm: Arm) -> bool:
    """Whether a coupling capacitor leads only to a load that hardly acts on this joint."""
    if view.at(arm.far).pins and not view.at(arm.far).resistors:
        return False
    beyond = min(ends(view, arm.far, here.joint).values(), default=float("inf"))
    own = min((way(view, leg, here.joint) for leg in here.resistors), default=0.0)
    return own != float("inf") and beyond >= LIGHT * own
