"""EDIF forms to libraries, each form let go once it is understood."""

from collections.abc import Callable
from typing import Final

from rcrules.readers import _bounds
from rcrules.readers._component import Entry
from rcrules.readers._edif_model import MAX_WIDTH, Cell, End, Instance, Libraries, Name, Net, Port, View, key_of
from rcrules.readers._edif_words import child, children, designator, named, number, number_form, said
from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._sexpr import Form

_LEVELS: Final = 2
"""Nets and connections of all levels of a hierarchy for each one that a board may have."""
CONTAINERS: Final = frozenset({"edif", "library", "external", "contents", "page", "listofnets"})


class Taker:
    """Takes each form as it ends: what stands in a cell waits for the cell, and a cell for its library."""

    def __init__(self, source: Source) -> None:
        self._source, self._file = source, source.name
        self.libraries = Libraries()
        self._ends: list[End] = []
        self._everywhere: list[str] = []
        self._nets: list[Net] = []
        self._instances: list[Instance] = []
        self._ports: dict[str, Port] = {}
        self._interface: tuple[Entry, ...] = ()
        self._views: list[View] = []
        self._cells: list[Cell] = []
        self._scales: dict[str, float] = {}
        self._parts = self._pins = self._net_count = self._port_count = 0
        self.version: tuple[str, ...] | None = None

    def take(self, around: str | None, form: Form) -> bool:
        """Whether the form is understood and can be let go."""
        taker = self._TAKE.get(form.head or "")
        return taker is not None and taker(self, around or "", form)

    def _version(self, around: str, form: Form) -> bool:
        if around == "edif":
            self.version = tuple(form.atoms)
            if self.version != ("2", "0", "0"):
                raise refusal(
                    self._file,
                    "an EDIF version that is not read",
                    line=form.line,
                    found=shorten(" ".join(self.version)),
                    expected="(edifVersion 2 0 0)",
                    do="export the netlist as EDIF 2 0 0",
                )
        return True

    def _scale(self, _: str, form: Form) -> bool:
        """So many user units are so many base units."""
        unit = form.find("unit")
        numbers = [number(atom) for atom in form.atoms] + [number_form(inner) for inner in form.forms]
        given = [number for number in numbers if number]
        if unit is not None and unit.atoms and len(given) == 2:
            self._scales[unit.atoms[0].casefold()] = given[1] / given[0]
        return True

    def _end(self, around: str, form: Form) -> bool:
        if around not in ("joined", "portlist"):
            return False
        port, port_index = self._reference(form)
        instance = child(form, "instanceref")
        key, index = (None, None) if instance is None else self._reference(instance)
        self._ends.append(End(port, port_index, key, index, form.line))
        self._pins += 1
        _bounds.bound(self._file, form.line, "connections", self._pins, _LEVELS * self._source.limits.connections)
        return True

    def _global(self, _: str, form: Form) -> bool:
        self._everywhere.extend(form.atoms[:1])
        return True

    def _net(self, around: str, form: Form) -> bool:
        if around not in ("contents", "page", "listofnets"):
            return around == "net"  # a segment of the net around it
        net = Net(name=self._name(form), line=form.line, ends=tuple(self._ends), everywhere=tuple(self._everywhere))
        self._nets.append(net)
        self._ends, self._everywhere = [], []
        self._net_count += net.name.width or 1
        _bounds.bound(self._file, form.line, "nets", self._net_count, _LEVELS * self._source.limits.nets)
        return True

    def _instance(self, around: str, form: Form) -> bool:
        if around not in ("contents", "page"):
            return False
        view, cell, library = self._placed(form)
        name = self._name(form)
        self._parts += name.width or 1
        _bounds.bound(self._file, form.line, "parts", self._parts, self._source.limits.parts)
        self._instances.append(
            Instance(
                name=name,
                line=form.line,
                view=view,
                cell=cell,
                library=library,
                designator=designator(form),
                entries=self._entries(form),
                pins=self._placed_pins(form),
            )
        )
        return True

    def _placed_pins(self, form: Form) -> dict[str, str]:
        pins = {}
        for item in children(form, "portinstance"):
            number = designator(item)
            inner = child(item, "portref")
            if number:
                pins[self._reference(inner if inner is not None else item)[0]] = number
        return pins

    def _placed(self, form: Form) -> tuple[str, str, str]:
        """View, cell and library that an instance names; '' where it does not."""
        views = child(form, "viewlist")
        ref = child(views if views is not None else form, "viewref")
        cell = child(ref if ref is not None else form, "cellref")
        library = child(cell, "libraryref") if cell is not None else None
        view, placed, shelf = (self._reference(item)[0] if item is not None else "" for item in (ref, cell, library))
        return view, placed, shelf

    def _port(self, around: str, form: Form) -> bool:
        if around not in ("interface", "listofports"):
            return False
        direction = child(form, "direction")
        name = self._name(form)
        self._port_count += 1
        _bounds.bound(self._file, form.line, "ports", self._port_count, self._source.limits.connections)
        self._ports[name.key] = Port(
            name=name,
            direction=direction.first().casefold() if direction is not None else "",
            designator=designator(form),
        )
        return True

    def _interface_end(self, _: str, form: Form) -> bool:
        self._ends = []  # pins that are joined inside the part
        self._interface = self._entries(form)
        return True

    def _view(self, around: str, form: Form) -> bool:
        if around != "cell":
            return False
        kind = child(form, "viewtype")
        self._views.append(
            View(
                key=self._name(form).key,
                kind=kind.first().casefold() if kind is not None else "",
                ports=self._ports,
                instances=tuple(self._instances),
                nets=tuple(self._nets),
                entries=(*self._entries(form), *self._interface),
            )
        )
        self._ports, self._instances, self._nets, self._interface = {}, [], [], ()
        return True

    def _cell(self, _: str, form: Form) -> bool:
        cell = Cell(name=self._name(form), line=form.line, views=self._views, entries=self._entries(form))
        self._cells.append(cell)
        self._views = []
        _bounds.bound(
            self._file, form.line, "cells", len(self.libraries.cells) + len(self._cells), self._source.limits.parts
        )
        return True

    def _library(self, _: str, form: Form) -> bool:
        shelf = self._name(form).key
        for cell in self._cells:
            self.libraries.add(shelf, cell)
        self._cells, self._scales = [], {}
        return True

    def _design(self, around: str, form: Form) -> bool:
        cell = child(form, "cellref")
        if around == "edif" and cell is not None:
            library = child(cell, "libraryref")
            shelf = self._reference(library)[0] if library is not None else ""
            self.libraries.tops.append((shelf, self._reference(cell)[0]))
            self.libraries.title = self.libraries.title or self._name(form).text
        return True

    def _skip(self, _: str, __: Form) -> bool:
        return True

    def _reference(self, form: Form) -> tuple[str, int | None]:
        """Identifier and member that a form refers to."""
        if not form.forms and form.atoms and len(form.atoms[0]) <= _bounds.MAX_NAME:
            return key_of(form.atoms[0]), None
        member = child(form, "member")
        if member is not None:
            key, _ = self._reference_name(member)
            index = next((atom for atom in reversed(member.atoms) if atom.isdecimal() and len(atom) < 8), "0")
            return key, int(index)
        return self._reference_name(form)[0], None

    def _reference_name(self, form: Form) -> tuple[str, str]:
        inner = child(form, "name")
        atoms = inner.atoms if inner is not None else form.atoms
        text = atoms[0] if atoms else ""
        _bounds.named(self._file, form.line, "a name", text)
        return key_of(text), text

    def _name(self, form: Form) -> Name:
        """The name that a form defines."""
        array, width = child(form, "array"), 0
        if array is not None:
            width = 1
            for atom in array.atoms[0 if array.forms else 1 :]:
                width *= int(atom) if atom.isdecimal() and len(atom) < 8 else 1
            _bounds.bound(self._file, form.line, "members of one array", width, MAX_WIDTH)
            form = array
        key, text = named(form)
        for name in (key, text):
            _bounds.named(self._file, form.line, "a name", name)
        return Name(key_of(key), text or key.removeprefix("&"), width)

    def _entries(self, form: Form) -> tuple[Entry, ...]:
        """Its properties by name."""
        entries = []
        for item in children(form, "property"):
            key, text = named(item)
            name = text or (" ".join(item.atoms) if item.atoms else key)
            entries.append((name.removeprefix("&"), said(item, self._scales), item.line))
        _bounds.bound(self._file, form.line, "fields of one part", len(entries), _bounds.MAX_FIELDS)
        return tuple(entries)

    _TAKE: Final[dict[str, Callable[["Taker", str, Form], bool]]] = {
        "edifversion": _version,
        "scale": _scale,
        "portref": _end,
        "globalportref": _global,
        "net": _net,
        "instance": _instance,
        "port": _port,
        "interface": _interface_end,
        "view": _view,
        "cell": _cell,
        "library": _library,
        "external": _library,
        "design": _design,
        "contents": _skip,
        "page": _skip,
        "netbundle": _skip,
        "userdata": _skip,
        "comment": _skip,
    }
