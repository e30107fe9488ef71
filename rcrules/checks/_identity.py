"""What a finding is about, as keys that survive other values and other annotation."""

from collections.abc import Iterable
from hashlib import sha256

from rcrules.checks._subjects import Subject
from rcrules.networks import Board, Branch, Node


def fingerprint(rule: str, subject: Subject, board: Board) -> str:
    """Two keys joined by a dot: rule with references and pins; rule with the topology around the subject.

    Neither holds values or names that the schematic editor makes up; the second holds no references.
    """
    own = _digest(rule, subject.kind, *sorted(subject.refs), *sorted(subject.feeds))
    return f"{own}.{_digest(rule, subject.kind, *_topology(subject, board))}"


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
    """``here``, a held net by kind (a supply also by name), or ``free``."""
    if net in own:
        return "here"
    held = board.held.get(net)
    if held is None:
        return "free"
    return f"{held.kind} {held.net}" if held.kind == "supply" else held.kind
