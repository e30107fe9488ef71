"""What a quantity is, and how a text fails to be one."""

from dataclasses import dataclass


class QuantityError(ValueError):
    """A text is no quantity: ``at`` is where it stops being understood, ``expected`` what goes there."""

    def __init__(self, problem: str, *, at: int = 0, length: int = 1, expected: str = "") -> None:
        super().__init__(problem)
        self.problem, self.at, self.length, self.expected = problem, at, length, expected

    def moved(self, by: int) -> "QuantityError":
        """The same error in a longer text, where this one starts at ``by``."""
        return QuantityError(self.problem, at=self.at + by, length=self.length, expected=self.expected)


class UnknownUnitError(QuantityError):
    """A unit outside the table; what was meant depends on the quantity that goes there."""

    def __init__(self, spelling: str, *, at: int = 0, expected: str = "") -> None:
        super().__init__(f"unit '{spelling}' is not known", at=at, length=max(len(spelling), 1), expected=expected)
        self.spelling = spelling

    def moved(self, by: int) -> "UnknownUnitError":
        """The same error in a longer text, where this one starts at ``by``."""
        return UnknownUnitError(self.spelling, at=self.at + by, expected=self.expected)


@dataclass(frozen=True, slots=True, kw_only=True)
class Spread:
    """A number between two bounds, SI units."""

    low: float
    nominal: float
    high: float
    unit: str
    """SI unit symbol: V A Ω F s Hz W J C K degC H Ω/V V/s 1 (a plain number or ratio) bit."""
