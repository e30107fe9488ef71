"""Where the symbols of a network stand: free nets side by side, what feeds them above, what they lead to ground below.

One plan serves all shapes: a chain of nets with series parts between neighbours draws every filter, divider, delay
and ladder as it is drawn by hand; parts between nets that are no neighbours run on tracks above. Lengths are in units
of the drawing library, y upwards, the chain at y = 0.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Final

from rcrules.reports._page._chain import chain

_ARM: Final = 2.7
"""Length of a part that stands upright."""
_BODY: Final = 2.4
"""Length of a part in the chain, beside the labels of its left neighbour."""
_TRACK: Final = 1.4
"""Between parts that lie one above another."""
_ABOVE: Final = 4.4
"""Height of the first track, above the names of supplies."""
_LETTER: Final = 0.2
_LONGEST: Final = 18
"""Letters of a name that are drawn; all of them stand in the tables."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Branch:
    """A resistor or capacitor between two nets."""

    ref: str
    value: str
    """``10 kΩ``, or what the schematic says."""
    kind: str
    """``resistor`` or ``capacitor``."""
    nets: tuple[str, str]

    def other(self, net: str) -> str:
        """The net at the other end."""
        return self.nets[1] if self.nets[0] == net else self.nets[0]


@dataclass(frozen=True, slots=True, kw_only=True)
class Symbol:
    """A part, a wire, or the mark of a held net; marks have one end."""

    kind: str
    """``resistor``, ``capacitor``, ``wire``, ``ground``, ``supply``, ``driven``, ``dot``."""
    start: tuple[float, float]
    end: tuple[float, float] | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Label:
    """A text at a point."""

    at: tuple[float, float]
    text: str
    anchor: str = "start"
    """``start``, ``middle`` or ``end``."""
    look: str = ""
    """Style class."""


@dataclass(slots=True, kw_only=True)
class Plan:
    """Symbols and labels in drawing order."""

    symbols: list[Symbol] = field(default_factory=list)
    labels: list[Label] = field(default_factory=list)

    def wire(self, start: tuple[float, float], end: tuple[float, float]) -> None:
        """A straight connection; none of no length."""
        if start != end:
            self.symbols.append(Symbol(kind="wire", start=start, end=end))

    def part(self, branch: Branch, start: tuple[float, float], end: tuple[float, float]) -> None:
        """A part between two points, its reference and value beside it if upright, else above it."""
        self.symbols.append(Symbol(kind=branch.kind, start=start, end=end))
        x, y = (start[0] + end[0]) / 2, (start[1] + end[1]) / 2
        if start[0] == end[0]:
            self.labels.append(Label(at=(x + 0.45, y + 0.2), text=cut(branch.ref)))
            self.labels.append(Label(at=(x + 0.45, y - 0.2), text=cut(branch.value)))
        else:
            self.labels.append(Label(at=(x, y + 0.55), text=cut(f"{branch.ref} {branch.value}"), anchor="middle"))

    def mark(self, kind: str, net: str, at: tuple[float, float], toward: str) -> None:
        """A held net at the end of a part that points up, down, left or right."""
        self.symbols.append(Symbol(kind=kind, start=at))
        x, y = at
        places = {"up": (x, y + 0.75, "middle"), "down": (x, y - 1.0, "middle")}
        places |= {"left": (x - 0.3, y, "end"), "right": (x + 0.3, y, "start")}
        if kind != "ground" or net != "GND":
            left, height, anchor = places[toward]
            self.labels.append(Label(at=(left, height), text=cut(net), anchor=anchor, look="net"))


def cut(text: str) -> str:
    """A name as long as a drawing can hold."""
    return text if len(text) <= _LONGEST else f"{text[: _LONGEST - 1]}…"


def plan(branches: Sequence[Branch], held: Mapping[str, str], feeds: Mapping[str, Sequence[str]]) -> Plan:
    """The whole drawing. held: net -> its kind; every other net is free. feeds: free net -> pins that it feeds."""
    free = [net for branch in branches for net in branch.nets if net not in held]
    resistors, capacitors = (
        [branch.nets for branch in branches if branch.kind == kind] for kind in ("resistor", "capacitor")
    )
    order = chain(list(dict.fromkeys(free)), resistors, capacitors, held)
    found, x, tracks = Plan(), 0.0, Tracks()
    for index, net in enumerate(order):
        own = [branch for branch in branches if net in branch.nets]
        near = {*order[max(index - 1, 0) : index + 2]}
        spot = Spot(net=net, own=own, held=held, near=near, first=index == 0)
        x = _node(found, spot, feeds.get(net, ()), x, tracks)
        if index + 1 < len(order):
            x = _between(found, [branch for branch in own if order[index + 1] in branch.nets], x)
    tracks.draw(found)
    _bridges(found, [branch for branch in branches if set(branch.nets) <= set(held)], held, x)
    return found


@dataclass(frozen=True, slots=True, kw_only=True)
class Spot:
    """A free net and what is at it."""

    net: str
    own: Sequence[Branch]
    held: Mapping[str, str]
    near: set[str]
    """Itself and its neighbours in the chain."""
    first: bool
    """Whether it stands at the left end."""

    @property
    def downs(self) -> list[Branch]:
        """Parts to ground."""
        return [branch for branch in self.own if self.held.get(branch.other(self.net)) == "ground"]

    @property
    def ups(self) -> list[Branch]:
        """Parts to supplies and driven nets."""
        return [branch for branch in self.own if self.held.get(branch.other(self.net)) in ("supply", "driven")]

    @property
    def far(self) -> list[Branch]:
        """Parts to free nets that are no neighbours."""
        return [branch for branch in self.own if branch.other(self.net) not in {*self.held, *self.near}]


@dataclass(slots=True, kw_only=True)
class Tracks:
    """Parts between nets that are no neighbours, each with the columns of its ends."""

    ends: dict[str, tuple[Branch, list[float]]] = field(default_factory=dict)

    def end(self, branch: Branch, x: float) -> None:
        """One end of a part reached."""
        self.ends.setdefault(branch.ref, (branch, []))[1].append(x)

    def draw(self, found: Plan) -> None:
        """Each part on a track of its own, wires down to the chain."""
        for index, (branch, columns) in enumerate(self.ends.values()):
            y, (left, right) = _ABOVE + index * _TRACK, (min(columns), max(columns))
            for column in (left, right):
                found.wire((column, 0.0), (column, y))
            found.part(branch, (left, y), (right, y))


def _node(found: Plan, spot: Spot, feeds: Sequence[str], x: float, tracks: Tracks) -> float:
    """One net with all that stands on it; the column of its right end."""
    ups, downs, far = spot.ups, spot.downs, spot.far
    side = next((branch for branch in ups if spot.first and spot.held[branch.other(spot.net)] == "driven"), None)
    if side is not None:
        ups.remove(side)
        found.part(side, (x, 0.0), (x + _BODY, 0.0))
        found.mark("driven", side.other(spot.net), (x, 0.0), "left")
        x += _BODY
    fed = f"→ {', '.join(feeds)}" if feeds else ""
    step = _step([*ups, *downs], [spot.net, fed])
    columns = [x + index * step for index in range(max(len(ups) + len(far), len(downs), 1))]
    _upright(found, spot, ups, columns, _ARM)
    _upright(found, spot, downs, columns, -_ARM)
    for branch, column in zip(far, columns[len(ups) :], strict=False):
        tracks.end(branch, column)
    found.wire((x, 0.0), (columns[-1] + step, 0.0))
    found.symbols += [Symbol(kind="dot", start=(column, 0.0)) for column in columns]
    found.labels.append(Label(at=(x + 0.15, 0.28), text=cut(spot.net), look="net"))
    if fed:
        found.labels.append(Label(at=(x + 0.15, -0.28), text=cut(fed), look="pin"))
    return columns[-1] + step


def _upright(found: Plan, spot: Spot, branches: Sequence[Branch], columns: Sequence[float], height: float) -> None:
    """Parts from the net to held nets, one a column."""
    for branch, column in zip(branches, columns, strict=False):
        net = branch.other(spot.net)
        found.part(branch, (column, 0.0), (column, height))
        found.mark(spot.held[net], net, (column, height), "up" if height > 0 else "down")


def _step(branches: Sequence[Branch], names: Sequence[str]) -> float:
    """Columns far enough apart for the labels beside them."""
    words = [cut(word) for branch in branches for word in (branch.ref, branch.value)] + [cut(name) for name in names]
    return max(1.9, 1.0 + _LETTER * max(map(len, words)))


def _between(found: Plan, series: Sequence[Branch], x: float) -> float:
    """The parts between two neighbours, one above another; a gap where there are none."""
    for index, branch in enumerate(series):
        y = index * _TRACK
        found.wire((x, 0.0), (x, y))
        found.part(branch, (x, y), (x + _BODY, y))
        found.wire((x + _BODY, y), (x + _BODY, 0.0))
    if not series:
        return x + 1.0
    found.wire((x + _BODY, 0.0), (x + _BODY + 0.4, 0.0))
    return x + _BODY + 0.4


def _bridges(found: Plan, bridges: Sequence[Branch], held: Mapping[str, str], x: float) -> None:
    """Parts between two held nets, those of one pair between the same two rails."""
    pairs: dict[tuple[str, str], list[Branch]] = {}
    for branch in bridges:
        lower = min(branch.nets, key=lambda net: (held[net] != "ground", held[net] != "supply", net))
        pairs.setdefault((branch.other(lower), lower), []).append(branch)
    x += 1.5 if x else 0.0
    for (upper, lower), members in pairs.items():
        step = _step(members, [upper, lower])
        columns = [x + index * step for index in range(len(members))]
        for branch, column in zip(members, columns, strict=True):
            found.part(branch, (column, _ARM / 2), (column, -_ARM / 2))
        for y in (_ARM / 2, -_ARM / 2):
            found.wire((columns[0], y), (columns[-1], y))
        middle = columns[0]
        found.mark(held[upper], upper, (middle, _ARM / 2), "up")
        found.mark(held[lower], lower, (middle, -_ARM / 2), "down")
        x = columns[-1] + step + 0.6
