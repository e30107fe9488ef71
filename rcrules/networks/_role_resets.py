"""Roles of a resistor to a supply and a capacitor to the other rail: power-on delay and supply filter."""

from rcrules.design import Pin
from rcrules.names import has_token
from rcrules.networks._family import inverting
from rcrules.networks._fed import family_of, feeding, kind_fed, kinds, words_of
from rcrules.networks._fed_words import BUTTON, RESET
from rcrules.networks._held_names import hint
from rcrules.networks._named import Facts
from rcrules.networks._role import Judged
from rcrules.networks._role_feedback import unit
from rcrules.networks._role_lines import on_bus
from rcrules.networks._role_parts import LIGHT, ends, kinds_at, least_way
from rcrules.networks._role_switching import LINE
from rcrules.networks._spot import Arm, Spot, View, least

FILTER = 100.0
"""Up to this resistance, in series with a supply, the resistor lets a part's supply current through. [Ω]"""
SHARE = 20.0
"""A resistor to ground of fewer times the series resistor makes a divider. [1]"""
SENSE = 0.2
"""Up to this resistance a resistor in a supply's way measures its current. [Ω]"""
DELAYED = ("reset", "logic", "regulator", "timer", "other")


def supply_filter(view: View, here: Spot) -> Judged | None:
    """A resistor from a supply, a capacitor to a fixed net, and a part that lives on what is between."""
    if here.contacts or not any(arm.fixed for arm in here.capacitors):
        return None
    sources = tuple(arm for arm in here.resistors if arm.to == "supply")
    if not sources or _is_divided(view, here, least(sources)):
        return None
    if 0 < least(sources) <= SENSE:
        only = (*sources, *(arm for arm in here.capacitors if arm.fixed))
        return Judged(
            role="sense-shunt", sure=False, why=("low resistance between a supply and what it feeds",), only=only
        )
    pins = feeding(view, here)
    takers = [pin for pin in here.pins if view.kind(pin) == "connector" and pin.type == "power-in"]
    supplied = [*(pin for pin in pins if kind_fed(view, pin) == "supply"), *takers]
    if here.local or supplied:
        return _filter(here, sources, tuple(pin.key for pin in supplied))
    return _filter_without_pin(view, here, sources, pins)


def power_on_delay(view: View, here: Spot) -> Judged | None:
    """A resistor to one rail, a capacitor to the other, and inputs that wait for it."""
    rails = {arm.to for arm in here.resistors if arm.fixed} | pulled(view, here)
    others = {arm.to for arm in here.capacitors if arm.fixed}
    if len(rails) != 1 or not others - rails or any(arm.to == "driven" for arm in here.resistors):
        return None
    fed = [kind for kind in kinds(view, feeding(view, here)) if kind in DELAYED]
    if not fed:
        return _compared(view, here)
    if on_bus(view, here):
        return None
    if _is_button_connector(view, here):
        return Judged(role="debounce", sure=False, why=("a connector that may carry a contact",))
    if least(here.resistors) <= LINE[1] and len({pin.ref for pin in here.pins}) >= 2 and "reset" not in fed:
        return Judged(role="other", sure=False, why=("ends a line on a rail",))
    driver = _driver(view, here)
    if driver is not None and "reset" not in fed:
        return Judged(role="low-pass", sure=False, why=(f"{driver} pulls the net, the resistor is its pull-up",))
    return Judged(role="power-on-delay", sure=driver is None and fed != ["other"], why=_waits(fed, driver))


def called_reset(view: View, here: Spot) -> Judged | None:
    """A net called a reset with a resistor to a supply and a capacitor to ground, where no part is known to take it."""
    rails = {arm.to for arm in here.resistors} | pulled(view, here)
    if rails != {"supply"} or {arm.to for arm in here.capacitors} != {"ground"} or kinds(view, feeding(view, here)):
        return None
    names = (here.joint, *view.draft.members.get(here.joint, ()))
    if not any(has_token(name, word) for name in names for word in RESET):
        return None
    return Judged(role="power-on-delay", sure=False, why=("its name is a reset's, and no input of it is known",))


def pulled(view: View, here: Spot) -> set[str]:
    """Kinds of the rails to which pulls inside pins lead, as the project file gives them."""
    facts = Facts(project=view.draft.project)
    found = [said for pin in here.pins if view.draft.project.pins and (said := facts.pin(pin)) is not None]
    nets = [pull[1] for said in found for pull in (said.pull_up, said.pull_down) if pull is not None]
    held = [view.draft.held_joint(view.draft.joints.get(net, net)) for net in nets]
    return {item.kind for item in held if item is not None and item.kind != "driven"}


def _compared(view: View, here: Spot) -> Judged | None:
    """An input compared with a share of the same supply: nothing but time moves one against the other."""
    rails = {arm.far for arm in here.resistors if arm.to == "supply"}
    for pin in feeding(view, here):
        others = [other for other in view.pins_of(pin.ref) if inverting(other.name) is (not inverting(pin.name))]
        for other in others if inverting(pin.name) is not None else ():
            joint = view.joint(other)
            if unit(other) == unit(pin) and joint != here.joint and len(rails & set(ends(view, joint, here.joint))) > 0:
                return Judged(role="power-on-delay", why=(f"{pin.key} is compared with a share of the same supply",))
    return None


def _is_divided(view: View, here: Spot, source: float) -> bool:
    """Whether a resistor to ground, also through others, or to a signal takes a share of the supply worth telling."""
    if here.local:
        return False
    downs = [arm for arm in here.resistors if kinds_at(view, arm, here.joint) == {"ground"}]
    told = bool(here.pins)
    signals = [arm for arm in here.resistors if arm.held is not None and arm.to == "driven" and (told or arm.held.sure)]
    return least_way(view, downs, here.joint) < SHARE * source or least(signals) < LIGHT * source


def _waits(fed: list[str], driver: str | None) -> tuple[str, ...]:
    words = (f"{' and '.join(fed)} inputs wait for it",)
    return words if driver is None else (*words, f"{driver} pulls the net too")


def _filter(here: Spot, sources: tuple[Arm, ...], keys: tuple[str, ...]) -> Judged:
    why = (f"supplies {', '.join(keys)}",) if keys else ("a local supply behind a resistor",)
    fixed = tuple(arm for arm in here.capacitors if arm.fixed)
    return Judged(role="supply-filter", why=why, only=sources + fixed)


def _filter_without_pin(view: View, here: Spot, sources: tuple[Arm, ...], pins: tuple[Pin, ...]) -> Judged | None:
    """Small, into an unknown pin or a coil; or a bare step on the way to further resistors."""
    fixed = tuple(arm for arm in here.capacitors if arm.fixed)
    onward = [arm for arm in here.resistors if arm not in sources and arm.to != "ground" and _leads_on(view, here, arm)]
    if not here.pins and not here.diodes and onward:
        return Judged(role="supply-filter", why=("filters what feeds further resistors",), only=sources + fixed)
    if _is_called_supply(here, sources, kinds(view, pins)):
        return Judged(role="supply-filter", sure=False, why=("its name is a supply's",), only=sources + fixed)
    if least(sources) > FILTER or len(fixed) != len(here.capacitors):
        return None
    unknown = all(kind_fed(view, pin) == "other" for pin in pins)
    if unknown and not view.has_kind(here, "connector") and (here.pins or here.diodes):
        return Judged(
            role="supply-filter", sure=bool(here.pins), why=("small enough to supply a part",), only=sources + fixed
        )
    return None


def _is_called_supply(here: Spot, sources: tuple[Arm, ...], fed: tuple[str, ...]) -> bool:
    """Whether a strong name of a supply is on a joint behind a small resistor, or one of unknown value."""
    named = hint(here.joint)
    small = all(arm.value is None or arm.value <= FILTER for arm in sources)
    return small and named is not None and named.kind == "supply" and named.strong and set(fed) <= {"other", "logic"}


def _leads_on(view: View, here: Spot, arm: Arm) -> bool:
    """Whether a resistor leads to more than the pins at its far end."""
    return arm.held is not None or view.leads_on(arm, here.joint)


def _is_button_connector(view: View, here: Spot) -> bool:
    return any(view.kind(pin) == "connector" and words_of(pin) & BUTTON for pin in here.pins)


def _driver(view: View, here: Spot) -> str | None:
    """An open collector or a transistor that pulls the joint."""
    for pin in here.pins:
        if pin.type in ("open-collector", "open-emitter") or view.kind(pin) == "transistor":
            return pin.key
        if view.kind(pin) == "ic" and _is_coupler(view, pin):
            return pin.key
    return None


def _is_coupler(view: View, pin: Pin) -> bool:
    """An optocoupler by its words, or a passive pin of a part of four pins a channel that has no supply."""
    if family_of(view, pin.ref) == "optocoupler":
        return True
    pins = view.pins_of(pin.ref)
    if pin.type != "passive" or pin.name.strip("~ ") or len(pins) not in (4, 8, 16):
        return False
    held = [view.draft.held_joint(view.joint(other)) for other in pins]
    return all(one is None or one.kind != "supply" for one in held)
