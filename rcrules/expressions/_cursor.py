"""A place in the text of an expression, moved from left to right; what is not understood is noted and passed over."""

import re
from typing import Final, Literal, NoReturn

from rcrules.quantities import QuantityError

MOST_SIGNS: Final = 100
"""Signs and calls of one expression."""
NAME: Final = re.compile(r"[A-Za-z_][A-Za-z0-9_]*")
_MOST_MISTAKES: Final = 10
_BLANK: Final = re.compile(r"\s*")
STRING: Final = re.compile(r'"[^"\n]*"|\'[^\'\n]*\'')
_WRONG: Final = re.compile(rf"{STRING.pattern}|[A-Za-z_0-9.]+|[^\s]")
"""What is passed over where nothing is understood."""


class HopelessError(Exception):
    """What follows cannot be read, or need not be; why is noted."""


class Cursor:
    """Takes letters, names and signs; notes mistakes with their offsets."""

    def __init__(self, text: str, mistakes: list[QuantityError]) -> None:
        self._text, self._at, self._signs = text, 0, 0
        self._mistakes = mistakes
        self._skip()

    @property
    def _ended(self) -> bool:
        return self._at >= len(self._text)

    def _is_at(self, letters: str) -> bool:
        return not self._ended and self._text[self._at] in letters

    def _wrong(self, expected: str) -> None:
        """Note that what stands here is not understood."""
        word = NAME.match(self._text, self._at) or STRING.match(self._text, self._at)
        found = word[0] if word else self._text[self._at : self._at + 1]
        told = found if found[1:] and found[0] in "\"'" else f"'{found}'"
        problem = f"{told} not understood" if found else "the expression ends too early"
        self._note(QuantityError(problem, at=self._at, length=max(len(found), 1), expected=expected))

    def _note(self, error: QuantityError) -> None:
        """One mistake at a place is enough; so are some in a text."""
        if all(other.at != error.at for other in self._mistakes):
            self._mistakes.append(error)
        if len(self._mistakes) >= _MOST_MISTAKES:
            raise HopelessError

    def _stop(self, problem: str, at: int, expected: str) -> NoReturn:
        self._note(QuantityError(problem, at=at, expected=expected))
        raise HopelessError

    def _pass(self) -> None:
        """Go past what is not understood."""
        match = _WRONG.match(self._text, self._at)
        self._at = match.end() if match else len(self._text)
        self._skip()

    def _name(self) -> str | None:
        match = NAME.match(self._text, self._at)
        if match is None:
            return None
        self._at = match.end()
        self._skip()
        return match[0]

    def _sign(self, *signs: Literal["+", "-", "*", "/"]) -> Literal["+", "-", "*", "/"] | None:
        """One of the signs, taken without the blanks behind it."""
        for sign in signs:
            if self._text.startswith(sign, self._at):
                self._count()
                self._at += 1
                return sign
        return None

    def _count(self) -> None:
        self._signs += 1
        if self._signs > MOST_SIGNS:
            self._stop("too many signs for an expression", self._at, f"at most {MOST_SIGNS}")

    def _take(self, letter: str) -> bool:
        if not self._text.startswith(letter, self._at):
            return False
        self._at += 1
        self._skip()
        return True

    def _skip(self) -> None:
        blank = _BLANK.match(self._text, self._at)
        self._at = blank.end() if blank else self._at
