"""What the XML netlist and its S-expression twin mean, apart from how they are written."""

import hashlib
from collections.abc import Mapping
from itertools import chain
from typing import Final, Literal

from rcrules.errors import Place
from rcrules.readers import _bounds
from rcrules.readers._columns import DESCRIPTION, plain
from rcrules.readers._component import Component, Departure, LibraryPart, Node, refuse_long
from rcrules.readers._export import Cell, Export, ExportPart, ExportPin, Remark, Source, Variant
from rcrules.readers._fitting import fitting
from rcrules.readers._pin_types import pin_type
from rcrules.readers._remarks import Remarks

_SHEET_PROPERTIES: Final = frozenset({"sheetname", "sheetfile"})
_NO: Final = frozenset({"0", "no", "false", "n"})
_PLACEHOLDER: Final = "~"
_UNTOLD: Final = ("", "")
"""Name and type of a pin that no library part has."""


class Netlist:
    """Collects what a parser meets and gives it as an export."""

    def __init__(self, source: Source, reader: str, assumed: tuple[Remark, ...] = ()) -> None:
        self.source, self.reader = source, reader
        self._assumed = assumed
        self._most = source.limits.connections
        self.title = ""
        self._remarks = Remarks()
        self._components: dict[str, Component] = {}
        self._library: dict[tuple[str, str], LibraryPart] = {}
        self._by_symbol: dict[str, LibraryPart] = {}
        self._nets: dict[str, Place] = {}
        self._listed = self._ended = 0
        self._pending: list[Node] = []
        self._nodes: list[tuple[str, Node]] = []
        self._open: list[Node] = []
        self._last = Place(file=source.name)

    def place(self, line: int) -> Place:
        """The place of a line, shared by what is asked for in a row."""
        if self._last.line != line:
            self._last = Place(file=self.source.name, line=line)
        return self._last

    def remark(self, line: int, text: str) -> None:
        """Keep something odd that does not stop the run."""
        self._remarks.add(self.place(line), text)

    def add_component(self, component: Component) -> None:
        """Keep a component; of two with the same reference the first stands."""
        self._listed += 1
        _bounds.bound(self.source.name, component.line, "parts", self._listed, self.source.limits.parts)
        refuse_long(self.source.name, component)
        if not component.ref:
            self.remark(component.line, "a component without a reference is left out")
            return
        first = self._components.setdefault(component.ref, component)
        if first is component:
            return
        same = (first.value, first.footprint, first.symbol) == (component.value, component.footprint, component.symbol)
        text = "" if same else f" with value {component.value!r} instead of {first.value!r}"
        self.remark(component.line, f"{component.ref} is listed again{text}; the one of line {first.line} stands")

    def add_library_part(self, library: str, names: list[str], part: LibraryPart) -> None:
        """Keep a library part under its own name and its aliases."""
        for name in names:
            self._library.setdefault((library, name), part)
            self._by_symbol.setdefault(name, part)

    def add_node(self, node: Node) -> None:
        """Keep a connection for the net that is added next; one that names no part or no pin is told."""
        ref, number, name, _, line = node
        if not ref or not number:
            self.remark(line, "a connection that names no part or no pin is left out")
            return
        self._pending.append(node)
        self._ended += 1
        if self._ended > self._most or len(ref) + len(number) + len(name) > _bounds.MAX_NAME:
            self._bounded(node)

    def add_open(self, node: Node) -> None:
        """Keep a pin that is said to be on no net."""
        self._open.append(node)
        self._ended += 1
        self._bounded(node)

    def _bounded(self, node: Node) -> None:
        ref, number, name, _, line = node
        for what, text in (("a reference", ref), ("a pin number", number), ("a pin name", name)):
            _bounds.named(self.source.name, line, what, text)
        _bounds.bound(self.source.name, line, "connections", self._ended, self._most)

    def add_net(self, name: str, code: str, line: int) -> None:
        """Keep a net with the connections added before it; nets without a name are told apart by their code."""
        _bounds.named(self.source.name, line, "a net name", name or code)
        _bounds.bound(self.source.name, line, "nets", len(self._nets) + 1, self.source.limits.nets)
        key = name or f"#{code or len(self._nets) + 1}"
        if key in self._nets:
            if name:
                self.remark(line, f"net {name!r} is listed again; its pins are added to those of {self._nets[key]}")
            else:
                key = f"{key}@{line}"
        if key not in self._nets:
            self._nets[key] = Place(file=self.source.name, line=line)
        self._nodes += [(key, node) for node in self._pending]
        self._pending.clear()

    def export(self, kind: Literal["netlist", "bom"] = "netlist") -> Export:
        """Everything collected, with pin names and types joined in from the library."""
        pins, open_pins = self._pins()
        parts = tuple(self._part(component) for component in self._components.values())
        return Export(
            reader=self.reader,
            source=self.source.name,
            sha256=hashlib.sha256(self.source.data).hexdigest(),
            kind=kind,
            parts=parts,
            pins=pins,
            open_pins=open_pins,
            nets=tuple(self._nets.items()),
            remarks=(*self._assumed, *self._remarks.all()),
            title=self.title,
        )

    def _part(self, component: Component) -> ExportPart:
        fields, flagged = self._fields(component)
        flagged = component.omitted or flagged
        fitted, why = (False, flagged) if flagged else fitting(component.value, _texts(fields))
        return ExportPart(
            ref=component.ref,
            place=self.place(component.line),
            value=self._value(component),
            footprint=_said(component.footprint),
            symbol=":".join(item for item in (component.library, component.symbol) if item),
            description=self._description(component, fields),
            sheet=component.sheet,
            fields=fields,
            fitted=fitted,
            fitted_why=why,
            variants={item.name: self._variant(component, item) for item in component.variants if item.name},
        )

    def _variant(self, component: Component, departure: Departure) -> Variant:
        fields: dict[str, Cell] = {}
        for name, text, line in departure.fields:
            self._keep(fields, component, name.strip(), text or "", line)
        value = next((fields.pop(name) for name in tuple(fields) if name.lower() == "value"), None)
        flags = (text for name, text, _ in departure.properties if name.strip().lower() == "dnp")
        fitted = next((text is not None and text.strip().lower() in _NO for text in flags), None)
        return Variant(place=self.place(departure.line), fitted=fitted, value=value, fields=fields)

    def _description(self, component: Component, fields: Mapping[str, Cell]) -> str:
        """The part's own description; else what the library says of its symbol."""
        own = next((cell.text for name, cell in fields.items() if plain(name) in DESCRIPTION), "")
        library_part = self._library_part(component)
        return own or _said(component.description) or _said(library_part.description if library_part else "")

    def _value(self, component: Component) -> Cell | None:
        text = _said(component.value)
        return Cell(text=text, place=self.place(component.value_line or component.line)) if text else None

    def _fields(self, component: Component) -> tuple[dict[str, Cell], str]:
        """Fields by stripped name, and the flag that says the part is not fitted, if one does."""
        fields: dict[str, Cell] = {}
        flagged = ""
        for name, text, line in component.fields:
            self._keep(fields, component, name.strip(), text or "", line)
        for name, text, line in component.properties:
            plain = name.strip()
            held, folded = plain in fields, plain.lower()
            if folded == "dnp":
                said_no = (text or "").strip().lower() in _NO and text is not None and text.strip() != ""
                flagged = flagged if said_no else "flag 'dnp'"
            if not held and folded not in _SHEET_PROPERTIES:
                self._keep(fields, component, plain, "yes" if text is None else text, line)
        return fields, flagged

    def _keep(self, fields: dict[str, Cell], component: Component, name: str, text: str, line: int) -> None:
        said = _said(text)
        if not said:
            return
        held = fields.get(name)
        if held is None:
            fields[name] = Cell(text=said, place=Place(file=self.source.name, line=line))
        elif held.text != said:
            self.remark(line, f"{component.ref} has the field {name!r} twice: {held.text!r} stands, not {said!r}")

    def _library_part(self, component: Component) -> LibraryPart | None:
        found = self._library.get((component.library, component.symbol))
        return found if found is not None else self._by_symbol.get(component.symbol)

    def _pins(self) -> tuple[tuple[ExportPin, ...], tuple[ExportPin, ...]]:
        """Connections in the order of the nets, and pins on no net."""
        libraries = {ref: self._library_part(component) for ref, component in self._components.items()}
        suffixed = self._names_end_with_number()
        unknown: dict[str, int] = {}
        seen: dict[tuple[str, str], str] = {}
        file = self.source.name

        def pin(key: str, node: Node) -> ExportPin:
            ref, number, name, kind, line = node
            library = libraries.get(ref)
            library_name, library_kind = library.pins.get(number, _UNTOLD) if library else _UNTOLD
            normal = pin_type(kind or library_kind)
            if normal is None:
                unknown.setdefault(kind or library_kind, line)
            return ExportPin(
                ref=ref,
                number=number,
                name=_pin_name(name, _said(library_name), number, suffixed) if name or library_name else "",
                type="unspecified" if normal is None else normal,
                net=key,
                place=Place(file=file, line=line),
            )

        for key, (ref, number, _, _, line) in self._nodes:
            first = seen.setdefault((ref, number), key)
            if first != key:
                self.remark(line, f"pin {number} of {ref} is on net {first!r} and on net {key!r}; both are kept")
        connected = tuple(pin(key, node) for key, node in self._nodes)
        alone = tuple(pin("", node) for node in self._open if node[:2] not in seen)
        for kind, line in unknown.items():
            self.remark(line, f"pin type {kind!r} is not known; taken as unspecified")
        self._remark_strangers()
        return connected, alone

    def _names_end_with_number(self) -> bool:
        """True where the export writes every pin name as ``NAME_number``."""
        named = 0
        for _, (_, number, name, _, _) in self._nodes:
            if name and _said(name):
                if not name.endswith(f"_{number}"):
                    return False
                named += 1
        return named > 1

    def _remark_strangers(self) -> None:
        told = set(self._components)
        for ref, _, _, _, line in chain((node for _, node in self._nodes), self._open):
            if ref not in told:
                told.add(ref)
                _bounds.bound(self.source.name, line, "parts", len(told), self.source.limits.parts)
                self.remark(line, f"{ref} stands in the nets but not in the list of components")


def _pin_name(given: str, library: str, number: str, suffixed: bool) -> str:
    name = _said(given) if given else ""
    if not name:
        return library
    ending = f"_{number}"
    if name.endswith(ending) and (suffixed or name == library + ending):
        return _said(name.removesuffix(ending))
    return name


def _said(text: str) -> str:
    """The text without blanks around it, '' for the placeholder of the format."""
    plain = text.strip()
    return "" if plain == _PLACEHOLDER else plain


def _texts(fields: Mapping[str, Cell]) -> list[tuple[str, str]]:
    return [(name, cell.text) for name, cell in fields.items()]
