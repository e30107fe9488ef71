"""Why there is no number at a place of the board, and what would give one."""

from collections.abc import Iterator

from rcrules.design import Pin
from rcrules.networks import Board, Held
from rcrules.quantities import show

_MOST_NAMES = 6


def why_nothing(board: Board, at: str) -> tuple[str, list[str]]:
    """The reason, and project lines that would help; at: a net, part or pin that the board has."""
    part = board.parts.get(at)
    if part is not None and not part.fitted:
        return f"{at} is not fitted", []
    if part is not None:
        return _of_part(board, at, part.kind)
    pin = next((pin for pin in _pins(board) if at in (pin.key, f"{pin.ref}.{pin.number}")), None)
    net = pin.net if pin is not None and at not in board.design.nets else at
    reason, ask = _of_net(board, net)
    return (f"{at} is at {net}; {reason}" if net != at else reason), ask


def _pins(board: Board) -> Iterator[Pin]:
    for net in board.design.nets.values():
        yield from net.pins


def _of_part(board: Board, ref: str, kind: str) -> tuple[str, list[str]]:
    nets = dict.fromkeys(pin.net for pin in board.parts[ref].part.pins if pin.net)
    if kind in ("resistor", "capacitor"):
        return f"{ref}: {board.reasons.get(ref) or 'it does not lie between two nets'}", []
    nodes = [node.net for network in board.networks for node in network.nodes if node.net in nets]
    kinds = "numbers are told of resistors, capacitors, nets and pins"
    where = f"; it is at {_listed(nodes)}" if nodes else "; no RC network is at its pins"
    return f"{ref} is a part of kind {kind}: {kinds}{where}", []


def _of_net(board: Board, net: str) -> tuple[str, list[str]]:
    held = board.held.get(net)
    if held is None:
        return _of_free(board, net), []
    joint = board.joints.get(net, net)
    around = [node.net for network in board.networks if joint in network.held for node in network.nodes]
    nearby = f"; the RC networks at it have {_listed(around)}" if around else "; no RC network hangs on it"
    ask = [f'[net."{net}"] swing = "…"'] if held.kind == "driven" and held.voltage is None and around else []
    return f"{net} {_held(held)}{nearby}", ask


def _held(held: Held) -> str:
    """What sets its voltage, in words."""
    why = f" ({', '.join(held.evidence)})" if held.evidence else ""
    if held.kind == "ground":
        return f"is ground{why}, at 0 V"
    if held.voltage is None:
        told = "at a voltage that is not known"
    else:
        ends = dict.fromkeys(show(end, "V") for end in (held.voltage.low, held.voltage.high))
        told = f"at {' .. '.join(ends)}"
    return f"is {'a supply' if held.kind == 'supply' else 'driven from outside the network'}{why}, {told}"


def _of_free(board: Board, net: str) -> str:
    parts = [ref for ref, part in board.parts.items() if net in {pin.net for pin in part.part.pins}]
    own = [ref for ref in parts if board.parts[ref].kind in ("resistor", "capacitor")]
    if not own:
        return f"neither a resistor nor a capacitor is at {net}"
    unfitted = [ref for ref in own if not board.parts[ref].fitted]
    if unfitted == own:
        return f"what is at {net} is not fitted: {_listed(own)}"
    return f"{_listed(own)} at {net} make no RC network with what holds its ends"


def _listed(names: list[str]) -> str:
    names = list(dict.fromkeys(names))
    rest = len(names) - _MOST_NAMES
    return ", ".join(names[:_MOST_NAMES]) + (f" and {rest} more" if rest > 0 else "")
