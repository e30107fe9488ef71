"""Amplifiers that may be taken as ideal: one in a network, its inputs and output known, nothing else active."""

import re
from collections.abc import Iterator
from typing import Final

from rcrules.design import Pin
from rcrules.networks._draft import RawNetwork
from rcrules.networks._family import inverting
from rcrules.networks._fed import family_of
from rcrules.networks._model import Amplifier
from rcrules.networks._role_feedback import unit
from rcrules.networks._spot import View

_COMPARATOR: Final = re.compile(r"COMPARATOR|(?<!\d)(393|339|2903|2901|311|319)(?!\d)", re.IGNORECASE)
_INPUTS: Final = {"1": ("3", "2"), "7": ("5", "6"), "8": ("10", "9"), "14": ("12", "13"), "6": ("3", "2")}
"""Output -> its plus and minus input, in the usual pinouts of single, dual and quad amplifiers."""
_ACTIVE: Final = ("transistor", "crystal", "inductor", "transformer")


def ideal(view: View, network: RawNetwork, ref: str) -> Amplifier | None:
    """The amplifier of a part that closes a loop in a network; None where there is none, or several, or diodes."""
    if network.diodes or network.contacts or family_of(view, ref) not in ("amplifier", ""):
        return None
    part = view.draft.parts.get(ref)
    if part is None or _COMPARATOR.search(f"{part.text} {part.part.symbol} {part.part.description}"):
        return None
    if any(view.has_kind(view.at(joint), *_ACTIVE) for joint in network.free):
        return None
    pins = (pin for joint in network.free for pin in view.at(joint).pins if inverting(pin.name) is not None)
    refs = dict.fromkeys((ref, *(pin.ref for pin in pins)))
    found = [item for other in refs for item in _units(view, other) if _closes(network, item)]
    return found[0] if len(found) == 1 else None


def _closes(network: RawNetwork, item: Amplifier) -> bool:
    """Whether an amplifier's output and an input are at the network, and its inverting input hears the output."""
    inside = {item.plus, item.minus} & set(network.free)
    return item.output in network.held and bool(inside) and item.minus in (*network.free, item.output)


def _units(view: View, ref: str) -> Iterator[Amplifier]:
    """The amplifiers of a package, by pin names, else by the usual pinout."""
    pins = view.pins_of(ref)
    by_number = {pin.number: pin for pin in pins}
    for output in pins:
        held = view.draft.held_joint(view.joint(output))
        if inverting(output.name) is not None or held is None or held.kind != "driven":
            continue
        plus, minus = (_input(pins, output, sign) for sign in (False, True))
        if plus is None and minus is None:
            plus, minus = (by_number.get(number) for number in _INPUTS.get(output.number, ("", "")))
        if plus is not None and minus is not None:
            joints = (view.joint(pin) for pin in (plus, minus, output))
            yield Amplifier(ref=ref, **dict(zip(("plus", "minus", "output"), joints, strict=True)))


def _input(pins: tuple[Pin, ...], output: Pin, sign: bool) -> Pin | None:
    """The input of a sign that belongs to an output: the only one, or that of the same unit."""
    named = [pin for pin in pins if inverting(pin.name) is sign]
    if len(named) > 1:
        named = [pin for pin in named if unit(pin) == unit(output)]
    return named[0] if len(named) == 1 else None
