"""Which pins the elements of an array join."""

from dataclasses import replace

import pytest

from rcrules import project
from rcrules.parts import Unknown, rate
from rcrules.project import Project
from tests.parts.parts_by_hand import design, part

FACING = (("1", "8"), ("2", "7"), ("3", "6"), ("4", "5"))
IN_LINE = (("1", "2"), ("3", "4"), ("5", "6"), ("7", "8"))


def named(item, *names):
    """The part with names for its pins, in order."""
    return replace(item, pins=tuple(replace(pin, name=name) for pin, name in zip(item.pins, names, strict=True)))


def rated(item, text=""):
    return rate(design(item), project.load("rcrules.toml", text) if text else Project())[item.ref]


@pytest.mark.parametrize(
    "names",
    [
        ("R1.1", "R2.1", "R3.1", "R4.1", "R4.2", "R3.2", "R2.2", "R1.2"),
        ("1A", "2A", "3A", "4A", "4B", "3B", "2B", "1B"),
        ("A1", "A2", "A3", "A4", "B4", "B3", "B2", "B1"),
        ("R1_1", "R2_1", "R3_1", "R4_1", "R4_2", "R3_2", "R2_2", "R1_2"),
    ],
)
def test_pin_names_tell_the_elements(names):
    assert rated(named(part("RN1", "10k", pins=8), *names)).elements == FACING


def test_a_common_pin_joins_every_element():
    item = named(part("RN1", "10k", pins=5), "R1", "R2", "COM", "R3", "R4")
    assert rated(item).elements == (("3", "1"), ("3", "2"), ("3", "4"), ("3", "5"))


@pytest.mark.parametrize(
    ("item", "pairs"),
    [
        (part("RN1", "10k", symbol="lib:R_Pack04", pins=8), FACING),
        (part("RN1", "10k", footprint="lib:R_Array_Convex_4x0603", pins=8), FACING),
        (part("RN1", "4x10k", pins=8), FACING),
        (part("RN1", "33R0_5%_4x0603", pins=8), FACING),
        (part("RN1", "10k", description="resistor array, isolated", pins=8), FACING),
        (part("RN1", "10k", symbol="lib:R_Pack04_SIP", pins=8), IN_LINE),
        (part("RN1", "10k", symbol="lib:R_Network04", pins=5), tuple(("1", str(pin)) for pin in range(2, 6))),
        (part("RN1", "10k bussed", pins=9), tuple(("1", str(pin)) for pin in range(2, 10))),
        (part("RN1", "10k", footprint="lib:SIP9", pins=9), tuple(("1", str(pin)) for pin in range(2, 10))),
        (part("C1", "4x100n", symbol="lib:C_Array", pins=8), FACING),
    ],
)
def test_words_tell_the_elements_of_pins_without_names(item, pairs):
    assert rated(item).elements == pairs


def test_pins_that_are_on_no_net_leave_their_element_out():
    item = part("RN1", "10k", symbol="lib:R_Pack04", pins=8)
    assert rated(replace(item, pins=item.pins[1:4] + item.pins[4:7])).elements == FACING[1:]


def test_without_a_word_the_elements_are_unknown_with_the_line_to_add():
    read = rated(part("RN1", "10k", pins=8))
    assert (read.kind, read.elements) == ("resistor-array", ())
    assert read.disagreements == (
        "its 8 pins may pair in several ways, so its elements are left out; its [part] can tell them: "
        'elements = "1-8 2-7 …"',
    )


def test_the_project_file_tells_the_elements():
    read = rated(part("RN1", "10k", pins=8), '[part."RN*"]\nelements = "1-2 3-4 5-6 7-8"')
    assert (read.elements, read.disagreements) == (IN_LINE, ())


@pytest.mark.parametrize("text", ["4x10k", "10k x2"])
def test_several_elements_in_the_text_of_a_part_with_two_pins_are_not_guessed(text):
    read = rated(part("R1", text))
    assert read.kind == "resistor"
    assert read.value == Unknown(why=f"'{text}' may be one part or {'4' if '4' in text else '2'}")
