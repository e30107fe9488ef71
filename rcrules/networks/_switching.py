"""Nets between a power switch and an inductor."""

from collections.abc import Mapping
from typing import Final

from rcrules.design import Design, Pin
from rcrules.networks import _held_claims as say
from rcrules.networks._held_names import hint
from rcrules.parts import RatedPart

_MOST_SWITCHED: Final = 8
"""Pins on a switching node that its pin names do not tell; larger nets are rails."""


def switching_nets(
    design: Design, parts: Mapping[str, RatedPart], claims: Mapping[str, Mapping[str, list[Pin]]]
) -> set[str]:
    """Nets between a power switch and an inductor, by pin name, or by an inductor, a diode and an active pin."""
    grounds = {net for net in design.nets if _is_like_ground(net, claims.get(net, {}))}
    found = ((name, net.pins, claims.get(name, {})) for name, net in design.nets.items())
    return {name for name, pins, said in found if _is_switching(pins, parts, said, grounds)}


def _is_switching(
    pins: tuple[Pin, ...], parts: Mapping[str, RatedPart], said: Mapping[str, list[Pin]], grounds: set[str]
) -> bool:
    fitted = [parts[pin.ref] for pin in pins if pin.ref in parts and parts[pin.ref].fitted]
    kinds = {part.kind for part in fitted}
    if kinds.isdisjoint(("inductor", "transformer")):
        return False
    if say.SWITCH in said:
        return True
    held = not {say.SUPPLY, say.GROUND, say.NEVER}.isdisjoint(said) or hint(pins[0].net) is not None
    smoothed = any(part.kind == "capacitor" and any(pin.net in grounds for pin in part.part.pins) for part in fitted)
    chips = [pin for pin in pins if pin.ref in parts and parts[pin.ref].kind == "ic"]
    silent = "inductor" in kinds and bool(chips) and not any(pin.name for pin in chips) and "capacitor" in kinds
    acted = silent or ("diode" in kinds and not kinds.isdisjoint(("ic", "transistor")))
    return acted and not held and not smoothed and "connector" not in kinds and len(pins) <= _MOST_SWITCHED


def _is_like_ground(net: str, said: Mapping[str, list[Pin]]) -> bool:
    named = hint(net)
    return (named is not None and named.kind == "ground") or len(said.get(say.GROUND, ())) > len(
        said.get(say.SUPPLY, ())
    )
