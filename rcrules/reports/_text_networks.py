"""Networks in words: held nets, then one line per node, grouped by role, in columns."""

from collections.abc import Mapping
from typing import Final

from rcrules.findings import Document, Json
from rcrules.reports._columns import aligned
from rcrules.reports._lines import Line, Span
from rcrules.reports._words import bounds, count, names_text, part_texts, parts_text
from rcrules.vocabulary import ROLES

_INDENT: Final = "  "
_SHOWN_JOINED: Final = 4


def networks_lines(document: Document, *, verbose: bool) -> list[Line]:
    """Held nets, then nodes by role; with verbose the evidence of each."""
    texts = part_texts(document)
    lines = _held(document, verbose=verbose)
    nodes = [node for network in document.networks for node in network["nodes"]]
    for role in sorted({node["role"] for node in nodes}, key=_role_order):
        chosen = sorted((node for node in nodes if node["role"] == role), key=lambda node: str(node["net"]))
        lines += [(), ((role, "name"), f"   {len(chosen)}"), *_nodes(chosen, texts, verbose=verbose)]
    return lines


def _role_order(role: str) -> tuple[int, str]:
    return (ROLES.index(role) if role in ROLES else len(ROLES), role)


def _held(document: Document, *, verbose: bool) -> list[Line]:
    """A line per ground and supply, nets joined at DC on the line of the first; driven nets on request."""
    lines: list[Line] = [()] if document.held else []
    shown = [row for row in document.held if row["kind"] != "driven" or verbose]
    told = {row["net"] for row in shown}
    first = [row for row in shown if verbose or row["joined"] not in told]
    order = ("ground", "supply", "driven")
    first.sort(key=lambda row: order.index(row["kind"]))
    lines += aligned(_held_cells(row, [] if verbose else _joined(row, shown)) for row in first)
    driven = sum(row["kind"] == "driven" for row in document.held)
    if driven and not verbose:
        lines.append((("driven", "name"), f"   {count(driven, 'net')} (--verbose lists them)"))
    return lines


def _joined(row: Json, shown: list[Json]) -> list[str]:
    return [other["net"] for other in shown if other["joined"] == row["net"]]


def _held_cells(row: Json, joined: list[str]) -> list[Span]:
    """Kind, net, voltage; why, and what is joined to it."""
    evidence = "; ".join(row["evidence"])
    also = f"joined to it: {names_text(joined, limit=_SHOWN_JOINED)}" if joined else ""
    return [(row["kind"], "name"), row["net"], _voltage(row), ("; ".join(filter(None, (evidence, also))), "dim")]


def _voltage(row: Json) -> str:
    if row["kind"] == "ground" and row["low"] == row["high"] == 0:
        return ""
    if row["nominal"] is None:
        return "voltage not known"
    return bounds(row["low"], row["nominal"], row["high"], row["unit"]) + ("" if row["given"] else " (assumed)")


def _nodes(nodes: list[Json], texts: Mapping[str, str], *, verbose: bool) -> list[Line]:
    """One line a node; with verbose the evidence under each."""
    lines = aligned((_cells(node, texts) for node in nodes), _INDENT)
    if not verbose:
        return lines
    evidence = [[(_INDENT * 3, ("; ".join(node["evidence"]), "dim"))] if node["evidence"] else [] for node in nodes]
    return [part for line, below in zip(lines, evidence, strict=True) for part in (line, *below)]


def _cells(node: Json, texts: Mapping[str, str]) -> list[Span]:
    """Net, parts, what feeds it and what it feeds, its time constant and corner frequency."""
    way = " -> ".join(filter(None, (", ".join(node["fed_from"]), ", ".join(node["feeds"]))))
    unsure = "unsure" if node["certainty"] == "unsure" else ""
    return [node["net"], parts_text(node["parts"], texts), way, _time_constant(node), _corner(node), unsure]


def _corner(node: Json) -> str:
    found = node["quantities"].get("corner_frequency")
    if found is None or found["nominal"] is None:
        return ""
    return f"corner {bounds(found['low'], found['nominal'], found['high'], found['unit'])}"


def _time_constant(node: Json) -> str:
    found = node["quantities"].get("time_constant")
    if found is None:
        return str(node["unmeasured"].get("time_constant", ""))
    return f"time constant {bounds(found['low'], found['nominal'], found['high'], found['unit'])}"
