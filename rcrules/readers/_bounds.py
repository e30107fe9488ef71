"""How much one file may hold: far more than any board, and little enough to be worked on in seconds."""

from typing import Final

from rcrules.readers._mistakes import refusal, shorten

MAX_PARTS: Final = 100_000
"""Parts, each as often as the file lists it."""
MAX_PINS: Final = 250_000
"""Connections of parts to nets."""
MAX_NETS: Final = 100_000
MAX_FIELDS: Final = 2000
"""Fields of one part."""
MAX_NAME: Final = 1000
"""Characters of a reference, a pin or a net name."""
MAX_TEXT: Final = 100_000
"""Characters of a value or another field."""


def bound(file: str, line: int, what: str, count: int, most: int) -> None:
    """Raise UserMistake where a file holds more of something than is read."""
    if count > most:
        raise refusal(
            file,
            f"the file holds too many {what}",
            line=line,
            found=f"more than {most}",
            expected=f"at most {most} {what}",
            do="check that this is the export of one board and was not damaged",
        )


def named(file: str, line: int, what: str, text: str, most: int = MAX_NAME) -> None:
    """Raise UserMistake where a name, or another text, is longer than any."""
    if len(text) > most:
        raise refusal(
            file,
            f"{what} is too long",
            line=line,
            found=f"{shorten(text, 40)} ({len(text)} characters)",
            expected=f"at most {most} characters",
            do="correct it, or export the file again if it was damaged",
        )
