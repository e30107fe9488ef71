"""A calculation sheet: every line is a formula, the same with its numbers put in, and what comes out.

A number stands rounded as it is printed, and the next line starts from what is printed. So whoever works a line out by
hand gets the number at its end.
"""

from collections.abc import Callable
from dataclasses import dataclass, field

from rcrules.quantities import show

LONG = 1000.0
"""Seconds from which a time is not shown in minutes or hours: a formula needs one unit."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Number:
    """A value as it is printed."""

    symbol: str
    value: float
    unit: str
    text: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Step:
    """One line."""

    number: Number
    formula: str
    """In symbols; '' where the number is taken from elsewhere."""
    put_in: str
    """The formula with numbers; '' where it has none."""
    note: str
    """Where a number comes from, or what the line is for."""


@dataclass(slots=True, kw_only=True)
class Sheet:
    """Lines in order; symbols are used once each, a second one of the same name gets a mark."""

    digits: int
    """Significant digits of every number."""
    steps: list[Step] = field(default_factory=list)

    def number(self, symbol: str, value: float, unit: str) -> Number:
        """A number that needs no line of its own."""
        rounded = float(f"{value:.{self.digits - 1}e}") + 0.0
        return Number(symbol=symbol, value=rounded, unit=unit, text=shown(rounded, unit, self.digits))

    def given(self, symbol: str, value: float, unit: str, note: str) -> Number:
        """A line for a number that comes from elsewhere."""
        number = self.number(self._unused(symbol), value, unit)
        self.steps.append(Step(number=number, formula="", put_in="", note=note))
        return number

    def work(
        self,
        symbol: str,
        unit: str,
        formula: str,
        compute: Callable[..., float],
        *numbers: Number,
        note: str = "",
    ) -> Number:
        """A line for a formula; ``{}`` stands for each number in turn, and ``compute`` takes their values."""
        result = self.number(self._unused(symbol), compute(*(item.value for item in numbers)), unit)
        symbols = formula.format(*(item.symbol for item in numbers))
        put_in = formula.format(*(_bracketed(item.text) for item in numbers))
        self.steps.append(Step(number=result, formula=symbols, put_in=put_in, note=note))
        return result

    def line(self, symbol: str, value: float, unit: str, formula: str, put_in: str) -> Number:
        """A line whose formula is written elsewhere."""
        number = self.number(self._unused(symbol), value, unit)
        self.steps.append(Step(number=number, formula=formula, put_in=put_in, note=""))
        return number

    def _unused(self, symbol: str) -> str:
        taken = {step.number.symbol for step in self.steps}
        while symbol in taken:
            symbol += "'"
        return symbol


def shown(value: float, unit: str, digits: int) -> str:
    """A number with its unit; long times stay in seconds."""
    if unit == "s" and LONG <= abs(value) < float("inf"):
        return f"{show(value, '1', digits)} s"
    return show(value, unit, digits)


def _bracketed(text: str) -> str:
    return f"({text})" if text.startswith("-") else text
