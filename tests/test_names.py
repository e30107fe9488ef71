"""Names of nets and pins as words."""

import pytest

from rcrules.names import automatic, has_token, tokens


@pytest.mark.parametrize(
    ("name", "words"),
    [
        ("/CPU/nSysRst2", ("N", "SYS", "RST", "2")),
        ("MCUReset", ("MCU", "RESET")),
        ("RSTn", ("RST", "N")),
        ("TGT_~RESET~", ("TGT", "RESET")),
        ("~{MCLR}/VPP", ("MCLR", "VPP")),
        ("PA0/NRST", ("PA", "0", "NRST")),
        ("/main/PA0{slash}NRST", ("PA", "0", "NRST")),
        ("R\\E\\S\\E\\T\\", ("RESET",)),
        ("U3.NRST", ("U", "3", "NRST")),
        ("RESET#", ("RESET",)),
        ("+3V3", ("3", "V", "3")),
        ("СбросПлаты", ("СБРОС", "ПЛАТЫ")),
        ("復位_1", ("復位", "1")),
        ("/", ()),
        ("", ()),
    ],
)
def test_a_name_is_taken_apart_into_upper_case_words(name, words):
    assert tokens(name) == words


@pytest.mark.parametrize(
    "name",
    [
        "RST",
        "nRST",
        "NRST",
        "RSTN",
        "RST_N",
        "RST#",
        "~{RST}",
        "RSTB",
        "/io/MCU_RST1",
        "sysRst",
        "U3.NRST",
        "rst",
        "RSTn",
    ],
)
def test_active_low_marks_digits_and_sheets_do_not_hide_a_word(name):
    assert has_token(name, "RST")


@pytest.mark.parametrize(
    ("name", "wanted"),
    [
        ("BURST", "RST"),
        ("PORTA", "POR"),
        ("FIRST", "RST"),
        ("/RESET/FB", "RESET"),
        ("RST", "RESET"),
        ("RST", ""),
        ("", "RST"),
    ],
)
def test_a_part_of_a_word_or_a_sheet_name_is_no_match(name, wanted):
    assert not has_token(name, wanted)


def test_several_words_must_stand_side_by_side():
    assert has_token("~{POWER_GOOD}", "power good")
    assert not has_token("POWER_IS_GOOD", "power good")


@pytest.mark.parametrize(
    "name", ["Net-(R13-Pad2)", "/cpu/Net-(C1-Pad1)", "N$12", "#7", "N00123", "NetR1_2", "unconnected-(U1-Pad3)"]
)
def test_names_that_the_schematic_editor_makes_up_are_known(name):
    assert automatic(name)


@pytest.mark.parametrize("name", ["NRST", "NET_A", "+3V3", "N12V", "/cpu/OUT", "NETWORK1", ""])
def test_names_that_people_gave_are_no_automatic_names(name):
    assert not automatic(name)
