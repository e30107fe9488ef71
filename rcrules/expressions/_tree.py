"""What an expression is made of. Every node knows where it stands in its text."""

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Literal

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


Expression = Number | Name | Text | Unary | Binary | Call


def parts(of: Expression) -> Iterator[Expression]:
    """The node and everything below it."""
    yield of
    below: tuple[Expression, ...] = ()
    if isinstance(of, Unary):
        below = (of.of,)
    elif isinstance(of, Binary):
        below = (of.left, of.right)
    elif isinstance(of, Call):
        below = of.arguments
    for item in below:
        yield from parts(item)


def names(of: Expression) -> list[Name]:
    """Every name, in the order of the text; options are no names of the expression."""
    return [item for item in parts(of) if isinstance(item, Name)]


def calls(of: Expression) -> list[Call]:
    """Every call, in the order of the text."""
    return [item for item in parts(of) if isinstance(item, Call)]


def text_of(of: Expression, level: int = 0) -> str:
    """The expression as it could be written, for people."""
    if isinstance(of, Number):
        return of.text
    if isinstance(of, Name):
        return of.name.replace("_", " ")
    if isinstance(of, Text):
        return f'"{of.value}"'
    if isinstance(of, Unary):
        return f"-{text_of(of.of, 2)}"
    if isinstance(of, Call):
        options = (f"{key} {item.value if isinstance(item, Text) else text_of(item)}" for key, item, _ in of.options)
        told = ", ".join([*(text_of(item) for item in of.arguments), *options])
        name = of.name.replace("_", " ")
        return f"{name} ({told})" if told else name
    own = 0 if of.sign in "+-" else 1
    right = own + 1 if of.sign in "-/" else own
    told = f"{text_of(of.left, own)} {of.sign} {text_of(of.right, right)}"
    return f"({told})" if own < level else told
