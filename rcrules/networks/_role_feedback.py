"""Feedback around an amplifier or a regulator, traced through small resistors and followers."""

from collections.abc import Iterator

from rcrules.design import Pin
from rcrules.networks._family import inverting
from rcrules.networks._fed import family_of, is_control, whole
from rcrules.networks._fed_words import FEEDBACK
from rcrules.networks._role import Judged
from rcrules.networks._role_parts import signal_above
from rcrules.networks._spot import Arm, Spot, View


def feedback(view: View, here: Spot) -> Judged | None:
    """A regulator's feedback or compensation pin, or an amplifier's inverting input with a way back from its output."""
    return _regulator(view, here) or _amplifier(view, here)


def _regulator(view: View, here: Spot) -> Judged | None:
    for pin in _pins_around(view, here):
        if _is_feedback_pin(view, pin) or _is_lifted(view, here, pin):
            why = f"{pin.key} closes a control loop here"
            alone = here.bare and all(len({arm.far for arm in arms}) == 1 for arms in (here.resistors, here.capacitors))
            return Judged(role="feedback", why=(why,), active=f"regulator {pin.ref} inside the loop", alone=alone)
    return None


def _pins_around(view: View, here: Spot) -> Iterator[Pin]:
    """Pins at the joint and behind stoppers; of a bare joint or a joint without a pin of its own also one arm away."""
    yield from view.pins_near(here)
    if any(view.kind(pin) == "ic" for pin in here.pins) or here.contacts:
        return
    for arm in here.resistors + here.capacitors:
        if arm.held is None:
            yield from view.at(arm.far).pins


def _is_feedback_pin(view: View, pin: Pin) -> bool:
    word, group = whole(pin), family_of(view, pin.ref)
    if view.kind(pin) != "ic" or word not in FEEDBACK or group in ("controller", "amplifier", "logic", "timer"):
        return False
    return group == "regulator" or word not in ("VC", "INV", "EA", "COMP") or len(view.pins_of(pin.ref)) <= 64


def _is_lifted(view: View, here: Spot, pin: Pin) -> bool:
    """The ground pin of a regulator that a resistor from the regulator's own output lifts: its adjust pin."""
    if view.kind(pin) != "ic" or family_of(view, pin.ref) != "regulator" or whole(pin) != "GND":
        return False
    supplied = [view.at(arm.far).pins for arm in here.resistors if arm.to == "supply"]
    return any(other.ref == pin.ref for pins in supplied for other in pins)


def _amplifier(view: View, here: Spot) -> Judged | None:
    for arm in here.resistors + here.capacitors:
        for pin in outputs(view, arm):
            if _closes(view, here, pin):
                return _loop(arm, pin)
            if arm in here.capacitors and _returns(here, pin):
                return _loop(arm, pin, sure=False)
    return _leg(view, here)


def _loop(arm: Arm, output: Pin, *, sure: bool = True) -> Judged:
    why = f"{arm.ref} from output {output.key} back to its {'inverting ' if sure else ''}input"
    return Judged(
        role="feedback", sure=sure, why=(why,), active=f"amplifier {output.ref} inside the loop", amplifier=output.ref
    )


def _returns(here: Spot, output: Pin) -> bool:
    """Whether an input of the same amplifier, of either sign, is at the joint itself."""
    return any(
        pin.ref == output.ref and inverting(pin.name) is not None and unit(pin) == unit(output) for pin in here.pins
    )


def outputs(view: View, arm: Arm) -> tuple[Pin, ...]:
    """IC pins that may drive the far joint of an arm."""
    if arm.to != "driven":
        return ()
    pins = view.at(arm.far).pins
    return tuple(
        pin for pin in pins if view.kind(pin) == "ic" and inverting(pin.name) is None and _amplifies(view, pin)
    )


def _amplifies(view: View, pin: Pin) -> bool:
    return family_of(view, pin.ref) in ("amplifier", "") and len(view.pins_of(pin.ref)) <= 16


def _closes(view: View, here: Spot, output: Pin) -> bool:
    """Whether an amplifier's inverting input is at the joint, one arm away, or behind a follower transistor."""
    near = {here.joint} | {arm.far for arm in here.resistors + here.capacitors if arm.held is None}
    inputs = [pin for pin in view.pins_of(output.ref) if _inverts(view, pin)]
    if near & {view.joint(pin) for pin in inputs if len(inputs) < 2 or unit(pin) == unit(output)}:
        return True
    return any(_follows(view, pin, output.ref) for pin in view.pins_near(here) if is_control(view, pin))


def unit(pin: Pin) -> int:
    """Which amplifier of a dual or quad package a pin belongs to, in the usual pinout: 1-3, 5-7, 8-10, 12-14."""
    number = int(pin.number) if pin.number.isdigit() else 0
    return next((unit for unit, last in enumerate((3, 7, 10, 14)) if number <= last), 4)


def _inverts(view: View, pin: Pin) -> bool:
    """By its name; without one, the input that a resistor or wire joins to the amplifier's output."""
    named = inverting(pin.name)
    if named is not None:
        return named
    if pin.name.strip("~ ") or pin.type in ("power-in", "output", "power-out"):
        return False
    return view.draft.held_joint(view.joint(pin)) is None and _joined_to_output(view, pin)


def _joined_to_output(view: View, pin: Pin) -> bool:
    joint = view.joint(pin)
    arms = view.at(joint).resistors
    return any(arm.to == "driven" and any(far.ref == pin.ref for far in view.at(arm.far).pins) for arm in arms)


def _follows(view: View, control: Pin, ref: str) -> bool:
    """Whether another pin of the transistor leads into a pin of the amplifier that is no supply."""
    for pin in view.pins_of(control.ref):
        joint = view.joint(pin)
        if pin.number == control.number or view.draft.held_joint(joint) is not None:
            continue
        if any(other.ref == ref and view.kind(other) == "ic" for other in view.at(joint).pins):
            return True
    return False


def _leg(view: View, here: Spot) -> Judged | None:
    """The joint of a series R-C from an inverting input to a fixed net."""
    if not here.bare or len({arm.far for arm in here.resistors}) != 1 or len({arm.far for arm in here.capacitors}) != 1:
        return None
    for arm in here.resistors + here.capacitors:
        for pin in view.at(arm.far).pins if arm.held is None else ():
            if inverting(pin.name) and _looped(view, pin):
                return _into(view, here, arm, pin)
    return None


def _into(view: View, here: Spot, arm: Arm, pin: Pin) -> Judged:
    """A series R-C into an inverting input: from a signal it couples into a virtual ground, from a rail it is a leg."""
    active = f"amplifier {pin.ref} inside the loop"
    other = next(leg for leg in here.resistors + here.capacitors if leg.far != arm.far)
    if other.to == "driven" or (other.held is None and signal_above(view, other.far, here.joint)):
        why = f"{other.ref} and {arm.ref} couple {other.far} into the virtual ground at {pin.key}"
        return Judged(role="high-pass", why=(why,), active=active, amplifier=pin.ref, alone=True)
    return Judged(
        role="feedback", why=(f"{arm.ref} leads to inverting input {pin.key}",), active=active, amplifier=pin.ref
    )


def _looped(view: View, pin: Pin) -> bool:
    here = view.at(view.joint(pin))
    return any(far.ref == pin.ref for arm in here.resistors + here.capacitors for far in outputs(view, arm))
