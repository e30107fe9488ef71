"""The document as JSON text and back: ``loads(dumps(document)) == settled(document)``.

Floats carry 12 significant digits; infinity is the text ``"inf"`` or ``"-inf"``, not-a-number is null. Each item of a
list stands on a line of its own, so that two documents compare line by line.
"""

import json
import math
import re
from collections.abc import Mapping
from dataclasses import fields
from functools import lru_cache
from typing import Any, Final

from rcrules.errors import Mistake, Place, UserMistake
from rcrules.findings._document import Document, Finding, Json, Quantity
from rcrules.findings._shape import damage

SCHEMA: Final = 1
_UNSEEN: Final = re.compile(
    "[\x7f-\x9f\u00ad\u061c\u180e\u200b-\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufff9-\ufffb\ufffe\uffff\ud800-\udfff\U000e0000-\U000e007f]"
)
"""What could steer a terminal or hide in a text; written as an escape."""
_FIELDS: Final = tuple(item.name for item in fields(Document) if item.init)
_ORDER: Final = ("rcrules", *(name for name in _FIELDS if name != "schema"))
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
_MEMBERS: Final[Mapping[type, tuple[str, ...]]] = {
    kind: tuple(item.name for item in fields(kind)) for kind in (Finding, Quantity)
}
_AS_IS: Final = frozenset((str, int, bool, type(None)))
"""Types of the values that need no second look; a large board has millions of them."""
_INFINITE: Final = {"inf": math.inf, "-inf": -math.inf}


def dumps(document: Document) -> str:
    """The JSON text of section "findings document", ending in a newline."""
    whole = document if document.settled else settled(document)
    members = ((key, getattr(whole, "schema" if key == "rcrules" else key)) for key in _ORDER)
    text = "{\n" + ",\n".join(f"{json.dumps(key)}: {_block(member)}" for key, member in members) + "\n}\n"
    return _UNSEEN.sub(lambda found: json.dumps(found[0])[1:-1], text)


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
    if found := damage(data):
        raise _mistake(
            name, "a findings document of another shape", found=found, expected="a file saved by this version"
        )
    members = {key: _revived(data[key]) for key in _ORDER if key not in ("rcrules", "findings")}
    return Document(**members, schema=SCHEMA, findings=[_finding(item) for item in data["findings"]])


def settled(document: Document) -> Document:
    """The document as it reads after saving: numbers at 12 significant digits, plain lists and dictionaries."""
    found = Document(**{name: _settled(getattr(document, name)) for name in _FIELDS})
    object.__setattr__(found, "settled", True)
    return found


def _settled(value: Any) -> Any:
    kind = type(value)
    if kind is dict:
        return {str(key): item if type(item) in _AS_IS else _settled(item) for key, item in value.items()}
    if kind is list or kind is tuple:
        return [item if type(item) in _AS_IS else _settled(item) for item in value]
    if kind is float:
        return _rounded(value)
    if kind in _MEMBERS:
        return kind(**{name: _settled(getattr(value, name)) for name in _MEMBERS[kind]})
    return _rounded(value) if isinstance(value, float) else value


def _block(value: Any) -> str:
    """A list with one item a line; anything else on one line."""
    if isinstance(value, list) and value:
        return "[\n" + ",\n".join(_line(item) for item in value) + "\n]"
    return _line(value)


def _line(value: Any) -> str:
    """A settled value on one line; what JSON has no number for is replaced where it occurs."""
    try:
        return _ENCODER.encode(value)
    except ValueError:
        return _ENCODER.encode(plain(value))


def _members(value: object) -> Json:
    """Findings and their quantities as objects of JSON."""
    names = _MEMBERS.get(type(value))
    if names is None:
        raise TypeError(f"{type(value).__name__} has no place in a findings document")
    return {name: getattr(value, name) for name in names}


_ENCODER: Final = json.JSONEncoder(ensure_ascii=False, allow_nan=False, check_circular=False, default=_members)


def plain(value: Any) -> Any:
    """Only what JSON knows: numbers at 12 significant digits, infinities as texts, objects as dictionaries."""
    return _finite(_settled(value))


def _finite(value: Any) -> Any:
    """With infinities as the texts ``inf`` and ``-inf``, and None for not-a-number."""
    if type(value) in _MEMBERS:
        value = _members(value)
    if isinstance(value, dict):
        return {key: _finite(item) for key, item in value.items()}
    if isinstance(value, list):
        return [_finite(item) for item in value]
    if isinstance(value, float) and not math.isfinite(value):
        return None if math.isnan(value) else "inf" if value > 0 else "-inf"
    return value


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


def _finding(data: Json) -> Finding:
    """A Finding of its JSON object, whose shape has been seen to."""
    revived = _revived(data)
    measured = revived["measured"]
    quantity = None if measured is None else Quantity(**{key: _or_nan(key, item) for key, item in measured.items()})
    return Finding(**{**revived, "measured": quantity})


def _or_nan(key: str, value: Any) -> Any:
    return math.nan if value is None and key in ("low", "nominal", "high") else value


def _revived(value: Any, key: str = "") -> Any:
    """Infinities back to numbers where a number stands; texts such as a net named ``inf`` stay texts."""
    if isinstance(value, dict):
        return {name: _revived(item, "value" if key in _CASES else name) for name, item in value.items()}
    if isinstance(value, list):
        return [_revived(item) for item in value]
    return _INFINITE.get(value, value) if isinstance(value, str) and key in _NUMBERS else value
