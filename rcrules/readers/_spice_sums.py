"""Sums of a SPICE deck: ``{rv*(1+tol)}``, read and worked out in bounded work, without recursion."""

import math
import re
from collections.abc import Callable, Mapping
from typing import Final

from rcrules.readers._spice_numbers import number

MAX_LENGTH: Final = 2000
"""Characters of a sum."""
MAX_STEPS: Final = 2000
"""Sums worked out for one name."""
Step = tuple[str, float | str | int]
"""``number`` and its value, ``name``, ``call`` and its function, ``do`` and an operator."""
_TOKEN: Final = re.compile(r"\s*(?:(\*\*|[-+*/^(),])|((?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?[^\W_]*)|([^\W\d]\w*))", re.I)
_RANKS: Final = {"+": 1, "-": 1, "*": 2, "/": 2, "negate": 3, "**": 4}
_DO: Final[Mapping[str, Callable[[float, float], float]]] = {
    "+": lambda a, b: a + b,
    "-": lambda a, b: a - b,
    "*": lambda a, b: a * b,
    "/": lambda a, b: a / b,
    "**": lambda a, b: math.pow(a, b),
}
_CALLS: Final[Mapping[str, tuple[int, Callable[..., float]]]] = {
    "sqrt": (1, math.sqrt),
    "abs": (1, abs),
    "exp": (1, math.exp),
    "ln": (1, math.log),
    "log": (1, math.log),
    "log10": (1, math.log10),
    "sin": (1, math.sin),
    "cos": (1, math.cos),
    "tan": (1, math.tan),
    "atan": (1, math.atan),
    "int": (1, math.trunc),
    "min": (2, min),
    "max": (2, max),
    "pow": (2, math.pow),
    "pwr": (2, lambda a, b: math.pow(abs(a), b)),
}
_CONSTANTS: Final = {"pi": math.pi, "e": math.e}


class SumError(ValueError):
    """A sum that cannot be read or has no number, with the reason."""


class Scope:
    """Parameters by folded name: sums that are worked out when asked for."""

    def __init__(self, outer: "Scope | None" = None) -> None:
        self._outer = outer
        self._sums: dict[str, tuple[str, Scope]] = {}
        self._known: dict[str, float] = {}

    def put(self, name: str, text: str, scope: "Scope | None" = None) -> None:
        """Keep a parameter; its sum is worked out in ``scope``, by default in this one. The last one stands."""
        self._sums[name.casefold()] = (text, scope or self)
        self._known.pop(name.casefold(), None)

    def value(self, text: str) -> float:
        """What a sum comes to. Raises SumError: not readable, not known, cyclic, no number."""
        waiting = [(self, "", self, parsed(text))]
        for _ in range(MAX_STEPS):
            holder, name, scope, steps = waiting[-1]
            missing = next((found for found in _names(steps) if scope._number(found) is None), None)
            if missing is None:
                result = _worked_out(steps, scope)
                if len(waiting) == 1:
                    return result
                holder._known[name] = result
                waiting.pop()
                continue
            home = scope._holder(missing)
            if any(entry[0] is home and entry[1] == missing for entry in waiting):
                raise SumError(f"{missing!r} depends on itself")
            inner, within = home._sums[missing]
            waiting.append((home, missing, within, parsed(inner)))
        raise SumError("it needs too many others")

    def _number(self, name: str) -> float | None:
        home = self._holder(name)
        return home._known.get(name, _CONSTANTS.get(name) if name not in home._sums else None)

    def _holder(self, name: str) -> "Scope":
        scope: Scope | None = self
        while scope is not None:
            if name in scope._sums:
                return scope
            scope = scope._outer
        if name in _CONSTANTS:
            return self
        raise SumError(f"{name!r} is not known")


def parsed(text: str) -> list[Step]:
    """A sum in the order in which it is worked out, operators after what they act on. Raises SumError."""
    if len(text) > MAX_LENGTH:
        raise SumError("the sum is too long")
    steps: list[Step] = []
    held: list[tuple[str, int]] = []  # operators, brackets and functions, with commas seen
    wants_operand, at = True, 0
    plain = text.strip().rstrip()
    while at < len(plain):
        found = _TOKEN.match(plain, at)
        if found is None:
            raise SumError(f"{plain[at : at + 20]!r} is not understood")
        at = found.end()
        sign, digits, name = found[1], found[2], found[3]
        if wants_operand:
            wants_operand = _operand(plain, at, sign, digits, name, steps, held)
        elif sign is None or sign == "(":
            raise SumError(f"an operator is missing before {found[0].strip()!r}")
        else:
            wants_operand = _operator("**" if sign == "^" else sign, steps, held)
    if wants_operand:
        raise SumError("the sum breaks off")
    while held:
        _pop(steps, held, closing=False)
    return steps


def _operand(
    text: str,
    at: int,
    sign: str | None,
    digits: str | None,
    name: str | None,
    steps: list[Step],
    held: list[tuple[str, int]],
) -> bool:
    """Take in what may start an operand; whether one is still wanted."""
    if sign in {"(", "-", "+"}:
        if sign != "+":
            held.append(("(" if sign == "(" else "negate", 0))
        return True
    if digits is not None:
        read = number(digits)
        if read is None or read.trap:
            raise SumError(f"{digits!r} is no number that all simulators agree on")
        steps.append(("number", read.value))
        return False
    if name is None:
        raise SumError(f"{sign!r} stands where a number should")
    if text[at:].lstrip().startswith("("):
        if name.casefold() not in _CALLS:
            raise SumError(f"the function {name!r} is not known")
        held.append((f"call {name.casefold()}", 0))
        return True
    steps.append(("name", name.casefold()))
    return False


def _operator(sign: str, steps: list[Step], held: list[tuple[str, int]]) -> bool:
    """Take in what may follow an operand; whether another one is wanted."""
    if sign in {")", ","}:
        while held and held[-1][0] != "(":
            _pop(steps, held, closing=True)
        if len(held) < 1 or (sign == "," and (len(held) < 2 or not held[-2][0].startswith("call "))):
            raise SumError(f"{sign!r} without a bracket before it")
        if sign == ",":
            held[-1] = ("(", held[-1][1] + 1)
            return True
        commas = held.pop()[1]
        if held and held[-1][0].startswith("call "):
            name = held.pop()[0][5:]
            if _CALLS[name][0] != commas + 1:
                raise SumError(f"{name!r} takes {_CALLS[name][0]} numbers")
            steps.append(("call", name))
        return False
    rank = _RANKS[sign]
    while held and held[-1][0] in _RANKS and (_RANKS[held[-1][0]] >= rank) and sign != "**":
        _pop(steps, held, closing=True)
    held.append((sign, 0))
    return True


def _pop(steps: list[Step], held: list[tuple[str, int]], *, closing: bool) -> None:
    sign = held.pop()[0]
    if sign not in _RANKS:
        raise SumError("a bracket is not closed" if not closing else "brackets do not match")
    steps.append(("do", sign))


def _names(steps: list[Step]) -> list[str]:
    return [str(what) for kind, what in steps if kind == "name"]


def _worked_out(steps: list[Step], scope: Scope) -> float:
    stack: list[float] = []
    try:
        for kind, what in steps:
            if kind == "number":
                stack.append(float(what))
            elif kind == "name":
                stack.append(scope._number(str(what)) or 0.0)
            elif what == "negate":
                stack.append(-stack.pop())
            else:
                count, do = (2, _DO[str(what)]) if kind == "do" else _CALLS[str(what)]
                operands = stack[-count:]
                stack[-count:] = [float(do(*operands))]
    except (ArithmeticError, ValueError) as error:
        raise SumError("it has no number (a division by zero, a root of less than zero)") from error
    if not math.isfinite(stack[-1]):
        raise SumError("it is too large for a number")
    return stack[-1]
