"""What a finding is about, as keys that survive other values and other annotation."""

from collections.abc import Iterable
from hashlib import sha256

from rcrules.checks._subject import Subject
from rcrules.names import automatic
from rcrules.networks import Board, Branch, Node


def fingerprint(rule: str, subject: Subject, board: Board) -> str:
    """Two keys joined by a dot: rule with references and pins; rule with the topology around the subject.

    Neither holds values or names that the schematic editor makes up; the second holds no references.
    """
    own = _digest(rule, subject.kind, *sorted(_pins(subject, board)))
    return f"{own}.{_digest(rule, subject.kind, *_topology(subject, board))}"


def _pins(subject: Subject, board: Board) -> list[str]:
    """References and pins; of a supply, which has neither, its own names, else the pins of what is neither R nor C."""
    if subject.refs or subject.feeds:
        return [*subject.refs, *subject.feeds]
    named = [net for net in subject.nets if not automatic(net)]
    pins = [pin for net in subject.nets if net in board.design.nets for pin in board.design.nets[net].pins]
    return named or [pin.key for pin in pins if board.parts[pin.ref].kind not in ("resistor", "capacitor")]


def _digest(*texts: str) -> str:
    """Sixteen hexadecimal digits."""
    return sha256("\x1f".join(texts).encode("utf-8", "surrogatepass")).hexdigest()[:16]


def _topology(subject: Subject, board: Board) -> list[str]:
    """Pin names fed, role, and every branch of the network by kind and by what stands at its ends."""
    fed = sorted(pin.partition(".")[2] for pin in subject.feeds)
    if subject.network is None:
        return [*fed, *sorted(_end(net, board, ()) for net in subject.nets)]
    role = subject.target.role if isinstance(subject.target, Node) else ""
    own = tuple(subject.nets)
    return [*fed, role, *sorted(_branch(branch, board, own) for branch in subject.network.branches)]


def _branch(branch: Branch, board: Board, own: Iterable[str]) -> str:
    ends = sorted(_end(net, board, own) for net in (branch.a, branch.b))
    return f"{branch.kind} {ends[0]} {ends[1]}"


def _end(net: str, board: Board, own: Iterable[str]) -> str:
    """``here``, a held net by kind (a supply also by its own name), or ``free``."""
    if net in own:
        return "here"
    held = board.held.get(net)
    if held is None:
        return "free"
    return f"{held.kind} {held.net}" if held.kind == "supply" and not automatic(held.net) else held.kind
