"""What a rule judges, where that is more than one measure: an expression over measures, facts and given numbers.

``value = "delay(event = 'power-up', to = 'may switch') - delay(…, at = 'FLASH_RST')"``; limits may be expressions too.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from typing import Final

from rcrules.expressions import (
    Call,
    Dimension,
    Expression,
    Known,
    Name,
    Number,
    Text,
    calls,
    changed,
    dimension_of,
    named,
    names,
    parse_expression,
    unit_of,
    units_of,
)
from rcrules.levels import Level, parse_level
from rcrules.measures import Measure, Option
from rcrules.project import NUMBERS
from rcrules.quantities import QUANTITY_NAMES, QuantityError
from rcrules.rulebook._facts import FACTS
from rcrules.rulebook._model import OptionValue, Term
from rcrules.rulebook._numbers import Names
from rcrules.tomlfile import Table, cut, guess, listed
from rcrules.vocabulary import AGREEMENT, AGREEMENTS, EVENTS, HELD_KINDS, PART_KINDS, ROLES

NUMBER_FACTS: Final[Mapping[str, str]] = {
    **FACTS,
    "temperature_low": "degC",
    "temperature_high": "degC",
}
"""Facts that a value may name, with their units; ``resistance`` and ``capacitance`` are those of the part itself."""
WORD_FACTS: Final = (
    "dielectric",
    "kind",
    "role",
    "certainty",
    "size",
    *(AGREEMENT + about for about in AGREEMENTS),
)
"""Facts that are words, for ``one-of``."""
COUNTS: Final[Mapping[str, str]] = {"count": "1", "path_resistance": "Ω"}
"""What is read off the network itself, with its unit."""
_PLAIN: Final = "what comes out as a time, a voltage, a plain number …"
ENDS: Final = ("contact", "capacitor", "pin", "connector", *HELD_KINDS)
"""Between what ``path_resistance`` counts."""
_COUNTED: Final[Mapping[str, tuple[str, ...]]] = {
    "kind": PART_KINDS,
    "role": ROLES,
    "within": ("the net", "the network"),
    "to": HELD_KINDS,
}
_PATH: Final[Mapping[str, tuple[str, ...]]] = {"from": ENDS, "to": ENDS}


@dataclass(frozen=True, slots=True, kw_only=True)
class Compiled:
    """An expression whose every name and call is known."""

    expression: Expression
    terms: tuple[Term, ...]
    dimension: Dimension


def compiled(
    table: Table, key: str, measures: Mapping[str, Measure], own: Names, wanted: Dimension | None = None
) -> Compiled | None:
    """The expression under a key; None with all its mistakes noted."""
    text = table.text(key, "an expression in quotes, such as 'final_voltage() - 0.3 V'")
    if text is None:
        return None
    terms: dict[Call, Term] = {}

    def check(call: Call) -> None:
        if call.name in COUNTS:
            _words(call, _COUNTED if call.name == "count" else _PATH)
        else:
            terms[call] = _term(call, measures[call.name], own)

    mistakes: list[QuantityError] = []
    expression = changed(parse_expression(text, mistakes), lambda of: _called(of, measures))
    known = replace(_known(measures, own, check), mistakes=mistakes)
    dimension = units_of(expression, known, wanted)
    if dimension is not None and not mistakes:
        mistakes += _unfit(text, dimension, wanted)
    if mistakes or dimension is None:
        own.tried |= {item.name for item in names(expression)} & own.own
        for error in sorted(mistakes, key=lambda error: error.at):
            _tell(table, key, error)
        return None
    _note(table, key, expression, known, own)
    called = tuple(terms[call] for call in calls(expression) if call in terms)
    return Compiled(expression=expression, terms=called, dimension=dimension)


def _unfit(text: str, dimension: Dimension, wanted: Dimension | None) -> Iterator[QuantityError]:
    """A whole that is not what goes there, or is no quantity that has a name."""
    if wanted is not None and dimension != wanted:
        yield QuantityError(f"is {named(dimension)}, and {named(wanted)} goes there", length=len(text))
    elif unit_of(dimension) not in QUANTITY_NAMES:
        problem = f"is {named(dimension)}, in which no limit can be told"
        yield QuantityError(problem, length=len(text), expected=_PLAIN)


def _tell(table: Table, key: str, error: QuantityError) -> None:
    joint = "" if error.problem.startswith("is ") else ":"
    problem, expected = f"'{key}'{joint} {error.problem}", error.expected or None
    table.wrong(key, problem, at=error.at, length=error.length, expected=expected)


def _called(of: Expression, measures: Mapping[str, Measure]) -> Expression:
    """A measure named without brackets is called with its own options."""
    if isinstance(of, Name) and of.name in measures:
        return Call(name=of.name, arguments=(), options=(), at=of.at)
    return of


def _known(measures: Mapping[str, Measure], own: Names, check: "object") -> Known:
    units = {name: measure.unit for name, measure in measures.items()}
    given = {name: unit for name, unit in {**own.declared, **own.units}.items() if name in own.own}
    return Known(
        names={**NUMBERS, **NUMBER_FACTS, **given},
        calls={**units, **COUNTS},
        free=frozenset(own.own - set(given)),
        check_call=check,  # type: ignore[arg-type]  # a function of a call
    )


def _note(table: Table, key: str, expression: Expression, known: Known, own: Names) -> None:
    """The names that are looked up, with their units."""
    for item in names(expression):
        if item.name in known.learned:
            own.use(table, key, item.name, unit_of(known.learned[item.name]))
        elif item.name in own.own or (item.name not in NUMBER_FACTS and item.name in known.names):
            own.use(table, key, item.name, known.names[item.name])


def _words(call: Call, keys: Mapping[str, tuple[str, ...]]) -> None:
    """Options that are words of closed lists."""
    for name, value, at in call.options:
        if name not in keys:
            problem = f"'{call.name}' has no option '{cut(name)}'{guess(name, keys)}"
            raise QuantityError(problem, at=at, length=len(name), expected=listed(keys))
        if not isinstance(value, Text) or value.value not in keys[name]:
            said = value.value if isinstance(value, Text) else "no text"
            problem = f"'{cut(str(said))}' is not known as '{name}'{guess(str(said), keys[name])}"
            raise QuantityError(problem, at=value.at, length=len(str(said)), expected=listed(keys[name]))
    needed = [name for name in keys if call.name == "path_resistance" and name not in dict_of(call)]
    if needed:
        expected = 'path_resistance(from = "contact", to = "capacitor")'
        raise QuantityError(f"'{call.name}' needs '{needed[0]}'", at=call.at, length=call.length, expected=expected)


def dict_of(call: Call) -> dict[str, str]:
    """Options that are texts."""
    return {name: value.value for name, value, _ in call.options if isinstance(value, Text)}


def _term(call: Call, measure: Measure, own: Names) -> Term:
    """A measure with its options."""
    options: dict[str, OptionValue] = {}
    at: str | None = None
    for name, value, place in call.options:
        if name == "at" and isinstance(value, Text):
            at = value.value
        elif name in measure.options:
            options[name] = _option(name, value, measure.options[name], own)
        else:
            problem = f"'{call.name}' has no option '{cut(name)}'{guess(name, (*measure.options, 'at'))}"
            raise QuantityError(problem, at=place, length=len(name), expected=listed((*measure.options, "at")))
    for name, option in measure.options.items():
        if name not in options and option.default is None:
            problem, expected = f"'{call.name}' needs '{name}': {option.summary}", f"{call.name}({name} = …)"
            raise QuantityError(problem, at=call.at, length=call.length, expected=expected)
        if name not in options and option.default is not None:
            options[name] = _default(option)
    return Term(call=call, measure=measure, options=options, at=at)


def _default(option: Option) -> OptionValue:
    if option.kind == "level" and isinstance(option.default, str):
        return parse_level(option.default)
    assert option.default is not None  # tested by the caller
    return option.default


def _option(name: str, value: Text | Number | Name, option: Option, own: Names) -> OptionValue:
    if option.kind in ("event", "choice"):
        return _choice(name, value, option.choices or EVENTS)
    if option.kind == "level":
        return _level(name, value)
    if option.kind == "names" and isinstance(value, Text):
        return value.value
    if isinstance(value, Name) and (value.name in own.own or value.name in NUMBERS):
        own.units.setdefault(value.name, option.unit)
        own.tried.add(value.name)
        return f"?{value.name}"
    if isinstance(value, Number) and dimension_of(value.unit) == dimension_of(option.unit):
        return value.value
    length = len(value.text if isinstance(value, Number) else value.name if isinstance(value, Name) else value.value)
    expected = f"{named(dimension_of(option.unit))}, without quotes"
    problem = f"'{name}' is {named(dimension_of(option.unit))}"
    raise QuantityError(problem, at=value.at, length=length, expected=expected)


def _choice(name: str, value: Text | Number | Name, choices: tuple[str, ...]) -> str:
    if isinstance(value, Text) and value.value in choices:
        return value.value
    said = value.value if isinstance(value, Text) else value.name if isinstance(value, Name) else value.text
    problem = f"'{cut(said)}' is not known as '{name}'{guess(said, choices)}"
    raise QuantityError(problem, at=value.at, length=len(said), expected=listed(choices))


def _level(name: str, value: Text | Number | Name) -> Level:
    if isinstance(value, Number):
        value = Text(value=value.text, at=value.at)
    if not isinstance(value, Text):
        raise QuantityError(f"'{name}' is a level, in quotes", at=value.at, length=len(value.name))
    try:
        return parse_level(value.value)
    except QuantityError as error:
        raise error.moved(value.at) from None
