"""Networks in words: one line per node, grouped by role."""

from collections.abc import Mapping

from rcrules.findings import Document, Json
from rcrules.reports._lines import Line
from rcrules.reports._words import bounds, count, part_texts, parts_text
from rcrules.vocabulary import ROLES

_INDENT = "  "


def networks_lines(document: Document, *, verbose: bool) -> list[Line]:
    """Held nets, then nodes by role; with verbose the evidence of each."""
    texts = part_texts(document)
    lines = _held(document, verbose=verbose)
    nodes = [node for network in document.networks for node in network["nodes"]]
    for role in sorted({node["role"] for node in nodes}, key=_role_order):
        chosen = sorted((node for node in nodes if node["role"] == role), key=lambda node: str(node["net"]))
        lines += [(), ((role, "name"), f"   {len(chosen)}")]
        for node in chosen:
            lines += _node(node, texts, verbose=verbose)
    return lines


def _role_order(role: str) -> tuple[int, str]:
    return (ROLES.index(role) if role in ROLES else len(ROLES), role)


def _held(document: Document, *, verbose: bool) -> list[Line]:
    """Grounds on one line, a line per supply, driven nets on request."""
    lines: list[Line] = [()] if document.held else []
    grounds = [row["net"] for row in document.held if row["kind"] == "ground"]
    if grounds:
        lines.append((("ground", "name"), f"   {', '.join(grounds)}"))
    kinds = ("supply", "driven") if verbose else ("supply",)
    lines += [
        ((row["kind"], "name"), f"   {row['net']}   {_voltage(row)}", (_evidence(row), "dim"))
        for row in document.held
        if row["kind"] in kinds
    ]
    driven = sum(row["kind"] == "driven" for row in document.held)
    if driven and not verbose:
        lines.append((("driven", "name"), f"   {count(driven, 'net')} (--verbose lists them)"))
    return lines


def _voltage(row: Json) -> str:
    if row["nominal"] is None:
        return "voltage not known"
    return bounds(row["low"], row["nominal"], row["high"], row["unit"]) + ("" if row["given"] else " (assumed)")


def _evidence(row: Json) -> str:
    return f"   {'; '.join(row['evidence'])}" if row["evidence"] else ""


def _node(node: Json, texts: Mapping[str, str], *, verbose: bool) -> list[Line]:
    """Net, parts, what feeds it and what it feeds, its time constant."""
    way = " -> ".join(filter(None, (", ".join(node["fed_from"]), ", ".join(node["feeds"]))))
    unsure = "unsure" if node["certainty"] == "unsure" else ""
    cells = (node["net"], parts_text(node["parts"], texts), way, _time_constant(node), unsure)
    line: Line = (_INDENT, "   ".join(filter(None, cells)))
    return [line, (_INDENT * 3, ("; ".join(node["evidence"]), "dim"))] if verbose and node["evidence"] else [line]


def _time_constant(node: Json) -> str:
    found = node["quantities"].get("time_constant")
    if found is None:
        return str(node["unmeasured"].get("time_constant", ""))
    return f"time constant {bounds(found['low'], found['nominal'], found['high'], found['unit'])}"
