"""The older parenthesised list: parts with stamps, each with its pins."""

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, Source

LIST = """\
# an export of old, created long ago
(
 ( /4B617B88 $noname  R27 10k {Lib=R}
  (    1 N-000008 )
  (    2 GND )
 )
 ( /4B3A13A4/4B617B99 SM0603 C1 100 nF
  (    1 N-000008 )
  (    2 GND )
 )
 ( 513B6FE5 DIP-8  U1 QX7301 {Lib=QX7301}
  (    1 ? )
  (  A.2 /filter/OUT )
 )
)
*
{ Allowed footprints by component:
$component R27
$endlist
}
"""


def read(text: str) -> Export:
    return readers.read(Source(name="board.net", data=text.encode()))


def refused(text: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(text)
    return caught.value.mistakes[0]


def test_parts_pins_and_nets_are_read_with_their_lines() -> None:
    export = read(LIST)
    assert (export.reader, export.kind, export.remarks) == ("parenthesised-list", "netlist", ())
    parts = [(p.ref, p.value and p.value.text, p.footprint, p.symbol, p.place.line) for p in export.parts]
    assert parts == [
        ("R27", "10k", "", "R", 3),
        ("C1", "100 nF", "SM0603", "", 7),
        ("U1", "QX7301", "DIP-8", "QX7301", 11),
    ]
    assert [(pin.net, pin.ref, pin.number, pin.place.line) for pin in export.pins] == [
        ("N-000008", "R27", "1", 4),
        ("N-000008", "C1", "1", 8),
        ("GND", "R27", "2", 5),
        ("GND", "C1", "2", 9),
        ("/filter/OUT", "U1", "A.2", 13),
    ]
    assert [(pin.ref, pin.number) for pin in export.open_pins] == [("U1", "1")]


@pytest.mark.parametrize("line", ["  (    1 )", "R1 10k", "  ("])
def test_a_line_that_is_neither_part_nor_pin_is_refused(line: str) -> None:
    mistake = refused(LIST.replace("  (    2 GND )", line, 1))
    assert (mistake.problem, mistake.place.line) == ("a line that is neither a part nor a pin", 5)


def test_a_list_that_breaks_off_is_refused() -> None:
    assert refused(LIST[: LIST.index("*")].rstrip()[:-1]).problem == "the list has no end"
