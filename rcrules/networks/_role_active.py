"""Roles in which an active part shares the work: oscillator, bootstrap, timing, gate drive."""

from rcrules.design import Pin
from rcrules.names import tokens
from rcrules.networks._fed import family_of, is_control, whole
from rcrules.networks._fed_words import BOOT, SHORT_TIMING, SWITCH, TIMING
from rcrules.networks._role import Judged
from rcrules.networks._role_parts import LIGHT
from rcrules.networks._spot import Arm, Spot, View, least

WINDINGS = ("inductor", "transformer")


def oscillator(view: View, here: Spot) -> Judged | None:
    """A crystal or resonator at the joint that is no oscillator module (no pin on a supply)."""
    for pin in here.pins:
        if view.kind(pin) == "crystal" and not _supplied(view, pin.ref):
            why = f"crystal {pin.ref} at the node"
            return Judged(
                role="oscillator", why=(why,), active=f"crystal {pin.ref} oscillates with the part that drives it"
            )
    return None


def bootstrap(view: View, here: Spot) -> Judged | None:
    """A series capacitor from a switch node to a boot pin, directly or through a small resistor."""
    pins = view.pins_near(here)
    boot = next((pin for pin in pins if view.kind(pin) == "ic" and whole(pin) in BOOT), None)
    for arm in here.capacitors:
        if arm.to in ("ground", "supply"):
            continue
        owner = _switch_owner(view, arm.far, boot)
        if boot is not None and owner is not None:
            return Judged(
                role="bootstrap",
                why=(f"{arm.ref} from switch node {arm.far} to boot pin {boot.key}",),
                active=f"{owner} pumps the capacitor from its switch node",
            )
    return None


def timing(view: View, here: Spot) -> Judged | None:
    """A timer's or soft-start pin, or a Schmitt gate with its output back at its own input."""
    for pin in view.pins_near(here):
        if view.kind(pin) == "ic" and _is_timing_pin(view, pin):
            return Judged(
                role="timing",
                why=(f"timing pin {pin.key}",),
                active=f"{pin.ref} charges or discharges the capacitor by itself",
            )
    return _gate_oscillator(view, here)


def gate_drive(view: View, here: Spot) -> Judged | None:
    """A gate or base with resistor and capacitor and no IC input beside it."""
    control = next((pin for pin in here.pins if is_control(view, pin)), None)
    if control is None or view.has_kind(here, "ic", "connector") or not here.resistors:
        return None
    sure = tokens(control.name)[:1] in (("G",), ("GATE",))
    drives, switches = _drivers(view, here), _switches(view, here)
    limit = LIGHT * least(drives) if drives else float("inf")
    light = [arm for arm in here.resistors if arm not in drives and not switches and (arm.value or 0.0) >= limit]
    only = tuple(arm for arm in here.resistors + here.capacitors if arm not in light)
    return Judged(
        role="gate-drive", sure=sure, why=(f"drives {control.key}",), also=(*drives, *switches),
        only=only if light else None,
    )  # fmt: skip


def _drivers(view: View, here: Spot) -> tuple[Arm, ...]:
    """Resistors from a driven net or from an IC's pin."""
    return tuple(
        arm
        for arm in here.resistors
        if arm.to == "driven" or (arm.held is None and view.has_kind(view.at(arm.far), "ic", "connector"))
    )


def _switches(view: View, here: Spot) -> tuple[Arm, ...]:
    """Resistors to the channel of another transistor."""
    return tuple(
        arm
        for arm in here.resistors
        if not arm.fixed
        and any(view.kind(pin) == "transistor" and not is_control(view, pin) for pin in view.at(arm.far).pins)
    )


def _supplied(view: View, ref: str) -> bool:
    return any((held := view.draft.held_joint(view.joint(pin))) and held.kind == "supply" for pin in view.pins_of(ref))


def _switch_owner(view: View, joint: str, boot: Pin | None) -> str | None:
    """The part that switches the joint: the boot pin's own, or one with a switch pin beside a coil or a transistor."""
    pins = view.at(joint).pins
    for pin in pins:
        if view.kind(pin) == "ic" and (whole(pin) in SWITCH or (boot is not None and pin.ref == boot.ref)):
            return pin.ref
    return next((pin.ref for pin in pins if view.kind(pin) in (*WINDINGS, "transistor")), None)


def _is_timing_pin(view: View, pin: Pin) -> bool:
    group = family_of(view, pin.ref)
    if whole(pin) not in TIMING or group in ("controller", "amplifier"):
        return False
    strict = whole(pin) in SHORT_TIMING
    return (
        not strict
        or group in ("regulator", "timer")
        or (len(view.pins_of(pin.ref)) <= 24 and pin.type != "bidirectional")
    )


def _gate_oscillator(view: View, here: Spot) -> Judged | None:
    for arm in here.resistors:
        if arm.to != "driven" or not any(other.fixed for other in here.capacitors):
            continue
        for pin in here.pins:
            back = next((out for out in view.at(arm.far).pins if out.ref == pin.ref and _same_gate(out, pin)), None)
            if back is not None and family_of(view, pin.ref) == "logic":
                why = f"{arm.ref} from {back.key} back to {pin.key} of the same gate"
                return Judged(role="timing", why=(why,), active=f"{pin.ref} oscillates with the resistor and capacitor")
    return None


def _same_gate(one: Pin, other: Pin) -> bool:
    first, second = (next((word for word in tokens(pin.name) if word.isdigit()), "") for pin in (one, other))
    if first and second:
        return first == second
    numbers = [int(pin.number) for pin in (one, other) if pin.number.isdigit()]
    return len(numbers) == 2 and abs(numbers[0] - numbers[1]) == 1
