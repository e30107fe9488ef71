"""Netlists in star sections and in dollar sections: one circuit, twice."""

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, Source

STARS = """\
!BOARD-V1-BASIC! an invented board
*REMARK* from the schematic
*part*       ITEMS
R1 RES-4K7-1%@R0402
C1 CAP-100N@C0402
U1 @QFN16
*MISC*
anything
*NET*
*SIGNAL* VIN 12 0
J1.1 R1.1
*SIGNAL* SENSE
R1.2 C1.1
*REMARK* and one more
U1.A4/B9
*SIGNAL* VIN
M.2.3
*END*
"""
DOLLARS = """\
(NETLIST)
(FOR an invented board)
$PACKAGES
R0402 ! 'RES' ! 4K7 ! 1% ; R1
C0402 ! 'CAP' ! '100N 16V' ; C1
QFN16 ! 'QX 7301' ! ; U1 , U2
$A_PROPERTIES
VOLT '16 V; X7R' ; C1
$PINS
U1 ; whatever
$NETS
VIN ; J1.1 R1.1
'SENSE IN' ; R1.2 ,
   C1.1,
   U1.3
$A_PROPERTIES
VOLT '99 V' ; C1
$END
"""


def read(text: str) -> Export:
    return readers.read(Source(name="board.net", data=text.encode()))


def refused(text: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(text)
    return caught.value.mistakes[0]


def ends(export: Export) -> list[tuple[str, str, str, int | None]]:
    return [(pin.net, pin.ref, pin.number, pin.place.line) for pin in export.pins]


def parts(export: Export) -> list[tuple[str, str | None, str]]:
    return [(part.ref, part.value.text if part.value else None, part.footprint) for part in export.parts]


def test_star_sections_give_parts_nets_and_pins_with_their_lines() -> None:
    export = read(STARS)
    assert (export.reader, export.kind) == ("star-list", "netlist")
    assert parts(export) == [
        ("R1", "RES-4K7-1%", "R0402"),
        ("C1", "CAP-100N", "C0402"),
        ("U1", None, "QFN16"),
        ("J1", None, ""),
        ("M.2", None, ""),
    ]
    assert ends(export) == [
        ("VIN", "J1", "1", 11),
        ("VIN", "R1", "1", 11),
        ("SENSE", "R1", "2", 13),
        ("SENSE", "C1", "1", 13),
        ("SENSE", "U1", "A4/B9", 15),
        ("VIN", "M.2", "3", 17),
    ]
    assert [remark.place.line for remark in export.remarks if "listed again" in remark.text] == [16]


def test_a_layout_in_star_sections_is_refused() -> None:
    dump = "!BOARD-V1-MILS! DESIGN DATABASE ASCII FILE 1.0\n*PART*  ITEMS\nR1 RES 100 200 0\n*END*\n"
    assert refused(dump).problem == "this is a layout in star sections, with coordinates and tracks"


def test_nets_without_signal_lines_are_refused() -> None:
    mistake = refused("*PART*\nR1 RES\n*NET*\nVIN 2\nR1.1 J1.1\n*END*\n")
    assert (mistake.problem, mistake.place.line) == ("a line of nets before the first signal", 4)
    assert refused("*NET*\n*SIGNAL*\nR1.1\n*END*\n").problem == "a signal without a name"


@pytest.mark.parametrize("word", ["R1", ".2", "R1."])
def test_an_end_without_part_or_pin_is_refused(word: str) -> None:
    star = refused(f"*NET*\n*SIGNAL* A\n{word}\n*END*\n")
    dollar = refused(f"$PACKAGES\n$NETS\nA ; {word}\n$END\n")
    assert star.place.line == dollar.place.line == 3
    assert star.problem == dollar.problem == "a connection that names no part or no pin"
    assert star.found == word


def test_dollar_sections_give_parts_properties_nets_and_pins() -> None:
    export = read(DOLLARS)
    assert (export.reader, export.kind) == ("dollar-list", "netlist")
    assert parts(export) == [
        ("R1", "4K7", "R0402"),
        ("C1", "100N 16V", "C0402"),
        ("U1", "QX 7301", "QFN16"),
        ("U2", "QX 7301", "QFN16"),
        ("J1", None, ""),
    ]
    assert {name: cell.text for name, cell in export.parts[0].fields.items()} == {"Tolerance": "1%"}
    assert {name: cell.text for name, cell in export.parts[1].fields.items()} == {"VOLT": "16 V; X7R"}
    assert ends(export) == [
        ("VIN", "J1", "1", 12),
        ("VIN", "R1", "1", 12),
        ("SENSE IN", "R1", "2", 13),
        ("SENSE IN", "C1", "1", 13),
        ("SENSE IN", "U1", "3", 13),
    ]


def test_a_line_of_dollar_sections_without_semicolon_is_refused() -> None:
    mistake = refused("(NETLIST)\n$PACKAGES\nR0402 ! 'A;B' R1\n$END\n")
    assert (mistake.problem, mistake.place.line) == ("a line without ';'", 3)


@pytest.mark.parametrize("text", [STARS, DOLLARS])
def test_a_list_without_its_end_is_refused(text: str) -> None:
    assert refused(text.replace("*END*\n", "").replace("$END\n", "")).problem == "the list has no end"


def test_a_semicolon_counts_outside_of_closed_quotes_only() -> None:
    text = DOLLARS.replace("VIN ; J1.1 R1.1", "'V;IN' ; J1.1 R1.1")
    assert "V;IN" in dict(read(text).nets)
    assert refused("(NETLIST)\n$NETS\n'A ; R1.1\n$END\n").problem == "a line without ';'"


def test_a_net_continued_over_very_many_lines_is_read_whole() -> None:
    ends = ",\n".join(f"R{number}.1" for number in range(1, 6_001))
    pins = read(f"(NETLIST)\n$PACKAGES\n$NETS\nA ; {ends}\n$END\n").pins
    assert (len(pins), pins[-1].ref, {pin.place.line for pin in pins}) == (6_000, "R6000", {4})
