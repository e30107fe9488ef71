"""Paths of a project file may not leave the repository that it lies in: a stranger's change could name any file."""

from collections.abc import Iterator, Mapping
from pathlib import Path
from typing import Final

from rcrules.tomlfile import Table, cut

PATHS: Final = ("netlist", "bom", "rules", "waivers", "part-numbers")
_MARK: Final = ".git"


def repository(folder: Path) -> Path | None:
    """The root of the repository that a folder lies in; None where there is none."""
    here = folder.resolve()
    return next((above for above in (here, *here.parents) if (above / _MARK).exists()), None)


def refuse_outside(top: Table, file: Path) -> None:
    """Note every path of ``[board]`` that leaves the repository, by ``..`` or by a link."""
    root = repository(file.parent)
    board = top.table("board") if isinstance(top.data.get("board"), Mapping) else None
    if root is None or board is None:
        return
    for key, number, path in _written(board):
        if not (file.parent / path).resolve().is_relative_to(root):
            where: tuple[str | int, ...] = (key,) if number is None else (key, number)
            problem = f"'{key}' leaves the repository"
            board.wrong(where, problem, found=f"'{cut(path)}'", do="keep the file in the repository of this one")


def _written(board: Table) -> Iterator[tuple[str, int | None, str]]:
    """Key, place in its list, path."""
    for key in PATHS:
        value = board.data.get(key)
        rows: list[tuple[int | None, object]] = [*enumerate(value)] if isinstance(value, list) else [(None, value)]
        for number, path in rows:
            if isinstance(path, str) and path.strip() and len(path) <= 1000 and "\0" not in path:
                yield key, number, path
