"""The keys by which a rule selects what it is held against."""

import re
from collections.abc import Callable, Mapping
from typing import Any, Final

from rcrules.names import tokens
from rcrules.quantities import QuantityError, Spread, parse_quantity
from rcrules.rulebook._condition import parse_condition
from rcrules.rulebook._model import Selection
from rcrules.tomlfile import Table
from rcrules.vocabulary import CERTAINTIES, FED_KINDS, PART_KINDS, ROLES

MAX_LIST: Final = 200
"""Words or globs of one key."""
MAX_GLOB: Final = 200
MAX_TABLES: Final = 200
"""Selections inside the selection of one rule, on all levels."""
_DEEPEST: Final = 3
_FIELDS: Final = {"any-of": "any_of", "not": "exclude", "except": "exclude"}
"""Keys of selections inside a selection, and their fields."""
_COMPARISON: Final = "a comparison such as 'supply_high >= 1.8 V'"
_BOUND: Final = re.compile(r"\s*(>=|<=)\s*")


def selection(table: Table, depth: int = 0) -> Selection:
    """The selection keys of a rule, or of a table in its ``any-of`` or ``not``."""
    found: dict[str, Any] = {}
    if depth == 0 and (number := _nested_in(table.data)) > MAX_TABLES:
        key = next(key for key in _FIELDS if key in table.data)
        table.wrong(key, f"{number} selections in one rule are too many", expected=f"at most {MAX_TABLES}")
        return Selection()
    judged = depth == 0 and "measure" not in table.data and "every" not in table.data
    for key, read in _KEYS.items():
        if key in table.data and not (judged and key == "value"):  # there it is what the rule judges
            found.update(read(table, key))
    for key, name in _FIELDS.items():
        if key in table.data:
            found[name] = (*found.get(name, ()), *_nested(table, key, depth))
    return Selection(**found)


def _nested_in(data: Any) -> int:
    """How many tables of selections there are inside one."""
    inner = [data[key] for key in _FIELDS if key in data] if isinstance(data, Mapping) else []
    tables = [item for value in inner for item in (value if isinstance(value, list) else [value])]
    return len(tables) + sum(map(_nested_in, tables))


def _nested(table: Table, key: str, depth: int) -> tuple[Selection, ...]:
    """A table, or a list of them."""
    single = isinstance(table.data[key], Mapping)
    inner = (table.table(key),) if single else table.tables(key)
    if depth >= _DEEPEST or len(inner) > MAX_LIST:
        table.wrong(key, f"'{key}' is too large", expected=f"at most {MAX_LIST} tables, {_DEEPEST} levels deep")
        return ()
    for item in inner:
        if item is not None:
            item.only(KEYS)
            if not item.data:
                item.wrong((), f"'{key}' holds an empty table", expected="at least one selection key")
    return tuple(selection(item, depth + 1) for item in inner if item is not None)


def _words(choices: tuple[str, ...]) -> "Reader":
    return lambda table, key: {key.replace("-", "_"): _bounded(table, key, table.words(key, choices))}


def _texts(table: Table, key: str) -> dict[str, Any]:
    return {key: _bounded(table, key, table.texts(key))}


def _globs(table: Table, key: str) -> dict[str, Any]:
    globs = _bounded(table, key, table.texts(key))
    if any(len(glob) > MAX_GLOB for glob in globs):
        table.wrong(key, f"'{key}' holds a glob that is too long", expected=f"at most {MAX_GLOB} characters")
    return {key: globs}


def _names(table: Table, key: str) -> dict[str, Any]:
    """Whole words of a net or pin name."""
    names = _bounded(table, key, table.texts(key))
    for number, name in enumerate(names):
        if not tokens(name) or "*" in name:
            below = (key, number) if isinstance(table.data[key], list) else (key,)
            do = 'globs go into net = ["…"] or pin = ["…"]'
            table.wrong(below, f"'{key}' must be whole words of a name, such as RST", found=f"'{name[:60]}'", do=do)
    return {key: names}


def _bounded(table: Table, key: str, items: tuple[str, ...]) -> tuple[str, ...]:
    if len(items) > MAX_LIST or (table.data[key] == []):
        table.wrong(key, f"'{key}' must hold 1 to {MAX_LIST} texts", found=f"{len(items)}")
    return items[:MAX_LIST]


def _value(table: Table, key: str) -> dict[str, Any]:
    """``>= 1 uF``, ``<= 10 kohm`` or ``1 uF .. 10 uF``."""
    found = table.parsed(key, _range, "a range such as '>= 1 uF' or '1 kohm .. 10 kohm'")
    return {"value_at_least": found[0], "value_at_most": found[1]} if found else {}


def _range(text: str) -> tuple[Spread | None, Spread | None]:
    sign = _BOUND.match(text)
    begin = sign.end() if sign else 0
    try:
        spread = parse_quantity(text[begin:])
    except QuantityError as error:
        raise error.moved(begin) from None
    if spread.unit not in ("Ω", "F", "H"):
        raise QuantityError("no value of a part", at=begin, length=len(text) - begin, expected="ohm, F or H")
    if sign is None and spread.low == spread.high:
        raise QuantityError("no range", length=len(text), expected="'>= 1 uF', '<= 1 uF' or '1 uF .. 10 uF'")
    low, high = (_exactly(spread.low, spread.unit), _exactly(spread.high, spread.unit))
    return (low if not sign or sign[1] == ">=" else None, high if not sign or sign[1] == "<=" else None)


def _exactly(value: float, unit: str) -> Spread:
    return Spread(low=value, nominal=value, high=value, unit=unit)


def _flag(table: Table, key: str) -> dict[str, Any]:
    return {key: table.flag(key)}


def _when(table: Table, key: str) -> dict[str, Any]:
    text = table.text(key, f"{_COMPARISON} in quotes")
    mistakes: list[QuantityError] = []
    found = parse_condition(text, mistakes) if text is not None else None
    for error in sorted(mistakes, key=lambda error: error.at):
        problem, expected = f"'{key}': {error.problem}", error.expected or _COMPARISON
        table.wrong(key, problem, at=error.at, length=error.length, expected=expected)
    return {"when": found, "when_text": text} if found is not None and not mistakes else {}


Reader = Callable[[Table, str], dict[str, Any]]
_KEYS: Final[Mapping[str, Reader]] = {
    "role": _words(ROLES),
    "name": _names,
    "net": _globs,
    "pin": _globs,
    "part": _globs,
    "sheet": _globs,
    "value": _value,
    "kind": _words(PART_KINDS),
    "kind-fed": _words(FED_KINDS),
    "dielectric": _texts,
    "certainty": _words(CERTAINTIES),
    "polarised": _flag,
    "when": _when,
}
KEYS: Final = (*_KEYS, "any-of", "not", "except")
