"""Resistors reduced by hand: series, parallel, star to mesh, until one terminal sees held terminals only.

Star to mesh (Rosen): a node with resistors R1 .. Rk to its neighbours is replaced by resistors
Ri Rj (1/R1 + .. + 1/Rk) between each pair; a current drawn from it is drawn from the neighbours in parts 1/Ri.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from itertools import combinations

from rcrules.derivation._sheet import Number, Sheet

LARGEST_STAR = 4
"""Neighbours of a node beyond which nobody works it out by hand."""
MOST_NODES = 8
"""Nodes to be taken away beyond which nobody works it out by hand."""


class TooLarge(Exception):  # noqa: N818 - an answer, no error
    """The network is not one to be reduced by hand."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Link:
    """A resistor between two terminals."""

    a: int
    b: int
    ohms: Number

    def other(self, end: int) -> int:
        """The terminal at its other end."""
        return self.a + self.b - end


@dataclass(slots=True, kw_only=True)
class Mesh:
    """Resistors and drawn currents while nodes are taken away."""

    sheet: Sheet
    names: Sequence[str]
    free: int
    """Terminals below this number are free."""
    links: list[Link]
    draws: dict[int, list[Number]] = field(default_factory=dict)
    """Free terminal -> currents drawn out of it [A]."""

    def at(self, terminal: int) -> list[Link]:
        """Resistors at a terminal."""
        return [link for link in self.links if terminal in (link.a, link.b) and link.a != link.b]

    def reduce(self, keep: int, fixed: frozenset[int] = frozenset()) -> list[Link]:
        """Resistors from ``keep`` to held (or ``fixed``) terminals, every other node taken away. Raises TooLarge."""
        inside = self._inside(keep, fixed)
        if len(inside) > MOST_NODES:
            raise TooLarge
        while inside:
            node = min(inside, key=lambda item: (len(self.at(item)), item))
            inside.remove(node)
            self._take_away(node)
        return self.at(keep)

    def _inside(self, keep: int, fixed: frozenset[int]) -> set[int]:
        """Free terminals that resistors join to ``keep`` through free terminals."""
        found, queue = {keep}, [keep]
        while queue:
            here = queue.pop()
            for there in {link.other(here) for link in self.at(here)} - found:
                if there < self.free and there not in fixed:
                    found.add(there)
                    queue.append(there)
        return found - {keep}

    def _take_away(self, node: int) -> None:
        links = self._merged(node)
        self.links = [link for link in self.links if node not in (link.a, link.b)]
        if len(links) > LARGEST_STAR:
            raise TooLarge
        self._hand_on(links, node)
        for one, two in combinations(links, 2):
            ends = one.other(node), two.other(node)
            if min(ends) < self.free:
                self.links.append(Link(a=ends[0], b=ends[1], ohms=self._joined(one, two, links, ends)))

    def _merged(self, node: int) -> list[Link]:
        """Resistors at a node, parallel ones as one."""
        by_end: dict[int, list[Link]] = {}
        for link in self.at(node):
            by_end.setdefault(link.other(node), []).append(link)
        return [self._parallel(links, node, end) for end, links in by_end.items()]

    def _parallel(self, links: list[Link], node: int, end: int) -> Link:
        if len(links) == 1:
            return links[0]
        return Link(a=node, b=end, ohms=parallel(self.sheet, self._symbol(node, end), [link.ohms for link in links]))

    def _joined(self, one: Link, two: Link, star: list[Link], ends: tuple[int, int]) -> Number:
        symbol = self._symbol(*ends)
        if len(star) == 2:
            return self.sheet.work(symbol, "Ω", "{} + {}", lambda a, b: a + b, one.ohms, two.ohms, note="in series")
        formula = "{} · {} · (" + " + ".join("1 / {}" for _ in star) + ")"
        numbers = [one.ohms, two.ohms, *(link.ohms for link in star)]

        def compute(a: float, b: float, *all_: float) -> float:
            return a * b * sum(1 / each for each in all_)

        return self.sheet.work(symbol, "Ω", formula, compute, *numbers, note="star to mesh")

    def _hand_on(self, links: list[Link], node: int) -> None:
        """Currents drawn from a node that goes are drawn from its neighbours."""
        for amps in self.draws.pop(node, []):
            for link in links:
                end = link.other(node)
                if end < self.free:
                    self.draws.setdefault(end, []).append(self._part(amps, link, links, node))

    def _part(self, amps: Number, link: Link, links: list[Link], node: int) -> Number:
        if len(links) == 1:
            return amps
        formula = "{} / {} / (" + " + ".join("1 / {}" for _ in links) + ")"
        return self.sheet.work(
            f"{amps.symbol} by {link.ohms.symbol}",
            "A",
            formula,
            lambda i, r, *all_: i / r / sum(1 / each for each in all_),
            amps,
            link.ohms,
            *(each.ohms for each in links),
            note=f"its part of the current drawn at {self.names[node]}",
        )

    def _symbol(self, a: int, b: int) -> str:
        return f"R({self.names[a]}, {self.names[b]})"


def parallel(sheet: Sheet, symbol: str, ohms: Sequence[Number], note: str = "in parallel") -> Number:
    """Resistors in parallel; one alone needs a line of its own too, to give it the symbol."""
    if len(ohms) == 1:
        return sheet.work(symbol, "Ω", "{}", lambda r: r, ohms[0])
    formula = "1 / (" + " + ".join("1 / {}" for _ in ohms) + ")"
    return sheet.work(symbol, "Ω", formula, lambda *all_: 1 / sum(1 / each for each in all_), *ohms, note=note)


def source(
    sheet: Sheet,
    symbol: str,
    ohms: Number,
    links: Sequence[Link],
    keep: int,
    volts: Mapping[int, Number],
    draws: Sequence[Number],
) -> Number:
    """Open-circuit voltage at ``keep``: R (V1/R1 + V2/R2 - I); held terminals at 0 V add nothing."""
    pushing = [link for link in links if volts[link.other(keep)].value != 0.0]
    if not pushing and not draws:
        return sheet.given(symbol, 0.0, "V", "nothing pushes")
    if len(links) == 1 and not draws:
        return sheet.work(symbol, "V", "{}", lambda v: v, volts[links[0].other(keep)])
    terms = [f"{'' if index == 0 else ' + '}{{}} / {{}}" for index in range(len(pushing))]
    formula = "{} · (" + "".join(terms) + "".join(" - {}" for _ in draws) + ")"
    numbers = [item for link in pushing for item in (volts[link.other(keep)], link.ohms)]
    count = len(pushing)

    def compute(r: float, *rest: float) -> float:
        pushed = sum(rest[2 * index] / rest[2 * index + 1] for index in range(count))
        return r * (pushed - sum(rest[2 * count :]))

    return sheet.work(symbol, "V", formula.replace("( - ", "(-"), compute, ohms, *numbers, *draws)
