"""The grammar: what is read, what it is worth, and where a mistake is told."""

import re

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rcrules import expressions
from rcrules.expressions import Dimension, Expression, Known, Values, calls, dimension_of, text_of, value_of
from rcrules.quantities import QuantityError


def parse_expression(text: str) -> Expression:
    """The expression; raises its first mistake."""
    mistakes: list[QuantityError] = []
    found = expressions.parse_expression(text, mistakes)
    if mistakes:
        raise mistakes[0]
    return found


def units_of(of: Expression, known: Known, wanted: Dimension | None = None) -> Dimension | None:
    """The dimension; raises the first mistake."""
    found = expressions.units_of(of, known, wanted)
    if known.mistakes:
        raise known.mistakes[0]
    return found


def known() -> Known:
    """A few names of each kind."""
    return Known(
        names={"limit": "s", "rated_voltage": "V", "temperature_high": "degC"},
        calls={"delay": "s", "final_voltage": "V", "power": "W", "count": "1"},
        free=frozenset({"margin", "ratio", "bits"}),
    )


def value(text: str, **names: float) -> float:
    return float(np.asarray(value_of(parse_expression(text), Values(names=names, calls={}))))


@pytest.mark.parametrize(
    ("text", "wanted"),
    [
        ("1 + 2 * 3", 7.0),
        ("(1 + 2) * 3", 9.0),
        ("10 - 4 - 3", 3.0),
        ("12 / 4 / 3", 1.0),
        ("-2 * -3", 6.0),
        ("- (2 - 5)", 3.0),
        ("3.3 V - 300 mV", 3.0),
        ("0.8 V/us * 2 us", 1.6),
        ("30 % * 3.3 V", 0.99),
        ("1e3 * 2", 2000.0),
        ("5 kohm * 2 uF", 0.01),
        ("min(3, 1, 2)", 1.0),
        ("max(1 ms, 2 us)", 1e-3),
        ("abs(-2 V)", 2.0),
        ("sqrt(4 V * 9 V)", 6.0),
        ("log(1)", 0.0),
        ("interpolate(85 degC, 70 degC, 50 %, 110 degC, 30 %)", 0.425),
        ("interpolate(20, 70, 1, 110, 2)", 1.0),
        ("interpolate(200, 110, 2, 70, 1)", 2.0),
        ("a - b / 2", 4.0),
        ("2 ^ 3", 8.0),
        ("-2^2", -4.0),
        ("2^-1", 0.5),
        ("(2^2)^3", 64.0),
        ("2 * 3^2", 18.0),
        ("4^(1/2)", 2.0),
        ("4^(-1/2)", 0.5),
        ("9^0.5", 3.0),
        ("(3 V)^2", 9.0),
        ("2^b * 3", 12.0),
    ],
)
def test_what_an_expression_is_worth(text: str, wanted: float) -> None:
    assert value(text, a=5.0, b=2.0) == pytest.approx(wanted)


def test_it_is_worked_out_for_many_cases_at_once() -> None:
    found = value_of(parse_expression("max(a, 2) - 1"), Values(names={"a": np.array([1.0, 5.0])}, calls={}))
    assert list(np.asarray(found)) == [1.0, 4.0]


def test_division_by_zero_is_infinite_and_what_is_not_defined_is_not_a_number() -> None:
    assert value("1 / a", a=0.0) == np.inf
    assert value("a ^ -1", a=0.0) == np.inf
    assert np.isnan(value("sqrt(a)", a=-1.0))
    assert np.isnan(value("a ^ 0.5", a=-1.0))


@pytest.mark.parametrize("text", ["a^10", "a * a", "a / 1e-200", "a^2 - a^3", "-a^9 + a"])
def test_what_is_too_large_for_a_number_is_not_defined(text: str) -> None:
    assert np.isnan(value(text, a=1e200))


def test_what_never_happens_stays_so_in_a_sum() -> None:
    assert value("2 * a + 1", a=np.inf) == np.inf
    assert value("(1 - a)^3", a=np.inf) == -np.inf


def test_options_of_calls_are_kept_with_their_places() -> None:
    (call,) = calls(parse_expression("delay(event = \"power-up\", to = '1.5 V', band = 1 %, time = settle)"))
    assert [(name, at) for name, _, at in call.options] == [("event", 6), ("to", 26), ("band", 40), ("time", 52)]


@pytest.mark.parametrize(
    ("text", "at", "problem"),
    [
        ("", 0, "ends too early"),
        ("1 +", 3, "ends too early"),
        ("1 + * 2", 4, "'*' not understood"),
        ("(1 + 2", 0, "a bracket that does not close"),
        ("min(1, 2", 3, "a bracket that does not close"),
        ("1 2", 2, "'2' not understood"),
        ("a b", 2, "'b' not understood"),
        ("3 Vx", 2, "unit 'Vx' is not known"),
        ("delay(to = )", 11, "')' not understood"),
        ("delay(to = '1 V', 3)", 18, "'3' not understood"),
        ("1 & 2", 2, "'&' not understood"),
        ("__import__('os')", 11, "not understood"),
        ("a.b", 1, "'.' not understood"),
        ("(" * 40 + "1" + ")" * 40, 13, "nested too deeply"),
        ("-" * 200 + "1", 13, "nested too deeply"),
        ("2^3^2", 3, "'^' not understood"),
        ("2^(a)", 2, "'(' not understood"),
        ("2^a^2", 2, "'a' not understood"),
        ("2^a(1)", 2, "'a' not understood"),
        ("2^0", 2, "'0' is no exponent"),
        ("2^(1/0)", 2, "no exponent"),
        ("2^9999999999", 2, "'9999999999' is no exponent"),
        ("3 V^2", 0, "a power of '3 V' can be read in two ways"),
        ("1" + "+1" * 400, 201, "too many signs"),
    ],
)
def test_mistakes_are_told_at_the_character(text: str, at: int, problem: str) -> None:
    with pytest.raises(QuantityError, match=re.escape(problem)) as caught:
        parse_expression(text)
    assert caught.value.at == at


def test_long_texts_are_refused() -> None:
    with pytest.raises(QuantityError, match="too long"):
        parse_expression("1" + " + 1" * 300)


@settings(max_examples=200)
@given(st.text(alphabet="ab1.(+-*/^),= \"'%VmsΩ\n\\", max_size=40))
def test_no_text_does_more_than_be_refused(text: str) -> None:
    try:
        text_of(parse_expression(text))
    except QuantityError as error:
        place = error.at
    else:
        place = 0
    assert 0 <= place <= max(len(text), 1)


@pytest.mark.parametrize(
    ("text", "places"),
    [
        ("1 2 + & 3 * (4 V", [2, 6, 12]),
        ("(1 2) + max(, 3 4, to = ) ^ ", [3, 12, 16, 24, 28]),
        ("3 Vx + min(1, 2 qq) * ?", [2, 16, 22]),
        ("delay(to = ) + delay(event = )", [11, 29]),
    ],
)
def test_all_mistakes_of_a_text_are_told_at_once(text: str, places: list[int]) -> None:
    mistakes: list[QuantityError] = []
    expressions.parse_expression(text, mistakes)
    assert [error.at for error in sorted(mistakes, key=lambda error: error.at)] == places


def test_what_only_follows_from_another_mistake_is_not_told() -> None:
    own, mistakes = known(), []
    text = "dealy() + margin * 2 + rated_voltag - min(1 s, 1 V)"
    expressions.units_of(expressions.parse_expression(text, mistakes), own)
    assert [error.at for error in own.mistakes] == [0, 23, 38]


def sums(signs: str) -> st.SearchStrategy[str]:
    """Sums in brackets, of whole numbers."""

    def joined(inner: st.SearchStrategy[str]) -> st.SearchStrategy[str]:
        return st.tuples(inner, st.sampled_from(signs), inner).map("({0[0]} {0[1]} {0[2]})".format)

    return st.recursive(st.integers(1, 99).map(str), joined, max_leaves=8)


@settings(max_examples=200)
@given(sums("+-*"))
def test_it_is_worth_what_python_says(text: str) -> None:
    """Source: Python's own arithmetic."""
    assert value(text) == pytest.approx(eval(text))


@settings(max_examples=100)
@given(sums("+-*/"))
def test_written_out_it_is_worth_the_same(text: str) -> None:
    found = value(text)
    assert value(text_of(parse_expression(text))) == pytest.approx(found, nan_ok=True)


@pytest.mark.parametrize(
    ("text", "unit"),
    [
        ("delay() + 1 ms", "s"),
        ("power() / rated_voltage", "A"),
        ("rated_voltage * rated_voltage / power()", "Ω"),
        ("delay() + margin", "s"),
        ("margin + delay()", "s"),
        ("ratio * delay() + limit", "s"),
        ("max(limit, margin)", "s"),
        ("count() - 1", "1"),
        ("interpolate(temperature_high, 70 degC, 1 V, 110 degC, 2 V)", "V"),
        ("sqrt(power() * 50 ohm)", "V"),
        ("power() * rated_voltage^-1", "A"),
        ("rated_voltage^2 / power()", "Ω"),
        ("(rated_voltage^2)^(1/2)", "V"),
        ("(delay() / limit)^1.6", "1"),
        ("temperature_high - 25 degC", "K"),
        ("temperature_high - 5 K", "degC"),
        ("10 K + temperature_high", "degC"),
        ("temperature_high + margin", "degC"),
        ("max(temperature_high, 70 degC)", "degC"),
        ("rated_voltage / 2^bits", "V"),
        ("2^ratio * delay()", "s"),
        ("10 ppm/K * (temperature_high - 25 degC)", "1"),
    ],
)
def test_dimensions_are_worked_out(text: str, unit: str) -> None:
    wanted = dimension_of(unit)
    assert units_of(parse_expression(text), known(), wanted) == wanted


@pytest.mark.parametrize(
    ("text", "problem"),
    [
        ("delay() + 3 V", "'delay' is a time, which cannot be added to '3 V'"),
        ("delay() - final_voltage()", "cannot be taken from"),
        ("min(1 s, 1 V)", "'min' of a time and a voltage"),
        ("sqrt(delay())", "'sqrt' of a time"),
        ("log(3 V)", "'log' of a voltage"),
        ("dealy()", "did you mean 'delay'"),
        ("rated_voltag + 1 V", "did you mean 'rated_voltage'"),
        ("min()", "'min' takes 1 or more arguments"),
        ("abs(1, 2)", "'abs' takes 1 argument"),
        ("delay()^0.5", "'delay' is a time, whose power 0.5 is no quantity"),
        ("rated_voltage^ratio", "'rated voltage' is a voltage in a power whose exponent is a name"),
        ("2^limit", "'limit' is a time in a power whose exponent is a name"),
        ("temperature_high + 10 degC", "are two temperatures, which cannot be added"),
        ("2 * temperature_high", "a temperature on its scale, which has no multiples"),
        ("-temperature_high", "which has no multiples"),
        ("temperature_high^2", "which has no multiples"),
        ("10 K - temperature_high", "is a temperature, which cannot be taken from '10 K'"),
        ("1 dB * delay()", "unit 'dB' is not known"),
        ("interpolate(1, 2, 3, 4)", "takes 5 or more"),
        ("interpolate(1, 2, 3, 4, 5, 6)", "a point of 'interpolate' is half"),
        ("delay(3)", "takes no plain arguments"),
        ("margin", "cannot be told here"),
    ],
)
def test_what_makes_no_sense_is_told(text: str, problem: str) -> None:
    with pytest.raises(QuantityError, match=problem):
        units_of(parse_expression(text), known())
