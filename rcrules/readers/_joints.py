"""Ends of a net written as one word: ``R1.2``."""

from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal, shorten


def joint(source: Source, line: int, word: str, between: str) -> tuple[str, str]:
    """Reference and pin, split at the last mark between them. Raises UserMistake where one is missing."""
    ref, mark, pin = word.rpartition(between)
    if not mark or not ref or not pin:
        raise refusal(
            source.name,
            "a connection that names no part or no pin",
            line=line,
            found=shorten(word),
            expected=f"a reference and a pin, such as R1{between}2",
            do="export the list again, or correct the line",
        )
    return ref, pin
