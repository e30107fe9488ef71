"""Texts with units to SI floats and back; the only module that knows units."""

from dataclasses import dataclass


class QuantityError(ValueError):
    """A text is no quantity: ``at`` is the offset of the first character not understood, ``expected`` what goes there."""

    def __init__(self, problem: str, *, at: int = 0, length: int = 1, expected: str = "") -> None:
        super().__init__(problem)
        self.problem, self.at, self.length, self.expected = problem, at, length, expected


@dataclass(frozen=True, slots=True, kw_only=True)
class Spread:
    """A number between two bounds, SI units."""

    low: float
    nominal: float
    high: float
    unit: str
    """SI unit symbol: V A Ω F s Hz W J C K degC H Ω/V V/s 1 (a plain number or ratio) bit."""


def parse_quantity(text: str, unit: str | None = None) -> Spread:
    """Read ``1.2 ms``, ``3.3 V +/- 3 %``, ``100 nF -20 % +80 %``, ``-20 degC .. 60 degC``, ``5 %`` (0.05), ``12``.

    unit: the SI unit expected, or None for any. Raises QuantityError.
    """
    raise NotImplementedError(text, unit)


def show(value: float, unit: str, digits: int = 3) -> str:
    """``show(1.2e-3, "s") == "1.2 ms"``; infinity is 'never' for times and 'unlimited' otherwise."""
    raise NotImplementedError(value, unit, digits)
