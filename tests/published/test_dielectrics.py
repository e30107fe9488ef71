"""Dielectric letter codes and ageing against published tables."""

import pytest

from rcrules.parts._dielectrics import ageing, class_one, class_two, code_of


@pytest.mark.parametrize(
    ("code", "lowest", "highest", "low", "high"),
    [
        ("X5R", -55, 85, -15, 15),
        ("X6R", -55, 105, -15, 15),
        ("X7R", -55, 125, -15, 15),
        ("X8R", -55, 150, -15, 15),
        ("X5S", -55, 85, -22, 22),
        ("X6S", -55, 105, -22, 22),
        ("X6T", -55, 105, -33, 22),
        ("X7S", -55, 125, -22, 22),
        ("X7T", -55, 125, -33, 22),
        ("X7U", -55, 125, -56, 22),
        ("X7P", -55, 125, -10, 10),
        ("Y5V", -30, 85, -82, 22),
        ("Z5U", 10, 85, -56, 22),
        ("Y5U", -30, 85, -56, 22),
    ],
)
def test_class_two_letters(code, lowest, highest, low, high):
    """EIA-198 as printed in TI SLAA701B, Table 1-16, and at riansanderson.com."""
    assert class_two(code) == (lowest, highest, pytest.approx(low / 100), pytest.approx(high / 100))


@pytest.mark.parametrize(
    ("code", "centre", "spread"), [("C0G", 0, 30), ("U2J", -750, 120), ("P3K", -1500, 250), ("S2H", -330, 60)]
)
def test_class_one_letters(code, centre, spread):
    """EIA-198 as printed in the element14 guide and at sharps.lv. [ppm/K]"""
    assert class_one(code) == (pytest.approx((centre - spread) * 1e-6), pytest.approx((centre + spread) * 1e-6))


@pytest.mark.parametrize("code", ["C4G", "C5G", "C9G"])
def test_multipliers_printed_in_two_meanings_are_not_read(code):
    """Digit 4 is ×+1 at sharps.lv, ×−10 000 in a maker's catalogue."""
    assert class_one(code) is None


@pytest.mark.parametrize("word", ["NP0", "NPO", "npo", "COG", "C0G", "c0g"])
def test_the_spellings_of_c0g(word):
    """C0G is the code of what the trade calls NP0."""
    assert code_of(word) == "C0G"


@pytest.mark.parametrize("word", ["X7", "7XR", "XR7", "A7R", "X1R", "X7X", "TEST", ""])
def test_other_words_are_no_codes(word):
    assert code_of(word) is None


def test_ageing_from_the_marked_value_to_ten_years():
    """C(t) = C(1 h) (1 − A log10 t): from 1000 h to 87 660 h at 2.5 % a decade −5.3 %, at 1 h +8.1 %, by hand:
    (1 − 0.025 · 4.94280) / (1 − 0.075) − 1 and 1 / (1 − 0.075) − 1."""
    low, high = ageing(0.025, 87660.0)
    assert (low, high) == (pytest.approx(-0.052508, abs=1e-6), pytest.approx(0.081081, abs=1e-6))
