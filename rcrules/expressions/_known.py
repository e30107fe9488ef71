"""What an expression may name: functions, facts and given numbers, measures; and the mistakes found in it."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Final

from rcrules.expressions._dimensions import Dimension
from rcrules.expressions._tree import Call
from rcrules.quantities import QuantityError

FUNCTIONS: Final[Mapping[str, tuple[int, int | None]]] = {
    "min": (1, None),
    "max": (1, None),
    "abs": (1, 1),
    "sqrt": (1, 1),
    "log": (1, 1),
    "interpolate": (5, None),
}
"""Plain functions: fewest and most arguments. ``log`` is the natural logarithm; ``interpolate(x, x1, y1, x2, y2, …)``
is linear between the points and constant outside them."""
SHOWN: Final = {
    "min": "min(a, b)",
    "max": "max(a, b)",
    "abs": "abs(a)",
    "sqrt": "sqrt(a)",
    "log": "log(a / b)",
    "interpolate": "interpolate(x, x1, y1, x2, y2)",
}
"""How each is called."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Known:
    """What an expression may name."""

    names: Mapping[str, str]
    """Facts and given numbers -> SI unit."""
    calls: Mapping[str, str]
    """Measures and counts that are called -> SI unit."""
    free: frozenset[str] = frozenset()
    """Given numbers whose unit is not known yet: it follows from what stands beside them."""
    learned: dict[str, Dimension] = field(default_factory=dict)
    """Of those, the dimensions found."""
    check_call: Callable[[Call], None] | None = None
    """Looks at the options of a call; raises QuantityError."""
    mistakes: list[QuantityError] = field(default_factory=list)
    """Found so far, also those of the grammar; what only follows from others is not added."""

    def note(self, error: QuantityError) -> None:
        """A mistake, once at a place."""
        if all(other.at != error.at for other in self.mistakes):
            self.mistakes.append(error)
