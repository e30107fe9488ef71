"""An EDIF hierarchy as one flat netlist."""

from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import Final

from rcrules.readers import _bounds
from rcrules.readers._columns import FOOTPRINT, plain
from rcrules.readers._component import Component
from rcrules.readers._edif_joints import Joints
from rcrules.readers._edif_model import Cell, End, Instance, Libraries, Net, View
from rcrules.readers._edif_top import top
from rcrules.readers._export import Export, Remark, Source
from rcrules.readers._netlist import Netlist

_VALUES: Final = ("value", "comment", "val", "part value", "component value")
"""Properties that hold the value, best first."""
_TYPES: Final = {"input": "input", "output": "output"}
"""``INOUT`` is written for every pin of which nothing is known."""
_WORK: Final = 4
_SHOWN: Final = 5
Slot = tuple[str, int]
"""Port or instance, and member."""
Placed = tuple[Instance, Cell | None, View | None]
"""An instance, with the cell and view that it places where the file defines them."""


@dataclass(slots=True, kw_only=True)
class _Block:
    """One placed cell with contents."""

    path: str
    depth: int
    cell: Cell
    view: View
    outer: dict[Slot, int]
    """Net outside, by port and member."""
    by_key: dict[Slot, int] = field(default_factory=dict)
    by_text: dict[str, int] = field(default_factory=dict)
    placed: dict[str, Placed] = field(default_factory=dict)
    joins: dict[Slot, list[tuple[str, int, int, int]]] = field(default_factory=dict)
    """Port, member, net and line of each connection of an instance."""


def flatten(source: Source, reader: str, libraries: Libraries, assumed: tuple[Remark, ...]) -> Export:
    """Every part and net below the board's cell. Raises UserMistake without one, or where a cell contains itself."""
    cell, view, said = top(source.name, libraries)
    netlist = Netlist(source, reader, assumed)
    netlist.title = libraries.title or cell.name.text
    if said:
        netlist.remark(cell.line, said)
    flat = _Flat(netlist, libraries)
    flat.walk(_Block(path="", depth=0, cell=cell, view=view, outer={}))
    return flat.export()


class _Flat:
    """Walks the hierarchy from the board down, block by block."""

    def __init__(self, netlist: Netlist, libraries: Libraries) -> None:
        self._netlist, self._libraries = netlist, libraries
        self._file = netlist.source.name
        self._joints = Joints(netlist.source)
        self._everywhere: dict[str, int] = {}
        self._parts: dict[str, Component] = {}
        self._pins: dict[tuple[int, str, str], tuple[str, str, int]] = {}
        self._count = self._ended = 0
        self._symbols: list[int] = []
        self._strangers: list[tuple[str, int]] = []

    def walk(self, board: _Block) -> None:
        """Take in a block and all below it."""
        waiting = [board]
        while waiting:
            block = waiting.pop()
            self._join_nets(block)
            inner = [found for placed in block.placed.values() for found in self._place(block, placed)]
            waiting.extend(reversed(inner))

    def _join_nets(self, block: _Block) -> None:
        for instance in block.view.instances:
            cell, view = self._libraries.placed(instance, block.cell)
            block.placed.setdefault(instance.name.key, (instance, cell, view))
        for net in block.view.nets:
            ids = [self._net(block, net, index) for index in range(net.name.width or 1)]
            for name in net.everywhere:
                self._join_everywhere(name, ids[0], net.line)
            for end in net.ends:
                self._join_end(block, ids, end)

    def _net(self, block: _Block, net: Net, index: int) -> int:
        """The net of a member; two forms with one identifier or one text are one net."""
        key, text = (net.name.key, index), net.name.member(index)
        held, same = block.by_key.get(key), block.by_text.get(text)
        found = held if held is not None else same
        if found is None:
            found = self._joints.new(block.depth, block.path, text, net.line)
        elif held is not None and same is not None:
            self._joints.join(held, same)
        block.by_key.setdefault(key, found)
        block.by_text.setdefault(text, found)
        return found

    def _join_everywhere(self, name: str, net: int, line: int) -> None:
        key = name.removeprefix("&").casefold()
        if key not in self._everywhere:
            self._everywhere[key] = self._joints.new(-1, "", name.removeprefix("&"), line)
        self._joints.join(net, self._everywhere[key])

    def _join_end(self, block: _Block, nets: list[int], end: End) -> None:
        if end.instance is None:
            for member, net in self._bits(end, nets, block.view):
                self._joints.join(net, block.outer.setdefault((end.port, member), net))
            return
        placed = block.placed.get(end.instance)
        if placed is None:
            self._strangers.append((end.instance, end.line))
            return
        instance, _, view = placed
        if end.instance_index is None and instance.name.width:
            slots = [
                (index, end.port_index or 0, nets[min(index, len(nets) - 1)]) for index in range(instance.name.width)
            ]
        else:
            slots = [(end.instance_index or 0, member, net) for member, net in self._bits(end, nets, view)]
        for index, member, net in slots:
            block.joins.setdefault((end.instance, index), []).append((end.port, member, net, end.line))
            self._ended += 1
        _bounds.bound(
            self._file,
            end.line,
            "connections of all levels",
            self._ended,
            _WORK * self._netlist.source.limits.connections,
        )

    def _bits(self, end: End, nets: list[int], view: View | None) -> list[tuple[int, int]]:
        """Members of a port, each with its net; a whole array is joined member by member."""
        port = view.ports.get(end.port) if view is not None else None
        if end.port_index is not None or port is None or not port.name.width:
            return [(end.port_index or 0, nets[0])]
        return [(index, nets[min(index, len(nets) - 1)]) for index in range(port.name.width)]

    def _place(self, block: _Block, placed: Placed) -> Iterator[_Block]:
        """The blocks of an instance, one for each member; a cell without contents is a part."""
        instance, cell, view = placed
        for index in range(instance.name.width or 1):
            self._count += 1
            _bounds.bound(self._file, instance.line, "parts", self._count, self._netlist.source.limits.parts)
            joins = block.joins.get((instance.name.key, index), [])
            own = instance.designator.strip()
            text = instance.name.member(index) if not own or "?" in own or instance.name.width else own
            path = f"{block.path}/{text}" if block.path else text
            _bounds.named(self._file, instance.line, "a reference", path)
            if cell is not None and view is not None and (view.instances or view.nets):
                yield self._inner(block, path, cell, view, joins)
            elif not own and self._is_symbol(block, cell, view, joins):
                self._symbols.append(instance.line)
            else:
                self._add_part(block, path, placed, joins)

    def _inner(
        self, block: _Block, path: str, cell: Cell, view: View, joins: list[tuple[str, int, int, int]]
    ) -> _Block:
        outer: dict[Slot, int] = {}
        for port, member, net, _ in joins:
            self._joints.join(net, outer.setdefault((port, member), net))
        return _Block(path=path, depth=block.depth + 1, cell=cell, view=view, outer=outer)

    def _is_symbol(
        self, block: _Block, cell: Cell | None, view: View | None, joins: list[tuple[str, int, int, int]]
    ) -> bool:
        """Whether a placed cell only names its net, as supply and ground symbols do."""
        if cell is None or view is None or len(view.ports) != 1 or len(joins) != 1:
            return False
        port = next(iter(view.ports.values()))
        known = {block.by_text.get(text) for text in (cell.name.text, port.name.text)} - {None}
        return not port.name.width and joins[0][2] in known

    def _add_part(self, block: _Block, ref: str, placed: Placed, joins: list[tuple[str, int, int, int]]) -> None:
        instance, _, view = placed
        if ref not in self._parts:
            self._parts[ref] = _component(ref, block.path, placed)
        for port, member, net, line in joins:
            number, name, kind = _pin(instance, view, port, member)
            self._pins.setdefault((net, ref, number), (name, kind, line))

    def export(self) -> Export:
        """Everything found."""
        for component in self._parts.values():
            self._netlist.add_component(component)
        ends: dict[int, list[tuple[str, str, str, str, int]]] = {}
        for (net, ref, number), (name, kind, line) in self._pins.items():
            ends.setdefault(self._joints.find(net), []).append((ref, number, name, kind, line))
        for net, text, line in self._joints.standing():
            for node in dict.fromkeys(ends.get(net, ())):
                self._netlist.add_node(node)
            self._netlist.add_net(text, str(net), line)
        self._tell()
        return self._netlist.export()

    def _tell(self) -> None:
        if self._symbols:
            text = f"{len(self._symbols)} placed symbols that only name their net are no parts"
            self._netlist.remark(self._symbols[0], text)
        if self._strangers:
            names = ", ".join(dict.fromkeys(repr(name) for name, _ in self._strangers[:_SHOWN]))
            text = f"{len(self._strangers)} connections to instances that the file does not hold are left out: {names}"
            self._netlist.remark(self._strangers[0][1], text)


def _component(ref: str, path: str, placed: Placed) -> Component:
    instance, cell, view = placed
    component = Component(ref=ref, line=instance.line, sheet=path)
    if cell is not None:
        component.library, component.symbol = cell.library, cell.name.text
    else:
        component.symbol = instance.cell
    own = {plain(name) for name, _, _ in instance.entries}
    default = (*(view.entries if view else ()), *(cell.entries if cell else ()))
    entries = [*instance.entries, *(entry for entry in default if plain(entry[0]) not in own)]
    for wanted in _VALUES:
        found = next((entry for entry in entries if plain(entry[0]) == wanted and (entry[1] or "").strip()), None)
        if found is not None:
            component.value, component.value_line = found[1] or "", found[2]
            entries = [entry for entry in entries if entry[0] != found[0]]
            break
    component.fields = entries
    component.footprint = next((text or "" for name, text, _ in entries if plain(name) in FOOTPRINT), "")
    return component


def _pin(instance: Instance, view: View | None, key: str, member: int) -> tuple[str, str, str]:
    """Number, name and type of a pin; without a number of its own it is called by its name."""
    port = view.ports.get(key) if view is not None else None
    if view is None or port is None:
        return instance.pins.get(key, key), "", ""
    numbers = [item.strip() for item in (instance.pins.get(key) or port.designator).split(",")]
    number = numbers[member] if member < len(numbers) else ""
    name = port.name.member(member)
    if not number and port.name.width and len(view.ports) == 1:
        number = str(port.name.label(member))
    return number or name, name if number and name != number else "", _TYPES.get(port.direction, "")
