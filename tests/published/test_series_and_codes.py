"""Preferred values and marking codes against published tables."""

import pytest

from rcrules.parts import read_value
from rcrules.parts._preferred import digit_code, letter_code, letter_tolerance, preferred, series
from rcrules.parts._voltage_codes import volts

E24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91]
"""IEC 60063:2015, E24; also the table of standard resistor values at utilitiesbunker.com."""
EIA_96 = {1: 100, 2: 102, 25: 178, 68: 499, 96: 976}
"""Code number -> E96 value, from the EIA-96 table of a chip-resistor data sheet (manualshelf.com)."""


def test_e24_is_the_table():
    assert list(series(24)) == E24
    assert list(series(12)) == E24[::2]
    assert list(series(6)) == [10, 15, 22, 33, 47, 68]
    assert list(series(3)) == [10, 22, 47]


def test_e24_differs_from_the_rounded_formula_in_eight_values():
    formula = [round(10 * 10 ** (index / 24)) for index in range(24)]
    assert [a for a, b in zip(E24, formula, strict=True) if a != b] == [27, 30, 33, 36, 39, 43, 47, 82]


@pytest.mark.parametrize(("number", "value"), EIA_96.items())
def test_e96_agrees_with_the_published_code_table(number, value):
    assert series(96)[number - 1] == value


def test_e192_has_its_one_exception():
    """The 186th value is 920, though 10 ** (185 / 192) rounds to 919 (edaboard.com, thread 373015)."""
    assert series(192)[184:187] == (909, 920, 931)
    assert set(series(48)) < set(series(96)) < set(series(192))


@pytest.mark.parametrize(
    ("value", "in_e24", "in_e48", "in_e96"),
    [
        (4.7e3, True, False, False),
        (4.99e3, False, False, True),
        (4.87e3, False, True, True),
        (5e3, False, False, False),
    ],
)
def test_membership(value, in_e24, in_e48, in_e96):
    """Derived from the tables above; 25 kΩ and 250 Ω are in no series either."""
    assert [preferred(value, (count,)) for count in (24, 48, 96)] == [in_e24, in_e48, in_e96]
    assert not preferred(25e3)
    assert not preferred(250.0)


@pytest.mark.parametrize(
    ("code", "ohms"),
    [
        ("R47", 0.47),
        ("R10", 0.1),
        ("R300", 0.3),
        ("4R7", 4.7),
        ("470R", 470.0),
        ("1K0", 1e3),
        ("4K7", 4.7e3),
        ("47K", 47e3),
        ("47K3", 47.3e3),
        ("470K", 470e3),
        ("2M2", 2.2e6),
        ("4M7", 4.7e6),
    ],
)
def test_letter_codes_of_resistors(code, ohms):
    """IEC 60062, as listed at en.wikipedia.org "RKM code" and probsee.com."""
    assert read_value(code, "resistor").value == pytest.approx(ohms, rel=1e-15)


@pytest.mark.parametrize(("code", "farads"), [("10p", 10e-12), ("2n2", 2.2e-9), ("4n7", 4.7e-9), ("1µ0", 1e-6)])
def test_letter_codes_of_capacitors(code, farads):
    """IEC 60062, as listed at en.wikipedia.org "RKM code"."""
    assert read_value(code, "capacitor").value == pytest.approx(farads, rel=1e-15)


def test_a_tolerance_letter_after_a_letter_code():
    """4K7J is 4.7 kΩ ±5 % (from memory)."""
    read = read_value("4K7J", "resistor")
    assert (read.value, read.tolerance) == (4700.0, (-0.05, 0.05))


@pytest.mark.parametrize(("code", "farads"), [("103", 10e-9), ("104", 100e-9), ("104K", 100e-9)])
def test_three_digits_on_a_capacitor_are_picofarads_with_zeros(code, farads):
    """Capacitor notes at sharps.lv."""
    assert read_value(code, "capacitor").value == pytest.approx(farads, rel=1e-15)


@pytest.mark.parametrize(
    ("code", "ohms"),
    [("120", 12.0), ("153", 15e3), ("471", 470.0), ("102", 1e3), ("1001", 1e3), ("4992", 49.9e3), ("1000", 100.0)],
)
def test_digit_codes_on_the_body_of_a_resistor(code, ohms):
    """A thick-film chip data sheet and xdevs.com/guide/rescode (three digits), en.wikipedia.org "Resistor" (four)."""
    assert digit_code(code) == ohms


def test_a_number_in_a_schematic_is_a_value_and_no_body_code():
    """The trap at xdevs.com/guide/rescode: 220 on a body is 22 Ω, in a BOM it is 220 Ω."""
    assert read_value("220", "resistor").value == 220.0


@pytest.mark.parametrize(
    ("letter", "share"),
    [("B", 0.001), ("C", 0.0025), ("D", 0.005), ("F", 0.01), ("G", 0.02), ("J", 0.05), ("K", 0.10), ("M", 0.20)],
)
def test_tolerance_letters(letter, share):
    """F, J, K: en.wikipedia.org; G, M: dummies.com; B, C, D from memory of IEC 60062:2016."""
    assert letter_tolerance(letter) == (-share, share)


def test_letters_with_two_meanings_in_the_trade_are_not_read():
    """H is 3 % in the standard and 2.5 % in film data sheets; E, N and P are as torn."""
    assert [letter_tolerance(letter) for letter in "HENP"] == [None] * 4


def test_below_ten_picofarads_the_letters_are_absolute():
    """B, C, D are ±0.1, 0.25, 0.5 pF (dummies.com); Z is −20/+80 % (dummies.com)."""
    assert letter_tolerance("C", 5e-12) == pytest.approx((-0.05, 0.05))
    assert letter_tolerance("Z", 1e-9) == (-0.20, 0.80)


@pytest.mark.parametrize("misprint", [90.0, 26.0, 29.0])
def test_a_misprinted_or_merely_rounded_value_is_in_no_coarse_series(misprint):
    """A published E24 table ends with 90 in place of 91 (news.eeany.cn); 26 and 29 are what the formula rounds to."""
    assert not preferred(misprint, (24,))


@pytest.mark.parametrize(
    ("value", "counts"), [(4990.0, (96, 192)), (4870.0, (48, 96, 192)), (9.2, (192,)), (0.68, (6, 12, 24))]
)
def test_membership_in_every_series(value, counts):
    """Derived from IEC 60063: 4.99 is in E96 and E192 alone, 4.87 in E48 too, 9.20 in E192 alone."""
    assert [count for count in (3, 6, 12, 24, 48, 96, 192) if preferred(value, (count,))] == list(counts)


@pytest.mark.parametrize(
    ("code", "ohms"),
    [
        ("01A", 100.0),
        ("01C", 10e3),
        ("01Y", 1.0),
        ("29B", 1.96e3),
        ("66B", 4.75e3),
        ("68X", 49.9),
        ("76X", 60.4),
        ("01F", 10e6),
        ("01Z", 0.1),
        ("01R", 1.0),
        ("01S", 10.0),
        ("01H", 1e3),
        ("96D", 976e3),
        ("25E", 1.78e6),
    ],
)
def test_three_character_markings_of_resistors(code, ohms):
    """Annex A of IEC 60062:2016: developer.wildernesslabs.co and xdevs.com/guide/rescode (first seven); the others from
    the multiplier letters that both print."""
    assert letter_code(code) == pytest.approx(ohms, rel=1e-12)


@pytest.mark.parametrize("code", ["00A", "97A", "68G", "6X8", "068", "68XA"])
def test_other_characters_are_no_marking(code):
    assert letter_code(code) is None


@pytest.mark.parametrize(("code", "farads"), [("479C", 4.7e-12), ("108B", 0.1e-12), ("109B", 1e-12), ("107M", 100e-6)])
def test_a_third_digit_of_8_or_9_divides(code, farads):
    """8 is ×0.01, 9 is ×0.1 (from memory of IEC 60062)."""
    if code[2] == "8":
        assert digit_code(code[:3], fractions=True) == pytest.approx(farads * 1e12)
    else:
        assert read_value(code, "capacitor").value == pytest.approx(farads, rel=1e-12)


def test_codes_with_the_zero_count_first_are_not_what_four_digits_mean_here():
    """One film maker prints 1274 for 2740 pF (a film data sheet); four digits on a capacitor are not read."""
    assert read_value("1274", "capacitor").value is None


@pytest.mark.parametrize(
    ("text", "reason"), [("220", "220 Ω"), ("471", None), ("102", None), ("3R3", "3.3"), ("12R0", "12")]
)
def test_what_is_a_value_in_a_bom_and_a_code_on_the_body(text, reason):
    """The trap at xdevs.com/guide/rescode and in an instrument manual: 220 is 22 Ω on the body, 220 Ω in a BOM;
    471 and 102 could be either."""
    assert (read_value(text, "resistor").value is None) == (reason is None)


@pytest.mark.parametrize(
    ("letter", "low", "high"), [("Q", -0.10, 0.30), ("T", -0.10, 0.50), ("S", -0.20, 0.50), ("Z", -0.20, 0.80)]
)
def test_uneven_tolerance_letters_of_capacitors(letter, low, high):
    """Z: dummies.com; T: a service manual; Q and S from memory of IEC 60062:2016."""
    assert letter_tolerance(letter, 1e-9) == (low, high)
    assert letter_tolerance(letter) is None, "none of them is used on resistors"


@pytest.mark.parametrize(("letter", "picofarads"), [("B", 0.1), ("C", 0.25), ("D", 0.5)])
def test_absolute_letters(letter, picofarads):
    """dummies.com."""
    assert letter_tolerance(letter, 2e-12) == pytest.approx((-picofarads / 2, picofarads / 2))


@pytest.mark.parametrize("letter", "EHNPAI")
def test_a_letter_with_two_meanings_leaves_the_value_and_gives_no_tolerance(letter):
    """E is 0.5 % at w9jz.org and 0.25 % at electro-tech-online, N 0.05 % and 30 %, H 3 % and 2.5 %."""
    assert letter_tolerance(letter, 1e-9) is None


VOLTS = {
    "0G": 4.0, "0J": 6.3, "1A": 10.0, "1C": 16.0, "1E": 25.0, "1V": 35.0, "1H": 50.0, "1J": 63.0,
    "2A": 100.0, "2D": 200.0, "2E": 250.0, "2G": 400.0, "2W": 450.0, "2J": 630.0, "3A": 1000.0,
}  # fmt: skip


@pytest.mark.parametrize(("code", "rated"), VOLTS.items())
def test_voltage_codes(code, rated):
    """R10 letters after a power of ten, JIS C 5101-1 (from memory)."""
    assert volts(code) == pytest.approx(rated)
