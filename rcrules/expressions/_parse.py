"""The grammar, read once from left to right; depth and length are bounded.

sum      = product { ("+" | "-") product }      product = factor { ("*" | "/") factor }
factor   = "-" factor | "(" sum ")" | quantity | call | name
call     = name "(" [ item { "," item } ] ")"   item    = name "=" (text | quantity | name) | sum
quantity = a number with its unit, at most one blank between: ``0.8 V/us`` is one quantity, ``5 * 3 V`` a product
"""

import re
from typing import Final, Literal

from rcrules.expressions._tree import Binary, Call, Expression, Name, Number, Text, Unary
from rcrules.quantities import QuantityError, parse_quantity

LONGEST: Final = 1000
DEEPEST: Final = 12
_BLANK: Final = re.compile(r"\s*")
_NAME: Final = re.compile(r"[A-Za-z_][A-Za-z0-9_]*")
_QUANTITY: Final = re.compile(
    r"(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+(?![A-Za-z]))?(?: ?(?:%|[A-Za-zµμΩΩ°]+(?:/[A-Za-zµμΩΩ°]+)?))?"
)
_STRING: Final = re.compile(r'"[^"\n]*"|\'[^\'\n]*\'')


def parse_expression(text: str) -> Expression:
    """Read an expression. Raises QuantityError with the offset of the first character not understood."""
    if len(text) > LONGEST:
        raise QuantityError("too long for an expression", at=LONGEST, expected=f"at most {LONGEST} characters")
    reader = _Reader(text)
    found = reader.sum(0)
    if not reader.ended:
        raise reader.error("an operator such as + or the end")
    return found


class _Reader:
    def __init__(self, text: str) -> None:
        self._text, self._at = text, 0
        self._skip()

    @property
    def ended(self) -> bool:
        return self._at >= len(self._text)

    def error(self, expected: str) -> QuantityError:
        """What stands here is not understood."""
        word = _NAME.match(self._text, self._at)
        found = word[0] if word else self._text[self._at : self._at + 1]
        problem = f"'{found}' not understood" if found else "the expression ends too early"
        return QuantityError(problem, at=self._at, length=max(len(found), 1), expected=expected)

    def sum(self, depth: int) -> Expression:
        """Products joined by + and -."""
        found = self._product(depth)
        while (sign := self._sign("+", "-")) is not None:
            at = self._at - 1
            self._skip()
            found = Binary(sign=sign, left=found, right=self._product(depth), at=at)
        return found

    def _product(self, depth: int) -> Expression:
        found = self._factor(depth)
        while (sign := self._sign("*", "/")) is not None:
            at = self._at - 1
            self._skip()
            found = Binary(sign=sign, left=found, right=self._factor(depth), at=at)
        return found

    def _factor(self, depth: int) -> Expression:
        if depth > DEEPEST:
            raise QuantityError("nested too deeply", at=self._at, expected=f"at most {DEEPEST} levels")
        at = self._at
        if self._take("-"):
            return Unary(of=self._factor(depth + 1), at=at)
        if self._take("("):
            found = self.sum(depth + 1)
            self._close(at)
            return found
        if _QUANTITY.match(self._text, at):
            return self._quantity()
        if (name := self._name()) is None:
            raise self.error("a quantity, a name or a bracket")
        return self._call(name, at, depth) if self._take("(") else Name(name=name, at=at)

    def _quantity(self) -> Number:
        at = self._at
        match = _QUANTITY.match(self._text, at)
        if match is None:
            raise self.error("a quantity such as 10 ms")
        try:
            spread = parse_quantity(match[0])
        except QuantityError as error:
            raise error.moved(at) from None
        self._at = match.end()
        self._skip()
        return Number(value=spread.nominal, unit=spread.unit, text=match[0], at=at)

    def _call(self, name: str, at: int, depth: int) -> Call:
        """After the opening bracket."""
        opening = self._at - 1
        arguments: list[Expression] = []
        options: list[tuple[str, Text | Number | Name, int]] = []
        while not self._take(")"):
            if (arguments or options) and not self._take(","):
                raise self._unclosed(opening)
            if (option := self._option()) is not None:
                options.append(option)
            elif options:
                raise self.error("name = value: numbers stand before options")
            else:
                arguments.append(self.sum(depth + 1))
        return Call(name=name, arguments=tuple(arguments), options=tuple(options), at=at)

    def _option(self) -> tuple[str, Text | Number | Name, int] | None:
        """``to = "1.2 V"``; None where something else stands here."""
        at = self._at
        name = self._name()
        if name is None or not self._take("="):
            self._at = at
            return None
        start = self._at
        if (string := _STRING.match(self._text, start)) is not None:
            self._at = string.end()
            self._skip()
            return name, Text(value=string[0][1:-1], at=start + 1), at
        if _QUANTITY.match(self._text, start):
            return name, self._quantity(), at
        if (word := self._name()) is None:
            raise self.error('a text in quotes, a quantity or a name, such as to = "1.2 V"')
        return name, Name(name=word, at=start), at

    def _name(self) -> str | None:
        match = _NAME.match(self._text, self._at)
        if match is None:
            return None
        self._at = match.end()
        self._skip()
        return match[0]

    def _sign(self, *signs: Literal["+", "-", "*", "/"]) -> Literal["+", "-", "*", "/"] | None:
        """One of the signs, taken without the blanks behind it."""
        for sign in signs:
            if self._text.startswith(sign, self._at):
                self._at += 1
                return sign
        return None

    def _take(self, letter: str) -> bool:
        if not self._text.startswith(letter, self._at):
            return False
        self._at += 1
        self._skip()
        return True

    def _close(self, opening: int) -> None:
        if not self._take(")"):
            raise self._unclosed(opening)

    def _unclosed(self, opening: int) -> QuantityError:
        if self.ended:
            return QuantityError("a bracket that does not close", at=opening, expected="')'")
        return self.error("',' or ')'")

    def _skip(self) -> None:
        blank = _BLANK.match(self._text, self._at)
        self._at = blank.end() if blank else self._at
