"""Whether a saved text has the shape of a findings document, by the schema that ships with it.

Only the words of JSON Schema that the schema uses are known here; a test holds this reading to a general validator.
"""

import json
from collections.abc import Callable, Iterator, Mapping
from functools import cache
from typing import Any, Final

from rcrules.findings._schema import schema_text

Schema = Mapping[str, Any]

_TYPES: Final[Mapping[str, Callable[[Any], bool]]] = {
    "object": lambda value: isinstance(value, dict),
    "array": lambda value: isinstance(value, list),
    "string": lambda value: isinstance(value, str),
    "boolean": lambda value: isinstance(value, bool),
    "integer": lambda value: isinstance(value, int) and not isinstance(value, bool),
    "number": lambda value: isinstance(value, int | float) and not isinstance(value, bool),
    "null": lambda value: value is None,
}


def damage(data: Any) -> str | None:
    """What is wrong first, with where: ``findings[3].margin: expected number or null``; None = nothing."""
    return next(_wrong(data, _schema(), "document"), None)


@cache
def _schema() -> Schema:
    found: Schema = json.loads(schema_text())
    return found


def _wrong(value: Any, schema: Schema, at: str) -> Iterator[str]:
    if "$ref" in schema:
        yield from _wrong(value, _schema()["$defs"][schema["$ref"].rpartition("/")[2]], at)
        return
    if "anyOf" in schema:
        yield from _none_of(value, schema["anyOf"], at)
        return
    types = schema.get("type", ())
    types = [types] if isinstance(types, str) else types
    allowed = schema.get("enum", [schema["const"]] if "const" in schema else None)
    if types and not any(_TYPES[name](value) for name in types):
        yield f"{at}: expected {' or '.join(types)}"
    elif allowed is not None and not any(item == value and type(item) is type(value) for item in allowed):
        yield f"{at}: expected {' or '.join(json.dumps(item, ensure_ascii=False) for item in allowed)}"
    elif isinstance(value, dict):
        yield from _in_object(value, schema, at)
    elif isinstance(value, list):
        yield from _in_list(value, schema, at)
    elif "minimum" in schema and value < schema["minimum"]:
        yield f"{at}: expected {schema['minimum']} or more"


def _none_of(value: Any, choices: list[Schema], at: str) -> Iterator[str]:
    """The complaint of the choice that went deepest, where all complain."""
    complaints = [next(_wrong(value, choice, at), None) for choice in choices]
    told = [text for text in complaints if text is not None]
    if len(told) == len(choices):
        yield max(told, key=lambda text: len(text.partition(":")[0]))


def _in_object(value: dict[str, Any], schema: Schema, at: str) -> Iterator[str]:
    own, other = schema.get("properties", {}), schema.get("additionalProperties", True)
    yield from (f"{at}: no key {key!r}" for key in schema.get("required", ()) if key not in value)
    if len(value) > schema.get("maxProperties", len(value)):
        yield f"{at}: expected no more than {schema['maxProperties']} keys"
    for key, item in value.items():
        if key in own:
            yield from _wrong(item, own[key], f"{at}.{key}")
        elif other is False:
            yield f"{at}: unknown key {key!r}"
        elif other is not True:
            yield from _wrong(item, other, f"{at}.{key}")


def _in_list(value: list[Any], schema: Schema, at: str) -> Iterator[str]:
    least, most = schema.get("minItems", 0), schema.get("maxItems", len(value))
    if not least <= len(value) <= most:
        yield f"{at}: expected {least} items"
    for index, item in enumerate(value):
        yield from _wrong(item, schema.get("items", {}), f"{at}[{index}]")
