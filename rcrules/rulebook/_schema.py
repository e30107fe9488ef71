"""The JSON schema of rule files, for editors: made from the same tables that the compiler reads by."""

from collections.abc import Mapping
from typing import Any, Final

from rcrules.measures import Measure, Option
from rcrules.rulebook._judged import HAS, SUBJECTS, subjects_of
from rcrules.rulebook._keys import EXAMPLE, NESTED, NUMBER, PACK, RULE, SELECTION, TEXT, Shape, one_of
from rcrules.tomlfile import quantity_name
from rcrules.vocabulary import EVENTS

DIALECT = "http://json-schema.org/draft-07/schema#"
"""The one that editors' language servers for TOML know."""


def schema(measures: Mapping[str, Measure]) -> dict[str, Any]:
    """A schema that every right rule file meets, and that refuses what it can of the others."""
    return {
        "$schema": DIALECT,
        "title": "rcrules rule file",
        "description": "Rules that resistor-capacitor networks are held against.",
        "type": "object",
        "properties": {
            "pack": {**_table(PACK, ("name",)), "description": "What this file of rules is."},
            "rule": {"type": "array", "items": _rule(measures), "maxItems": 500, "description": "The rules."},
        },
        "required": ["pack"],
        "additionalProperties": False,
        "definitions": {"selection": _selection()},
    }


_LIMITS: Final = ("at-least", "at-most", "equals")
"""Of a quantity with a unit they are texts."""


def _table(keys: Mapping[str, tuple[str, Shape]], required: tuple[str, ...]) -> dict[str, Any]:
    return {
        "type": "object",
        "properties": _described(keys),
        "required": list(required),
        "additionalProperties": False,
    }


def _described(keys: Mapping[str, tuple[str, Shape]]) -> dict[str, Any]:
    return {key: {"description": meaning, **shape} for key, (meaning, shape) in keys.items()}


def _nested() -> dict[str, Any]:
    """Selections inside a selection: a table, or several."""
    inner = {"$ref": "#/definitions/selection"}
    either = {"anyOf": [inner, {"type": "array", "items": inner, "maxItems": 200}]}
    return {key: {"description": meaning, **either} for key, meaning in NESTED.items()}


def _selection() -> dict[str, Any]:
    properties = {**_described(SELECTION), **_nested()}
    return {"type": "object", "properties": properties, "additionalProperties": False, "minProperties": 1}


def _rule(measures: Mapping[str, Measure]) -> dict[str, Any]:
    """Every key with its meaning; options by measure; what must be there unless another rule is extended."""
    properties = {**_described(RULE), **_described(SELECTION), **_nested()}
    properties["measure"] = {**properties["measure"], **one_of(tuple(measures))}
    properties["subject"] = {**properties["subject"], **one_of(_subjects(measures))}
    every_option = {name: option.summary for measure in measures.values() for name, option in measure.options.items()}
    told = {name: {"description": summary} for name, summary in every_option.items()}
    properties["with"] = {**properties["with"], "properties": told, "additionalProperties": False}
    properties["every"] = {**properties["every"], **_every()}
    examples = _table(EXAMPLE, ("circuit", "outcome"))
    properties["example"] = {
        "type": "array",
        "items": examples,
        "maxItems": 20,
        "description": "Circuits to try the rule on.",
    }
    return {
        "type": "object",
        "properties": properties,
        "additionalProperties": False,
        "anyOf": [{"required": ["extends"]}, _whole()],
        "allOf": [*_together(), *(_options(measure) for measure in measures.values())],
    }


_NOT_BOTH: Final = (
    *((one, other) for one in ("equals", "one-of") for other in ("at-least", "at-most")),
    ("equals", "one-of"),
    ("measure", "every"),
)


def _together() -> list[dict[str, Any]]:
    """Keys that cannot stand beside each other, or not alone."""
    apart = [{"not": {"required": list(pair)}} for pair in _NOT_BOTH]
    measured = {"anyOf": [{"required": ["measure"]}, {"required": ["extends"]}]}
    return [*apart, {"if": {"required": ["with"]}, "then": measured}]


def _whole() -> dict[str, Any]:
    """What a rule must say that takes nothing from another."""
    limits = [{"required": [key]} for key in ("at-least", "at-most", "equals", "one-of", "every")]
    judged = [{"required": [key]} for key in ("measure", "value", "every")]
    return {"required": ["id", "level"], "allOf": [{"anyOf": judged}, {"anyOf": limits}]}


def _subjects(measures: Mapping[str, Measure]) -> tuple[str, ...]:
    own = (subject for measure in measures.values() for subject in subjects_of(measure))
    return tuple(dict.fromkeys((*SUBJECTS, *own)))


def _every() -> dict[str, Any]:
    what = {
        "type": "object",
        "properties": {key: one_of(choices) for key, choices in HAS.items()},
        "additionalProperties": False,
        "anyOf": [{"required": ["kind"]}, {"required": ["role"]}],
    }
    return {
        "type": "object",
        "properties": {
            "subject": {"description": "What must have it.", **one_of(SUBJECTS)},
            "has": {"description": "What must be there, at least once, or as often as the limits say.", **what},
            "has-no": {"description": "What must not be there.", **what},
        },
        "required": ["subject"],
        "oneOf": [{"required": ["has"]}, {"required": ["has-no"]}],
        "additionalProperties": False,
    }


def _options(measure: Measure) -> dict[str, Any]:
    """What ``with`` may hold beside a measure."""
    options = {name: _option(option) for name, option in measure.options.items()}
    needed = [name for name, option in measure.options.items() if option.default is None]
    inner = {"type": "object", "properties": options, "additionalProperties": False}
    then: dict[str, Any] = {
        "properties": {
            "with": {"description": f"Options of {measure.name}. {measure.summary}", **inner},
            "subject": {"enum": list(subjects_of(measure))},
            **{key: {"type": ["string", "object"]} for key in _LIMITS if measure.unit != "1"},
        }
    }
    told = {"properties": {"measure": {"const": measure.name}}, "required": ["measure"]}
    if needed:
        given = {"required": ["with"], "properties": {"with": {"required": needed}}}
        then["anyOf"] = [{"required": ["extends"]}, given]
    return {"if": told, "then": then}


def _option(option: Option) -> dict[str, Any]:
    """One option: its words, or a text."""
    default = {} if option.default is None else {"default": option.default}
    if option.kind in ("event", "choice"):
        return {"description": option.summary, **one_of(option.choices or EVENTS), **default}
    if option.kind == "quantity":
        return {"description": f"{option.summary}: {quantity_name(option.unit)}", **NUMBER}
    return {"description": option.summary, **TEXT}
