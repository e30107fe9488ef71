"""What an expression is made of. Every node knows where it stands in its text."""

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from typing import Final, Literal

Sign = Literal["+", "-", "*", "/"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Number:
    """A quantity, SI."""

    value: float
    unit: str
    text: str
    at: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Name:
    """A fact or a given number, looked up for each subject."""

    name: str
    at: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Text:
    """A text in quotes; only options of calls are texts."""

    value: str
    at: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Unary:
    """``-x``"""

    of: "Expression"
    at: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Binary:
    """``a + b``"""

    sign: Sign
    left: "Expression"
    right: "Expression"
    at: int
    """Where the sign stands."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Power:
    """``x ^ 2``, ``2 ^ bits``."""

    of: "Expression"
    exponent: float | None
    """The number that stands there; None where a name does."""
    by: "Name | Call | None"
    text: str
    """The exponent as it is written."""
    at: int
    """Where the sign stands."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Broken:
    """What was not understood, and is told elsewhere."""

    parts: "tuple[Expression, ...]"
    """What of it was understood, so that mistakes in there are told too."""
    at: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Call:
    """A function or a measure: ``min(a, b)``, ``delay(event = "power-up", to = "1.2 V")``."""

    name: str
    arguments: tuple["Expression", ...]
    options: tuple[tuple[str, "Text | Number | Name", int], ...]
    """Name, value, where the name stands."""
    at: int

    @property
    def length(self) -> int:
        """Characters of the name."""
        return len(self.name)


Expression = Number | Name | Text | Unary | Binary | Power | Broken | Call


def below(of: Expression) -> tuple[Expression, ...]:
    """What a node is made of, in the order of the text."""
    if isinstance(of, Unary):
        return (of.of,)
    if isinstance(of, Power):
        return (of.of,) if of.by is None else (of.of, of.by)
    if isinstance(of, Binary):
        return of.left, of.right
    if isinstance(of, Call):
        return of.arguments
    return of.parts if isinstance(of, Broken) else ()


def parts(of: Expression) -> Iterator[Expression]:
    """The node and everything below it."""
    yield of
    for item in below(of):
        yield from parts(item)


def changed(of: Expression, change: Callable[[Expression], Expression]) -> Expression:
    """The expression with every node, from the leaves up, put through a change."""
    if isinstance(of, Unary):
        of = replace(of, of=changed(of.of, change))
    elif isinstance(of, Power):
        by = None if of.by is None else changed(of.by, change)
        of = replace(of, of=changed(of.of, change), by=by if isinstance(by, Name | Call) else None)
    elif isinstance(of, Binary):
        of = replace(of, left=changed(of.left, change), right=changed(of.right, change))
    elif isinstance(of, Call):
        of = replace(of, arguments=tuple(changed(item, change) for item in of.arguments))
    elif isinstance(of, Broken):
        of = replace(of, parts=tuple(changed(item, change) for item in of.parts))
    return change(of)


def names(of: Expression) -> list[Name]:
    """Every name, in the order of the text; options are no names of the expression."""
    return [item for item in parts(of) if isinstance(item, Name)]


def calls(of: Expression) -> list[Call]:
    """Every call, in the order of the text."""
    return [item for item in parts(of) if isinstance(item, Call)]


_OPERAND: Final = 3
"""The level of what a power is taken of."""


def text_of(of: Expression, level: int = 0) -> str:
    """The expression as it could be written, for people."""
    if isinstance(of, Number):
        return f"({of.text})" if level == _OPERAND and of.unit != "1" else of.text
    if isinstance(of, Name):
        return of.name.replace("_", " ")
    if isinstance(of, Text):
        return f'"{of.value}"'
    if isinstance(of, Call):
        return _call_text(of)
    if isinstance(of, Broken):
        return "…"
    own, told = _joined_text(of)
    return f"({told})" if own < level else told


def _call_text(of: Call) -> str:
    options = (f"{key} {item.value if isinstance(item, Text) else text_of(item)}" for key, item, _ in of.options)
    told = ", ".join([*(text_of(item) for item in of.arguments), *options])
    name = of.name.replace("_", " ")
    return f"{name} ({told})" if told else name


def _joined_text(of: Unary | Binary | Power) -> tuple[int, str]:
    """How tightly its sign binds, and the text."""
    if isinstance(of, Unary):
        return 2, f"-{text_of(of.of, 2)}"
    if isinstance(of, Power):
        return 2, f"{text_of(of.of, _OPERAND)}^{of.text if of.by is None else text_of(of.by, _OPERAND)}"
    own = 0 if of.sign in "+-" else 1
    right = own + 1 if of.sign in "-/" else own
    return own, f"{text_of(of.left, own)} {of.sign} {text_of(of.right, right)}"
