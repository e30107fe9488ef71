"""Counts of the board, its inputs and the remarks about them."""

import re
from collections.abc import Container, Iterable, Iterator, Sequence
from pathlib import PurePath
from typing import Final

from rcrules.design import natural, told
from rcrules.findings import Json
from rcrules.inventory._parts import listed
from rcrules.inventory._place import place_json, shown
from rcrules.networks import Board
from rcrules.parts import RatedPart
from rcrules.project import Notice, Project, unmatched
from rcrules.readers import Export, Remark

_SHOWN: Final = 12
"""References in one remark."""


def board_counts(board: Board, name: str | None, variant: str | None) -> Json:
    """Name (of the project, a title, or the first input) and counts; pins are connections, and pins on no net.

    variant: stands behind the name, so that two variants of a board are two boards everywhere.
    """
    rows = listed(board)
    capacitors = sum(is_capacitor(part) for part in rows)
    return {
        "name": (name or _title(_ordered(board.design.exports))) + (f" ({variant})" if variant else ""),
        "parts": len(board.design.parts),
        "nets": len(board.design.nets),
        "pins": sum(len(part.pins) + len(part.open_pins) for part in board.design.parts.values()),
        "resistors": len(rows) - capacitors,
        "capacitors": capacitors,
    }


def _title(exports: Sequence[Export]) -> str:
    titles = (export.title for export in exports if export.title)
    return next(titles, PurePath(exports[0].source).stem if exports else "board")


def is_capacitor(part: RatedPart) -> bool:
    """By kind; a part of another kind by its reference."""
    if part.kind.startswith(("resistor", "capacitor")):
        return part.kind.startswith("capacitor")
    return re.match(r"C\d", part.ref) is not None


def inputs(exports: tuple[Export, ...]) -> list[Json]:
    """One object per export: netlists, then BOMs, each in the order given, which tells the first from the others."""
    return [
        {
            "file": shown(export.source),
            "reader": export.reader,
            "kind": export.kind,
            "sha256": export.sha256,
            "parts": len(export.parts),
            "nets": len(export.nets),
            "pins": len(export.pins),
        }
        for export in _ordered(exports)
    ]


def _ordered(exports: tuple[Export, ...]) -> list[Export]:
    return sorted(exports, key=lambda export: export.kind == "bom")


def problems(board: Board, project: Project, judged: Container[str] = ()) -> list[Json]:
    """Remarks about the inputs and the project file, and facts on which inputs disagree; by place.

    judged: parts of which rules judge whether the inputs agree.
    """
    inputs = (*board.design.remarks, *told(board.design, judged))
    said: tuple[Remark | Notice, ...] = (*inputs, *project.notices, *_unmatched(board, project))
    remarks: list[Json] = [{"place": place_json(item.place), "text": item.text} for item in said]
    remarks += _contradicted(part for part in listed(board) if part.ref not in judged)
    return sorted(remarks, key=lambda item: (item["place"]["file"], item["place"].get("line", 0), item["text"]))


def _contradicted(rows: Iterable[RatedPart]) -> Iterator[Json]:
    """Facts of parts on which inputs disagree; the same ones of many parts are told once."""
    together: dict[tuple[str, ...], list[RatedPart]] = {}
    for part in rows:
        if part.disagreements:
            together.setdefault(part.disagreements, []).append(part)
    for texts, parts in together.items():
        refs = sorted((part.ref for part in parts), key=natural)
        more = f" and {len(refs) - _SHOWN} more" if len(refs) > _SHOWN else ""
        text = f"{', '.join(refs[:_SHOWN])}{more}: {'; '.join(texts)}"
        yield {"place": place_json(parts[0].part.place), "text": text}


def _unmatched(board: Board, project: Project) -> list[Notice]:
    """Names of the project file that mean nothing on this board."""
    parts = board.design.parts
    pins = {name for part in parts.values() for pin in part.pins for name in (pin.key, f"{pin.ref}.{pin.number}")}
    return unmatched(project, board.design.nets, pins, parts)
