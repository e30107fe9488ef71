"""Series R-C that hang on a joint and lead to held joints."""

from rcrules.networks._spot import Arm, View


def rc_leg(view: View, arm: Arm, but: str) -> tuple[Arm, ...]:
    """Capacitors to held joints behind a resistor whose far joint holds nothing else; () where it is no such leg."""
    far = view.at(arm.far)
    if arm.held is not None or far.pins or far.contacts or far.diodes:
        return ()
    if any(other.far != but for other in far.resistors):
        return ()
    return tuple(other for other in far.capacitors if other.held is not None)


def cr_leg(view: View, arm: Arm, but: str) -> tuple[Arm, ...]:
    """Resistors to held joints behind a capacitor whose far joint holds nothing else; () where it is no such leg."""
    far = view.at(arm.far)
    if not far.bare or any(other.far != but for other in far.capacitors):
        return ()
    return far.resistors if all(other.held is not None for other in far.resistors) else ()
