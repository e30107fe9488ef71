"""Netlists in bracket lists."""

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, Source

LISTS = """\
an invented board
[
R1
R0402
4K7
]
[
C1
C0402
CAP
100N

]
[
DESIGNATOR
U1
PARTTYPE
QX7301
DESCRIPTION
a controller
FOOTPRINT
QFN16
]
(
VIN
R1-1
U1,4
R2-A-2 NAME-2 PASSIVE
)
{
anything
}
(
SENSE
R1-2

C1-1
)
"""


def read(text: str) -> Export:
    return readers.read(Source(name="board.net", data=text.encode()))


def refused(text: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(text)
    return caught.value.mistakes[0]


def test_parts_nets_and_pins_with_their_lines() -> None:
    export = read(LISTS)
    assert (export.reader, export.kind) == ("bracket-list", "netlist")
    assert [
        (part.ref, part.value.text if part.value else None, part.footprint, part.place.line) for part in export.parts
    ] == [
        ("R1", "4K7", "R0402", 2),
        ("C1", "100N", "C0402", 7),
        ("U1", "QX7301", "QFN16", 14),
        ("R2-A", None, "", 28),
    ]
    assert export.parts[2].description == "a controller"
    assert [(pin.net, pin.ref, pin.number, pin.place.line) for pin in export.pins] == [
        ("VIN", "R1", "1", 26),
        ("VIN", "U1", "4", 27),
        ("VIN", "R2-A", "2", 28),
        ("SENSE", "R1", "2", 35),
        ("SENSE", "C1", "1", 37),
    ]


@pytest.mark.parametrize(
    ("text", "problem", "line"),
    [
        ("[\nR1\n10k\n[\nR2\n]\n", "a part is not closed", 1),
        ("[\nR1\n10k\n]\n(\nVIN\nR1-1\n", "a net is not closed", 5),
        ("[\nR1\n10k\n]\n(\n)\n", "a net without a name", 5),
        ("[\nR1\n10k\n]\n(\nVIN\nR1\n)\n", "a connection that names no part or no pin", 7),
    ],
)
def test_broken_lists_are_refused(text: str, problem: str, line: int) -> None:
    mistake = refused(text)
    assert (mistake.problem, mistake.place.line) == (problem, line)


@pytest.mark.parametrize("text", ['[\n  "R1",\n  "R2"\n]\n', "[\n  1,\n  2\n]\n"])
def test_a_json_text_is_no_bracket_list(text: str) -> None:
    assert refused(text).problem == "the content is of no kind that can be read"
