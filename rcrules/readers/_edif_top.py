"""The cell of an EDIF file that is the board, and whether cells contain themselves."""

from graphlib import CycleError, TopologicalSorter

from rcrules.readers._edif_model import Cell, Libraries, View
from rcrules.readers._mistakes import refusal, shorten

Key = tuple[str, str]


def top(file: str, libraries: Libraries) -> tuple[Cell, View, str]:
    """The board's cell, its view, and a remark, '' where the design names it. Raises UserMistake."""
    called = _called(libraries)
    _refuse_cycle(file, libraries, called)
    named = [libraries.cell(*key) for key in dict.fromkeys(libraries.tops)]
    cells = [cell for cell in named if cell is not None and _has_contents(cell)]
    said = ""
    if len(cells) != 1:
        cells = _uncalled(libraries, called)
        said = "names no design" if not libraries.tops else "names no one design"
    if not cells:
        raise refusal(
            file,
            "the EDIF file has no cell with instances or nets that could be the board",
            line=1,
            found=f"{len(libraries.cells)} cells",
            expected="a design whose cell has contents",
            do="export the netlist of the whole board again",
        )
    cell = max(cells, key=_size)
    view = cell.view("")
    assert view is not None  # it has contents
    return cell, view, said and f"the file {said}; the cell {cell.name.text!r}, which no other places, is taken"


def _called(libraries: Libraries) -> dict[Key, set[Key]]:
    """Cells that each cell places."""
    called: dict[Key, set[Key]] = {}
    for key, cell in libraries.cells.items():
        own = called.setdefault(key, set())
        for view in cell.views:
            for instance in view.instances:
                placed, _ = libraries.placed(instance, cell)
                if placed is not None:
                    own.add((placed.library, placed.name.key))
    return called


def _refuse_cycle(file: str, libraries: Libraries, called: dict[Key, set[Key]]) -> None:
    try:
        TopologicalSorter(called).prepare()
    except CycleError as error:
        cells = [libraries.cells[key] for key in error.args[1]]
        raise refusal(
            file,
            "a cell contains itself",
            line=min(cell.line for cell in cells),
            found=shorten(" in ".join(cell.name.text for cell in cells), 160),
            expected="cells that place other cells",
            do="mend the hierarchy of the schematic and export it again",
        ) from error


def _uncalled(libraries: Libraries, called: dict[Key, set[Key]]) -> list[Cell]:
    placed = {key for keys in called.values() for key in keys}
    return [cell for key, cell in libraries.cells.items() if key not in placed and _has_contents(cell)]


def _has_contents(cell: Cell) -> bool:
    return any(view.instances or view.nets for view in cell.views)


def _size(cell: Cell) -> int:
    return max(len(view.instances) + len(view.nets) for view in cell.views)
