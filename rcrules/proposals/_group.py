"""Failing findings by what they stand at: a network, a supply, or a part alone."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from rcrules.checks import Subject
from rcrules.design import natural
from rcrules.findings import Finding
from rcrules.networks import Board, Network
from rcrules.parts import Known

_MOST_REFS = 4
"""Parts of a group that are tried."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Group:
    """What is changed together, and judged together."""

    network: Network | None
    refs: tuple[str, ...]
    """Resistors and capacitors to try, those that set what fails first."""
    around: frozenset[str]
    """Every resistor and capacitor whose findings must hold."""
    nets: frozenset[str]
    findings: tuple[int, ...]
    """Indexes of the failing findings."""

    def touches(self, subject: Subject) -> bool:
        """Whether a finding on the subject may change with the group's parts."""
        return bool(self.around.intersection(subject.refs) or self.nets.intersection(subject.nets))


def groups(board: Board, findings: Sequence[Finding]) -> list[Group]:
    """Every failing finding in one group."""
    found: dict[str, list[int]] = {}
    where: dict[str, Network | None] = {}
    for index, item in enumerate(findings):
        if item.outcome == "fails":
            network = _network(item, board)
            key = network.id if network else item.net or " ".join(item.parts)
            where[key] = network
            found.setdefault(key, []).append(index)
    return [_group(where[key], indexes, board, findings) for key, indexes in found.items()]


def _network(item: Finding, board: Board) -> Network | None:
    return next((network for network in board.networks if _stands_at(item, network)), None)


def _stands_at(item: Finding, network: Network) -> bool:
    if item.net is not None:
        return item.net == network.id or item.net in network.free or any(n.net == item.net for n in network.nodes)
    return any(branch.ref in item.parts for branch in network.branches)


def _group(network: Network | None, indexes: list[int], board: Board, findings: Sequence[Finding]) -> Group:
    own = [ref for index in indexes for ref in findings[index].parts]
    if network is not None:
        around = [branch.ref for branch in network.branches]
        nets = {*network.free, *(node.net for node in network.nodes)}
    else:
        nets = {net for index in indexes if (net := findings[index].net)}
        around = own or list(_on(nets, board))
    refs = [ref for ref in dict.fromkeys((*own, *around)) if _changeable(ref, board)]
    return Group(
        network=network,
        refs=tuple(refs[:_MOST_REFS]),
        around=frozenset((*own, *around)),
        nets=frozenset(nets),
        findings=tuple(indexes),
    )


def _on(nets: Iterable[str], board: Board) -> list[str]:
    """Resistors, then capacitors that have a pin on one of the nets."""
    joined = {net for net, joint in board.joints.items() if joint in nets or net in nets} | set(nets)
    pins = [pin for net in joined if net in board.design.nets for pin in board.design.nets[net].pins]
    refs = {pin.ref for pin in pins if pin.ref in board.parts}
    return sorted(refs, key=lambda ref: (board.parts[ref].kind != "resistor", natural(ref)))


def _changeable(ref: str, board: Board) -> bool:
    part = board.parts.get(ref)
    return part is not None and part.kind in ("resistor", "capacitor") and part.fitted and isinstance(part.value, Known)
