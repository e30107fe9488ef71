"""Part numbers read by the patterns of the project."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rcrules import project
from rcrules.parts import rate
from rcrules.parts._part_numbers import Stop, fitted
from tests.parts.parts_by_hand import design, part
from tests.work import Work

CHIPS = """
[[part-number]]
name = "QX chips"
kind = "capacitor"
fields = [
  { text = "QXC" },
  { size = 4 },
  { dielectric = 1, codes = { B = "X7R", C = "C0G" } },
  { value = 3 },
  { tolerance = 1 },
  { rated-voltage = 1, codes = "QX volts" },
  { skip = "rest" },
]
[codes."QX volts"]
"4" = "16 V"
"5" = "50 V"
"""
SEPARATED = """
[[part-number]]
name = "QR resistors"
kind = "resistor"
fields = [ { text = "QR" }, { size = "to -" }, { value = "to -", code = "letters" }, { tolerance = 1 } ]
"""
DESCRIBED = """
[[part-number]]
name = "house descriptions"
kind = "resistor"
in   = "Description"
fields = [
  { text = "RES;" }, { value = "to ;", code = "text" }, { tolerance = "to ;", code = "text" }, { size = "rest" }
]
"""


def pattern(text):
    return project.load("rcrules.toml", text).part_numbers[0]


def rated(item, text=CHIPS):
    return rate(design(item), project.load("rcrules.toml", text))[item.ref]


def test_fields_of_a_fixed_width_are_read_with_standard_codes_and_tables():
    read = rated(part("C1", "", bom_MPN="QXC0603B104K5AT"))
    assert (read.value.si, read.rated_voltage.si, read.dielectric, read.size) == (1e-7, 50.0, "X7R", "0603")
    tolerance = next(share for share in read.shares if share.name == "tolerance")
    assert (tolerance.low, tolerance.high, tolerance.given) == (-0.1, 0.1, True)
    assert read.value.origin == "BOM field 'MPN' by part-number pattern 'QX chips'"
    assert read.value.place.file == "bom.csv"


def test_fields_may_end_at_a_separator():
    read = fitted(pattern(SEPARATED), "QR0603-4K7-F")
    assert (read.value, read.tolerance, read.size) == (4700.0, (-0.01, 0.01), "0603")


def test_a_description_is_read_where_the_pattern_names_its_column():
    read = rated(part("R1", "", bom_description="RES;4k7;0.1%;0402"), DESCRIBED)
    assert (read.value.si, read.size) == (4700.0, "0402")


def test_a_part_number_in_the_value_cell_is_read():
    assert rated(part("C1", bom="QXC0402C101J4")).value.si == pytest.approx(100e-12)


def test_the_part_number_is_found_behind_the_name_of_its_maker():
    read = rated(part("C1", "10n", **{"mfg mfg#": "qx,QXC0402C103J4"}))
    assert read.rated_voltage.si == 16.0


@pytest.mark.parametrize(
    ("code", "farads", "low"),
    [("4R7C", 4.7e-12, -0.25 / 4.7), ("479D", 4.7e-12, -0.5 / 4.7), ("107M", 100e-6, -0.2), ("0R5B", 0.5e-12, -0.2)],
)
def test_value_and_tolerance_follow_the_marking_codes(code, farads, low):
    read = fitted(pattern(CHIPS), f"QXC0402C{code}4")
    assert read.value == pytest.approx(farads)
    assert read.tolerance[0] == pytest.approx(low)


@pytest.mark.parametrize(
    ("code", "ohms"), [("1002", 10e3), ("49R9", 49.9), ("R010", 0.01), ("0000", 0.0), ("4R70", 4.7), ("1004", 1e6)]
)
def test_digit_codes_of_resistors(code, ohms):
    made = pattern('[[part-number]]\nname = "r"\nkind = "resistor"\nfields = [ { text = "QR" }, { value = 4 } ]')
    assert fitted(made, f"QR{code}").value == pytest.approx(ohms)


def test_three_character_codes_and_voltage_codes():
    made = pattern(
        '[[part-number]]\nname = "r"\nkind = "resistor"\nfields = [ { value = 3, code = "three characters" }, '
        "{ rated-voltage = 2 } ]"
    )
    read = fitted(made, "68X2A")
    assert (read.value, read.rated_voltage) == (pytest.approx(49.9), 100.0)


def test_the_value_text_wins_and_the_difference_is_told():
    read = rated(part("C1", "100n", bom_MPN="QXC0402C101J4"))
    assert read.value.si == 1e-7
    assert "100 pF (BOM field 'MPN' by part-number pattern 'QX chips')" in read.disagreements[0]


def test_the_part_number_wins_over_the_description():
    read = rated(part("C1", "", bom_MPN="QXC0402C101J4", bom_description="CAP 47pF 25V"))
    assert (read.value.si, read.rated_voltage.si) == (pytest.approx(100e-12), 16.0)


@pytest.mark.parametrize(
    ("number", "where"),
    [
        ("QXC0402D101J4", "at character 8: expected dielectric as one of B, C"),
        ("QXC0402C1", "at character 9: expected value as a digit code"),
        ("QXC0402CABCJ4", "at character 9: expected value as a digit code"),
        ("QXC0402C101J9", "at character 13: expected rated-voltage as one of 4, 5"),
        ("QXC0402C101H4", "at character 12: expected tolerance as letter"),
    ],
)
def test_a_part_number_that_nearly_fits_is_told_with_the_place(number, where):
    read = rated(part("C1", "100p", bom_MPN=number))
    assert read.disagreements == (f"part number '{number}' does not fit the pattern 'QX chips' {where}",)


def test_other_part_numbers_are_none_of_its_business():
    read = rated(part("C1", "100p", bom_MPN="ZZ100"))
    assert (read.disagreements, read.rated_voltage.why) == ((), "not given")


def test_a_pattern_of_another_kind_does_not_apply():
    assert rated(part("R1", "10k", bom_MPN="QXC0402C101J4")).disagreements == ()


def test_parts_written_alike_keep_their_own_places():
    first, second = part("C1", "10n", bom_MPN="QXC0402C103J4"), part("C2", "10n", bom_MPN="QXC0402C103J4")
    read = rate(design(first, second), project.load("rcrules.toml", CHIPS))
    assert read["C2"].rated_voltage.si == 16.0
    assert read["C2"].origins["rated_voltage"][1] == second.fields["mpn"][0].place


@given(st.text(max_size=80))
def test_any_text_fits_or_stops_at_a_place(text):
    outcome = fitted(pattern(CHIPS), "QXC" + text)
    assert not isinstance(outcome, Stop) or 0 <= outcome.at <= len(text) + 3


def test_reading_takes_one_step_a_field_whatever_the_text():
    made = pattern(CHIPS.replace("{ size = 4 }", '{ size = "to 0" }'))
    with Work() as work:
        fitted(made, "QXC" + "0" * 100_000)
    assert work.calls < 500
