"""The key ``when``."""

import pytest

from rcrules.quantities import QuantityError
from rcrules.rulebook import Comparison, Condition, Junction, _condition, holds


def parse_condition(text: str) -> Condition:
    """The condition; raises its first mistake."""
    mistakes: list[QuantityError] = []
    found = _condition.parse_condition(text, mistakes)
    if mistakes:
        raise mistakes[0]
    return found


def test_and_binds_closer_than_or():
    found = parse_condition("supply_low > 1 V or supply_high < 2 V and 3 V >= voltage_low")
    assert found == Junction(
        word="or",
        terms=(
            Comparison(left="supply_low", right=1.0, sign=">"),
            Junction(
                word="and",
                terms=(
                    Comparison(left="supply_high", right=2.0, sign="<"),
                    Comparison(left=3.0, right="voltage_low", sign=">="),
                ),
            ),
        ),
    )


@pytest.mark.parametrize(
    ("text", "outcome"),
    [
        ("supply_low >= 3 V", True),
        ("supply_low > 3 V", False),
        ("supply_low <= 3 V", True),
        ("supply_low < 3000 mV", False),
        ("voltage_high > 60 V", None),
        ("voltage_high > 60 V or supply_low >= 3 V", True),
        ("voltage_high > 60 V or supply_low > 3 V", None),
        ("voltage_high > 60 V and supply_low > 3 V", False),
        ("voltage_high > 60 V and supply_low >= 3 V", None),
        ("not supply_low > 3 V", True),
        ("not (supply_low >= 3 V and supply_high > 4 V)", True),
        ("not (supply_low >= 3 V or supply_high > 4 V)", False),
        ("not voltage_high > 60 V", None),
        ("not not supply_low >= 3 V and supply_high < 4 V", True),
        ("(supply_low > 3 V or supply_high > 3 V) and supply_low < supply_high", True),
    ],
)
def test_a_fact_that_is_not_known_leaves_it_open_only_where_it_matters(text, outcome):
    assert holds(parse_condition(text), {"supply_low": 3.0, "supply_high": 3.6}) is outcome


@pytest.mark.parametrize(
    ("text", "at", "problem"),
    [
        ("", 0, "a fact is missing"),
        ("supply_low", 10, "no comparison"),
        ("supply_low > 1 mz", 15, "unit 'mz' is not known"),
        ("supply_low > 1 V)", 16, "')' not understood"),
        ("supply_low > 1 V supply_high", 17, "'supply_high' not understood"),
        ("supply_lo > 1 V", 0, "no fact is called 'supply_lo'; did you mean 'supply_low'?"),
        ("(supply_low > 1 V", 17, "a bracket that does not close"),
        ("(supply_low > 1 V) 3", 18, "'3' not understood"),
        ("supply_low > 1 V .. 2 V", 13, "a range cannot be compared"),
        ("supply_low > 1 s", 0, "a voltage is compared with a time"),
        ("1 V > 2 V", 0, "no fact to compare"),
        ("(" * 20 + "supply_low > 1 V" + ")" * 20, 8, "too many brackets"),
        ("supply_low > 1 V and " * 50, 400, "too long for a condition"),
    ],
)
def test_mistakes_have_an_offset(text, at, problem):
    with pytest.raises(QuantityError) as caught:
        parse_condition(text)
    assert (caught.value.problem[: len(problem)], caught.value.at) == (problem, at)


WORDS = {
    "dielectric": frozenset({"X7R", "PP film"}),
    "technology": frozenset({"ceramic", "film"}),
    "size": frozenset({"0402", ""}),
    "sheet": frozenset({"/power/input/"}),
    "polarised": frozenset({"no"}),
}


@pytest.mark.parametrize(
    ("text", "outcome"),
    [
        ("dielectric = 'X7R'", True),
        ("dielectric = 'film'", True),
        ("dielectric != 'C0G'", True),
        ("dielectric != 'X7R'", False),
        ("not dielectric = 'X7R'", False),
        ("technology = 'tantalum'", False),
        ("size = '0402'", True),
        ("size = '0603'", None),
        ("size != '0603'", None),
        ("size = '0603' and polarised = 'yes'", False),
        ("sheet = '/power/*'", True),
        ('sheet = "power and (ground)"', False),
        ("certainty = 'sure'", None),
        ("tolerance <= 1 % and technology = 'ceramic'", True),
        ("tolerance > 1 % or capacitance >= 1 uF", None),
    ],
)
def test_facts_that_are_words_are_compared_with_texts(text, outcome):
    assert holds(parse_condition(text), {"tolerance": 0.01}, WORDS) is outcome


@pytest.mark.parametrize(
    ("text", "at", "problem"),
    [
        ("dielectric >= 'X7R'", 0, "'dielectric' is a word"),
        ("dielectric = X7R", 13, "'X7R' is no text in quotes"),
        ("dielectric =", 12, "a text is missing"),
        ("technology = 'ceramics'", 14, "'ceramics' is not known as 'technology'; did you mean 'ceramic'?"),
        ("dielectic = 'X7R'", 0, "no fact is called 'dielectic'; did you mean 'dielectric'?"),
        ("tolerance = '1 %'", 0, "'tolerance' is a number"),
        ("'X7R' = dielectric", 0, "no fact is called ''X7R''"),
        ("dielectric = 'X7R", 13, "''X7R' is no text in quotes"),
        ("tolerance < 1 V", 0, "a plain number or ratio is compared with a voltage"),
        ("not", 3, "a fact is missing"),
    ],
)
def test_mistakes_in_words_have_an_offset(text, at, problem):
    with pytest.raises(QuantityError) as caught:
        parse_condition(text)
    assert (caught.value.problem[: len(problem)], caught.value.at) == (problem, at)


@pytest.mark.parametrize(
    ("text", "places"),
    [
        ("suply_high > 1 V and voltage_low > 2 s or technology = 'tin'", [0, 21, 56]),
        ("(supply_low > 1 mz and not size >= '0402') or dielectric", [16, 27, 46]),
        ("(supply_lo > 1 V or (voltage_low > 1 V", [1, 38]),
        ("> > > and = =", [0, 10]),
    ],
)
def test_all_mistakes_of_a_condition_are_told_at_once(text, places):
    mistakes: list[QuantityError] = []
    _condition.parse_condition(text, mistakes)
    assert sorted(error.at for error in mistakes) == places
