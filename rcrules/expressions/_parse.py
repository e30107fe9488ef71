"""The grammar, read once from left to right; depth, length and the number of signs are bounded.

sum      = product { ("+" | "-") product }      product = factor { ("*" | "/") factor }
factor   = "-" factor | atom [ "^" exponent ]   atom    = "(" sum ")" | quantity | call | name
exponent = [ "-" ] number | "(" [ "-" ] number [ "/" number ] ")" | name
call     = name "(" [ item { "," item } ] ")"   item    = name "=" (text | quantity | name) | sum
quantity = a number with its unit, at most one blank between: ``0.8 V/us`` is one quantity, ``5 * 3 V`` a product

After a mistake the reading goes on behind it, so that all mistakes of a text are told at once.
"""

import re
from typing import Final

from rcrules.expressions._cursor import STRING, Cursor, HopelessError
from rcrules.expressions._tree import Binary, Broken, Call, Expression, Name, Number, Power, Text, Unary
from rcrules.quantities import QuantityError, parse_quantity

LONGEST: Final = 1000
DEEPEST: Final = 12
HIGHEST: Final = 10.0
"""Largest exponent, of either sign."""
_QUANTITY: Final = re.compile(
    r"(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+(?![A-Za-z]))?(?: ?(?:%|[A-Za-zµμΩΩ°]+(?:/[A-Za-zµμΩΩ°]+)?))?"
)
_EXPONENT: Final = re.compile(r"-?\d+(?:\.\d+)?|\(\s*(-?\d+(?:\.\d+)?)\s*(?:/\s*(\d+(?:\.\d+)?)\s*)?\)")
_ATOM: Final = re.compile(r"[A-Za-z_0-9.(]")
_OPTION: Final = 'a text in quotes, a quantity or a name, such as to = "1.2 V"'


def parse_expression(text: str, mistakes: list[QuantityError]) -> Expression:
    """Read an expression. Adds mistakes, each with its offset; what is wrong is ``Broken``."""
    if len(text) > LONGEST:
        mistakes.append(QuantityError("too long for an expression", at=LONGEST, expected=f"at most {LONGEST} letters"))
        return Broken(parts=(), at=0)
    reader = _Reader(text, mistakes)
    try:
        return reader.whole(0)
    except HopelessError:
        return Broken(parts=(), at=0)


class _Reader(Cursor):
    def whole(self, depth: int, closing: str = "") -> Expression:
        """A sum up to the end or a closing bracket; what stands before that is looked at too."""
        found = [self._sum(depth)]
        while not self._ended and not self._is_at(closing):
            self._wrong("an operator such as +, or ')'" if closing else "an operator such as + or the end")
            if not _ATOM.match(self._text, self._at):
                self._pass()
            if not self._ended and not self._is_at(closing):
                found.append(self._sum(depth))
        return found[0] if len(found) == 1 else Broken(parts=tuple(found), at=0)

    def _sum(self, depth: int) -> Expression:
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
            self._stop("nested too deeply", self._at, f"at most {DEEPEST} levels")
        at = self._at
        if self._take("-"):
            return Unary(of=self._factor(depth + 1), at=at)
        found = self._atom(depth)
        return self._power(found, depth) if self._is_at("^") else found

    def _atom(self, depth: int) -> Expression:
        at = self._at
        if self._take("("):
            found = self.whole(depth + 1, ")")
            if not self._take(")"):
                self._unclosed(at)
            return found
        if _QUANTITY.match(self._text, at):
            return self._quantity()
        if (name := self._name()) is not None:
            return self._call(name, at, depth) if self._take("(") else Name(name=name, at=at)
        self._wrong("a quantity, a name or a bracket")
        if self._is_at("+-*/^),"):
            return Broken(parts=(), at=at)
        self._pass()
        rest = (self._atom(depth),) if _ATOM.match(self._text, self._at) else ()
        return Broken(parts=rest, at=at)

    def _power(self, of: Expression, depth: int) -> Expression:
        """After what the power is taken of."""
        at = self._at
        if isinstance(of, Number) and of.unit != "1" and self._text[of.at - 1 : of.at] != "(":
            problem = f"a power of '{of.text}' can be read in two ways"
            self._note(QuantityError(problem, at=of.at, length=len(of.text), expected=f"({of.text})^2"))
        self._count()
        self._take("^")
        match = _EXPONENT.match(self._text, self._at)
        if match is None:
            return self._raised(of, at)
        exponent = _quotient(match[1], match[2]) if match[1] else float(match[0])
        if abs(exponent) > HIGHEST or exponent == 0:
            expected = f"an exponent from -{HIGHEST:.0f} to {HIGHEST:.0f}, not 0"
            problem = f"'{match[0]}' is no exponent here"
            self._note(QuantityError(problem, at=self._at, length=len(match[0]), expected=expected))
        self._at = match.end()
        self._skip()
        if self._is_at("^"):
            self._wrong("brackets around a power of a power")
            self._pass()
            return Broken(parts=(of, self._atom(depth)), at=at)
        return Power(of=of, exponent=exponent, by=None, text=match[0], at=at)

    def _raised(self, of: Expression, at: int) -> Expression:
        """A power whose exponent is a name."""
        start = self._at
        name = self._name()
        if name is None or self._is_at("(^"):
            self._at = start
            self._wrong("a number or a name as exponent, such as 2, -1, (1/2) or bits")
            return Broken(parts=(of,), at=at)
        return Power(of=of, exponent=None, by=Name(name=name, at=start), text=name, at=at)

    def _quantity(self) -> Expression:
        at = self._at
        match = _QUANTITY.match(self._text, at)
        assert match is not None  # tested by the caller
        self._at = match.end()
        self._skip()
        try:
            spread = parse_quantity(match[0])
        except QuantityError as error:
            self._note(error.moved(at))
            return Broken(parts=(), at=at)
        return Number(value=spread.nominal, unit=spread.unit, text=match[0], at=at)

    def _call(self, name: str, at: int, depth: int) -> Expression:
        """After the opening bracket."""
        opening = self._at - 1
        arguments: list[Expression] = []
        options: list[tuple[str, Text | Number | Name, int]] = []
        before = len(self._mistakes)
        self._count()
        while not self._take(")"):
            if self._ended:
                self._unclosed(opening)
                break
            self._item(arguments, options, depth)
            if not self._take(",") and not self._is_at(")") and not self._ended:
                self._wrong("',' or ')'")
                self._pass_to_item()
        if len(self._mistakes) > before:
            return Broken(parts=tuple(arguments), at=at)
        return Call(name=name, arguments=tuple(arguments), options=tuple(options), at=at)

    def _item(
        self, arguments: list[Expression], options: list[tuple[str, Text | Number | Name, int]], depth: int
    ) -> None:
        """An argument or an option of a call."""
        at = self._at
        name = self._name()
        if name is not None and self._take("="):
            value = self._option()
            options += [(name, value, at)] if value is not None else []
            return
        self._at = at
        if options:
            self._wrong("name = value: numbers stand before options")
        arguments.append(self._sum(depth + 1))

    def _option(self) -> Text | Number | Name | None:
        """After the ``=`` of ``to = "1.2 V"``; None where it is wrong."""
        start = self._at
        if (string := STRING.match(self._text, start)) is not None:
            self._at = string.end()
            self._skip()
            return Text(value=string[0][1:-1], at=start + 1)
        if _QUANTITY.match(self._text, start):
            found = self._quantity()
            return found if isinstance(found, Number) else None
        if (word := self._name()) is not None:
            return Name(name=word, at=start)
        self._wrong(_OPTION)
        self._pass_to_item()
        return None

    def _pass_to_item(self) -> None:
        """Go on with the next item of a call, or its end."""
        while not self._ended and not self._is_at("),"):
            self._pass()
        self._take(",")

    def _unclosed(self, opening: int) -> None:
        self._note(QuantityError("a bracket that does not close", at=opening, expected="')'"))


def _quotient(above: str, below: str | None) -> float:
    """``1/2``; a quotient by 0 is no exponent."""
    divisor = float(below or 1)
    return float(above) / divisor if divisor else float("inf")
