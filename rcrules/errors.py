"""Mistakes of the user's files: place, problem, found, expected, what to do."""

from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field


@dataclass(frozen=True, slots=True, kw_only=True)
class Place:
    """A spot in an input file, lines and columns counted from 1."""

    file: str
    """Path as the user gave it, relative where possible."""
    line: int | None = None
    column: int | None = None

    def __str__(self) -> str:
        return ":".join(str(item) for item in (self.file, self.line, self.column) if item is not None)


@dataclass(frozen=True, slots=True, kw_only=True)
class Mistake:
    """One thing wrong with an input, told so that the reader can mend it."""

    place: Place
    problem: str
    """What is wrong, in half a sentence."""
    found: str | None = None
    expected: str | None = None
    do: str | None = None
    """What to do about it."""
    shown: str | None = None
    """The line of the file to show, with a marker below it."""
    span: tuple[int, int] | None = None
    """Start column (from 1) and length of the marker under ``shown``."""

    def __str__(self) -> str:
        lines = [f"{self.place}: {self.problem}"]
        if self.shown is not None:
            lines.append(f"  {self.shown}")
            if self.span is not None:
                start, length = self.span
                lines.append("  " + " " * (start - 1) + "^" + "~" * max(length - 1, 0))
        for word, text in (("found", self.found), ("expected", self.expected), ("do", self.do)):
            if text is not None:
                lines.append(f"  {word:<9} {text}")
        return "\n".join(lines)


class UserMistake(Exception):  # noqa: N818 - the word of the trade here; it is no error of ours
    """Inputs, rules or usage are wrong; the command prints the mistakes and exits 2."""

    def __init__(self, *mistakes: Mistake) -> None:
        super().__init__("\n".join(str(mistake) for mistake in mistakes))
        self.mistakes = mistakes


@dataclass(slots=True)
class Problems:
    """Collects the mistakes of a run, so that all are told at once."""

    mistakes: list[Mistake] = field(default_factory=list)

    @contextmanager
    def collecting(self) -> Iterator[None]:
        """Keep a UserMistake raised inside for later."""
        try:
            yield
        except UserMistake as error:
            self.mistakes.extend(error.mistakes)

    def stop_if_any(self) -> None:
        """Raise all that was collected, if anything was."""
        if self.mistakes:
            raise UserMistake(*self.mistakes)
