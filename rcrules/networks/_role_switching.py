"""Roles around contacts and switched nets: debounce and snubber."""

from rcrules.networks._fed import whole
from rcrules.networks._fed_words import SWITCH
from rcrules.networks._model import Contact
from rcrules.networks._role import Judged
from rcrules.networks._spot import Arm, Spot, View, greatest

COILS = ("inductor", "transformer", "transistor")
ADDED_ESR = 3.0
"""Up to this resistance a resistor in series with a regulator's output capacitor is there for its stability. [Ω]"""
LINE = (30.0, 250.0)
"""Resistances that match a line. [Ω]"""


def debounce(view: View, here: Spot) -> Judged | None:
    """A contact at the joint, or behind a resistor or diode, with a resistor to the opposite level."""
    if here.local:
        return None
    contacts = list(here.contacts)
    behind = [arm for arm in here.resistors if arm.held is None and _contacts_behind(view, arm.far, here.joint)]
    reached = contacts + [contact for arm in behind for contact in _contacts_behind(view, arm.far, here.joint)]
    if not contacts:
        reached += [contact for joint in _across_diodes(view, here) for contact in view.at(joint).contacts]
    if not reached or not here.capacitors or _across_contact(view, here) or _differentiates(view, here):
        return None
    pulled = any(arm.fixed for at in (here, *(view.at(arm.far) for arm in behind)) for arm in at.resistors)
    names = ", ".join(sorted({contact.ref for contact in reached}))
    why = f"contact {names} " + ("at the node" if contacts else "behind a resistor or diode")
    near = bool(contacts) or any(view.at(arm.far).contacts for arm in behind)
    return Judged(role="debounce", sure=near and pulled, why=(why,), also=tuple(behind))


def snubber(view: View, here: Spot) -> Judged | None:
    """A resistor and a capacitor in series with nothing else at their joint."""
    if not here.bare or not (here.resistors and here.capacitors):
        return None
    ends = {arm.far for arm in here.resistors}, {arm.far for arm in here.capacitors}
    if any(len(end) != 1 for end in ends) or ends[0] == ends[1]:
        return None
    contact = _across_contact(view, here)
    if contact is not None:
        return Judged(role="snubber", why=(f"in series across contact {contact}",), alone=True)
    return _series(view, here.resistors[0], here.capacitors[0], greatest(here.resistors))


def _differentiates(view: View, here: Spot) -> bool:
    """Whether all capacitors come from outputs of other parts: they pass edges on, contact or not."""
    own = {pin.ref for pin in view.pins_near(here)}
    return all(
        arm.held is not None
        and arm.held.kind == "driven"
        and arm.held.sure
        and own.isdisjoint(pin.ref for pin in view.at(arm.far).pins)
        for arm in here.capacitors
    )


def _across_contact(view: View, here: Spot) -> str | None:
    """The contact across a series R-C whose joint holds nothing else."""
    ends = {arm.far for arm in here.resistors}, {arm.far for arm in here.capacitors}
    if not here.bare or len(ends[0]) != 1 or len(ends[1]) != 1:
        return None
    both = ends[0] | ends[1]
    across = (contact for contact in view.at(min(ends[0])).contacts if {contact.a, contact.b} == both)
    return next((contact.ref for contact in across), None)


def _series(view: View, resistor: Arm, capacitor: Arm, ohms: float) -> Judged | None:
    where = f"in series between {resistor.far} and {capacitor.far}, nothing else at the joint"
    if any(_is_switched(view, arm) for arm in (resistor, capacitor)):
        return Judged(role="snubber", why=(where, "one end is a switched net"), alone=True)
    if resistor.held is None:
        return _onward(resistor, capacitor, where, ohms)
    if resistor.to == "driven" and capacitor.held is None:
        return Judged(role="other", sure=False, why=(where, f"couples into {capacitor.far}"), alone=True)
    if resistor.fixed and capacitor.fixed and 0 < ohms <= ADDED_ESR:
        return Judged(
            role="other", sure=False, why=(where, "adds series resistance to an output capacitor"), alone=True
        )
    if LINE[0] <= ohms <= LINE[1] and resistor.to == "driven" and _is_line(view, resistor):
        return Judged(
            role="termination", sure=not capacitor.fixed, why=(where, "ends a line for its edges"), alone=True
        )
    if resistor.to == "driven" and capacitor.fixed and ohms > LINE[1]:
        return None
    return Judged(role="snubber", sure=False, why=(where,), alone=True)


def _onward(resistor: Arm, capacitor: Arm, where: str, ohms: float) -> Judged | None:
    """A capacitor and a resistor in series into a free joint: coupling from a signal, or a leg to a fixed net."""
    if capacitor.held is None:
        return None
    if capacitor.to == "driven":
        why = f"{capacitor.ref} couples {capacitor.far} onward"
        return Judged(role="high-pass", sure=False, why=(why,), alone=True)
    role = "snubber" if 0 < ohms <= LINE[1] else "other"
    return Judged(role=role, sure=False, why=(where, f"loads the node {resistor.far}"), alone=True)


def _is_switched(view: View, arm: Arm) -> bool:
    if arm.fixed:
        return False
    pins = view.at(arm.far).pins
    return any(view.kind(pin) in COILS or (view.kind(pin) == "ic" and whole(pin) in SWITCH) for pin in pins)


def _is_line(view: View, arm: Arm) -> bool:
    """Whether the far joint is a signal between two parts."""
    return len({pin.ref for pin in view.at(arm.far).pins}) >= 2


def _contacts_behind(view: View, joint: str, but: str) -> tuple[Contact, ...]:
    """Contacts at a free joint that has no capacitor of its own, or across its diodes."""
    far = view.at(joint)
    if any(arm.far != but for arm in far.capacitors):
        return ()
    return far.contacts + tuple(contact for other in _across_diodes(view, far) for contact in view.at(other).contacts)


def _across_diodes(view: View, here: Spot) -> list[str]:
    """Free joints on the other side of diodes."""
    others = [diode.anode if diode.cathode == here.joint else diode.cathode for diode in here.diodes]
    return [joint for joint in others if joint != here.joint and view.draft.held_joint(joint) is None]
