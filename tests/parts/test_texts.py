"""Value texts as they stand on real schematics and BOMs."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rcrules.parts import read_value
from tests.work import Work

RESISTORS = [
    ("10k", 10e3),
    ("10K", 10e3),
    ("10 k", 10e3),
    ("4K7", 4.7e3),
    ("4.7k", 4.7e3),
    ("4,7K", 4.7e3),
    ("16k2", 16.2e3),
    ("1K00", 1e3),
    ("180R", 180.0),
    ("24r", 24.0),
    ("49R9", 49.9),
    ("R22", 0.22),
    ("R100", 0.1),
    ("0R330", 0.33),
    ("0R", 0.0),
    ("0", 0.0),
    ("0.0", 0.0),
    ("240E", 240.0),
    ("240e", 240.0),
    ("49.9E", 49.9),
    ("100", 100.0),
    ("2700", 2700.0),
    ("237", 237.0),
    ("270.0", 270.0),
    ("0,56", 0.56),
    ("0.016", 0.016),
    ("1M", 1e6),
    ("4M32", 4.32e6),
    ("100M", 100e6),
    ("1MEG", 1e6),
    ("2Meg", 2e6),
    ("60m", 0.06),
    ("L50", 0.5e-3),
    ("100 Ohm", 100.0),
    ("1.8 kOhm", 1800.0),
    ("10 KOHM", 10e3),
    ("10kΩ", 10e3),
    ("47к", 47e3),
    ("78,7к", 78.7e3),
    ("1 МОм", 1e6),
    ("1e+06", 1e6),
    ("1E+06", 1e6),
    ("4.7E-3", 4.7e-3),
    ("9.8E4", 98e3),
    ("10k*", 10e3),
    ("2K2, 2.2k", 2200.0),
    ("RES0402 (39R)", 39.0),
    ("RSA4 (100)", 100.0),
    ("RES2512 (6mOhm)", 0.006),
    ("33R0_5%_4x0603", 33.0),
    ("4K7J", 4.7e3),
    ("10KJ", 10e3),
]
CAPACITORS = [
    ("100nF", 100e-9),
    ("100 nF", 100e-9),
    ("100N", 100e-9),
    ("100n", 100e-9),
    ("0.1uF", 0.1e-6),
    (".1uF", 0.1e-6),
    ("0,1мк", 0.1e-6),
    ("0,1мкФ", 0.1e-6),
    ("10мкФ", 10e-6),
    ("22нФ", 22e-9),
    ("100пФ", 100e-12),
    ("10U", 10e-6),
    ("27P", 27e-12),
    ("1µ", 1e-6),
    ("1μF", 1e-6),
    ("1ÂµF", 1e-6),
    ("2u2", 2.2e-6),
    ("2u2F", 2.2e-6),
    ("2µ2", 2.2e-6),
    ("4p7", 4.7e-12),
    ("n47", 0.47e-9),
    ("10n0", 10e-9),
    ("5n60", 5.6e-9),
    ("4700u", 4700e-6),
    ("1F", 1.0),
    ("104", 100e-9),
    ("103K", 10e-9),
    ("4R7", 4.7e-12),
    ("10MFD", 10e-6),
    ("4.25E-13", 0.425e-12),
    ("T10uF", 10e-6),
    ("CAP0402 (4.7U)", 4.7e-6),
    ("100nF-X7R", 100e-9),
    ("0.1uF(104)", 100e-9),
    ("22uF 25V 105C", 22e-6),
    ("10u-16V", 10e-6),
]


@pytest.mark.parametrize(("text", "ohms"), RESISTORS)
def test_resistor_texts_are_read(text, ohms):
    assert read_value(text, "resistor").value == pytest.approx(ohms, rel=1e-12)


@pytest.mark.parametrize(("text", "farads"), CAPACITORS)
def test_capacitor_texts_are_read(text, farads):
    assert read_value(text, "capacitor").value == pytest.approx(farads, rel=1e-12)


def test_values_are_correctly_rounded():
    assert read_value("4.7uF", "capacitor").value == 4.7e-6
    assert read_value("4u7", "capacitor").value == 4.7e-6
    assert read_value("49R9", "resistor").value == 49.9


@pytest.mark.parametrize(
    ("text", "kind", "facts"),
    [
        ("1500 .1%", "resistor", {"value": 1500.0, "tolerance": (-0.001, 0.001)}),
        ("10K-1%", "resistor", {"value": 10e3, "tolerance": (-0.01, 0.01)}),
        ("49,9 1%", "resistor", {"value": 49.9, "tolerance": (-0.01, 0.01)}),
        ("20K5%- 0.05W", "resistor", {"value": 20e3, "tolerance": (-0.05, 0.05), "rated_power": 0.05}),
        ("10K ±1 %", "resistor", {"value": 10e3, "tolerance": (-0.01, 0.01)}),
        ("4K7J", "resistor", {"tolerance": (-0.05, 0.05)}),
        ("100-1/4W", "resistor", {"value": 100.0, "rated_power": 0.25}),
        ("100 / 1/2W", "resistor", {"value": 100.0, "rated_power": 0.5}),
        ("10k 1/8", "resistor", {"value": 10e3, "rated_power": 0.125}),
        ("0R082/1W", "resistor", {"value": 0.082, "rated_power": 1.0}),
        ("63mW/1%", "resistor", {"value": None, "rated_power": 0.063, "tolerance": (-0.01, 0.01)}),
        ("0805, 22ohm, 1/16W, 1%", "resistor", {"value": 22.0, "size": "0805", "rated_power": 0.0625}),
        ("RES_4K42_0.5%_0.1W_Thin_0805", "resistor", {"value": 4420.0, "technology": "thin film", "size": "0805"}),
        ("10k 25ppm/°C", "resistor", {"coefficient": 25e-6}),
        ("10k 50 ppm", "resistor", {"value": 10e3, "coefficient": 50e-6}),
        ("10uF-6.3V", "capacitor", {"value": 10e-6, "rated_voltage": 6.3}),
        ("100 nF - 6,3V", "capacitor", {"value": 100e-9, "rated_voltage": 6.3}),
        ("100nFx35V", "capacitor", {"value": 100e-9, "rated_voltage": 35.0}),
        ("10uF / 6V3", "capacitor", {"value": 10e-6, "rated_voltage": 6.3}),
        ("2n2/200V", "capacitor", {"value": 2.2e-9, "rated_voltage": 200.0}),
        ("1nF 2KV", "capacitor", {"value": 1e-9, "rated_voltage": 2000.0}),
        ("10uF50V", "capacitor", {"value": 10e-6, "rated_voltage": 50.0}),
        ("10u/25V/X5R", "capacitor", {"value": 10e-6, "rated_voltage": 25.0, "dielectric": "X5R"}),
        ("22p/NP0", "capacitor", {"value": 22e-12, "dielectric": "C0G"}),
        ("1nF COG", "capacitor", {"dielectric": "C0G"}),
        ("10u Х7R", "capacitor", {"dielectric": "X7R"}),
        ("T10uF", "capacitor", {"dielectric": "tantalum"}),
        ("tant 10uF", "capacitor", {"value": 10e-6, "dielectric": "tantalum"}),
        ("CAP_470p_2%_50V_PPS_0805", "capacitor", {"value": 470e-12, "dielectric": "PPS film", "rated_voltage": 50.0}),
        ("CAP_100u_20%_25V_ALUM_RADIAL", "capacitor", {"value": 100e-6, "dielectric": "aluminium"}),
        ("0402, 10uF, 6.3V, X5R, 20%", "capacitor", {"value": 10e-6, "size": "0402", "tolerance": (-0.2, 0.2)}),
        ("0402,100n,16V", "capacitor", {"value": 100e-9, "size": "0402", "rated_voltage": 16.0}),
        ("CAP0805 (10U@16V)", "capacitor", {"value": 10e-6, "rated_voltage": 16.0, "size": "0805"}),
        ("100 nF -20 % +80 %", "capacitor", {"value": 100e-9, "tolerance": (-0.2, 0.8)}),
        ("10u +80/-20%", "capacitor", {"value": 10e-6, "tolerance": (-0.2, 0.8)}),
        ("5p ±0.25pF", "capacitor", {"value": 5e-12, "tolerance": (-0.05, 0.05)}),
        ("680uF/25V/10x13", "capacitor", {"value": 680e-6, "rated_voltage": 25.0}),
        ("5% 50V X7R", "capacitor", {"value": None, "tolerance": (-0.05, 0.05), "dielectric": "X7R"}),
    ],
)
def test_ratings_are_read_beside_the_value(text, kind, facts):
    read = read_value(text, kind)
    for name, fact in facts.items():
        wanted = fact if fact is None or isinstance(fact, str) else pytest.approx(fact, rel=1e-9)
        assert getattr(read, name) == wanted, name


@pytest.mark.parametrize(
    ("text", "kind", "value"),
    [
        ("dnp 100p", "capacitor", 100e-12),
        ("1M-DNP", "resistor", 1e6),
        ("0R-DNP", "resistor", 0.0),
        ("120k n.p.", "resistor", 120e3),
        ("100 - No Soldar", "resistor", 100.0),
        ("0805, 10k, 1/16W (DNP)", "resistor", 10e3),
        ("10k do not populate", "resistor", 10e3),
        ("100n nicht bestückt", "capacitor", 100e-9),
        ("10n не ставить", "capacitor", 10e-9),
        ("10kDNP", "resistor", 10e3),
        ("DNP", "resistor", None),
        ("OPT", "resistor", None),
        ("np", "capacitor", None),
    ],
)
def test_texts_may_say_that_a_part_is_not_fitted(text, kind, value):
    read = read_value(text, kind)
    assert (read.fitted, read.value) == (False, value if value is None else pytest.approx(value))
    assert read.fitted_why.startswith("value text")


@pytest.mark.parametrize(("text", "kind"), [("22p NP0", "capacitor"), ("10k*", "resistor"), ("C0G 1n", "capacitor")])
def test_other_texts_do_not(text, kind):
    assert read_value(text, kind).fitted


@pytest.mark.parametrize(
    ("text", "kind", "why"),
    [
        ("4.7", "capacitor", "'4.7' has no unit: pF or µF"),
        ("4700", "capacitor", "'4700' has no unit: pF or µF"),
        ("220", "capacitor", "'220' has no unit: pF or µF"),
        ("10M", "capacitor", "'10M' may be milli- or microfarads"),
        ("1,000 pF", "capacitor", "the comma may part thousands or decimals"),
        ("-39.75E-9", "capacitor", "'-39.75E-9' is not a positive value"),
        ("0uF", "capacitor", "'0uF' is not a positive value"),
        ("10k", "capacitor", "'10k' reads as the value of a resistor"),
        ("100nF", "resistor", "'100nF' reads as the value of a capacitor"),
        ("104", "resistor", "'104' may be 104 Ω or the code for 100000 Ω"),
        ("4992", "resistor", "'4992' may be 4992 Ω or the code for 49900 Ω"),
        ("4E7", "resistor", "'4E7' may be an exponent or a letter code"),
        ("15K, 1k", "resistor", "two values: 15K and 1k"),
        ("5-30pF", "capacitor", "'5-30pF' is a range"),
        ("1k..10k", "resistor", "'1k..10k' is a range"),
        ("0603", "resistor", "'0603' names a package, no value"),
        ("2512", "resistor", "'2512' names a package, no value"),
        ("R0402TBD", "resistor", "'R0402TBD' names a package, no value"),
        ("R", "resistor", "'R' is the name of a symbol"),
        ("CP", "capacitor", "'CP' is the name of a symbol"),
        ("C_Polarized", "capacitor", "'C_Polarized' is the name of a symbol"),
        ("{r_1}", "resistor", "'{r_1}' is an expression"),
        ("QX106K016RNJ", "capacitor", "'QX106K016RNJ' is not understood"),
        ("QX0805B270RN9", "resistor", "'QX0805B270RN9' is not understood"),
        ("?", "resistor", "'?' is not understood"),
        ("", "resistor", "no value text"),
    ],
)
def test_what_is_ambiguous_or_no_value_is_unknown_with_its_reason(text, kind, why):
    read = read_value(text, kind)
    assert (read.value, read.why_unknown) == (None, why)


def test_three_digits_of_a_resistor_are_a_value_where_a_tolerance_is_given():
    assert read_value("104 1%", "resistor").value == 104.0
    assert read_value("104", "resistor", tolerance_given=True).value == 104.0
    assert read_value("103", "resistor", tolerance_given=True).value is None, "103 Ω is in no series"


def test_numbers_without_unit_are_no_values_in_descriptions():
    assert read_value("chip resistor 100", "resistor", bare=False).value is None
    read = read_value("RES SMD 0 OHM JUMPER 1/10W 0603", "resistor", bare=False)
    assert (read.value, read.rated_power, read.size) == (0.0, 0.1, "0603")


@pytest.mark.parametrize("kind", ["resistor", "capacitor"])
@pytest.mark.parametrize(
    "text", ["1" * 300, "1 " * 150, "9e9" * 100, "-+" * 150, "(" * 300, "k" * 300, "x" * 1_000_000, "1.1.1.1" * 40]
)
def test_hostile_texts_are_read_at_once(text, kind):
    with Work() as work:
        read_value(text, kind)
    assert work.calls < 50_000


@given(st.text(max_size=40), st.sampled_from(["resistor", "capacitor"]))
def test_any_text_has_a_value_or_a_reason(text, kind):
    read = read_value(text, kind)
    assert (read.value is None) == bool(read.why_unknown)
    if read.tolerance is not None:
        assert read.tolerance[0] <= 0 <= read.tolerance[1]


_RKM = {"p": -12, "n": -9, "u": -6}


@given(st.integers(1, 999), st.integers(0, 99), st.sampled_from(sorted(_RKM)))
def test_letter_codes_equal_the_value_written_out(whole, part, letter):
    text = f"{whole}{letter}{part:02d}"
    assert read_value(text, "capacitor").value == float(f"{whole}.{part:02d}e{_RKM[letter]}")
