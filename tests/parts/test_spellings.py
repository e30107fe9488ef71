"""What is printed is read back equal, however it is spelled; no text crashes or hangs the reader."""

from decimal import Decimal

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from rcrules.parts import read_value
from rcrules.parts._preferred import series
from rcrules.quantities import show
from tests.work import Work

FIGURES = sorted({*(10 * value for value in series(24)), *series(96)})
COARSE = [10 * value for value in series(24)]
PREFIX = {-12: "p", -9: "n", -6: "µ", -3: "m", 0: "", 3: "k", 6: "M", 9: "G"}
CYRILLIC = {-12: "пФ", -9: "нФ", -6: "мкФ", 0: "Ом", 3: "кОм", 6: "МОм"}


def plain(number: Decimal) -> str:
    text = f"{number:f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def letter_code(number: Decimal, letter: str) -> str:
    whole, _, part = plain(number).partition(".")
    return f"{whole}{letter}{part}" if part or letter != "R" else f"{whole}R0"


def spellings_of_resistor(number: Decimal, power: int) -> list[str]:
    """Ten ways to write ``number`` times ten to the ``power`` ohms."""
    text, prefix = plain(number), PREFIX[power]
    si = number.scaleb(power)
    return [
        show(float(si), "Ω"),
        f"{text}{prefix}Ω",
        f"{text.replace('.', ',')} {prefix}Ω",
        f"{text} {prefix}ohm",
        f"{text}{prefix}Ohms",
        letter_code(number, prefix or "R"),
        f"{text}{prefix}R",
        f"{text} {CYRILLIC[power]}",
        f"{text}{prefix}Ω ±5%",
        f"RES {text}{prefix}ohm 1% 1/10W 0603",
        f"{si:e} ohm".replace("E", "e"),
    ]


def spellings_of_capacitor(number: Decimal, power: int) -> list[str]:
    """Ten ways to write ``number`` times ten to the ``power`` farads."""
    text, prefix = plain(number), PREFIX[power]
    latin = prefix.replace("µ", "u")
    return [
        show(float(number.scaleb(power)), "F"),
        f"{text}{latin}F",
        f"{text} {latin}F",
        f"{text.replace('.', ',')}{prefix}F",
        f"{text}{latin}",
        f"{text}{latin.upper()}F",
        letter_code(number, latin),
        f"{text} {CYRILLIC[power]}",
        f"{text}{latin}F/50V",
        f"{text}{latin}F 10%",
        f"{text} {latin}F (50 V, X7R)",
        f"CAP_{text}{latin}_10%_50V_X7R_0805",
        f"CAP CER {text}{latin.upper()}F 50V X7R 0603",
    ]


@given(st.sampled_from(FIGURES), st.integers(-2, 0), st.sampled_from([0, 3, 6]))
def test_ten_spellings_of_a_resistance_are_read_back_equal(figure, place, power):
    number = Decimal(figure).scaleb(place)
    texts = spellings_of_resistor(number, power)
    assert len(set(texts)) >= 10
    assert {text: read_value(text, "resistor").value for text in texts} == dict.fromkeys(
        texts, float(number.scaleb(power))
    )


@given(st.sampled_from(COARSE), st.integers(-2, 0), st.sampled_from([-12, -9, -6]))
def test_ten_spellings_of_a_capacitance_are_read_back_equal(figure, place, power):
    number = Decimal(figure).scaleb(place)
    texts = spellings_of_capacitor(number, power)
    assert len(set(texts)) >= 10
    assert {text: read_value(text, "capacitor").value for text in texts} == dict.fromkeys(
        texts, float(number.scaleb(power))
    )


@given(st.integers(1, 999_999), st.integers(-9, 6), st.integers(1, 6))
def test_any_resistance_printed_is_read_back(digits, power, figures):
    text = show(float(Decimal(digits).scaleb(power)), "Ω", digits=figures)
    if not text.endswith((" µΩ", " nΩ", " TΩ")):
        assert show(read_value(text, "resistor").value, "Ω", digits=figures) == text


@given(st.integers(1, 999_999), st.integers(-15, -9), st.integers(1, 6))
def test_any_capacitance_printed_below_a_millifarad_is_read_back(digits, power, figures):
    text = show(float(Decimal(digits).scaleb(power)), "F", digits=figures)
    if not text.endswith(" fF"):
        assert show(read_value(text, "capacitor").value, "F", digits=figures) == text


def test_millifarads_are_not_read_though_they_are_printed():
    """On old schematics mF is meant to be microfarads."""
    assert read_value("47 mF", "capacitor").why_unknown == "'47 mF' may be milli- or microfarads"


PIECES = [
    *(
        "10",
        "4.7",
        "0603",
        "k",
        "K",
        "M",
        "m",
        "R",
        "E",
        "Ω",
        "ohm",
        "n",
        "u",
        "µ",
        "p",
        "F",
        "V",
        "kV",
        "%",
        "±",
        "+/-",
    ),
    *(
        "+",
        "-",
        "W",
        "1/4",
        "/",
        "_",
        ",",
        " ",
        "x",
        "X7R",
        "NP0",
        "J",
        "1H",
        "104",
        "ppm",
        "°C",
        "DNP",
        "n.p.",
        "(",
        ")",
    ),
    *(
        "[",
        "{",
        "к",
        "мк",
        "Ом",
        "Ф",
        "Н90",
        "МП0",
        "Â",
        "\ufffd",
        "１",
        "㎌",
        "电",
        "\u202e",
        "²",
        "½",
        "e",
        "E9",
        "..",
    ),
    *("to", "T", "0"),
]


@given(st.lists(st.sampled_from(PIECES), max_size=40).map("".join), st.sampled_from(["resistor", "capacitor"]))
@example("0" * 299 + "k", "resistor")
@example("9" * 12 + "e" + "9" * 12, "resistor")
@example("1" + "0" * 11 + "e99", "capacitor")
@example("1e99 ohm", "resistor")
@example("1" * 13 + " ohm", "resistor")
def test_no_text_crashes_the_reader(text, kind):
    read = read_value(text, kind)
    assert (read.value is None) == bool(read.why_unknown)
    assert read.value is None or 0 <= read.value < float("inf")
    if read.tolerance is not None:
        assert -1 < read.tolerance[0] <= 0 <= read.tolerance[1]
    assert read.rated_voltage is None or read.rated_voltage >= 0


@pytest.mark.parametrize("kind", ["resistor", "capacitor"])
@pytest.mark.parametrize(
    "piece", [*PIECES, "1,", "1.", "1 ", "0-", "+1", "1k", "10-", "n.", "do-", "М4", "1'", "1 000"]
)
def test_work_grows_with_the_length_of_a_text_no_matter_what_it_repeats(piece, kind):
    with Work() as work:
        read_value((piece * 300)[:300], kind)
    assert work.calls < 50_000
