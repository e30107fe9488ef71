"""What a rule holds its quantity against: numbers, names, tables by word, expressions."""

import re
from collections.abc import Mapping
from dataclasses import replace
from typing import Final, Literal

from rcrules.expressions import dimension_of
from rcrules.measures import Measure
from rcrules.quantities import SAMPLES, QuantityError, Spread, parse_quantity
from rcrules.rulebook._keys import RULE as RULE_KEYS
from rcrules.rulebook._model import Limit
from rcrules.rulebook._numbers import NAME, WORD, Names, looked_up
from rcrules.rulebook._selection import KEYS, MAX_LIST
from rcrules.rulebook._value import NUMBER_FACTS, compiled
from rcrules.tomlfile import Path, Table

Kind = Literal["at-least", "at-most"]
_LIKE_EXPRESSION: Final = re.compile(r"[()*]|\s[+-]\s|[A-Za-z_]\w*\s*/|/\s*[a-z_]\w*_")


def limits(table: Table, measure: Measure, names: Names, measures: Mapping[str, Measure]) -> tuple[Limit, ...]:
    """``at-least``, ``at-most``, ``equals`` and numbers under ``one-of``; one of them must be there."""
    kinds: tuple[Kind, ...] = ("at-least", "at-most")
    there = [kind for kind in kinds if kind in table.data]
    single = [key for key in SINGLE if key in table.data]
    if single:
        for key in (*there, *single[1:]):
            table.wrong(key, f"'{key}' beside '{single[0]}'", on="key", do="give one of the two")
        return _chosen(table, single[0], measure)
    if not there and "every" in table.data:
        return (_existing(table),)
    if not there and not table.misspelt(LIMITS, _KNOWN):
        where, sample = "measure" if "measure" in table.data else "value", SAMPLES.get(measure.unit, "5")
        table.wrong(where, "the rule has no limit", expected=_EXPECTED, do=f'at-most = "{sample}"')
    found = [limit for kind in there if (limit := _limit(table, kind, measure, names, measures)) is not None]
    numbers = {limit.kind: limit.value for limit in found if limit.value is not None}
    low, high = numbers.get("at-least"), numbers.get("at-most")
    if low is not None and high is not None and low.nominal > high.nominal:
        problem = "'at-most' lies below 'at-least': nothing can hold"
        table.wrong("at-most", problem, found=table.found("at-most"), do="exchange them")
    return tuple(found)


_BY: Final = 'at-most = { by = "mode", standard = "…", fast = "…" } looks the word up on the board'
SINGLE: Final = ("equals", "one-of")
LIMITS: Final = ("at-least", "at-most", *SINGLE)
_KNOWN: Final = (*RULE_KEYS, *KEYS)
_EXPECTED: Final = "at-least, at-most or equals"


def _existing(table: Table) -> Limit:
    """Of ``every``: at least one, or with ``has-no`` none."""
    inner = table.data["every"]
    none = isinstance(inner, Mapping) and "has-no" in inner
    number = 0.0 if none else 1.0
    spread = Spread(low=number, nominal=number, high=number, unit="1")
    return Limit(kind="at-most" if none else "at-least", text=f"{number:.0f}", value=spread)


def _chosen(table: Table, key: str, measure: Measure) -> tuple[Limit, ...]:
    """The numbers, one of which it must be."""
    value = table.data[key]
    listed = key == "one-of" and isinstance(value, list)
    items, paths = (value, [(key, number) for number in range(len(value))]) if listed else ([value], [(key,)])
    found = [spread for path in paths[:MAX_LIST] if (spread := _amount(table, path, measure, key)) is not None]
    if not items or len(items) > MAX_LIST:
        table.wrong(key, f"'{key}' must be 1 to {MAX_LIST} numbers", found=f"{len(items)}")
    if len(found) < len(items) or not items:
        return ()
    text = " or ".join(map(str, items))
    return (Limit(kind="one-of", text=text, choices=tuple(item.nominal for item in found), unit=measure.unit),)


def _is_expression(text: str) -> bool:
    """Whether a text is more than one quantity or name."""
    try:
        parse_quantity(text)
    except QuantityError:
        return _LIKE_EXPRESSION.search(text) is not None and not NAME.fullmatch(text)
    return False


def _limit(table: Table, kind: Kind, measure: Measure, names: Names, measures: Mapping[str, Measure]) -> Limit | None:
    value = table.data[kind]
    if isinstance(value, Mapping):
        return _by_word(table, kind, measure, names)
    if isinstance(value, str) and (value in NUMBER_FACTS or _is_expression(value)):
        found = compiled(table, kind, measures, names, dimension_of(measure.unit))
        return Limit(kind=kind, text=value, expression=found.expression, terms=found.terms) if found else None
    if isinstance(value, str) and NAME.fullmatch(value):
        name = looked_up(table, kind, value, measure.unit, names)
        return Limit(kind=kind, text=value, name=value) if name else None
    spread = _amount(table, kind, measure, kind)
    return Limit(kind=kind, text=str(value), value=spread) if spread else None


def _amount(table: Table, key: str | Path, measure: Measure, kind: str) -> Spread | None:
    """A quantity of the measure's dimension."""
    earlier = len(table.problems.mistakes)
    spread = table.quantity(key, measure.unit)
    if spread is None and len(table.problems.mistakes) > earlier:
        _name_measure(table, key, measure)
    if spread is not None and spread.low != spread.high:
        table.wrong(key, f"'{kind}' must be one number, not a range", found=table.found(key), do="take one end")
        return None
    return spread


def _name_measure(table: Table, key: str | Path, measure: Measure) -> None:
    """Tell a wrong dimension by the measure: ``'delay' is a time, '3 V' is a voltage``."""
    mistake = table.problems.mistakes.pop()
    name = key if isinstance(key, str) else key[0]
    problem = mistake.problem.replace(f"'{name}' is a", f"'{measure.name}' is a", 1)
    mistake = replace(mistake, problem=problem)
    table.problems.mistakes.append(mistake)


def _by_word(table: Table, kind: Kind, measure: Measure, names: Names) -> Limit | None:
    """``{ by = "mode", standard = "1000 ns", fast = "300 ns" }``"""
    inner = table.table(kind)
    word = inner.text("by") if inner else None
    if inner is None or word is None or not NAME.fullmatch(word):
        table.wrong(kind, f"'{kind}' as a table needs by = the name of a word", found=table.found(kind), do=_BY)
        return None
    names.use(inner, "by", word, WORD)
    amounts = {key: _amount(inner, key, measure, key) for key in inner.data if key != "by"}
    found = {key: spread for key, spread in amounts.items() if spread is not None}
    if not amounts:
        table.wrong(kind, f"'{kind}' has no limit for any word", expected=f'{{ by = "{word}", standard = "…" }}')
    return Limit(kind=kind, text=f"by {word}", table=(word, found)) if found else None
