"""What messages about a file say: a guess at a misspelt word, words in a row, texts cut short, names of quantities."""

from collections.abc import Iterable
from difflib import get_close_matches

from rcrules.quantities import QUANTITY_NAMES


def guess(word: str, known: Iterable[str]) -> str:
    """``; did you mean 'measure'?`` or nothing."""
    near = get_close_matches(word.lower()[:80], {name.lower(): name for name in known}, n=1, cutoff=0.6)
    spelled = {name.lower(): name for name in known}
    return f"; did you mean '{spelled[near[0]]}'?" if near else ""


def listed(words: Iterable[str]) -> str:
    """``a, b or c``, cut after two dozen."""
    items = list(words)
    if len(items) > 24:
        return ", ".join(items[:24]) + " …"
    return " or ".join((", ".join(items[:-1]), items[-1])) if len(items) > 1 else "".join(items)


def cut(text: str) -> str:
    """A text from a file, short enough for a message."""
    return text if len(text) <= 60 else text[:59] + "…"


def quantity_name(unit: str) -> str:
    """``a time``, ``an energy``."""
    name = QUANTITY_NAMES.get(unit, f"quantity in {unit}")
    return f"{'an' if name[0] in 'aeiou' else 'a'} {name}"
