"""The order in which people expect references and nets: R2 before R10."""

import re
from functools import lru_cache
from typing import Final

_DIGITS: Final = re.compile(r"(\d+)")


@lru_cache(maxsize=2**17)
def natural(text: str) -> tuple[tuple[int, int, str], ...]:
    """Sort key that counts runs of digits as numbers; ties keep the plain text order."""
    parts = _DIGITS.split(text)
    key = tuple((0, int(part), part) if part.isdecimal() else (1, 0, part) for part in parts if part)
    return (*key, (-1, 0, text))
