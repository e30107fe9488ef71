"""Lists of references: ``C1, C2``, ``R1-R4``, ``C1 C2 C3``."""

import re
from typing import Final

MAX_RANGE: Final = 1000
MAX_REFERENCES: Final = 50_000
_RANGE: Final = re.compile(
    r"(?<![\w.-])([^\W\d]+)(\d+)\s*(?:-|–|—|\.\.\.?|…|\bto\b|\bbis\b)\s*(?:([^\W\d]+))?(\d+)(?![\w.-])", re.IGNORECASE
)
_SEPARATOR: Final = re.compile(r"[,;\s]+")
_REFERENCE: Final = re.compile(r"[^\W\d](?:[\w.+/#:*-]*\d[\w.+/#:*'-]*|[\w]*\?+)")
_WORD: Final = re.compile(r"[^\W\d][\w.+/#:*-]*")


class TooManyError(ValueError):
    """The ranges of one cell stand for more parts than any board has."""


def references(text: str, quantity: int | None = None) -> tuple[str, ...]:
    """Every reference of a cell, in order; () where the text is no list of references.

    A range is written out where both ends have one prefix and rise by at most ``MAX_RANGE``. With a quantity that
    only the text without ranges meets, ``R1-4`` stays one name. Raises TooManyError.
    """
    if text.isalnum():
        return _names(text)
    ranges = [_size(found) for found in _RANGE.finditer(text)]
    if sum(ranges) > MAX_REFERENCES:
        raise TooManyError(f"{sum(ranges)} references in one cell")
    names = _names(_RANGE.sub(_written_out, text))
    if quantity is not None and len(names) != quantity:
        literal = _names(text)
        if len(literal) == quantity:
            return literal
    return names


def count_references(text: str) -> int:
    """Number of references that a cell stands for, ranges counted in full, 0 where it is no list of them."""
    ranges = list(_RANGE.finditer(text))
    names = _names(_RANGE.sub(r"\1\2", text))
    return len(names) + sum(map(_size, ranges)) - len(ranges) if names else 0


def looks_like_references(text: str) -> bool:
    """True where each word of a cell is a reference that carries a number."""
    names = _names(_RANGE.sub(r"\1\2", text))
    return bool(names) and all(_REFERENCE.fullmatch(name) for name in names)


def _names(text: str) -> tuple[str, ...]:
    words = [word for word in _SEPARATOR.split(text.strip(" '\"\t")) if word]
    if len(words) == 1 and _WORD.fullmatch(words[0]):
        return (words[0],)
    return tuple(words) if words and all(_REFERENCE.fullmatch(word) for word in words) else ()


def _size(found: re.Match[str]) -> int:
    """Number of references that a range stands for, 1 where it is none."""
    prefix, first, second_prefix, last = found.groups()
    if (second_prefix or prefix).lower() != prefix.lower() or len(first) > 9 or len(last) > 9:
        return 1
    steps = int(last) - int(first)
    return steps + 1 if 0 < steps <= MAX_RANGE else 1


def _written_out(found: re.Match[str]) -> str:
    if _size(found) == 1:
        return found.group(0)
    prefix, first, _, last = found.groups()
    low, high = int(first), int(last)
    width = len(first) if first.startswith("0") else 0
    return ",".join(f"{prefix}{number:0{width}}" for number in range(low, high + 1))
