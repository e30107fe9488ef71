"""Two held nets bridged by resistors and capacitors: chassis bond, bleeder, sense shunt."""

from collections.abc import Iterator
from typing import Final

from rcrules.names import tokens
from rcrules.networks._draft import Draft
from rcrules.networks._fed_words import CHASSIS
from rcrules.networks._model import Node
from rcrules.networks._role import SURE, UNSURE
from rcrules.networks._role_lines import SHUNT
from rcrules.networks._role_words import arm_text
from rcrules.networks._spot import Arm, View, chain, least

BLEEDS: Final = 10e3
"""From this resistance on a resistor between two lines from outside discharges the capacitor beside it. [Ω]"""
_INLET: Final = ("connector", "inductor", "transformer", "other")


def bridged(draft: Draft) -> tuple[Node, ...]:
    """One node for each two held joints with both resistors and capacitors between them, in order of name."""
    view = View(draft)
    nodes = (_node(view, *pair) for pair in sorted(_pairs(draft)))
    return tuple(node for node in nodes if node is not None)


def _pairs(draft: Draft) -> Iterator[tuple[str, str]]:
    """Two held joints with resistors, also several in series, and capacitors between them."""
    kinds: dict[tuple[str, str], set[str]] = {}
    for joint, branches in draft.branches.items():
        for branch in branches if draft.held_joint(joint) else ():
            _, far = chain(draft, branch, joint)
            if joint < far and draft.held_joint(far):
                kinds.setdefault((joint, far), set()).add(branch.kind)
    return (pair for pair, found in kinds.items() if len(found) == 2)


def _node(view: View, one: str, other: str) -> Node | None:
    high, low = _in_order(view, one, other)
    here = view.at(high)
    resistors, capacitors = ([arm for arm in arms if arm.far == low] for arms in (here.resistors, here.capacitors))
    role = _role(view, high, low, resistors)
    if role is None:
        return None
    name, certainty, why, active = role
    return Node(
        net=f"{high} <-> {low}",
        joint=high,
        across=low,
        role=name,
        certainty=certainty,
        evidence=(*(arm_text(view, arm) for arm in resistors + capacitors), *why),
        parts=tuple(ref for arm in resistors + capacitors for ref in (arm.ref, *arm.behind)),
        fed_from=(high,),
        feeds=(),
        active=active,
    )


def _in_order(view: View, one: str, other: str) -> tuple[str, str]:
    """The supply before the ground, the chassis before the ground."""
    rank = [(_kind(view, joint) == "ground", not _is_chassis(view, joint), joint) for joint in (one, other)]
    return (one, other) if rank[0] <= rank[1] else (other, one)


def _role(view: View, high: str, low: str, resistors: list[Arm]) -> tuple[str, str, tuple[str, ...], str | None] | None:
    kinds = {_kind(view, high), _kind(view, low)}
    if kinds == {"driven"} and least(resistors) >= BLEEDS and _from_outside(view, high, low):
        return "bleeder", UNSURE, (f"discharges {high} when its source is gone",), None
    if "driven" in kinds or high in view.draft.local:
        return None
    if least(resistors) <= SHUNT:
        return "sense-shunt", UNSURE, ("low resistance between held nets",), "a current feeds it, not a voltage"
    if kinds == {"ground"}:
        chassis = _is_chassis(view, high)
        why = f"{high} is the chassis" if chassis else "between two grounds"
        return "chassis-bond", SURE if chassis else UNSURE, (why,), None
    return "bleeder", SURE if "ground" in kinds else UNSURE, (f"discharges {high} when its source is gone",), None


def _from_outside(view: View, *joints: str) -> bool:
    """Whether nothing but connectors, filters and protection holds the joints, such as a mains inlet."""
    pins = [pin for joint in joints for pin in view.at(joint).pins]
    return any(view.kind(pin) == "connector" for pin in pins) and all(view.kind(pin) in _INLET for pin in pins)


def _kind(view: View, joint: str) -> str:
    held = view.draft.held_joint(joint)
    return held.kind if held is not None else ""


def _is_chassis(view: View, joint: str) -> bool:
    """By pins of shells, shields and mounting holes, and by its name."""
    if set(tokens(joint)) & CHASSIS:
        return True
    pins = view.draft.pins_at(joint)
    if len(pins) > 64:
        return False
    return any(set(tokens(pin.name)) & CHASSIS or view.kind(pin) == "mechanical" for pin in pins)
