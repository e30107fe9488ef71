"""Merges the exports of one board."""

from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace

from rcrules.design._connections import Joined, join
from rcrules.design._disagree import differences
from rcrules.design._merge import Said, merge, word
from rcrules.design._model import Design, Difference, Net, Part, Pin
from rcrules.design._order import natural
from rcrules.errors import Place
from rcrules.readers import Export, ExportPart, ExportPin


def build(exports: Iterable[Export]) -> Design:
    """One design of all exports of one board; parts, nets and pins in natural order.

    What a BOM says comes before what a netlist says; nothing said is lost. Parts of a BOM alone have no pins; a BOM
    without a netlist gives a design without nets.
    """
    given = tuple(exports)
    ordered = sorted(given, key=lambda export: (export.kind != "bom", _is_bare(export)))
    pins, joined = _pins(ordered)
    alone = _open_pins(ordered, pins)
    said = _said(ordered, {**alone, **pins})
    order = sorted(said, key=natural)
    parts = {ref: merge(said[ref], tuple(pins.get(ref, ())), tuple(alone.get(ref, ()))) for ref in order}
    apart: dict[str, tuple[Difference, ...]] = defaultdict(tuple)
    for item in (*differences(parts, said, ordered), *(item for each in joined for item in each.differences())):
        apart[item.ref] += (item,)
    own = [remark for export in given for remark in export.remarks]
    return Design(
        parts={ref: replace(part, differences=apart[ref]) if ref in apart else part for ref, part in parts.items()},
        nets=_nets(ordered, parts, joined),
        exports=given,
        remarks=(*own, *(remark for each in joined for remark in each.remarks)),
    )


def _is_bare(export: Export) -> bool:
    """A netlist without values, such as one for tests of the bare board, whose names are cut off: others come first."""
    return all(part.value is None for part in export.parts)


def _said(exports: Sequence[Export], pins: Mapping[str, Sequence[Pin]]) -> dict[str, list[Said]]:
    """What each export says about each reference, also about one that only stands in the nets."""
    said: dict[str, list[Said]] = defaultdict(list)
    for export in exports:
        for part in export.parts:
            said[part.ref].append((word(export), part))
    for ref, connected in pins.items():
        if all(kind == "BOM" for kind, _ in said[ref]):
            said[ref].append(("netlist", ExportPart(ref=ref, place=connected[0].place)))
    return dict(said)


def _pins(exports: Sequence[Export]) -> tuple[dict[str, list[Pin]], list[Joined]]:
    """Pins by reference in natural order, and each export held against those before it.

    Of two netlists the first one to connect a pin decides. Two pads of one number, listed twice in a netlist, are two
    connections. Raises UserMistake where two netlists agree on hardly any pin.
    """
    found: dict[str, list[Pin]] = defaultdict(list)
    held: list[Joined] = []
    for export in exports:
        known = {(pin.ref, pin.number): pin for own in found.values() for pin in own}
        joined = join(export, known)
        for pin in export.pins:
            if (pin.ref, pin.number) not in known:
                found[pin.ref].append(_pin(pin, joined.net(pin)))
        held.append(joined)
    return {ref: sorted(own, key=_pin_order) for ref, own in found.items()}, held


def _open_pins(exports: Sequence[Export], connected: Mapping[str, Sequence[Pin]]) -> dict[str, list[Pin]]:
    """Pins on no net by reference in natural order, each once; one that any export connects is not open."""
    known = {(pin.ref, pin.number) for own in connected.values() for pin in own}
    found: dict[str, list[Pin]] = defaultdict(list)
    for pin in (pin for export in exports for pin in export.open_pins):
        if (pin.ref, pin.number) not in known:
            known.add((pin.ref, pin.number))
            found[pin.ref].append(_pin(pin, ""))
    return {ref: sorted(own, key=_pin_order) for ref, own in found.items()}


def _pin(pin: ExportPin, net: str) -> Pin:
    return Pin(ref=pin.ref, number=pin.number, name=pin.name, type=pin.type, net=net, place=pin.place)


def _pin_order(pin: Pin) -> tuple[object, ...]:
    return natural(pin.number), natural(pin.net)


def _nets(exports: Sequence[Export], parts: Mapping[str, Part], joined: Sequence[Joined]) -> dict[str, Net]:
    """Every net with its pins in the order of the parts, also nets of one pin or none."""
    places: dict[str, Place] = {}
    for export, held in zip(exports, joined, strict=True):
        for name, place in export.nets:
            places.setdefault(held.names.get(name, name), place)
    pins: dict[str, list[Pin]] = {name: [] for name in places}
    for part in parts.values():
        for pin in part.pins:
            places.setdefault(pin.net, pin.place)
            pins.setdefault(pin.net, []).append(pin)
    return {name: Net(name=name, pins=tuple(pins[name]), place=places[name]) for name in sorted(pins, key=natural)}
