"""The numbers of a rule: options of its measure, limits, and the names that are looked up on the board."""

import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Final, Literal

from rcrules.levels import Level, parse_level
from rcrules.measures import Measure, Option
from rcrules.project import NUMBERS
from rcrules.quantities import QuantityError, Spread, parse_quantity, parse_unit
from rcrules.rulebook._model import OptionValue
from rcrules.tomlfile import Table, cut, guess, listed, quantity_name
from rcrules.vocabulary import EVENTS

WORD: Final = "word"
"""Stands for a unit where a name means a word."""
_ASK_IN: Final = "ask in "
_UNUSED: Final = "use it as a limit, an option or in an expression, or leave it out"
NAME: Final = re.compile(r"[a-z][a-z0-9_]{0,59}")


@dataclass(slots=True)
class Names:
    """The names that a rule looks up, and the unit of each where it was first used."""

    own: frozenset[str]
    """Those that the rule itself lists under ``given``."""
    units: dict[str, str] = field(default_factory=dict)
    declared: dict[str, str] = field(default_factory=dict)
    """Units of those that the rule brings, or asks for by unit."""
    tried: set[str] = field(default_factory=set)
    """Names used, rightly or not."""
    first: dict[str, str] = field(default_factory=dict)
    """Key at which the name was first used."""

    def known(self, text: str) -> bool:
        """Whether a text is the name of a number and not a quantity, level or choice."""
        return text in self.own or text in NUMBERS

    def use(self, table: Table, key: str, name: str, unit: str) -> None:
        """Note a use; the same name cannot stand for two dimensions."""
        self.tried.add(name)
        earlier = self.units.get(name) or NUMBERS.get(name)
        if earlier is not None and earlier != unit:
            where = f"'{self.first[name]}'" if name in self.first else "the project file"
            problem = f"'{name}' cannot be {_named(unit)} as '{key}': it is {_named(earlier)} in {where}"
            table.wrong(key, problem, at=0, length=len(name), do="give the two numbers two names")
            return
        self.units[name] = unit
        self.first.setdefault(name, key)


def _named(unit: str) -> str:
    return "a word" if unit == WORD else quantity_name(unit)


def options(table: Table, measure: Measure, names: Names) -> dict[str, OptionValue]:
    """``with``: every option of the measure, defaults filled in."""
    given = table.table("with")
    if given is not None and not measure.options:
        table.wrong("with", f"measure '{measure.name}' has no options", on="key", do="leave 'with' out")
    elif given is not None:
        given.only(tuple(measure.options), do=f"these are the options of '{measure.name}'")
    found: dict[str, OptionValue] = {}
    for key, option in measure.options.items():
        if given is not None and key in given.data:
            value = _option(given, key, option, measure, names)
        elif given is not None and option.default is None and given.misspelt((key,), tuple(measure.options)):
            continue  # that is told
        else:
            value = _default(table, key, option, measure)
        if value is not None:
            found[key] = value
    return found


def _default(table: Table, key: str, option: Option, measure: Measure) -> OptionValue | None:
    if option.default is None:
        place = "with" if "with" in table.data else "measure"
        problem, do = f"measure '{measure.name}' needs '{key}': {option.summary}", f"with = {{ {key} = … }}"
        table.wrong(place, problem, expected=listed(_choices(option)) or None, do=do)
        return None
    if option.kind == "level" and isinstance(option.default, str):
        return parse_level(option.default)
    return option.default


def _choices(option: Option) -> tuple[str, ...]:
    return option.choices or (EVENTS if option.kind == "event" else ())


def _option(given: Table, key: str, option: Option, measure: Measure, names: Names) -> OptionValue | None:
    value = given.data[key]
    if option.kind in ("event", "choice"):
        return given.word(key, _choices(option))
    if option.kind == "names":
        return ", ".join(given.texts(key)) or None
    if isinstance(value, str) and (value in names.own or (option.kind == "quantity" and NAME.fullmatch(value))):
        return looked_up(given, key, value, option.unit, names)
    if option.kind == "level":
        return _level(given, key, measure)
    spread = given.quantity(key, option.unit)
    if spread is not None and spread.low != spread.high:
        given.wrong(key, f"'{key}' must be one number, not a range", found=given.found(key))
        return None
    return spread.nominal if spread else None


def looked_up(table: Table, key: str, name: str, unit: str, names: Names) -> str | None:
    """A name as ``?name``; one that nobody gives is a mistake."""
    if not names.known(name):
        known = sorted({*names.own, *NUMBERS})
        do = f'given = {{ {name} = "ask" }} asks the project for it; or write {quantity_name(unit)} in quotes'
        problem = f"no number is called '{cut(name)}'{guess(name, known)}"
        table.wrong(key, problem, at=0, length=len(name), expected=_own(names), do=do)
        return None
    names.use(table, key, name, unit)
    return f"?{name}"


def _own(names: Names) -> str:
    return listed(sorted(names.own)) or "a quantity, or a name under 'given'"


def _level(given: Table, key: str, measure: Measure) -> Level | None:
    level = given.parsed(key, parse_level, "a level such as '1.2 V', '30 % of +3V3' or 'may switch'")
    if level is not None and level.edge is not None and measure.subject not in ("node", "pin"):
        given.wrong(key, f"a {measure.subject} feeds no pin that could switch", found=given.found(key))
        return None
    return level


def given(table: Table, names: Names) -> dict[str, Spread | Literal["ask"]]:
    """``given``: the numbers that the rule brings, or asks the project for."""
    inner = table.table("given")
    found: dict[str, Spread | Literal["ask"]] = {}
    for name in inner.data if inner else ():
        if inner is None or not _is_used(inner, name, names):
            continue
        unit = names.units[name]
        if inner.data[name] == "ask" or _ask_unit(inner.data[name]) is not None:
            found[name] = "ask"
        elif unit == WORD:
            inner.wrong(name, f"'{name}' is a word, which a rule cannot bring", expected='"ask"')
        elif (spread := inner.quantity(name, unit)) is not None:
            found[name] = spread
    return found


def declared(data: object) -> dict[str, str]:
    """Units that ``given`` tells by itself: of numbers, and of what is asked for as ``"ask in Hz"``."""
    found: dict[str, str] = {}
    for name, value in data.items() if isinstance(data, Mapping) else ():
        unit = _ask_unit(value)
        if unit is None and isinstance(value, str):
            unit = _quantity_unit(value)
        if unit is not None:
            found[str(name)] = unit
    return found


def _ask_unit(value: object) -> str | None:
    """``Hz`` of ``ask in Hz``; None for anything else."""
    if not isinstance(value, str) or not value.startswith(_ASK_IN):
        return None
    try:
        return parse_unit(value.removeprefix(_ASK_IN).strip())[0]
    except QuantityError:
        return None


def _quantity_unit(text: str) -> str | None:
    try:
        return parse_quantity(text).unit
    except QuantityError:
        return None


def _is_used(inner: Table, name: str, names: Names) -> bool:
    if not NAME.fullmatch(name):
        expected = "small letters, digits and _, such as hold_time"
        inner.wrong(name, f"'{cut(name)}' cannot be the name of a number", on="key", expected=expected)
        return False
    if name not in names.units:
        if name not in names.tried:
            inner.wrong(name, f"'{name}' is given but never used{guess(name, names.units)}", on="key", do=_UNUSED)
        return False
    return True
