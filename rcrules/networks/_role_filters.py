"""Filters: high-pass, divider with capacitor, low-pass."""

from rcrules.networks._family import inverting
from rcrules.networks._fed import feeding, kind_fed, kinds, words_of
from rcrules.networks._fed_words import CURRENT
from rcrules.networks._role import Judged
from rcrules.networks._role_parts import LIGHT, ends, kinds_at, signal_above, strong_ends
from rcrules.networks._spot import SMALL, Arm, Spot, View, greatest, least

PULL = 5.0
"""A resistor to a supply of this many times the series resistor is its pull, not a divider's arm."""
PULL_DOWN = 20.0
"""The same for a resistor to ground, where a divider is the usual case."""

ALIKE = 2.0
"""Two series resistors within this ratio make a pair of lines. [1]"""


def high_pass(view: View, here: Spot) -> Judged | None:
    """A series capacitor from a signal, resistors to a fixed bias."""
    series = [arm for arm in here.capacitors if _is_signal(view, here, arm)]
    shunt = [arm for arm in here.capacitors if arm.fixed]
    if not series or not any(_is_bias(view, here, arm) for arm in here.resistors):
        return None
    if greatest(shunt) > greatest(series) > 0 or any(_is_driven(view, here, arm) for arm in here.resistors):
        return None
    why = f"{series[0].ref} couples {series[0].far} to a fixed bias"
    for arm in here.resistors:
        helping = bootstrapped(view, here, arm)
        if helping is not None:
            active = f"an amplifier drives {arm.ref}"
            return Judged(role="high-pass", why=(why,), active=active, amplifier=helping)
    return Judged(role="high-pass", why=(why,))


def divider(view: View, here: Spot) -> Judged | None:
    """A capacitor to a fixed net at the tap between two resistors to different levels."""
    ends_of = {arm.far for arm in here.resistors}
    shunts = [arm for arm in here.capacitors if arm.fixed]
    beside = [arm for arm in here.capacitors if not arm.fixed and arm.far in ends_of]  # compensates the tap
    if not shunts or len(shunts) + len(beside) < len(here.capacitors) or len(here.resistors) < 2:
        return None
    low = [arm for arm in here.resistors if kinds_at(view, arm, here.joint) == {"ground"}]
    high = [arm for arm in here.resistors if kinds_at(view, arm, here.joint) - {"ground"} and arm not in low]
    if not low:
        low, high = _two_levels(view, here, high)
    if not low or not high or _is_pull(view, here, low, high):
        return None
    refs = list(dict.fromkeys((high[0].ref, low[0].ref)))
    why = f"tap between {' and '.join(refs)}" if len(refs) > 1 else f"tap of {refs[0]}"
    return Judged(role="divider-low-pass", why=(why,))


def low_pass(view: View, here: Spot) -> Judged | None:
    """A series resistor from a signal, or from a supply into an analog input; a capacitor to a fixed or driven net."""
    driven = [arm for arm in here.resistors if "driven" in kinds_at(view, arm, here.joint)]
    if not any(arm.held is not None for arm in here.capacitors):
        return _differential(view, here, driven)
    if driven:
        return Judged(role="low-pass", why=(f"{driven[0].ref} in series from {_source(view, here, driven[0])}",))
    later = [arm for arm in here.resistors if arm.held is None and ends(view, arm.far, here.joint)]
    if later:
        return Judged(role="low-pass", why=(f"{later[0].ref} from the node {later[0].far}",))
    return _from_supply(view, here) or _from_pin(view, here)


def _differential(view: View, here: Spot, driven: list[Arm]) -> Judged | None:
    """A capacitor across two lines that both come from signals, or from the ends of a shunt, through like resistors."""
    mine = driven or _sensed(view, here)
    for arm in here.capacitors if mine else ():
        far = view.at(arm.far)
        others = [leg for leg in far.resistors if leg.to == "driven"] or _sensed(view, far)
        if others and least(mine) <= ALIKE * least(others) and least(others) <= ALIKE * least(mine):
            why = f"{mine[0].ref} in series from {_source(view, here, mine[0])}, {arm.ref} across to {arm.far}"
            return Judged(role="low-pass", why=(why,))
    return None


def _sensed(view: View, here: Spot) -> list[Arm]:
    """Resistors from supplies into a pin that measures."""
    measures = any(kind_fed(view, pin) in ("adc", "amplifier") or words_of(pin) & CURRENT for pin in here.pins)
    return [arm for arm in here.resistors if arm.to == "supply"] if measures else []


def _from_supply(view: View, here: Spot) -> Judged | None:
    rails = [arm for arm in here.resistors if arm.fixed]
    fed = kinds(view, feeding(view, here))
    if rails and set(fed) & {"adc", "amplifier"}:
        return Judged(role="low-pass", why=(f"{rails[0].ref} from {rails[0].far} into an analog input",))
    return None


def _from_pin(view: View, here: Spot) -> Judged | None:
    """A resistor from a pin whose direction is not known."""
    for arm in here.resistors:
        if arm.held is None and any(view.kind(pin) in ("ic", "transistor") for pin in view.at(arm.far).pins):
            pin = next(pin for pin in view.at(arm.far).pins if view.kind(pin) in ("ic", "transistor"))
            return Judged(role="low-pass", sure=False, why=(f"{arm.ref} from {pin.key}",), also=(arm,))
    return None


def _is_signal(view: View, here: Spot, arm: Arm) -> bool:
    if arm.held is not None:
        return arm.to == "driven"
    outside = view.has_kind(view.at(arm.far), "connector") and not view.has_kind(here, "connector")
    return outside or signal_above(view, arm.far, here.joint)


def _is_driven(view: View, here: Spot, arm: Arm) -> bool:
    """Whether a resistor leads to a driven net, directly or through one that is small beside it."""
    if arm.held is not None:
        return arm.to == "driven" and bootstrapped(view, here, arm) is None
    beyond = (far for far in view.at(arm.far).resistors if far.far != here.joint)
    return any(far.to == "driven" and (far.value or 0.0) <= SMALL * (arm.value or 0.0) for far in beyond)


def _is_bias(view: View, here: Spot, arm: Arm) -> bool:
    if arm.held is not None:
        return arm.fixed or bootstrapped(view, here, arm) is not None
    return bool(ends(view, arm.far, here.joint))


def bootstrapped(view: View, here: Spot, arm: Arm) -> str | None:
    """The amplifier whose output a resistor leads back from, where an input of it is here or one capacitor away."""
    if arm.to != "driven":
        return None
    inputs = {pin.ref for pin in here.pins if inverting(pin.name) is not None}
    for other in here.capacitors:
        if other.held is None:
            inputs |= {pin.ref for pin in view.at(other.far).pins if inverting(pin.name) is not None}
    outputs = (pin.ref for pin in view.at(arm.far).pins if inverting(pin.name) is None)
    return next((ref for ref in outputs if ref in inputs), None)


def _source(view: View, here: Spot, arm: Arm) -> str:
    """The driven net behind an arm."""
    if arm.held is not None:
        return arm.far
    held = (view.draft.held_joint(joint) for joint in strong_ends(view, arm.far, here.joint))
    return next((one.net for one in held if one is not None and one.kind == "driven"), arm.far)


def _two_levels(view: View, here: Spot, arms: list[Arm]) -> tuple[list[Arm], list[Arm]]:
    """Arms to a supply and arms to another supply or a driven net."""
    supplies = [arm for arm in arms if kinds_at(view, arm, here.joint) == {"supply"}]
    first = supplies[:1]
    others = [arm for arm in arms if first and arm.far != first[0].far and not _dwarfs(arm, first[0])]
    return first, others


def _dwarfs(arm: Arm, other: Arm) -> bool:
    """Whether an arm is too large beside another one to shift the level at their tap."""
    return arm.value is not None and other.value is not None and arm.value >= LIGHT * other.value


def _is_pull(view: View, here: Spot, low: list[Arm], high: list[Arm]) -> bool:
    """Whether one side only keeps a driven signal at rest: the arm from it is much smaller."""
    driven = [arm for arm in high if "driven" in kinds_at(view, arm, here.joint)]
    if not driven or any(arm.value is None for arm in driven + low):
        return False
    times = PULL if low[0].to == "supply" else PULL_DOWN
    return times * greatest(driven) <= least(low)
