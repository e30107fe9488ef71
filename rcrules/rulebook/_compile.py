"""A file of rules to compiled rules; every mistake of the file is noted, none is guessed away."""

import re
from collections.abc import Mapping
from typing import Final, Literal

from rcrules.measures import Measure
from rcrules.rulebook._model import Example, Pack, Rule
from rcrules.rulebook._numbers import Names, given, limits, options
from rcrules.rulebook._selection import KEYS, selection
from rcrules.tomlfile import Table, cut, guess, listed
from rcrules.vocabulary import OUTCOMES, SEVERITIES

MAX_RULES: Final = 500
_ID: Final = re.compile(r"[a-z][a-z0-9]*(?:-[a-z0-9]+)*")
_PACK: Final = ("name", "title", "needs-facts", "caution")
_RULE: Final = (
    "id", "title", "level", *KEYS, "measure", "subject", "with", "at-least", "at-most", "given", "never", "why",
    "source", "must-meet", "example",
)  # fmt: skip
_NEVER: Final[Mapping[str, Literal["fails", "holds"]]] = {"fails": "fails", "holds": "holds"}


def pack_of(top: Table) -> Pack | None:
    """``[pack]``; None with the mistakes noted."""
    table = top.table("pack")
    if table is None:
        if "pack" not in top.data:
            top.wrong((), "the file has no [pack]", do='[pack] name = "our-rules" at the top')
        return None
    table.only(_PACK)
    table.needs("name")
    name = _kebab(table, "name")
    facts = table.flag("needs-facts")
    title, caution = table.text("title") or name or "", table.text("caution") or ""
    needs = True if facts is None else facts
    return Pack(name=name, title=title, needs_facts=needs, caution=caution, file=top.file.name) if name else None


def rules_of(top: Table, pack: Pack | None, measures: Mapping[str, Measure]) -> list[Rule]:
    """Every ``[[rule]]`` that is right; mistakes are noted, also without a pack."""
    top.only(("pack", "rule"))
    tables = top.tables("rule")
    if len(tables) > MAX_RULES:
        top.wrong("rule", "the file has too many rules", found=f"{len(tables)}", expected=f"at most {MAX_RULES}")
        return []
    seen: dict[str, Table] = {}
    found = [_rule(table, pack, measures, seen) for table in tables]
    return [rule for rule in found if rule is not None]


def _kebab(table: Table, key: str) -> str | None:
    text = table.text(key)
    if text is None or (len(text) <= 80 and _ID.fullmatch(text)):
        return text
    expected = "small letters, digits and single hyphens, such as reset-lifts-late-enough"
    table.wrong(key, f"'{key}' must be words in kebab-case", found=f"'{cut(text)}'", expected=expected)
    return None


def _rule(table: Table, pack: Pack | None, measures: Mapping[str, Measure], seen: dict[str, Table]) -> Rule | None:
    before = len(table.problems.mistakes)
    table.only(_RULE)
    table.needs("id", "level", "measure")
    own_id = _kebab(table, "id")
    if own_id is not None and own_id in seen:
        table.wrong("id", f"the id '{own_id}' is taken", found=f"first at {seen[own_id].place_of('id')}")
    if own_id is not None:
        seen.setdefault(own_id, table)
    measure = _measure(table, measures)
    if measure is None:
        selection(table)  # what is wrong there is told in the same run
        return None
    rule = _body(table, pack, measure, own_id or "")
    return rule if len(table.problems.mistakes) == before else None


def _body(table: Table, pack: Pack | None, measure: Measure, own_id: str) -> Rule:
    inner = table.data.get("given")
    names = Names(own=frozenset(inner if isinstance(inner, Mapping) else ()))
    settings = options(table, measure, names)
    bounds = limits(table, measure, names)
    never = table.word("never", tuple(_NEVER))
    return Rule(
        id=own_id,
        pack=pack or Pack(name="", title="", needs_facts=True, caution="", file=table.file.name),
        place=table.place,
        title=table.text("title") or own_id.replace("-", " "),
        level=table.word("level", SEVERITIES) or "",
        selection=selection(table),
        measure=measure,
        options=settings,
        limits=bounds,
        given=given(table, names),
        given_units=dict(names.units),
        never=_NEVER[never or "fails"],
        why=table.text("why") or "",
        source=table.text("source") or "",
        subject=table.word("subject", (measure.subject, *measure.also)) or "",
        must_meet=table.count("must-meet") or 0,
        examples=tuple(_example(item) for item in table.tables("example")),
    )


def _measure(table: Table, measures: Mapping[str, Measure]) -> Measure | None:
    name = table.text("measure")
    if name is None or name in measures:
        return measures[name] if name else None
    problem = f"no measure is called '{cut(name)}'{guess(name, measures)}"
    table.wrong("measure", problem, at=0, length=len(name), expected=listed(measures))
    return None


def _example(table: Table) -> Example:
    """``[[rule.example]]``: kept as written."""
    table.only(("circuit", "outcome"))
    table.needs("circuit", "outcome")
    outcome = table.word("outcome", OUTCOMES)
    return Example(place=table.place, circuit=table.text("circuit") or "", outcome=outcome or "")
