"""The exports as they are for one variant of the board."""

import re
from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import Final

from rcrules.design._order import natural
from rcrules.errors import Mistake, Place, UserMistake
from rcrules.readers import Export, ExportPart, Remark, Variant, fitted_in, tells_fitting
from rcrules.tomlfile import cut

_LISTS: Final = frozenset({"variant", "variants", "assembly variant", "assembly variants"})
"""Columns whose cells list the variants in which a part is fitted."""
_BETWEEN: Final = re.compile(r"[\s,;/|]+")
_SHOWN: Final = 12


def vary(exports: Sequence[Export], name: str, asked_at: Place) -> list[Export]:
    """Every part as the variant has it; '' = as the base has it, with a remark where there are variants.

    A variant is named by an element of the netlist, by a column of the BOM (its cells say fitted or not, or hold
    another value), or in the cells of a column ``Variant``. asked_at: where the name stands. Raises UserMistake for a
    name that no export knows.
    """
    known = sorted({name for export in exports for name in _declared(export)}, key=natural)
    if not name:
        return _of_the_base(exports, known)
    found = [_varied(export, name) for export in exports]
    if not any(there for _, there in found):
        columns = sorted({column for export in exports for column in _columns(export)}, key=natural)
        told = ", ".join(cut(item) for item in (*known, *columns)[:_SHOWN])
        expected = f"one of {told}" if told else "a netlist with variants, or a BOM with a column of that name"
        raise UserMistake(
            Mistake(place=asked_at, problem="no input knows this variant", found=f"'{cut(name)}'", expected=expected)
        )
    return [export for export, _ in found]


def _declared(export: Export) -> Iterator[str]:
    """Names of variants that elements of the netlist give."""
    for part in export.parts:
        yield from part.variants


def _columns(export: Export) -> set[str]:
    """Columns of a BOM in which every cell says fitted or not, and which may be variants."""
    if export.kind != "bom":
        return set()
    cells: dict[str, list[str]] = {}
    for part in export.parts:
        for name, cell in part.fields.items():
            if not tells_fitting(name):
                cells.setdefault(name, []).append(cell.text)
    return {name for name, texts in cells.items() if all(fitted_in(text) is not None for text in texts)}


def _of_the_base(exports: Sequence[Export], known: Sequence[str]) -> list[Export]:
    if not known:
        return list(exports)
    first = next(index for index, export in enumerate(exports) if any(_declared(export)))
    told = ", ".join(cut(item) for item in known[:_SHOWN])
    text = f"there are variants of this board ({told}); the base is taken: --variant or [board] variant names another"
    remark = Remark(place=Place(file=exports[first].source), text=text)
    return [
        replace(export, remarks=(*export.remarks, remark)) if index == first else export
        for index, export in enumerate(exports)
    ]


def _varied(export: Export, name: str) -> tuple[Export, bool]:
    """The export for the variant, and whether it knows it."""
    column = _column(export, name)
    lists = _list_column(export, name)
    if column is None and lists is None and all(name not in part.variants for part in export.parts):
        return export, False
    fits = {fitted_in(part.fields[column].text) for part in export.parts if column in part.fields} if column else set()
    empty = False if True in fits and False not in fits else None  # crosses mark what is fitted, or what is not
    parts = [_part(part, name) for part in export.parts]
    if column is not None:
        parts = [_by_column(part, name, column, empty) for part in parts]
    if lists is not None:
        parts = [_by_list(part, name, lists) for part in parts]
    return replace(export, parts=tuple(parts)), True


def _column(export: Export, name: str) -> str | None:
    """The column that is called as the variant."""
    names = {column for part in export.parts for column in part.fields} if export.kind == "bom" else set()
    return next((column for column in sorted(names) if column.strip().lower() == name.strip().lower()), None)


def _list_column(export: Export, name: str) -> str | None:
    """The column whose cells list variants, where one of them is this."""
    for part in export.parts:
        for column, cell in part.fields.items():
            if column.strip().lower() in _LISTS and name.lower() in _BETWEEN.split(cell.text.lower()):
                return column
    return None


def _part(part: ExportPart, name: str) -> ExportPart:
    """As an element of the netlist has it."""
    variant = part.variants.get(name)
    return part if variant is None else _departed(part, variant, name)


def _departed(part: ExportPart, variant: Variant, name: str) -> ExportPart:
    kept = {key: cell for key, cell in part.fields.items() if key not in variant.fields}
    changed = replace(part, value=variant.value or part.value, fields={**kept, **variant.fields})
    return changed if variant.fitted is None else _fitted(changed, variant.fitted, f"variant {name!r}")


def _by_column(part: ExportPart, name: str, column: str, empty: bool | None) -> ExportPart:
    cell = part.fields.get(column)
    if cell is None:
        return part if empty is None else _fitted(part, empty, f"variant {name!r}: no mark")
    says = fitted_in(cell.text)
    return replace(part, value=cell) if says is None else _fitted(part, says, f"variant {name!r}: {cell.text!r}")


def _by_list(part: ExportPart, name: str, column: str) -> ExportPart:
    cell = part.fields.get(column)
    if cell is None or name.lower() in _BETWEEN.split(cell.text.lower()):
        return part
    return _fitted(part, False, f"{column} = {cell.text!r}")


def _fitted(part: ExportPart, fitted: bool, why: str) -> ExportPart:
    return replace(part, fitted=fitted, fitted_why=why)
