"""Counts of the board, its inputs and the remarks about them."""

import re

from rcrules.findings import Json
from rcrules.inventory._parts import listed
from rcrules.inventory._place import place_json
from rcrules.networks import Board
from rcrules.parts import RatedPart
from rcrules.readers import Export


def board_counts(board: Board, name: str) -> Json:
    """Name and counts; pins are connections."""
    rows = listed(board)
    capacitors = sum(is_capacitor(part) for part in rows)
    return {
        "name": name,
        "parts": len(board.design.parts),
        "nets": len(board.design.nets),
        "pins": sum(len(net.pins) for net in board.design.nets.values()),
        "resistors": len(rows) - capacitors,
        "capacitors": capacitors,
    }


def is_capacitor(part: RatedPart) -> bool:
    """By kind; a part of another kind by its reference."""
    if part.kind in ("resistor", "capacitor"):
        return part.kind == "capacitor"
    return re.match(r"C\d", part.ref) is not None


def inputs(exports: tuple[Export, ...]) -> list[Json]:
    """One object per export, in the order given."""
    return [
        {
            "file": export.source,
            "reader": export.reader,
            "kind": export.kind,
            "sha256": export.sha256,
            "parts": len(export.parts),
            "nets": len(export.nets),
            "pins": len(export.pins),
        }
        for export in exports
    ]


def problems(board: Board) -> list[Json]:
    """Remarks about the inputs, and facts on which they disagree; by place."""
    remarks = [{"place": place_json(remark.place), "text": remark.text} for remark in board.design.remarks]
    for part in listed(board):
        remarks += [
            {"place": place_json(part.part.place), "text": f"{part.ref}: {text}"} for text in part.disagreements
        ]
    return sorted(remarks, key=lambda item: (item["place"]["file"], item["place"].get("line", 0), item["text"]))
