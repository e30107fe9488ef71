"""Every key of a rule file: what it means, in one sentence, and what may stand there.

The compiler refuses what is not in these tables, and the schema for editors is made from them.
"""

from collections.abc import Mapping
from typing import Any, Final

from rcrules.vocabulary import BOUNDS, CERTAINTIES, FED_KINDS, OUTCOMES, PART_KINDS, ROLES, SEVERITIES

Shape = Mapping[str, Any]
"""A JSON schema without its description."""

TEXT: Final[Shape] = {"type": "string"}
NUMBER: Final[Shape] = {"type": ["string", "number"]}
FLAG: Final[Shape] = {"type": "boolean"}
KEBAB: Final[Shape] = {"type": "string", "pattern": "^[a-z][a-z0-9]*(-[a-z0-9]+)*$", "maxLength": 80}


def one_of(words: tuple[str, ...]) -> Shape:
    """One word of a list."""
    return {"type": "string", "enum": list(words)}


def some_of(words: tuple[str, ...]) -> Shape:
    """One word of a list, or several."""
    return {"anyOf": [one_of(words), {"type": "array", "items": one_of(words), "minItems": 1, "maxItems": 200}]}


TEXTS: Final[Shape] = {
    "anyOf": [TEXT, {"type": "array", "items": TEXT, "minItems": 1, "maxItems": 200}],
}
_PLAIN_TEXT: Final[Shape] = {"type": "string", "pattern": "^[^*]*$"}
PLAIN: Final[Shape] = {
    "anyOf": [_PLAIN_TEXT, {"type": "array", "items": _PLAIN_TEXT, "minItems": 1, "maxItems": 200}],
}
SELECTION: Final[Mapping[str, tuple[str, Shape]]] = {
    "role": ("What resistors and capacitors do at the node.", some_of(ROLES)),
    "name": ("Whole words in the name of the net or a fed pin, such as RST; marks of active low are ignored.", PLAIN),
    "net": ("Globs over net names, such as AIN*.", TEXTS),
    "pin": ("Globs over fed pins, such as U3.NRST.", TEXTS),
    "part": ("Globs over references, such as C1*.", TEXTS),
    "sheet": ("Globs over the sheets that the parts stand on.", TEXTS),
    "value": ("Range of marked values, such as '>= 1 uF' or '1 kohm .. 10 kohm'; without 'measure', what is judged: "
              "an expression over measures, facts and given numbers.", TEXT),
    "kind": ("Kinds of parts.", some_of(PART_KINDS)),
    "kind-fed": ("What the fed pin is.", some_of(FED_KINDS)),
    "dielectric": ("Dielectrics of capacitors, such as X7R, C0G, tantalum.", TEXTS),
    "certainty": ("Whether the role was recognised for sure.", some_of(CERTAINTIES)),
    "polarised": ("Whether the capacitor is polarised.", FLAG),
    "when": ("A condition over facts, such as \"supply_high >= 1.8 V and technology = 'ceramic'\".", TEXT),
}  # fmt: skip
"""Key -> meaning and shape; all keys that are given must match."""
NESTED: Final[Mapping[str, str]] = {
    "any-of": "Tables of selection keys, one of which must match.",
    "not": "A table of selection keys, or several, none of which may match.",
    "except": "The same as not.",
}
"""Selections inside a selection."""
PACK: Final[Mapping[str, tuple[str, Shape]]] = {
    "name": ("Name of the pack, in kebab-case.", KEBAB),
    "title": ("What the pack is about, in a few words.", TEXT),
    "needs-facts": ("false: of use on a board without a project file.", FLAG),
    "caution": ("Printed with the findings of the pack where work can hurt someone.", TEXT),
}
EXAMPLE: Final[Mapping[str, tuple[str, Shape]]] = {
    "circuit": ("A tiny circuit, one part a line: R1 10k 1% : +3V3, NRST", TEXT),
    "project": ("What a project file would say about it.", TEXT),
    "bom": ("What a BOM beside it lists, one part a line: R1 12k | RES 12K 1%", TEXT),
    "outcome": ("What the rule must find there.", one_of(OUTCOMES)),
}
LINES: Final[Mapping[str, str]] = {
    "id": 'id = "reset-lifts-late-enough"',
    "level": 'level = "warning"',
    "name": 'name = "our-rules"',
    "subject": 'subject = "supply pin"',
    "has-no": 'has-no = { kind = "capacitor", within = "the net" }',
    "has": 'has = { kind = "capacitor", within = "the net" }',
    "circuit": 'circuit = "R1 10k 1% : +3V3, NRST"',
    "outcome": 'outcome = "holds"',
}
"""What a key that is missing could be."""
CHOICES: Final[Shape] = {
    "anyOf": [NUMBER, {"type": "array", "items": NUMBER, "minItems": 1, "maxItems": 200}],
}
LIMIT: Final[Shape] = {
    "anyOf": [
        NUMBER,
        {"type": "object", "properties": {"by": TEXT}, "required": ["by"], "minProperties": 2,
         "additionalProperties": NUMBER},
    ]
}  # fmt: skip
RULE: Final[Mapping[str, tuple[str, Shape]]] = {
    "id": ("Name of the rule, in kebab-case; settings, waivers and findings go by it.", KEBAB),
    "extends": ("The rule of this or another pack whose keys count where this one has none; without an id it stands "
                "in that rule's place.", KEBAB),
    "title": ("What must be so, as a short sentence.", TEXT),
    "level": ("How grave it is when the rule fails; off takes an extended rule away.", one_of((*SEVERITIES, "off"))),
    "measure": ("What is measured.", TEXT),
    "with": ("Options of the measure.", {"type": "object"}),
    "subject": ("What the rule is held against, where the measure leaves a choice.", TEXT),
    "every": ("What must have something, or not: { subject = …, has = { … } } or { subject = …, has-no = { … } }.",
              {"type": "object"}),
    "at-least": ("Lower limit: a quantity, a name that is looked up, an expression, or a table by a word.", LIMIT),
    "at-most": ("Upper limit: a quantity, a name that is looked up, an expression, or a table by a word.", LIMIT),
    "equals": ("The number that it must be, at nominal values.", NUMBER),
    "one-of": ("Words or numbers, one of which it must be; numbers are judged at nominal values.", CHOICES),
    "bounds": ("worst (default): over all cases; nominal: as marked; yield: on a share of the boards.", one_of(BOUNDS)),
    "passing": ("With bounds = yield: the share of boards that must pass, such as '99.9 %'.", NUMBER),
    "given": ("Numbers that the rule brings, or asks the project for: { hold_time = \"ask\" }.",
              {"type": "object", "additionalProperties": NUMBER}),
    "never": ("Whether a level that is never reached fails the rule (default) or holds.", one_of(("fails", "holds"))),
    "why": ("Why it must be so; printed with each finding.", TEXT),
    "source": ("Where the limit comes from: a standard with its clause, a data sheet, common practice.", TEXT),
    "must-meet": ("How many subjects the rule must at least meet on a board.",
                  {"type": "integer", "minimum": 0, "maximum": 1_000_000}),
}  # fmt: skip
"""Key -> meaning and shape, beside those of the selection."""
