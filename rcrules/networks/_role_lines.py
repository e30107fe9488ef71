"""Roles at lines and currents: termination, sense shunt, pull-up of a bus, bias resistor with its capacitor."""

from rcrules.design import Pin
from rcrules.networks._fed import words_of
from rcrules.networks._fed_words import BUS, CENTRE, CURRENT
from rcrules.networks._role import Judged
from rcrules.networks._spot import Arm, Spot, View, greatest, least

COMMON = 2000.0
"""Greatest resistance of a line termination's halves. [Ω]"""
SHUNT = 1.0
"""Up to this resistance a resistor in a power path is there to measure its current. [Ω]"""
LOOP = 500.0
"""Up to this resistance a resistor at a connector turns a loop current into a voltage. [Ω]"""


def termination(view: View, here: Spot) -> Judged | None:
    """Two equal line resistors that meet at a capacitor."""
    lines = [arm for arm in here.resistors if not arm.fixed]
    if len(lines) != len(here.resistors) or not all(arm.fixed for arm in here.capacitors):
        return None
    if sum(_is_line(view, arm) for arm in lines) < 2 or any(_is_filtered(view, arm) for arm in lines):
        return None
    if any(not words_of(pin) & CENTRE for pin in here.pins if view.kind(pin) == "ic"):
        return None
    values = sorted(arm.value for arm in lines if arm.value is not None)
    pairs = all(abs(one - two) <= 0.05 * two for one, two in zip(values[::2], values[1::2], strict=False))
    if len({arm.far for arm in lines}) < 2 or len(values) % 2 or not pairs or greatest(lines) > COMMON:
        return None
    return Judged(role="termination", why=("equal resistors from two lines meet here",), also=tuple(lines))


def _is_line(view: View, arm: Arm) -> bool:
    """Whether an arm leads to a signal that two or more parts share, or that is driven."""
    return arm.to == "driven" or (arm.held is None and len({pin.ref for pin in view.at(arm.far).pins}) >= 2)


def _is_filtered(view: View, arm: Arm) -> bool:
    return arm.held is None and bool(view.at(arm.far).capacitors)


def sense_shunt(view: View, here: Spot) -> Judged | None:
    """Resistor and capacitor side by side that turn a current into a voltage."""
    far = _side_by_side(here)
    if far is None:
        return None
    monitor = next((pin for pin in here.pins if view.kind(pin) == "ic" and words_of(pin) & CURRENT), None)
    path = view.has_kind(here, "transistor", "inductor", "transformer")
    ohms = least(here.resistors)
    if ohms <= SHUNT and (path or monitor):
        return Judged(role="sense-shunt", why=("low resistance in a current path",), active=_CURRENT)
    if monitor is not None:
        return Judged(role="sense-shunt", sure=False, why=(f"{monitor.key} gives a current",), active=_CURRENT)
    if ohms <= LOOP and view.has_kind(here, "connector"):
        return Judged(role="sense-shunt", sure=False, why=("turns a loop current into a voltage",), active=_CURRENT)
    return None


def bias(_view: View, here: Spot) -> Judged | None:
    """Resistor and capacitor side by side at a pin that says nothing: no time can be told."""
    far = _side_by_side(here)
    if far is None or not here.resistors:
        return None
    return Judged(role="other", sure=False, why=(f"resistor and capacitor side by side to {far}, no source seen",))


def bus_pull_up(view: View, here: Spot) -> Judged | None:
    """A pull-up on a line that several open-drain pins share."""
    pulls = [arm for arm in here.resistors if arm.to == "supply"]
    if not pulls or any(arm.to != "ground" for arm in here.capacitors):
        return None
    named = on_bus(view, here)
    opens = [pin for pin in here.pins if pin.type == "open-collector"]
    if named or (len(opens) >= 2 and len({pin.ref for pin in here.pins}) >= 2):
        keys = ", ".join(pin.key for pin in (named or opens)[:3])
        return Judged(role="bus-pull-up", why=(f"open-drain line of {keys}",))
    return None


def on_bus(view: View, here: Spot) -> list[Pin]:
    """Pins of a shared open-drain line at the joint and behind stoppers, where two parts share it."""
    pins = view.pins_near(here)
    named = [pin for pin in pins if words_of(pin) & BUS and view.kind(pin) in ("ic", "connector")]
    return named if len({pin.ref for pin in pins}) >= 2 else []


_CURRENT = "a current feeds it, not a voltage"


def _side_by_side(here: Spot) -> str | None:
    """The one held joint that all resistors and capacitors lead to."""
    ends = {arm.far for arm in here.resistors + here.capacitors}
    if len(ends) != 1 or not here.capacitors or not all(arm.fixed for arm in here.resistors):
        return None
    return next(iter(ends))
