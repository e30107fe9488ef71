"""Evidence as short plain sentences."""

from rcrules.design import Pin
from rcrules.networks._fed import kind_fed
from rcrules.networks._spot import Arm, Spot, View
from rcrules.parts import Known
from rcrules.quantities import show


def arm_text(view: View, arm: Arm) -> str:
    """``R12 10 kΩ to +3V3``; where the value is not known its text, if any."""
    part = view.draft.parts.get(arm.ref)
    if arm.behind and arm.value is not None:
        return f"{' + '.join((arm.ref, *arm.behind))} {show(arm.value, 'Ω')} to {arm.far}"
    if part is not None and isinstance(part.value, Known):
        unit = "F" if part.kind in ("capacitor", "capacitor-array") else "Ω"
        return f"{arm.ref} {show(part.value.si, unit)} to {arm.far}"
    text = part.text.strip() if part is not None else ""
    return f"{arm.ref} {text} to {arm.far}" if text else f"{arm.ref} (value not known) to {arm.far}"


def arms_text(view: View, here: Spot, parts: tuple[str, ...]) -> tuple[str, ...]:
    """One sentence for each arm at the joint that sets its time."""
    return tuple(arm_text(view, arm) for arm in here.resistors + here.capacitors if arm.ref in parts)


def fed_text(view: View, pins: tuple[Pin, ...]) -> tuple[str, ...]:
    """``feeds U3.NRST (reset)``, the first few; nothing where no pin is fed."""
    named = [f"{pin.key} ({kind_fed(view, pin)})" for pin in pins]
    more = [f"and {len(named) - 4} more"] if len(named) > 4 else []
    return (f"feeds {', '.join(named[:4] + more)}",) if named else ()
