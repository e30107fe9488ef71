"""A compiled rule: frozen, checked, independent of any board."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from rcrules.errors import Place
from rcrules.expressions import Call, Expression
from rcrules.levels import Level
from rcrules.measures import Measure
from rcrules.quantities import Spread

OptionValue = str | float | Level


@dataclass(frozen=True, slots=True, kw_only=True)
class Comparison:
    """``supply_high >= 1.8 V``: facts by name, numbers in SI."""

    left: str | float
    right: str | float
    sign: Literal["<", "<=", ">", ">="]


@dataclass(frozen=True, slots=True, kw_only=True)
class Worded:
    """``dielectric = 'X7R'``: a fact that is a word is one, or with ``!=`` is none."""

    fact: str
    word: str
    """A glob where it holds a star."""
    equal: bool = True


@dataclass(frozen=True, slots=True, kw_only=True)
class Junction:
    """Conditions joined by ``and`` or ``or``."""

    word: Literal["and", "or"]
    terms: "tuple[Condition, ...]"


Condition = Comparison | Worded | Junction


@dataclass(frozen=True, slots=True, kw_only=True)
class Selection:
    """All given keys must match; an empty tuple matches everything."""

    role: tuple[str, ...] = ()
    name: tuple[str, ...] = ()
    """Whole name tokens of the net or a fed pin; active-low marks ignored."""
    net: tuple[str, ...] = ()
    """Globs."""
    pin: tuple[str, ...] = ()
    """Globs over ``U3.NRST``."""
    part: tuple[str, ...] = ()
    """Globs over references."""
    sheet: tuple[str, ...] = ()
    kind: tuple[str, ...] = ()
    kind_fed: tuple[str, ...] = ()
    dielectric: tuple[str, ...] = ()
    certainty: tuple[str, ...] = ()
    value_at_least: Spread | None = None
    value_at_most: Spread | None = None
    polarised: bool | None = None
    when: Condition | None = None
    """Ask ``rulebook.holds``."""
    when_text: str = ""
    any_of: tuple["Selection", ...] = ()
    exclude: tuple["Selection", ...] = ()
    """The key ``not``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Term:
    """A measure that a value calls."""

    call: Call
    measure: Measure
    options: Mapping[str, OptionValue]
    at: str | None
    """Another net, part or pin at which it is measured; None = the rule's own subject."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Limit:
    """A bound of a rule: a number, a name that is looked up at pin, net, part, settings, given, or an expression."""

    kind: Literal["at-least", "at-most", "one-of"]
    text: str
    value: Spread | None = None
    name: str | None = None
    choices: tuple[float, ...] = ()
    """Of ``one-of`` and ``equals``: the numbers, SI, one of which it must be."""
    unit: str = ""
    """Of the choices."""
    table: tuple[str, Mapping[str, Spread]] | None = None
    """``{ by = "mode", standard = …, fast = … }``: the word looked up, and the limit by word."""
    expression: Expression | None = None
    terms: tuple[Term, ...] = ()
    """Measures that the expression calls."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Pack:
    """A file of rules."""

    name: str
    title: str
    needs_facts: bool
    caution: str
    file: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Example:
    """A tiny circuit in text and the outcome that the rule must have on it."""

    place: Place
    circuit: str
    """One part a line: ``R1 10k 1% : +3V3, NRST``."""
    project: str
    """Text of a project file for it; '' = none."""
    outcome: str
    """One of vocabulary.OUTCOMES."""
    bom: str = ""
    """What a BOM beside it lists, one part a line; '' = there is none."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Rule:
    """One rule, ready to be held against any board."""

    id: str
    pack: Pack
    place: Place
    title: str
    level: str
    """One of vocabulary.SEVERITIES."""
    selection: Selection
    measure: Measure
    options: Mapping[str, OptionValue]
    """Every option of the measure, defaults filled in. Quantities are SI floats; names of given numbers stay text
    starting with ``?`` (looked up like a limit)."""
    limits: tuple[Limit, ...]
    given: Mapping[str, Spread | Literal["ask"]] = field(default_factory=dict)
    given_units: Mapping[str, str] = field(default_factory=dict)
    """Unit of each name that the rule looks up (its own and those of the project file); ``word`` for words."""
    never: Literal["fails", "holds"] = "fails"
    why: str = ""
    source: str = ""
    subject: str = ""
    """What it is held against; '' = what its measure is first of all a quantity of."""
    value: Expression | None = None
    """What is judged, where that is more than the measure alone; then ``measure`` only names subject and unit."""
    terms: tuple[Term, ...] = ()
    """Measures that the value calls."""
    fact: str = ""
    """A fact that is a word, which must be one of ``one_of``."""
    one_of: tuple[str, ...] = ()
    nominal: bool = False
    """True: judged at nominal values (``bounds = "nominal"``), not over the worst case."""
    passing: float | None = None
    """The share of boards that must pass (``bounds = "yield"``); None = the worst case, or nominal values, count."""
    must_meet: int = 0
    """Subjects that the rule must at least meet."""
    examples: tuple[Example, ...] = ()

    @property
    def held_against(self) -> str:
        """``node``, ``capacitor``, ``resistor``, ``pin``, ``supply``, ``network``, ``supply pin`` or ``board``.

        ``any pin`` where pins are counted at, not measured.
        """
        counted = self.subject == "pin" and not self.terms and (self.value is not None or self.fact)
        return "any pin" if counted else self.subject or self.measure.subject
