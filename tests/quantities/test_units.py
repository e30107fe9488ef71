"""The unit table, held to an independent one."""

import pint
import pytest

from rcrules.quantities import QUANTITY_NAMES, QuantityError, parse_unit
from rcrules.quantities._units import SPELLINGS

_SAME = {
    "%": "percent",
    "degC": "delta_degC",
    "°C": "delta_degC",
    "\u2103": "delta_degC",
    "K": "kelvin",
    "mK": "millikelvin",
    "Ohm": "ohm",
}
_BASE = {"Ω": "ohm", "degC": "delta_degC", "1": "dimensionless"}


@pytest.fixture(scope="module")
def registry():
    return pint.UnitRegistry(cache_folder=None)


def _spelt(name):
    """The same unit in the other table's words."""
    if name in _SAME:
        return _SAME[name]
    return name.replace("\u2126", "ohm").replace("Ω", "ohm").replace("Ohm", "ohm")


@pytest.mark.parametrize("name", [name for name in SPELLINGS if name != "ppm"])
def test_every_unit_has_the_factor_of_the_independent_table(name, registry):
    unit, factor = SPELLINGS[name]
    other = registry.Quantity(1, _spelt(name)).to(_BASE.get(unit, unit))
    assert other.magnitude == pytest.approx(factor, rel=1e-12)


def test_parts_per_million_are_a_millionth():
    assert parse_unit("ppm") == ("1", 1e-6)


@pytest.mark.parametrize(
    ("text", "unit", "factor"),
    [
        ("V/us", "V/s", 1e6),
        ("V/ms", "V/s", 1e3),
        ("V/s", "V/s", 1.0),
        ("kohm/V", "Ω/V", 1e3),
        ("ns/V", "s/V", 1e-9),
        ("ppm/K", "1/K", 1e-6),
        ("ppm/°C", "1/K", 1e-6),
        ("%/K", "1/K", 0.01),
        ("K/W", "K/W", 1.0),
    ],
)
def test_units_with_a_slash_are_read(text, unit, factor):
    found, scale = parse_unit(text)
    assert (found, scale) == (unit, pytest.approx(factor, rel=1e-12))


@pytest.mark.parametrize("text", ["V/F", "s/s", "1/0", "V/V/V", "Ks", "kK", "µ"])
def test_units_that_measure_nothing_here_are_refused(text):
    with pytest.raises(QuantityError):
        parse_unit(text)


@pytest.mark.parametrize(
    ("wrong", "meant"),
    [
        ("kohms", "kohm"),
        ("volts", "V"),
        ("sec", "s"),
        ("UF", "uF"),
        ("mhz", "mHz"),
        ("R", "ohm"),
        ("days", "day"),
        ("celsius", "degC"),
        ("MEG", "Mohm"),
    ],
)
def test_a_misspelt_unit_gets_a_guess(wrong, meant):
    with pytest.raises(QuantityError) as error:
        parse_unit(wrong)
    assert error.value.expected == f"did you mean '{meant}'?"


def test_every_unit_has_a_name_in_words():
    assert {unit for unit, _ in SPELLINGS.values()} <= set(QUANTITY_NAMES)


def test_a_unit_that_is_foreign_here_is_told_in_si():
    """A week has 604 800 s by definition; one horsepower is 550 foot-pounds-force a second (745.7 W)."""
    with pytest.raises(QuantityError) as week:
        parse_unit("week")
    assert week.value.expected == "another unit: 1 week is 604800 s"
    with pytest.raises(QuantityError) as horsepower:
        parse_unit("hp")
    assert horsepower.value.expected == "another unit: 1 hp is 745.7 W"


@pytest.mark.parametrize("text", ["9**9**8", "x" * 10_000, "furlong", "qqq", "__import__"])
def test_no_expression_reaches_the_unit_library(text):
    with pytest.raises(QuantityError) as caught:
        parse_unit(text)
    assert "another unit" not in caught.value.expected
