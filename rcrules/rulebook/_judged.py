"""What a rule judges: a measure, an expression, a word, or how many there are of something."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

import numpy as np

from rcrules.expressions import Call, Expression, Text, calls, names, text_of, unit_of
from rcrules.measures import Measure, Theory
from rcrules.problems import Array, Structure
from rcrules.quantities import QuantityError, parse_quantity
from rcrules.rulebook._keys import LINES
from rcrules.rulebook._keys import RULE as RULE_KEYS
from rcrules.rulebook._model import OptionValue, Term
from rcrules.rulebook._numbers import Names, options
from rcrules.rulebook._selection import KEYS
from rcrules.rulebook._value import COUNTS, NUMBER_FACTS, WORD_FACTS, Compiled, compiled
from rcrules.tomlfile import Table, cut, guess, listed
from rcrules.vocabulary import HELD_KINDS, PART_KINDS, ROLES

_KNOWN: Final = (*RULE_KEYS, *KEYS)
PINS: Final = ("supply pin", "reset pin", "contact pin", "open-drain net")
"""Subjects that are pins of a kind: measures of pins can be taken at them."""
SUBJECTS: Final = ("node", "capacitor", "resistor", "pin", "supply", "network", *PINS, "listed part", "board")
EVERY: Final = ("subject", "has", "has-no")
HAS: Final[Mapping[str, tuple[str, ...]]] = {
    "kind": PART_KINDS,
    "role": ROLES,
    "within": ("the net", "the network"),
    "to": HELD_KINDS,
}


@dataclass(frozen=True, slots=True, kw_only=True)
class Judged:
    """The quantity of a rule, and what it is held against."""

    measure: Measure
    options: Mapping[str, OptionValue]
    subject: str
    value: Expression | None = None
    terms: tuple[Term, ...] = ()
    fact: str = ""
    one_of: tuple[str, ...] = ()


def judged(table: Table, measures: Mapping[str, Measure], own: Names) -> Judged | None:
    """Of the keys ``measure``, ``every`` and ``value``; None with the mistakes noted.

    Beside ``measure`` or ``every`` a ``value`` selects parts by their own value.
    """
    there = [key for key in ("measure", "every") if key in table.data]
    there = there or [key for key in ("value",) if key in table.data]
    if not there:
        if not table.misspelt(("measure", "every", "value"), _KNOWN):
            expected = "'measure', 'value' or 'every'"
            table.wrong((), "the rule says nothing to judge", expected=expected, do='measure = "time_constant"')
        return None
    if len(there) > 1:
        table.wrong("every", "'measure' and 'every' in one rule", on="key", do="write two rules")
        return None
    if there[0] == "measure":
        return _measured(table, measures, own)
    if "with" in table.data:
        do = 'write options in the brackets: delay(to = "1.2 V")'
        table.wrong("with", "'with' goes with 'measure'", on="key", do=do)
    return _every(table) if there[0] == "every" else _valued(table, measures, own)


def _measured(table: Table, measures: Mapping[str, Measure], own: Names) -> Judged | None:
    name = table.text("measure")
    if name is None:
        return None
    if name not in measures:
        problem = f"no measure is called '{cut(name)}'{guess(name, measures)}"
        table.wrong("measure", problem, at=0, length=len(name), expected=listed(measures))
        return None
    measure = measures[name]
    subject = table.word("subject", subjects_of(measure)) or ""
    return Judged(measure=measure, options=options(table, measure, own), subject=subject)


def subjects_of(measure: Measure) -> tuple[str, ...]:
    """What a measure can be taken of."""
    own = (measure.subject, *measure.also)
    return (*own, *PINS) if "pin" in own else own


def _valued(table: Table, measures: Mapping[str, Measure], own: Names) -> Judged | None:
    """``value``: a word that must be one of some, else an expression."""
    subject = table.word("subject", SUBJECTS)
    if "one-of" in table.data and _is_word(table):
        return _worded(table, subject)
    found = compiled(table, "value", measures, own)
    if found is None:
        return None
    about = subject or _subject(found)
    if about is None:
        table.wrong("value", "of what it is the value cannot be told", do=f"subject = one of {listed(SUBJECTS)}")
        return None
    wrong = _foreign(found, about)
    if wrong is not None:
        table.wrong("value", wrong)
        return None
    return _of(found, about)


def _of(found: Compiled, subject: str) -> Judged:
    measure = composite(text_of(found.expression), subject, unit_of(found.dimension))
    return Judged(measure=measure, options={}, subject=subject, value=found.expression, terms=found.terms)


def composite(name: str, subject: str, unit: str) -> Measure:
    """A measure that stands for an expression until the board is there."""
    kind = subject if subject in ("node", "capacitor", "resistor", "pin", "supply", "network") else "pin"
    return Measure(
        name=name,
        subject=kind,  # type: ignore[arg-type]  # one of the six, tested above
        unit=unit,
        summary=f"{name[:1].upper()}{name[1:]}.",
        compute=_unposed,
        theory=_nothing,
    )


def _unposed(structure: Structure, cases: Array) -> Array:  # noqa: ARG001 - never met by a case
    raise RuntimeError("an expression is worked out on a board only")


def _nothing(structure: Structure, low: Array, high: Array) -> Theory:  # noqa: ARG001
    return Theory(signs=(None,) * len(np.atleast_1d(low)))


def _subject(found: Compiled) -> str | None:
    """What the first measure that names no other place is a quantity of; counts are taken at nodes."""
    own = [term.measure.subject for term in found.terms if term.at is None]
    if own:
        return own[0]
    if any(call.name in COUNTS for call in calls(found.expression)):
        return "node"
    used = {item.name for item in names(found.expression)}
    return "resistor" if "resistance" in used else "capacitor" if "capacitance" in used else None


def _foreign(found: Compiled, subject: str) -> str | None:
    """A measure that is none of the subject."""
    for term in found.terms:
        fits = subjects_of(term.measure)
        if term.at is None and subject not in fits:
            return f"'{term.measure.name}' is measured at a {listed(fits)}, and the rule is about a {subject}"
    return None


def _is_word(table: Table) -> bool:
    """Whether a rule with ``one-of`` is about a word, not a number."""
    value, choices = table.data["value"], table.data["one-of"]
    if value in WORD_FACTS or value in NUMBER_FACTS:
        return value in WORD_FACTS
    return not any(_is_quantity(item) for item in (choices if isinstance(choices, list) else [choices]))


def _is_quantity(item: object) -> bool:
    try:
        parse_quantity(str(item)[:200])
    except QuantityError:
        return False
    return True


def _worded(table: Table, subject: str | None) -> Judged | None:
    fact = table.word("value", WORD_FACTS)
    words = table.texts("one-of")
    table.needs(*(() if subject else ("subject",)), do={"subject": 'subject = "capacitor"'})
    if fact is None or subject is None:
        return None
    if not words:
        table.wrong("one-of", "'one-of' holds no words")
    for key in ("at-least", "at-most", "equals"):
        if key in table.data:
            table.wrong(key, f"'{key}' beside 'one-of'", on="key", do="a word is one of some, a number has limits")
    measure = composite(fact, subject, "1")
    return Judged(measure=measure, options={}, subject=subject, fact=fact, one_of=words)


def _every(table: Table) -> Judged | None:
    """``every = { subject = "supply pin", has = { kind = "capacitor" } }``: at least 1, or with ``has-no`` none."""
    inner = table.table("every")
    if inner is None:
        return None
    inner.only(EVERY)
    key = "has-no" if "has-no" in inner.data else "has"
    inner.needs("subject", key, known=EVERY, do=LINES)
    subject, has = inner.word("subject", SUBJECTS), inner.table(key)
    if key == "has-no":
        _alone(table, inner)
    if has is None or subject is None:
        return None
    has.only(tuple(HAS))
    words = {key: has.word(key, choices) for key, choices in HAS.items() if key in has.data}
    if not any(key in words for key in ("kind", "role")):
        has.wrong((), f"'{key}' says neither kind nor role", expected='{ kind = "capacitor" } or { role = "bleeder" }')
    told = tuple((key, Text(value=word, at=0), 0) for key, word in words.items() if word is not None)
    call = Call(name="count", arguments=(), options=told, at=0)
    return Judged(measure=composite(_number_of(words), subject, "1"), options={}, subject=subject, value=call)


def _number_of(words: Mapping[str, str | None]) -> str:
    """``number of resistors to supply on its nets``."""
    what = f"{words['kind']}s" if words.get("kind") else f"{words.get('role')} nodes"
    to = f" to {words['to']}" if words.get("to") else ""
    return f"number of {what}{to} {'in its network' if words.get('within') == 'the network' else 'on its nets'}"


def _alone(table: Table, inner: Table) -> None:
    """``has-no`` says how many there are: none."""
    if "has" in inner.data:
        inner.wrong("has", "'has' beside 'has-no'", on="key", do="write two rules")
    for key in ("at-least", "at-most", "equals", "one-of"):
        if key in table.data:
            table.wrong(key, f"'{key}' beside 'has-no'", on="key", do="leave it out: there must be none")
