"""Two held nets bridged by resistors and capacitors: chassis bond, bleeder, sense shunt."""

from collections.abc import Iterable, Iterator

from rcrules.names import tokens
from rcrules.networks._draft import Draft
from rcrules.networks._fed_words import CHASSIS
from rcrules.networks._model import Branch, Node
from rcrules.networks._role import SURE, UNSURE
from rcrules.networks._role_lines import SHUNT
from rcrules.networks._role_words import arm_text
from rcrules.networks._spot import Arm, View, least
from rcrules.parts import Known


def bridged(draft: Draft) -> tuple[Node, ...]:
    """One node for each two held joints with both resistors and capacitors between them, in order of name."""
    view = View(draft)
    nodes = (_node(view, *pair, branches) for pair, branches in sorted(_pairs(draft).items()))
    return tuple(node for node in nodes if node is not None)


def _pairs(draft: Draft) -> dict[tuple[str, str], list[Branch]]:
    """Branches by the two held joints they lie between; each branch once."""
    pairs: dict[tuple[str, str], list[Branch]] = {}
    for joint, branches in draft.branches.items():
        for branch in branches:
            if branch.a == joint and all(draft.held_joint(end) for end in (branch.a, branch.b)):
                pairs.setdefault((min(branch.a, branch.b), max(branch.a, branch.b)), []).append(branch)
    return {pair: branches for pair, branches in pairs.items() if len({branch.kind for branch in branches}) == 2}


def _node(view: View, one: str, other: str, branches: Iterable[Branch]) -> Node | None:
    high, low = _in_order(view, one, other)
    arms = tuple(sorted(_arms(view, low, branches), key=lambda pair: pair[1] != "resistor"))
    role = _role(view, high, low, [arm for arm, kind in arms if kind == "resistor"])
    if role is None:
        return None
    name, certainty, why, active = role
    return Node(
        net=f"{high} <-> {low}",
        joint=high,
        across=low,
        role=name,
        certainty=certainty,
        evidence=(*(arm_text(view, arm) for arm, _ in arms), *why),
        parts=tuple(arm.ref for arm, _ in arms),
        fed_from=(high,),
        feeds=(),
        active=active,
    )


def _arms(view: View, low: str, branches: Iterable[Branch]) -> Iterator[tuple[Arm, str]]:
    for branch in branches:
        part = view.draft.parts.get(branch.ref)
        value = part.value.si if part is not None and isinstance(part.value, Known) else None
        yield Arm(ref=branch.ref, far=low, value=value, held=view.draft.held_joint(low)), branch.kind


def _in_order(view: View, one: str, other: str) -> tuple[str, str]:
    """The supply before the ground, the chassis before the ground."""
    rank = [(_kind(view, joint) == "ground", not _is_chassis(view, joint), joint) for joint in (one, other)]
    return (one, other) if rank[0] <= rank[1] else (other, one)


def _role(view: View, high: str, low: str, resistors: list[Arm]) -> tuple[str, str, tuple[str, ...], str | None] | None:
    kinds = {_kind(view, high), _kind(view, low)}
    if "driven" in kinds or high in view.draft.local:
        return None
    if least(resistors) <= SHUNT:
        return "sense-shunt", UNSURE, ("low resistance between held nets",), "a current feeds it, not a voltage"
    if kinds == {"ground"}:
        chassis = _is_chassis(view, high)
        why = f"{high} is the chassis" if chassis else "between two grounds"
        return "chassis-bond", SURE if chassis else UNSURE, (why,), None
    return "bleeder", SURE if "ground" in kinds else UNSURE, (f"discharges {high} when its source is gone",), None


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
