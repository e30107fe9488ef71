"""Power that a chip resistor of a size is rated for, where nothing is said of it."""

from collections.abc import Mapping
from typing import Final

POWERS: Final[Mapping[str, tuple[float, float]]] = {
    "0201": (0.05, 0.05),
    "0402": (0.0625, 0.063),
    "0603": (0.0625, 0.1),
    "0805": (0.1, 0.125),
    "1206": (0.125, 0.25),
    "1210": (0.25, 0.5),
    "1218": (1.0, 1.0),
    "2010": (0.5, 0.75),
    "2512": (0.5, 1.0),
}
"""EIA size code -> the least and the usual rating [W] at 70 °C, from data sheets of four makers, which do not agree."""
FULL: Final = 70.0
"""Up to this temperature the whole rating holds. [°C]"""
NOTHING: Final = 155.0
"""From this temperature of the film on nothing does; between them it falls along a straight line. [°C]"""


def derated(temperature: float) -> float:
    """Share of the rating that holds at a temperature of the surroundings [°C]."""
    return min(1.0, max(0.0, (NOTHING - temperature) / (NOTHING - FULL)))


def chip_power(size: str, hottest: float) -> tuple[float, float] | None:
    """Least and usual rating [W] at the highest temperature of the surroundings [°C]; None for no known size."""
    if size not in POWERS or derated(hottest) == 0.0:
        return None
    least, usual = POWERS[size]
    return least * derated(hottest), usual * derated(hottest)
