"""The document as JSON text and back: ``loads(dumps(document)) == settled(document)``.

Floats carry 12 significant digits; infinity is the text ``"inf"`` or ``"-inf"``, not-a-number is null. Each item of a
list stands on a line of its own, so that two documents compare line by line.
"""

import json
import math
from dataclasses import fields
from functools import lru_cache
from typing import Any, Final

from rcrules.errors import Mistake, Place, UserMistake
from rcrules.findings._document import Document, Finding, Json, Quantity

SCHEMA: Final = 1
_KEYS: Final = tuple("rcrules" if item.name == "schema" else item.name for item in fields(Document))
_ORDER: Final = ("rcrules", *(key for key in _KEYS if key != "rcrules"))
_NUMBERS: Final = frozenset(
    (
        "low",
        "nominal",
        "high",
        "value",
        "relative",
        "share",
        "margin",
        "at_least",
        "at_most",
        "flips_at",
        "rated_voltage",
        "rated_power",
    )
)
_CASES: Final = frozenset(("low_case", "high_case", "margin_case"))
_MEMBERS: Final = {kind: tuple(item.name for item in fields(kind)) for kind in (Finding, Quantity)}
_AS_IS: Final = frozenset((str, int, bool, type(None)))
"""Types of the values that need no second look; a large board has millions of them."""
_ENCODER: Final = json.JSONEncoder(ensure_ascii=False, allow_nan=False, check_circular=False)
_INFINITE: Final = {"inf": math.inf, "-inf": -math.inf}


def dumps(document: Document) -> str:
    """The JSON text of section "findings document", ending in a newline."""
    members = {
        "rcrules" if item.name == "schema" else item.name: getattr(document, item.name) for item in fields(Document)
    }
    return "{\n" + ",\n".join(f"{json.dumps(key)}: {_block(members[key])}" for key in _ORDER) + "\n}\n"


def loads(text: str, name: str = "<saved>") -> Document:
    """Read a saved document. Raises UserMistake, at ``name``, where the text is none or of another schema."""
    data = _parsed(text, name)
    missing = [key for key in _ORDER if key not in data]
    if missing:
        raise _mistake(
            name,
            "not a findings document",
            found=f"no key {missing[0]!r}",
            expected="a file saved with --report json=FILE",
        )
    if data["rcrules"] != SCHEMA:
        raise _mistake(name, "another schema number", found=str(data["rcrules"]), expected=f"schema number {SCHEMA}")
    members = {key: _revived(data[key]) for key in _ORDER if key not in ("rcrules", "findings")}
    return Document(**members, schema=SCHEMA, findings=[_finding(item, name) for item in data["findings"]])


def settled(document: Document) -> Document:
    """The document as it reads after saving: numbers at 12 significant digits, plain lists and dictionaries."""
    return Document(**{item.name: _settled(getattr(document, item.name)) for item in fields(Document)})


def _settled(value: Any) -> Any:
    kind = type(value)
    if kind is dict:
        return {str(key): item if type(item) in _AS_IS else _settled(item) for key, item in value.items()}
    if kind is list or kind is tuple:
        return [item if type(item) in _AS_IS else _settled(item) for item in value]
    if kind in _MEMBERS:
        return kind(**{name: _settled(getattr(value, name)) for name in _MEMBERS[kind]})
    return _rounded(value) if isinstance(value, float) else value


def _block(value: Any) -> str:
    """A list with one item a line; anything else on one line."""
    if isinstance(value, list) and value:
        return "[\n" + ",\n".join(_line(item) for item in value) + "\n]"
    return _line(value)


def _line(value: Any) -> str:
    return _ENCODER.encode(_plain(value))


def _plain(value: Any) -> Any:
    """Only what JSON knows."""
    kind = type(value)
    if kind in _AS_IS:
        return value
    if kind is dict:
        return {str(key): item if type(item) in _AS_IS else _plain(item) for key, item in value.items()}
    if kind is list or kind is tuple:
        return [item if type(item) in _AS_IS else _plain(item) for item in value]
    if kind in _MEMBERS:
        return {name: _plain(getattr(value, name)) for name in _MEMBERS[kind]}
    if isinstance(value, float):
        return _number(value)
    raise TypeError(f"{kind.__name__} has no place in a findings document")


def _number(value: float) -> float | str | None:
    """A float of 12 significant digits, ``inf``, ``-inf`` or None."""
    if math.isnan(value):
        return None
    if math.isinf(value):
        return "inf" if value > 0 else "-inf"
    return _rounded(value)


@lru_cache(maxsize=2**16)
def _rounded(value: float) -> float:
    """At 12 significant digits, without a negative zero; infinities stay, not-a-number is always the same object."""
    return math.nan if math.isnan(value) else float(f"{value:.12g}") + 0.0


def _parsed(text: str, name: str) -> Json:
    try:
        data = json.loads(text)
    except (ValueError, RecursionError) as error:
        line, column = getattr(error, "lineno", None), getattr(error, "colno", None)
        raise UserMistake(
            Mistake(place=Place(file=name, line=line, column=column), problem=f"not JSON: {error}")
        ) from error
    if not isinstance(data, dict):
        raise _mistake(name, "not a findings document", found=type(data).__name__, expected="a JSON object")
    return data


def _mistake(name: str, problem: str, *, found: str, expected: str) -> UserMistake:
    return UserMistake(Mistake(place=Place(file=name), problem=problem, found=found, expected=expected))


def _finding(data: Json, name: str) -> Finding:
    """A Finding of its JSON object; absent optional keys take their defaults."""
    revived = _revived(data)
    measured = revived.get("measured")
    try:
        quantity = None if measured is None else Quantity(**{key: _or_nan(key, item) for key, item in measured.items()})
        return Finding(**{**revived, "measured": quantity})
    except TypeError as error:
        raise _mistake(
            name, "a finding of another shape", found=str(error), expected="a file saved by this version"
        ) from error


def _or_nan(key: str, value: Any) -> Any:
    return math.nan if value is None and key in ("low", "nominal", "high") else value


def _revived(value: Any, key: str = "") -> Any:
    """Infinities back to numbers where a number stands; texts such as a net named ``inf`` stay texts."""
    if isinstance(value, dict):
        return {name: _revived(item, "value" if key in _CASES else name) for name, item in value.items()}
    if isinstance(value, list):
        return [_revived(item) for item in value]
    return _INFINITE.get(value, value) if isinstance(value, str) and key in _NUMBERS else value
