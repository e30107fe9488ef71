"""Held nets as the document holds them."""

from rcrules.findings import Json
from rcrules.networks import Board, Held


def held(board: Board) -> list[Json]:
    """One object per held net, by name."""
    return [_row(board.held[net], board.joints.get(net, net)) for net in sorted(board.held)]


def _row(net: Held, joint: str) -> Json:
    low, nominal, high = (net.voltage.low, net.voltage.nominal, net.voltage.high) if net.voltage else (None, None, None)
    return {
        "net": net.net,
        "kind": net.kind,
        "low": low,
        "nominal": nominal,
        "high": high,
        "unit": "V",
        "given": net.given,
        "sure": net.sure,
        "evidence": list(net.evidence),
        "joined": None if joint == net.net else joint,
    }
