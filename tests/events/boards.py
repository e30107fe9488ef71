"""Small boards as text, through readers, design, parts and networks."""

from dataclasses import dataclass
from xml.sax.saxutils import quoteattr

from rcrules.design import build
from rcrules.events import pose
from rcrules.measures import registry
from rcrules.networks import Board, Node, recognise
from rcrules.parts import rate
from rcrules.problems import Bounds, Problem, solve_bounds
from rcrules.project import Project, load
from rcrules.readers import Source, read

SYMBOLS = {
    "R": "R",
    "C": "C",
    "U": "QX7301",
    "J": "Conn_01x02",
    "SW": "SW_Push",
    "D": "D",
    "L": "L",
    "FB": "Ferrite_Bead",
    "RV": "R_Potentiometer",
    "Y": "Crystal",
}


@dataclass(frozen=True, kw_only=True)
class Bench:
    """A recognised board and its project."""

    board: Board
    project: Project

    def node(self, net: str) -> Node:
        return next(node for network in self.board.networks for node in network.nodes if node.net == net)

    def pose(self, at: str | Node, measure: str, **options: str | float) -> Problem:
        subject = at if isinstance(at, Node) else self.board.parts.get(at) or self.node(at)
        plain = {name.rstrip("_"): value for name, value in options.items()}
        return pose(self.board, self.project, subject, registry()[measure], plain)

    def measure(self, at: str | Node, measure: str, *, given_only: bool = False, **options: str | float) -> Bounds:
        found = solve_bounds([(self.pose(at, measure, **options), registry()[measure], given_only)])[0]
        assert isinstance(found, Bounds)
        return found


def bench(parts: str, nets: str, project: str = "") -> Bench:
    """``parts``: "R1 10k, C1 100n"; ``nets``: one a line, "N: R1.2 C1.1 U1.7/NRST/input"."""
    facts = load("rcrules.toml", project)
    design = build([read(Source(name="board.xml", data=xml(parts, nets).encode()))])
    return Bench(board=recognise(design, rate(design, facts), facts), project=facts)


def xml(parts: str, nets: str) -> str:
    components = "".join(_component(*item.strip().split(" ", 1)) for item in parts.split(","))
    lines = [line.split(":", 1) for line in nets.strip().splitlines()]
    found = "".join(_net(code, name.strip(), pins.split()) for code, (name, pins) in enumerate(lines, 1))
    return f'<export version="E"><components>{components}</components><nets>{found}</nets></export>'


def _component(ref: str, value: str) -> str:
    symbol = SYMBOLS[ref.rstrip("0123456789")]
    return f"<comp ref={quoteattr(ref)}><value>{value}</value><libsource lib='Device' part={quoteattr(symbol)}/></comp>"


def _net(code: int, name: str, pins: list[str]) -> str:
    return f"<net code='{code}' name={quoteattr(name)}>{''.join(_pin(pin) for pin in pins)}</net>"


def _pin(text: str) -> str:
    where, *facts = text.split("/")
    ref, number = where.split(".")
    function = f" pinfunction={quoteattr(facts[0])}" if facts else ""
    kind = facts[1] if len(facts) > 1 else "passive"
    return f"<node ref={quoteattr(ref)} pin={quoteattr(number)}{function} pintype={quoteattr(kind)}/>"
