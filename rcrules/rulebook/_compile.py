"""A file of rules to compiled rules; every mistake of the file is noted, none is guessed away."""

import re
from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Final, Literal

from rcrules.expressions import Call
from rcrules.measures import Measure
from rcrules.rulebook._extend import KEY, OFF, Bases, explained, extended, replaced
from rcrules.rulebook._judged import Judged, judged
from rcrules.rulebook._keys import EXAMPLE as EXAMPLE_KEYS
from rcrules.rulebook._keys import LINES
from rcrules.rulebook._keys import PACK as PACK_KEYS
from rcrules.rulebook._keys import RULE as RULE_KEYS
from rcrules.rulebook._limits import limits
from rcrules.rulebook._model import Example, Limit, Pack, Rule, Selection, Term
from rcrules.rulebook._numbers import Names, declared, given
from rcrules.rulebook._selection import KEYS, selection
from rcrules.tomlfile import Table, cut, listed
from rcrules.vocabulary import BOUNDS, OUTCOMES, SEVERITIES

MOST_PASSING: Final = 0.99999
"""More would take more random cases than are drawn."""
MAX_RULES: Final = 500
MAX_EXAMPLES: Final = 20
"""Circuits that one rule brings."""
_ID: Final = re.compile(r"[a-z][a-z0-9]*(?:-[a-z0-9]+)*")
_RULE: Final = (*RULE_KEYS, *KEYS, "example")
_NEVER: Final[Mapping[str, Literal["fails", "holds"]]] = {"fails": "fails", "holds": "holds"}


@dataclass(frozen=True, slots=True, kw_only=True)
class Rules:
    """The rules of a file."""

    rules: list[Rule]
    replaced: frozenset[str]
    """Ids of rules of other files in whose place they stand."""


def pack_of(top: Table) -> Pack | None:
    """``[pack]``; None with the mistakes noted."""
    table = top.table("pack")
    if table is None:
        if "pack" not in top.data:
            top.wrong((), "the file has no [pack]", do='[pack] name = "our-rules" at the top')
        return None
    table.only(tuple(PACK_KEYS))
    table.needs("name", known=tuple(PACK_KEYS), do=LINES)
    name = _kebab(table, "name")
    facts = table.flag("needs-facts")
    title, caution = table.text("title") or name or "", table.text("caution") or ""
    needs = True if facts is None else facts
    return Pack(name=name, title=title, needs_facts=needs, caution=caution, file=top.file.name) if name else None


def rules_of(top: Table, pack: Pack | None, measures: Mapping[str, Measure], bases: Bases) -> Rules:
    """Every ``[[rule]]`` that is right; mistakes are noted, also without a pack. bases: rules that may be extended."""
    top.only(("pack", "rule"))
    tables = top.tables("rule")
    if len(tables) > MAX_RULES:
        top.wrong("rule", "the file has too many rules", found=f"{len(tables)}", expected=f"at most {MAX_RULES}")
        return Rules(rules=[], replaced=frozenset())
    seen: dict[str, Table] = {}
    found = [_extending(table, pack, measures, seen, bases) for table in tables]
    instead = frozenset(name for table in tables if (name := replaced(table)) is not None)
    return Rules(rules=[rule for rule in found if rule is not None], replaced=instead)


def _extending(
    table: Table, pack: Pack | None, measures: Mapping[str, Measure], seen: dict[str, Table], bases: Bases
) -> Rule | None:
    """A rule, with what it takes from another; None where it is wrong, or only takes the other away."""
    before = len(table.problems.mistakes)
    whole = extended(table, bases)
    if whole is None:
        return None
    if KEY in table.data and table.data.get("level") == OFF:
        return None
    rule = _rule(whole, pack, measures, seen)
    if whole is not table:
        told = table.problems.mistakes[before:]
        table.problems.mistakes[before:] = [explained(mistake, table) for mistake in told]
    return rule


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
    table.needs("id", "level", known=_RULE, do=LINES)
    own_id = _kebab(table, "id")
    if own_id is not None and own_id in seen:
        first = f"first at {seen[own_id].place_of('id')}"
        table.wrong("id", f"the id '{own_id}' is taken", found=first, do="give it a name of its own")
    if own_id is not None:
        seen.setdefault(own_id, table)
    inner = table.data.get("given")
    names = Names(own=frozenset(inner if isinstance(inner, Mapping) else ()), declared=declared(inner))
    what = judged(table, measures, names)
    if what is None:
        selection(table)  # what is wrong there is told in the same run
        return None
    rule = _body(table, pack, what, names, measures, own_id or "")
    return rule if len(table.problems.mistakes) == before else None


def _body(
    table: Table, pack: Pack | None, what: Judged, names: Names, measures: Mapping[str, Measure], own_id: str
) -> Rule:
    bounds = limits(table, what.measure, names, measures) if not what.fact else ()
    if len(bounds) > 1 and any(limit.terms for limit in bounds) and table.data.get("never") == "holds":
        table.wrong("never", "'never' beside two limits, one of which depends on measures", do="write two rules")
    examples = table.tables("example")
    if len(examples) > MAX_EXAMPLES:
        table.wrong("example", f"{len(examples)} examples of one rule are too many", expected=f"at most {MAX_EXAMPLES}")
    what = _with_call(what) if any(limit.terms for limit in bounds) else what
    never = table.word("never", tuple(_NEVER))
    chosen = selection(table)
    _dead(table, chosen, what.subject or what.measure.subject)
    return Rule(
        id=own_id,
        pack=pack or Pack(name="", title="", needs_facts=True, caution="", file=table.file.name),
        place=table.place,
        title=table.text("title") or own_id.replace("-", " "),
        level=table.word("level", SEVERITIES) or "",
        selection=chosen,
        measure=what.measure,
        options=what.options,
        limits=bounds,
        given=given(table, names),
        given_units=dict(names.units),
        never=_NEVER[never or "fails"],
        why=table.text("why") or "",
        source=table.text("source") or "",
        subject=what.subject,
        value=what.value,
        terms=what.terms,
        fact=what.fact,
        one_of=what.one_of,
        nominal=_is_nominal(table, bounds),
        passing=_passing(table),
        must_meet=table.count("must-meet") or 0,
        examples=tuple(_example(item) for item in examples),
    )


def _dead(table: Table, chosen: Selection, subject: str) -> None:
    """A selection that nothing of the subject can meet."""
    if subject not in ("capacitor", "resistor"):
        return
    other = "resistor" if subject == "capacitor" else "capacitor"
    if "kind" in table.data and chosen.kind and subject not in chosen.kind:
        problem = f"the rule is about {subject}s, none of which is of kind {listed(chosen.kind)}"
        do = f'subject = "{other}"' if other in chosen.kind else "leave 'kind' out, or say another 'subject'"
        table.wrong("kind", problem, do=do)
    for key in ("dielectric", "polarised"):
        if subject == "resistor" and key in table.data:
            table.wrong(
                key, f"the rule is about resistors, which have no '{key}'", on="key", do='subject = "capacitor"'
            )


def _is_nominal(table: Table, bounds: tuple[Limit, ...]) -> bool:
    """What must be one number is so as marked, unless the rule says otherwise: no tolerance meets a number."""
    said = table.word("bounds", BOUNDS)
    return said == "nominal" or (said is None and any(limit.choices for limit in bounds))


def _passing(table: Table) -> float | None:
    """The share of boards that must pass; None unless the rule is about yield."""
    yields = table.data.get("bounds") == "yield"
    if yields and not table.misspelt(("passing",), _RULE):
        table.needs("passing", do={"passing": 'passing = "99.9 %"'})
    if not yields and "passing" in table.data:
        table.wrong("passing", "'passing' goes with bounds = \"yield\"", on="key", do='bounds = "yield"')
    spread = table.quantity("passing", "1", least=0.5) if yields and "passing" in table.data else None
    if spread is not None and spread.high > MOST_PASSING:
        found, do = table.found("passing"), 'bounds = "worst" is for what must always hold'
        table.wrong("passing", "random cases cannot show so much", found=found, expected="50 % to 99.999 %", do=do)
    return spread.nominal if spread is not None else None


def _with_call(what: Judged) -> Judged:
    """A plain measure as a value that calls it: its limit depends on measures too."""
    if what.value is not None:
        return what
    call = Call(name=what.measure.name, arguments=(), options=(), at=-1)
    term = Term(call=call, measure=what.measure, options=what.options, at=None)
    return replace(what, value=call, terms=(term,), subject=what.subject or what.measure.subject)


def _example(table: Table) -> Example:
    """``[[rule.example]]``: kept as written, read when it is tried."""
    table.only(tuple(EXAMPLE_KEYS))
    table.needs("circuit", "outcome", known=tuple(EXAMPLE_KEYS), do=LINES)
    outcome = table.word("outcome", OUTCOMES)
    circuit, project, bom = (table.text(key) or "" for key in ("circuit", "project", "bom"))
    return Example(place=table.place, circuit=circuit, project=project, outcome=outcome or "", bom=bom)
