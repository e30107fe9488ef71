"""What became of each resistor and capacitor."""

import re
from collections.abc import Iterable, Mapping
from typing import Final

from rcrules.design import natural
from rcrules.networks._draft import Draft
from rcrules.networks._fed import whole
from rcrules.networks._fed_words import BOOT
from rcrules.networks._links import branches, joined
from rcrules.networks._model import Branch, Network
from rcrules.parts import RatedPart, Unknown

_RC: Final = re.compile(r"[RC]\d")
_KINDS: Final = ("resistor", "capacitor")
_HELD: Final = {"ground": "ground", "supply": "a supply", "driven": "a driven net"}
OPEN_END: Final = "one end is open"
"""The reason of a part that carries no current, because nothing else is at one of its ends."""
BOOTSTRAP: Final = "bootstrap capacitor"
"""How the reason of a capacitor between a switch node and a boot pin begins."""

Class = tuple[str, str]
"""Coverage class and the reason, empty where the class says it all."""


def coverage(draft: Draft, networks: Iterable[Network]) -> tuple[dict[str, str], dict[str, str]]:
    """Class of each resistor and capacitor, and the reason where it needs saying, by reference in order."""
    used = {item.ref: network.id for network in networks for item in network.branches}
    counted = [ref for ref, part in draft.parts.items() if _RC.match(ref) or part.kind in _KINDS]
    placed = _placed(draft)
    classes = {ref: _class(draft, draft.parts[ref], used, placed) for ref in sorted(counted, key=natural)}
    return {ref: name for ref, (name, _) in classes.items()}, {ref: why for ref, (_, why) in classes.items() if why}


def _placed(draft: Draft) -> dict[str, Branch]:
    return {item.ref: item for items in draft.branches.values() for item in items}


def _class(draft: Draft, part: RatedPart, used: Mapping[str, str], placed: Mapping[str, Branch]) -> Class:
    if not part.fitted:
        return "not_fitted", part.fitted_why
    if part.kind in _KINDS and isinstance(part.value, Unknown):
        return "unreadable", part.value.why
    if part.ref in used:
        return "network", ""
    item = placed.get(part.ref)
    return _unplaced(draft, part) if item is None else _between(draft, item)


def _unplaced(draft: Draft, part: RatedPart) -> Class:
    """A part that is no branch between two joints."""
    if part.kind not in _KINDS:
        return "elsewhere", f"counted as {part.kind}"
    if not part.part.pins:
        return "elsewhere", "on no net" if draft.design.nets else "no netlist"
    if any(True for _ in joined(part, draft.project)):
        return "elsewhere", "joins its nets (0 Ω)"
    if not any(True for _ in branches(part)):
        return "elsewhere", "not connected to two nets"
    apart = any(draft.joints[one.net] != draft.joints[other.net] for _, one, other in branches(part))
    return "elsewhere", OPEN_END if apart else "both ends on one net at DC"


def _between(draft: Draft, item: Branch) -> Class:
    """A branch that is in no network with a node."""
    ends = [draft.held_joint(joint) for joint in (item.a, item.b)]
    kinds = [_HELD[kind] for kind in _HELD for held in ends if held is not None and held.kind == kind]
    if len(kinds) == 2:
        rails = all(held is not None and held.kind != "driven" for held in ends)
        if item.kind == "capacitor":
            return ("decoupling", "") if rails else ("decoupling", f"between {kinds[0]} and {kinds[1]}")
        return "elsewhere", f"between {kinds[0]} and {kinds[1]}"
    return "elsewhere", _lonely(draft, item, kinds)


def _lonely(draft: Draft, item: Branch, kinds: list[str]) -> str:
    """Why a branch at a free joint makes no node: nothing of the other kind acts with it."""
    free = [joint for joint in (item.a, item.b) if draft.held_joint(joint) is None]
    boot = [pin.key for joint in free for pin in draft.pins_at(joint) if whole(pin) in BOOT]
    if item.kind == "capacitor" and boot:
        return f"{BOOTSTRAP} at {boot[0]}"
    others = {pin.ref: draft.kind_of(pin.ref) for joint in free for pin in draft.pins_at(joint) if pin.ref != item.ref}
    for kind, why in (
        ("crystal", "at a crystal"),
        ("diode", "at a diode"),
        ("transistor", "at a transistor"),
        ("contact", "at a contact"),
    ):
        if kind in others.values():
            return why
    if item.kind == "resistor":
        link = "in series with" if kinds == [_HELD["driven"]] else "pull to"
        return f"{link} {kinds[0]}, no capacitor with it" if kinds else "no capacitor with it"
    return "no resistor with it"
