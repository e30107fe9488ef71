"""The SPICE deck: elements, subcircuits, parameters and included files; a netlist whose parts are its elements."""

import hashlib
import re
from collections.abc import Mapping
from typing import Final

from rcrules.errors import Place
from rcrules.readers import _bounds
from rcrules.readers._export import Cell, Export, ExportPart, ExportPin, Reader, Source
from rcrules.readers._mistakes import refusal
from rcrules.readers._remarks import Remarks
from rcrules.readers._spice_cards import cards
from rcrules.readers._spice_flat import Flattener, Placed, gathered
from rcrules.readers._text import head

NAME: Final = "spice"
_HEAD: Final = 65_536
_DIRECTIVE: Final = re.compile(
    r"^[ \t]*\.(?:subckt|ends?|model|params?|include|inc|lib|tran|ac|dc|op|control|global)\b",
    re.IGNORECASE | re.MULTILINE,
)
_ELEMENT: Final = re.compile(
    r"^[ \t]*[RCLVID]\w*[ \t]+(\S+)[ \t]+(\S+)[ \t]+[\d.{'][^,;|\r\n]*$", re.IGNORECASE | re.MULTILINE
)
_GROUND: Final = frozenset({"0", "gnd"})


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for directives of a deck, else for two lines of elements with a number, one of them on the ground node."""
    text = head(source, _HEAD)
    if text.lstrip()[:1] in ("<", "("):
        return False
    if _DIRECTIVE.search(text):
        return True
    found = _ELEMENT.findall(text.partition("\n")[2])
    return len(found) > 1 and any(_GROUND & {node.lower() for node in nodes} for nodes in found)


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read the deck flat. Raises UserMistake, also where it only defines subcircuits."""
    del columns  # a deck has none
    remarks = Remarks()
    deck = gathered(source.name, cards(source, remarks), remarks)
    flat = _Flat(source, remarks)
    for placed in Flattener(source.name, deck, remarks, source.limits.parts).placed():
        flat.take(placed)
    if not flat.parts:
        raise refusal(
            source.name,
            "the deck has no elements of its own, only definitions",
            expected="a deck of a circuit",
            do="give the deck that includes this one",
        )
    return flat.export()


class _Flat:
    """Collects the flat deck."""

    def __init__(self, source: Source, remarks: Remarks) -> None:
        self._source, self._remarks = source, remarks
        self.parts: dict[str, ExportPart] = {}
        self._pins: list[ExportPin] = []
        self._nets: dict[str, tuple[str, Place]] = {}

    def take(self, placed: Placed) -> None:
        """Take in an element. Raises UserMistake where its name is taken: simulators refuse that too."""
        file, line = placed.place.file, placed.place.line or 1
        _bounds.named(file, line, "a reference", placed.ref)
        first = self.parts.get(placed.ref)
        if first is not None:
            raise refusal(
                file,
                f"two elements are called {placed.ref[:60]}",
                line=line,
                found=f"the other one at {first.place}",
                expected="a name of its own for each element",
                do="rename one",
            )
        self.parts[placed.ref] = self._part(placed)
        for at, name in enumerate(placed.nets):
            self._pin(placed, at, name)

    def _part(self, placed: Placed) -> ExportPart:
        found, place = placed.element, placed.place
        _bounds.named(place.file, place.line or 1, "a value", found.value, _bounds.MAX_TEXT)
        return ExportPart(
            ref=placed.ref,
            place=place,
            value=Cell(text=found.value, place=place) if found.value else None,
            symbol=found.symbol,
            sheet=placed.ref.rpartition("/")[0],
            fields={name: Cell(text=text, place=place) for name, text in found.fields.items()},
        )

    def _pin(self, placed: Placed, at: int, name: str) -> None:
        file, line = placed.place.file, placed.place.line or 1
        _bounds.named(file, line, "a net name", name)
        key, _ = self._nets.setdefault(name.lower(), (name, placed.place))
        limits = self._source.limits
        _bounds.bound(file, line, "nets", len(self._nets), limits.nets)
        _bounds.bound(file, line, "connections", len(self._pins) + 1, limits.connections)
        names, types = placed.element.pin_names, placed.element.pin_types
        self._pins.append(
            ExportPin(
                ref=placed.ref,
                number=str(at + 1),
                name=names[at] if at < len(names) else "",
                type=types[at] if at < len(types) else "unspecified",
                net=key,
                place=placed.place,
            )
        )

    def export(self) -> Export:
        """Everything as an export."""
        return Export(
            reader=NAME,
            source=self._source.name,
            sha256=hashlib.sha256(self._source.data).hexdigest(),
            kind="netlist",
            parts=tuple(self.parts.values()),
            pins=tuple(self._pins),
            nets=tuple(self._nets.values()),
            remarks=self._remarks.all(),
        )


READER = Reader(name=NAME, order=29, claims=claims, read=read)
