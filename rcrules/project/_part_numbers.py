"""Part-number patterns: declared fields that read facts out of a part number or a description.

A pattern is a list of fields, each as wide as it says or up to a separator, read once from left to right: no choice, no
repetition, so that reading takes one step a field, whatever the text.
"""

from collections.abc import Mapping
from itertools import pairwise
from pathlib import Path
from typing import Final

from rcrules.project._amounts import dielectric, relative
from rcrules.project._model import NumberField, NumberPattern
from rcrules.quantities import Spread
from rcrules.tomlfile import Table, cut, guess, listed, root
from rcrules.tomlfile import read as read_toml
from rcrules.vocabulary import NUMBER_CODES

_KEYS: Final = ("name", "kind", "in", "fields")
_KINDS: Final = ("resistor", "capacitor")
_UNITS: Final = {"rated-voltage": "V", "rated-power": "W", "tcr": "1/K"}
FACTS: Final = ("value", "tolerance", "rated-voltage", "rated-power", "tcr", "dielectric", "size")
_WIDEST: Final = 60
_MOST_FIELDS: Final = 40
_WIDTH: Final = "characters (1 to 60), 'to -' (up to that separator) or 'rest'"


def patterns(top: Table, board: Table | None, folder: Path) -> tuple[NumberPattern, ...]:
    """The patterns of the project file, then those of the team files that ``[board] part-numbers`` names."""
    found = list(_patterns(top))
    names = board.texts("part-numbers") if board else ()
    for name in names:
        with top.problems.collecting():
            team = root(read_toml(folder / name, (Path(top.file.name).parent / name).as_posix()), top.problems)
            team.only(("part-number", "codes"))
            found += _patterns(team)
    return tuple(found)


def _patterns(top: Table) -> list[NumberPattern]:
    codes = top.named("codes")
    return [pattern for table in top.tables("part-number") if (pattern := _pattern(table, codes)) is not None]


def _pattern(table: Table, codes: Mapping[str, Table]) -> NumberPattern | None:
    table.only(_KEYS)
    table.needs("name", "kind", "fields")
    name, kind = table.text("name"), table.word("kind", _KINDS)
    columns = tuple(column.lower() for column in table.texts("in"))
    rows = table.tables("fields")
    if name is None or kind is None:
        return None
    if not 0 < len(rows) <= _MOST_FIELDS and "fields" in table.data:
        table.wrong("fields", f"'fields' must hold 1 to {_MOST_FIELDS} fields", found=table.found("fields"))
    fields = [field for row in rows if (field := _field(row, kind, codes)) is not None]
    for row, item in pairwise(rows):
        if "rest" in row.data.values():
            item.wrong((), "nothing can follow a field that takes the rest")
    return NumberPattern(name=name, kind=kind, columns=columns, fields=tuple(fields), place=table.place)


def _field(row: Table, kind: str, codes: Mapping[str, Table]) -> NumberField | None:
    named = [key for key in ("text", "skip", *FACTS) if key in row.data]
    row.only(("text", "skip", *FACTS, "code", "codes"))
    if len(named) != 1:
        row.wrong((), "a field names one thing", expected=listed(("text", "skip", *FACTS)))
        return None
    (what,) = named
    if what == "text":
        literal = row.text("text")
        return NumberField(what=what, text=literal) if literal else None
    width, until = _width(row, what)
    known = NUMBER_CODES.get(what, ())
    code = row.word("code", known) if known else None
    if "code" in row.data and not known:
        row.wrong("code", f"'{what}' has no code of a standard", on="key", do="give codes = { … } instead")
    return NumberField(
        what=what, width=width, until=until, code=code or next(iter(known), ""), codes=_codes(row, what, kind, codes)
    )


def _width(row: Table, what: str) -> tuple[int | None, str]:
    """Characters, None for as many as there are; the separator that ends them, '' for none."""
    amount = row.data[what]
    if isinstance(amount, int) and not isinstance(amount, bool) and 0 < amount <= _WIDEST:
        return amount, ""
    if isinstance(amount, str) and amount.startswith("to ") and 0 < len(amount[3:]) <= 3:
        return None, amount[3:]
    if amount != "rest":
        row.wrong(what, f"'{what}' must be {_WIDTH}", found=row.found(what))
    return None, ""


def _codes(row: Table, what: str, kind: str, shared: Mapping[str, Table]) -> Mapping[str, object] | None:
    """What each code means, by the unit of the fact; None where the field has no table."""
    given = row.data.get("codes")
    if given is None:
        return None
    table = row.table("codes") if not isinstance(given, str) else shared.get(given)
    if table is None:
        if isinstance(given, str):
            problem = f'no table [codes."{cut(given)}"]{guess(given, shared)}'
            row.wrong("codes", problem, found=row.found("codes"))
        return {}
    meant = {code: _meaning(table, code, what, kind) for code in table.data}
    return {code: fact for code, fact in meant.items() if fact is not None}


def _meaning(table: Table, code: str, what: str, kind: str) -> object:
    if what == "tolerance":
        return table.parsed(code, relative, "a share such as '5 %' or '-20 % +80 %'")
    if what == "dielectric":
        return dielectric(table, code)
    if what in ("size", "skip"):
        return table.text(code)
    unit = _UNITS.get(what) or ("Ω" if kind == "resistor" else "F")
    spread = table.quantity(code, unit, least=0)
    return spread.nominal if isinstance(spread, Spread) else None
