"""IPC-2581, revisions A, B and C: BOM, components, and connections by logical nets or by pads."""

from __future__ import annotations

from collections import Counter
from collections.abc import Mapping
from typing import TYPE_CHECKING, Final

from rcrules.readers import _bounds
from rcrules.readers._component import Component
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._ipc_2581_bom import Bom, item_of, makers
from rcrules.readers._ipc_2581_join import Contents, join
from rcrules.readers._ipc_2581_step import Step
from rcrules.readers._xml import root_name
from rcrules.readers._xml_stream import Elements, local

if TYPE_CHECKING:
    from lxml.etree import _Element

NAME: Final = "ipc-2581"
Home = tuple[str, dict[tuple[str, str, str], int], bool]
_PINS: Final = frozenset({"PinRef", "LogicalNetPin"})
_COUNTED: Final = {"Component": "parts", "LogicalNet": "nets"}
_GEOMETRY: Final = ("PadStack", "Set", "LayerFeature", "PhyNet", "Profile", "Layer")
"""Of these only the pins in them are of use."""


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for XML whose root is called ``IPC-2581``."""
    return (root_name(source) or "").upper() == "IPC-2581"


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read element by element. Raises UserMistake, also where the file holds neither parts nor nets."""
    del columns  # the names are those of the standard
    elements = Elements(source, tuple(_Board.TAKEN), "board", idle=_GEOMETRY)
    board = _Board(source, elements)
    counts: Counter[str] = Counter()
    for tag, element in elements:
        counts[tag] += 1
        if tag not in _PINS:
            _bounds.bound(
                source.name,
                elements.line(element),
                _COUNTED.get(tag, f"elements <{tag}>"),
                counts[tag],
                source.limits.parts,
            )
        _Board.TAKEN[tag](board, element)
    return join(source, NAME, board.contents)


class _Board:
    """Collects what the file says."""

    def __init__(self, source: Source, elements: Elements) -> None:
        self._source, self._line = source, elements.line
        self.contents = Contents()
        self._listed = 0
        self._around: _Element | None = None
        self._home: Home | None = None

    def _step(self, element: _Element) -> Step | None:
        found = next(element.iterancestors("{*}Step"), None)
        if found is None:
            return None
        name = found.get("name", "")
        return self.contents.steps.setdefault(name, Step(name=name, line=self._line(found)))

    def _take_step_ref(self, element: _Element) -> None:
        around = element.getparent()
        name = element.get("name", "")
        if around is not None and local(around) == "Content":
            self.contents.wanted.append(name)
        elif around is not None and local(around) == "BomHeader":
            bom = self._bom(around)
            if bom is not None:
                bom.steps.append(name)

    def _bom(self, element: _Element) -> Bom | None:
        found = element.getparent()
        if found is None or local(found) != "Bom":
            return None
        line = self._line(found)
        return self.contents.boms.setdefault(line, Bom(name=found.get("name", ""), line=line))

    def _take_item(self, element: _Element) -> None:
        bom = self._bom(element)
        if bom is not None:
            bom.items.append(item_of(element, self._line))
            self._listed += len(bom.items[-1].places)
            _bounds.bound(self._source.name, bom.items[-1].line, "parts", self._listed, self._source.limits.parts)

    def _take_component(self, element: _Element) -> None:
        ref, step = element.get("refDes", "").strip(), self._step(element)
        if not ref or step is None:
            return
        component = Component(ref=ref, line=self._line(element), footprint=element.get("packageRef", ""))
        component.symbol = element.get("part", "")
        for child in element:
            if local(child) in ("NonstandardAttribute", "Attribute"):
                component.fields.append((child.get("name", ""), child.get("value", ""), self._line(child)))
        step.components.setdefault(ref, component)
        _bounds.bound(self._source.name, component.line, "parts", len(step.components), self._source.limits.parts)

    def _take_pin(self, element: _Element) -> None:
        """A pin of a logical net, or of a pad in a set of features on a net."""
        parent = element.getparent()
        if parent is not self._around:
            self._around, self._home = parent, self._home_of(element)
        if self._home is None:
            return
        net, ends, logical = self._home
        ref, pin = element.get("componentRef", "").strip(), element.get("pin", "").strip()
        if not ref or not pin:
            self.contents.nameless += logical
            return
        line = self._line(element)
        ends.setdefault((net, ref, pin), line)
        _bounds.bound(self._source.name, line, "connections", len(ends), self._source.limits.connections)

    def _home_of(self, element: _Element) -> Home | None:
        """Net, connections to add to, and whether they are those of logical nets; None for a pin on no named net."""
        for around in element.iterancestors("{*}LogicalNet", "{*}Set", "{*}PadStack"):
            logical = local(around) == "LogicalNet"
            net, step = around.get("name" if logical else "net"), self._step(around)
            if net is not None and step is not None:
                return net.strip(), step.logical if logical else step.pads, logical
        return None

    def _take_net(self, element: _Element) -> None:
        step = self._step(element)
        if step is not None:
            step.nets.setdefault(element.get("name", "").strip(), self._line(element))
            _bounds.bound(self._source.name, self._line(element), "nets", len(step.nets), self._source.limits.nets)

    def _take_package(self, element: _Element) -> None:
        pins = ((child.get("number", ""), child.get("name", "")) for child in element if local(child) == "Pin")
        self.contents.pin_names.setdefault(
            element.get("name", ""), {number: name for number, name in pins if name != number}
        )

    def _take_enterprise(self, element: _Element) -> None:
        self.contents.enterprises[element.get("id", "")] = element.get("name", "") or element.get("id", "")

    def _take_maker(self, element: _Element) -> None:
        number, part, enterprise = makers(element)
        if part:
            self.contents.makers.setdefault(number, (part, enterprise))

    TAKEN: Final = {
        "StepRef": _take_step_ref,
        "BomItem": _take_item,
        "Component": _take_component,
        "PinRef": _take_pin,
        "LogicalNetPin": _take_pin,
        "LogicalNet": _take_net,
        "Package": _take_package,
        "Enterprise": _take_enterprise,
        "AvlItem": _take_maker,
    }


READER = Reader(name=NAME, order=12, claims=claims, read=read)
