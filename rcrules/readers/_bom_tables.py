"""Finds the tables of a BOM: where each begins, what its columns hold, which rows are its own."""

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Final

from rcrules.readers._columns import (
    DESCRIPTION,
    FOOTPRINT,
    PIN_LIST_KEYS,
    QUANTITY,
    REFERENCE,
    SYMBOL,
    VALUE,
    find,
    find_named,
    is_bom_header,
    plain,
)
from rcrules.readers._references import looks_like_references
from rcrules.readers._table import Row, rejoined

_SHOWN: Final = 8
_SAMPLE: Final = 1000
"""Rows by which a column is told to hold references."""
_VALUE_LIKE: Final = re.compile(r"[.,]?\d|[RCL]\d")


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """One table of a BOM."""

    rows: tuple[Row, ...]
    headers: tuple[str, ...]
    """Names of the columns; ``column 3`` where the file gives none."""
    reference: int
    value: int | None
    quantity: int | None
    footprint: int | None
    description: int | None
    symbol: int | None
    named: Mapping[str, int] = field(default_factory=dict)
    """Columns that the project names for further facts, by canonical name."""
    remarks: tuple[tuple[int, str], ...] = ()
    """Line and text of what is odd about the table itself."""


def tables(rows: Sequence[Row], columns: Mapping[str, str]) -> list[Table]:
    """Every table in the order of the file; [] where no column holds references."""
    starts = [index for index, row in enumerate(rows) if is_bom_header(row.cells, columns)]
    if not starts:
        bare = _without_header(rows)
        return [] if bare is None else [bare]
    ends = [*starts[1:], len(rows)]
    blocks = [(rows[start], rows[start + 1 : end]) for start, end in zip(starts, ends, strict=True)]
    if starts[-1] == len(rows) - 1 and len(blocks) == 1 and len(rows) > 1:
        return [_table(rows[-1], rows[:-1], columns, ((rows[-1].line, "the header stands in the last row"),))]
    return [_table(header, own, columns) for header, own in blocks]


def _table(
    header: Row, rows: Sequence[Row], columns: Mapping[str, str], remarks: tuple[tuple[int, str], ...] = ()
) -> Table:
    names = header.cells
    rows, overlong = _fitted_rows(rows, len(names))
    reference = _reference(names, rows, columns)
    taken = frozenset({reference})

    def pick(key: str, spellings: Sequence[str]) -> int | None:
        named = find_named(names, columns, key)
        return find(names, spellings, taken) if named is None else named

    quantity = pick("quantity", QUANTITY)
    return Table(
        rows=tuple(rows),
        headers=_distinct(names),
        reference=reference,
        value=pick("value", VALUE),
        quantity=quantity,
        footprint=pick("footprint", FOOTPRINT),
        description=pick("description", DESCRIPTION),
        symbol=pick("symbol", SYMBOL),
        named=_named(names, columns),
        remarks=(*remarks, *_header_remarks(header, columns), *overlong),
    )


def _fitted_rows(rows: Sequence[Row], width: int) -> tuple[list[Row], list[tuple[int, str]]]:
    """The rows with decimal commas rejoined where a row is longer than the header, and a remark on such rows."""
    long = [row for row in rows if any(row.cells[width:])]
    if not long:
        return list(rows), []
    mended = {row.line: rejoined(row, width) for row in long}
    still = [line for line, row in mended.items() if any(row.cells[width:])]
    joined = [row.line for row in long if len(mended[row.line].cells) < len(row.cells)]
    why = ", for commas in cells that are not quoted" if long[0].delimiter == "," else ""
    said = f"{len(long)} rows hold more cells than the header{why}"
    if joined:
        said += f"; numbers cut in two are put together again in line {_listed(joined)}"
    if still:
        said += f"; cells may stand in the wrong column in line {_listed(still)}"
    return [mended.get(row.line, row) for row in rows], [(long[0].line, said)]


def _listed(lines: Sequence[int]) -> str:
    return ", ".join(map(str, lines[:_SHOWN])) + (f" and {len(lines) - _SHOWN} more" if len(lines) > _SHOWN else "")


def _reference(names: Sequence[str], rows: Sequence[Row], columns: Mapping[str, str]) -> int:
    """The column with a name for references whose cells look most like them."""
    named = find_named(names, columns, "reference")
    if named is not None:
        return named
    candidates = [index for index, name in enumerate(names) if plain(name) in REFERENCE]
    order = {index: REFERENCE.index(plain(names[index])) for index in candidates}
    return max(candidates, key=lambda index: (_share(rows, index) > 0.5, -order[index]))


def _share(rows: Sequence[Row], index: int) -> float:
    """Share of the filled cells of a column that are lists of references, in the first rows."""
    filled = [row.cell(index) for row in rows[:_SAMPLE] if row.cell(index)]
    return sum(map(looks_like_references, filled)) / len(filled) if filled else 0.0


def _named(names: Sequence[str], columns: Mapping[str, str]) -> dict[str, int]:
    own = {"reference", "value", "quantity", "footprint", "description", "symbol"}
    found = {key: find_named(names, columns, key) for key in columns if key not in own}
    return {key: index for key, index in found.items() if index is not None}


def _header_remarks(header: Row, columns: Mapping[str, str]) -> list[tuple[int, str]]:
    remarks = []
    seen: set[str] = set()
    for name in header.cells:
        if name and name in seen:
            remarks.append((header.line, f"two columns are headed {name!r}; the first is taken, both are kept"))
        seen.add(name)
    for key, wanted in columns.items():
        if key not in PIN_LIST_KEYS and find_named(header.cells, columns, key) is None:
            remarks.append((header.line, f"[columns] {key} = {wanted!r} is the header of no column here"))
    return remarks


def _distinct(names: Sequence[str]) -> tuple[str, ...]:
    """Header texts made distinct, so that no column hides another."""
    found: list[str] = []
    for index, name in enumerate(names):
        base = name or f"column {index + 1}"
        count = sum(1 for other in names[:index] if other == name) + 1
        found.append(base if count == 1 or not name else f"{base} ({count})")
    return tuple(found)


def _without_header(rows: Sequence[Row]) -> Table | None:
    """A table told by its cells alone: references, quantity, and the column most like values."""
    width = max((len(row.cells) for row in rows), default=0)
    shares = [(_share(rows, index), -index) for index in range(width)]
    if width < 2 or max(shares)[0] < 0.6:
        return None
    reference = -max(shares)[1]
    others = [index for index in range(width) if index != reference]
    quantity = next((index for index in others if all(row.cell(index).isdecimal() for row in rows)), None)
    texts = [index for index in others if index != quantity]
    value = max(texts, key=lambda index: (_value_share(rows, index), -index), default=None)
    said = f"no header row; column {reference + 1} is taken as references" + (
        "" if value is None else f", column {value + 1} as values"
    )
    return Table(
        rows=tuple(rows),
        headers=tuple(f"column {index + 1}" for index in range(width)),
        reference=reference,
        value=value,
        quantity=quantity,
        footprint=None,
        description=None,
        symbol=None,
        remarks=((rows[0].line, said),),
    )


def _value_share(rows: Sequence[Row], index: int) -> float:
    return sum(_VALUE_LIKE.match(row.cell(index)) is not None for row in rows) / len(rows)
