"""Voltage levels as texts: ``1.2 V``, ``30 % of +3V3``, ``+3V3 + 0.3 V``, ``63 % of final``, ``may switch``."""

from dataclasses import dataclass
from typing import Literal

from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class Level:
    """A voltage that may follow nets, the node's own response, or the thresholds of the fed pin.

    The level is ``offset + sum(fraction * voltage of net)``; or ``fraction`` of the node's final value or step; or an
    edge of the undefined band of the pin that the node feeds.
    """

    text: str
    """As written."""
    offset: Spread | None = None
    """[V]"""
    nets: tuple[tuple[Spread, str], ...] = ()
    """Fraction (1 = 100 %) and net name; the level follows the net's momentary voltage."""
    of: Literal["final", "step"] | None = None
    fraction: Spread | None = None
    """Used with ``of``."""
    edge: Literal["may switch", "must have switched"] | None = None


def parse_level(text: str) -> Level:
    """Read a level. Raises QuantityError with the offset of the first character not understood."""
    raise NotImplementedError(text)
