"""How much one file may hold: far more than any board, and little enough to be worked on in seconds."""

from dataclasses import dataclass
from typing import Final

from rcrules.readers._mistakes import refusal, shorten

MAX_FIELDS: Final = 2000
"""Fields of one part."""
MAX_NAME: Final = 1000
"""Characters of a reference, a pin or a net name."""
MAX_TEXT: Final = 100_000
"""Characters of a value or another field."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Limits:
    """What is read of one file; the project file's [limits] or ``--limit`` may say otherwise."""

    file_size: int = 64
    """[MiB]"""
    parts: int = 100_000
    """Each as often as the file lists it."""
    connections: int = 250_000
    """Of parts to nets."""
    nets: int = 100_000


USUAL: Final = Limits()


def bound(file: str, line: int, what: str, count: int, most: int) -> None:
    """Raise UserMistake where a file holds more of something than is read."""
    if count > most:
        raise refusal(
            file,
            f"the file holds too many {what}",
            line=line,
            found=f"more than {most}",
            expected=f"at most {most} {what}",
            do=f"check that this is the export of one board and was not damaged{_allow(what)}",
        )


def _allow(what: str) -> str:
    return f"; --limit {what}=N allows more" if what in Limits.__dataclass_fields__ else ""


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
