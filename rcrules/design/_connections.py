"""Whether two netlists of one board connect the same pins, whatever each calls its nets."""

from collections import Counter
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import Final

from rcrules.design._model import Difference, Pin
from rcrules.errors import Mistake, UserMistake
from rcrules.names import automatic
from rcrules.readers import Export, ExportPin, Remark

_MOVED: Final = 4
"""Pins on different nets from which on two netlists may be of different boards."""
_SHOWN: Final = 12
Known = Mapping[tuple[str, str], Pin]
"""Pins of the earlier netlists by reference and number."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Joined:
    """A later netlist held against those before it."""

    names: Mapping[str, str]
    """Its nets -> what the earlier ones call them, where they have pins in common."""
    moved: tuple[tuple[ExportPin, Pin], ...]
    """Pins that it puts on another net, each with what stands."""
    remarks: tuple[Remark, ...]

    def differences(self) -> Iterator[Difference]:
        """Where the netlists contradict each other about a part."""
        for pin, other in self.moved:
            text = f"pin {pin.number} on {other.net!r} ({other.place}), on {pin.net!r} ({pin.place})"
            yield Difference(ref=pin.ref, about="connections", text=text, places=(other.place, pin.place))

    def net(self, pin: ExportPin) -> str:
        """The net of a pin, as the earlier netlists call it."""
        return self.names.get(pin.net, pin.net)


def join(export: Export, known: Known) -> Joined:
    """Pair the nets by the pins that they have in common, the most first, each net once; then hold pin against pin.

    Names decide only between equals, so that a netlist whose names are cut off, in capitals or made up anew agrees.
    Raises UserMistake where most of the common pins are on other nets.
    """
    common = [(pin, known[pin.ref, pin.number]) for pin in export.pins if (pin.ref, pin.number) in known]
    names = _paired(common)
    moved = tuple((pin, other) for pin, other in common if names.get(pin.net) != other.net)
    _refuse_other_board(len(common), moved)
    return Joined(names=names, moved=moved, remarks=(*_told(moved), *_renamed(common, names)))


def _paired(common: Iterable[tuple[ExportPin, Pin]]) -> dict[str, str]:
    """Net of the later netlist -> net of the earlier ones."""
    shared = Counter((pin.net, other.net) for pin, other in common)
    order = {pair: at for at, pair in enumerate(shared)}
    names: dict[str, str] = {}
    taken: set[str] = set()
    for later, earlier in sorted(shared, key=lambda pair: (-shared[pair], not _shortened(*pair), order[pair])):
        if later not in names and earlier not in taken:
            names[later] = earlier
            taken.add(earlier)
    return names


def _shortened(one: str, other: str) -> bool:
    """Whether one name is the other, or its start or end, apart from case and marks."""
    short, long = sorted((_letters(one), _letters(other)), key=len)
    return bool(short) and (long.startswith(short) or long.endswith(short))


def _letters(name: str) -> str:
    return "".join(character for character in name.casefold() if character.isalnum())


def _told(moved: Iterable[tuple[ExportPin, Pin]]) -> Iterator[Remark]:
    for pin, other in moved:
        text = f"pin {pin.number} of {pin.ref} is on {pin.net!r}; {other.net!r} of {other.place} stands"
        yield Remark(place=pin.place, text=text)


def _renamed(common: Iterable[tuple[ExportPin, Pin]], names: Mapping[str, str]) -> Iterator[Remark]:
    """One remark for the nets that two netlists call by different names, neither of them made up nor cut off."""
    first: dict[str, tuple[ExportPin, Pin]] = {}
    for pin, other in common:
        if names.get(pin.net) == other.net:
            first.setdefault(pin.net, (pin, other))
    told = [
        (pin, other)
        for pin, other in first.values()
        if not _shortened(pin.net, other.net) and not _made_up(pin.net) and not _made_up(other.net)
    ]
    if told:
        pin, other = told[0]
        said = ", ".join(f"{later.net!r} is {earlier.net!r}" for later, earlier in told[:_SHOWN])
        more = f" and {len(told) - _SHOWN} more" if len(told) > _SHOWN else ""
        text = f"nets with the same pins have other names in {other.place.file}: {said}{more}; the latter stand"
        yield Remark(place=pin.place, text=text)


def _made_up(net: str) -> bool:
    return net.startswith("#") or automatic(net)


def _refuse_other_board(common: int, moved: tuple[tuple[ExportPin, Pin], ...]) -> None:
    if len(moved) < _MOVED or 2 * len(moved) < common:
        return
    pin, other = moved[0]
    raise UserMistake(
        Mistake(
            place=pin.place,
            problem=f"this netlist and {other.place.file} are not of one board",
            found=f"{len(moved)} of {common} common pins on other nets: {pin.ref}.{pin.number} "
            f"on {pin.net!r} and on {other.net!r}",
            expected="netlists that connect different parts, or the same pins alike",
            do="name the netlist of one board; several boards need a --project each",
        )
    )
