"""Numbers the way engineers write them."""

from math import inf, nan

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rcrules.quantities import parse_quantity, show


@pytest.mark.parametrize(
    ("value", "unit", "text"),
    [
        (1.2e-3, "s", "1.2 ms"),
        (4.7e-6, "F", "4.7 µF"),
        (4.7e-3, "F", "4700 µF"),
        (47e-3, "F", "47 mF"),
        (999.96, "Ω", "1 kΩ"),
        (10000, "Ω", "10 kΩ"),
        (0, "V", "0 V"),
        (-3.3, "V", "-3.3 V"),
        (0.0497, "s", "49.7 ms"),
        (8.4e-16, "s", "0.84 fs"),
        (8.4e-19, "s", "8.4e-19 s"),
        (999, "s", "999 s"),
        (7200, "s", "2 h"),
        (1200, "s", "20 min"),
        (315576000.0, "s", "10 year"),
        (8e5, "V/s", "0.8 V/µs"),
        (20, "V/s", "20 V/s"),
        (5e-9, "s/V", "5 ns/V"),
        (0.05, "%", "5 %"),
        (0.0122e-2, "%", "0.0122 %"),
        (100e-6, "1/K", "100 ppm/K"),
        (25, "degC", "25 °C"),
        (0.9, "1", "0.9"),
        (12.0, "1", "12"),
        (1.23e10, "1", "1.23e10"),
        (12, "bit", "12 bit"),
    ],
)
def test_a_value_is_shown_with_an_engineering_prefix(value, unit, text):
    assert show(value, unit) == text


def test_digits_are_rounded_as_asked():
    assert show(1.23456e-3, "s", digits=4) == "1.235 ms"
    assert show(3.14159, "V", digits=1) == "3 V"


@pytest.mark.parametrize(
    ("value", "unit", "text"), [(inf, "s", "never"), (inf, "W", "unlimited"), (nan, "V", "undefined")]
)
def test_what_is_no_number_is_said_in_words(value, unit, text):
    assert show(value, unit) == text


_UNITS = st.sampled_from(
    ["V", "A", "Ω", "F", "s", "Hz", "W", "J", "H", "K", "degC", "Ω/V", "V/s", "s/V", "1/K", "%", "1"]
)


@given(st.floats(1e-13, 1e13), _UNITS, st.integers(1, 6))
def test_a_shown_value_reads_back_as_its_printed_digits(value, unit, digits):
    read = parse_quantity(show(value, unit, digits))
    assert read.unit == ("1" if unit == "%" else unit)
    assert read.nominal == pytest.approx(value, rel=0.51 * 10 ** (1 - digits))
    assert show(read.nominal, unit, digits) == show(value, unit, digits)
