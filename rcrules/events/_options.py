"""Options of a measure, sorted into levels and plain ones."""

from collections.abc import Mapping

from rcrules.events._unmeasurable import Unmeasurable
from rcrules.levels import Level, parse_level
from rcrules.measures import Measure
from rcrules.quantities import Spread

OptionValue = str | float | Level | Spread


def chosen(measure: Measure, options: Mapping[str, OptionValue]) -> dict[str, OptionValue]:
    """Every option of the measure, defaults filled in. Raises Unmeasurable where one without default is missing."""
    found = {}
    for name, option in measure.options.items():
        value = options.get(name, option.default)
        if value is None:
            raise Unmeasurable(f"the option {name!r} of {measure.name} is not given")
        found[name] = value
    return found


def levels_of(measure: Measure, options: Mapping[str, OptionValue]) -> dict[str, Level]:
    """The options that are levels."""
    found = {}
    for name, option in measure.options.items():
        if option.kind == "level":
            value = options[name]
            found[name] = value if isinstance(value, Level) else _level(value)
    return found


def plain_of(measure: Measure, options: Mapping[str, OptionValue]) -> tuple[tuple[str, float | str], ...]:
    """Quantities and choices, as measures read them."""
    found: list[tuple[str, float | str]] = []
    for name, option in measure.options.items():
        value = options[name]
        if option.kind == "quantity":
            found.append((name, value.nominal if isinstance(value, Spread) else float(str(value))))
        elif option.kind == "choice" and name != "from":
            found.append((name, str(value)))
    return tuple(found)


def _level(value: str | float | Spread) -> Level:
    if isinstance(value, str):
        return parse_level(value)
    spread = value if isinstance(value, Spread) else Spread(low=value, nominal=value, high=value, unit="V")
    return Level(text=f"{spread.nominal:g} V", offset=spread)
