"""Quantities as people write them."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rcrules.quantities import QuantityError, Spread, parse_quantity
from tests.work import Work


def near(low, nominal, high, unit):
    return (pytest.approx(low), pytest.approx(nominal), pytest.approx(high), unit)


def read(text, unit=None):
    found = parse_quantity(text, unit)
    return found.low, found.nominal, found.high, found.unit


@pytest.mark.parametrize(
    ("text", "value", "unit"),
    [
        ("1.2 ms", 1.2e-3, "s"),
        ("1.2ms", 1.2e-3, "s"),
        ("  10 kΩ ", 1e4, "Ω"),
        ("10 k\u2126", 1e4, "Ω"),
        ("10 kohm", 1e4, "Ω"),
        ("4.7 µF", 4.7e-6, "F"),
        ("4.7 μF", 4.7e-6, "F"),
        ("4.7uF", 4.7e-6, "F"),
        ("1 min", 60.0, "s"),
        ("1 m", 1.0, "m"),
        ("2 h", 7200.0, "s"),
        ("10 year", 315576000.0, "s"),
        ("-40 degC", -40.0, "degC"),
        ("−40 °C", -40.0, "degC"),
        ("5 K", 5.0, "K"),
        ("5 %", 0.05, "1"),
        ("100 ppm", 1e-4, "1"),
        ("12", 12.0, "1"),
        ("12 bit", 12.0, "bit"),
        (".5 V", 0.5, "V"),
        ("1e-3 A", 1e-3, "A"),
        ("1.5e3 Hz", 1500.0, "Hz"),
        ("0.8 V/us", 8e5, "V/s"),
        ("100 ohm/V", 100.0, "Ω/V"),
        ("25 ppm/K", 25e-6, "1/K"),
    ],
)
def test_a_number_with_its_unit_is_read_in_si(text, value, unit):
    assert read(text) == near(value, value, value, unit)


def test_decimal_prefixes_round_like_the_number_written_out():
    assert parse_quantity("4.7 uF").nominal == 4.7e-6
    assert parse_quantity("0.3 mV").nominal == 0.3e-3


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("3.3 V +/- 3 %", (3.201, 3.3, 3.399, "V")),
        ("3.3 V ± 3 %", (3.201, 3.3, 3.399, "V")),
        ("3.3 V ±0.1 V", (3.2, 3.3, 3.4, "V")),
        ("-5 V +/- 10 %", (-5.5, -5.0, -4.5, "V")),
        ("100 nF -20 % +80 %", (80e-9, 100e-9, 180e-9, "F")),
        ("100 nF +80 % -20 %", (80e-9, 100e-9, 180e-9, "F")),
        ("100 nF - 20 % + 80 %", (80e-9, 100e-9, 180e-9, "F")),
        ("25 degC +/- 5 K", (20.0, 25.0, 30.0, "degC")),
        ("12 +/- 1", (11.0, 12.0, 13.0, "1")),
    ],
)
def test_tolerances_spread_the_value(text, expected):
    assert read(text) == near(*expected)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("-20 degC .. 60 degC", (-20.0, 20.0, 60.0, "degC")),
        ("0 V .. 2.5 V", (0.0, 1.25, 2.5, "V")),
        ("0.5 .. 2 ms", (0.5e-3, 1.25e-3, 2e-3, "s")),
        ("0.5ms..2ms", (0.5e-3, 1.25e-3, 2e-3, "s")),
        ("1 V … 2 V", (1.0, 1.5, 2.0, "V")),
        ("-1 uA .. 1 uA", (-1e-6, 0.0, 1e-6, "A")),
        ("0 A .. 120 mA", (0.0, 0.06, 0.12, "A")),
        ("1 .. 3", (1.0, 2.0, 3.0, "1")),
    ],
)
def test_a_range_has_its_nominal_in_the_middle(text, expected):
    assert read(text) == near(*expected)


@pytest.mark.parametrize(
    ("text", "at", "problem"),
    [
        ("", 0, "no number: the text ends here"),
        ("fast", 0, "no number: 'fast'"),
        ("3,3 V", 1, "decimal comma"),
        ("10 kohms", 3, "unit 'kohms' is not known"),
        ("1 V 2", 4, "'2' not understood"),
        ("1 V ..", 6, "no number: the text ends here"),
        ("2 V .. 1 V", 0, "the range runs downwards"),
        ("1 V .. 2 s", 7, "'V' and 's' in one range"),
        ("1 V -20 %", 9, "half a tolerance"),
        ("1 V +1 % +2 %", 9, "two tolerances of the same sign"),
        ("1 V +/- 1 s", 8, "a tolerance in 's' on a value in 'V'"),
        ("25 degC +/- 5 %", 12, "a temperature with a step that is not in K"),
        ("5 % +/- 1 %", 8, "a percentage of a percentage"),
        ("1 V +/- -1 %", 8, "a negative tolerance"),
        ("1e400 V", 0, "number too large"),
        ("1 V/F", 2, "unit 'V/F' is not known"),
        ("9**9**8 s", 1, "'**9**8 s' not understood"),
    ],
)
def test_a_mistake_is_told_with_its_place(text, at, problem):
    with pytest.raises(QuantityError) as error:
        parse_quantity(text)
    assert (error.value.problem, error.value.at) == (problem, at)


def test_a_decimal_comma_is_answered_with_the_point():
    with pytest.raises(QuantityError) as error:
        parse_quantity("3,3 V")
    assert error.value.expected == "a decimal point, such as '3.3 V'"


@pytest.mark.parametrize(
    ("text", "unit", "problem"),
    [
        ("3 V", "s", "a voltage where a time goes"),
        ("12", "V", "no unit where a voltage goes"),
        ("5 degC", "K", "a temperature where a temperature difference goes"),
        ("5 %", "V", "a plain number or ratio where a voltage goes"),
    ],
)
def test_another_dimension_than_expected_is_refused(text, unit, problem):
    with pytest.raises(QuantityError) as error:
        parse_quantity(text, unit)
    assert error.value.problem == problem


@pytest.mark.parametrize(
    "text",
    ["9**9**8 s", "9" * 1_000_000, "1" + "0" * 150 + " V", "1 " + "k" * 150, "((((" * 40, "1 V " + "+" * 150, "\0"],
)
def test_hostile_texts_end_at_once(text):
    with Work() as work, pytest.raises(QuantityError):
        parse_quantity(text)
    assert work.calls < 10_000


@given(st.text(alphabet="0123456789.,+-±%/eE VkmµΩsFA\u2126°C ", max_size=24))
def test_any_text_is_a_quantity_or_a_quantity_error(text):
    try:
        found, place = parse_quantity(text), 0
    except QuantityError as error:
        found, place = Spread(low=0.0, nominal=0.0, high=0.0, unit="1"), error.at
    assert 0 <= place <= len(text)
    assert found.low <= found.nominal <= found.high


@pytest.mark.parametrize(
    ("text", "unit", "expected"),
    [
        ("1 mz", "s", "did you mean 'ms'?"),
        ("1 mz", "Hz", "did you mean 'mHz'?"),
        ("1 k", "Ω", "did you mean 'kohm'?"),
        ("3 sek", "s", "such as '1 ms'"),
        ("1 week", "s", "another unit: 1 week is 604800 s"),
        ("1 week", "V", "such as '3.3 V'"),
        ("3.3 V +/- 3 pct", "V", "such as '3.3 V'"),
    ],
)
def test_a_unit_that_is_not_known_is_guessed_among_those_that_fit(text, unit, expected):
    with pytest.raises(QuantityError) as caught:
        parse_quantity(text, unit)
    assert caught.value.expected == expected


def test_one_sign_for_degrees_is_read_like_two():
    assert parse_quantity("-20 ℃ .. 60℃") == parse_quantity("-20 °C .. 60 degC")


@pytest.mark.parametrize("word", ["nan", "inf", "infinity"])
def test_a_word_that_reads_as_a_number_elsewhere_is_no_unit(word: str) -> None:
    with pytest.raises(QuantityError, match=f"unit '{word}' is not known"):
        parse_quantity(f"1 {word}", "s")
