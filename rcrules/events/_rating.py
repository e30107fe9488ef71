"""The rating in whose share a voltage or a power is told."""

from rcrules.events._bench import Bench
from rcrules.events._table import Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.parts import ASSUMED_TEMPERATURE, Known, RatedPart, chip_power
from rcrules.problems import Form, constant
from rcrules.quantities import Spread, show


def rating_of(bench: Bench, table: Table, part: RatedPart, measure: Measure) -> Form | None:
    """The rating that a ratio counts in; None for a measure that is no ratio. Raises Unmeasurable where none is known.

    Of a resistor of which nothing but the size is known it is assumed, from the least to the usual one.
    """
    if measure.rating is None:
        return None
    rating = part.rated_voltage if measure.rating == "voltage" else part.rated_power
    if isinstance(rating, Known):
        return constant(rating.si)
    ask = rating.ask or f'[part."{part.ref}"] rated-{measure.rating} = "…"'
    by_size = _by_size(bench, part) if measure.rating == "power" and part.kind == "resistor" else None
    if by_size is None:
        raise Unmeasurable(f"rated {measure.rating} of {part.ref}: {rating.why}", ask)
    spread, text = by_size
    usual = Spread(low=spread.nominal, nominal=spread.nominal, high=spread.high, unit="W")
    return table.assumed(f"{part.ref} rated power", spread, text, ask, given=usual)


def _by_size(bench: Bench, part: RatedPart) -> tuple[Spread, str] | None:
    """The rating of a chip of its size, and in words."""
    said = bench.project.temperature
    hottest = said.high if said is not None else ASSUMED_TEMPERATURE[1]
    found = chip_power(part.size, hottest)
    if found is None:
        return None
    least, usual = found
    text = f"assumed: rated power of a {part.size} chip, {show(least, 'W')} to {show(usual, 'W')} at {hottest:g} °C"
    return Spread(low=least, nominal=usual, high=usual, unit="W"), text
