"""Bare-board test netlists after IPC-D-356."""

import pytest

from rcrules import readers
from rcrules.design import build
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, Source, ipc_d_356

HEAD = "C  a filter\r\nP  JOB   TINY\r\nP  CODE  00\r\nP  UNITS CUST 0\r\nP  TITLE TINY\r\nP  VER   IPC-D-356A\r\n"
FILTER = """\
P  NNAME1 /front/SENSE_FILTERED
317VIN              J1    -1    D0400PA00X+001000Y+005000X0700Y0000R000 S0
017VIN              J1    -1    D0400PA00X+001000Y+005000X0700Y0000R000 S0
317GND              J1    -2    D0400PA00X+002000Y+005000X0700Y0000R000 S0
327VIN              R1    -1          A01X+005000Y+005000X0200Y0200R000 S0
327NNAME1           R1    -2          A01X+005400Y+005000X0200Y0200R000 S0
327NNAME1           C1    -1          A01X+007000Y+005000X0200Y0200R000 S0
327GND              C1    -2          A01X+007400Y+005000X0200Y0200R000 S0
317NNAME1           VIA        MD0120PA00X+006000Y+005500X0240Y0000R000 S3
367N/C                          D1260UA00X+000300Y+000300X0000Y0000R000 S0
999
"""


def record(net: str, ref: str = "", pin: str = "", kind: str = "327") -> str:
    """A short record: connectivity only."""
    return f"{kind}{net:14}   {ref:6}-{pin:4}\n"


def read(text: str) -> Export:
    return readers.read(Source(name="board.d356", data=text.encode()))


def refused(text: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(text)
    return caught.value.mistakes[0]


def ends(export: Export) -> list[tuple[str, str, str, int | None]]:
    return [(pin.net, pin.ref, pin.number, pin.place.line) for pin in export.pins]


def test_connectivity_with_long_names_and_lines() -> None:
    export = read(FILTER)
    assert (export.reader, export.kind) == ("ipc-d-356", "netlist")
    sense = "/front/SENSE_FILTERED"
    assert ends(export) == [
        ("VIN", "J1", "1", 2),
        ("VIN", "R1", "1", 5),
        ("GND", "J1", "2", 4),
        ("GND", "C1", "2", 8),
        (sense, "R1", "2", 6),
        (sense, "C1", "1", 7),
    ]
    assert [(part.ref, part.place.line) for part in export.parts] == [("J1", 2), ("R1", 5), ("C1", 7)]
    assert [(name, place.line) for name, place in export.nets] == [("VIN", 2), ("GND", 4), (sense, 6)]


def test_comments_and_parameters_may_stand_first_and_lines_end_in_any_way() -> None:
    assert ends(read(HEAD + FILTER.replace("\n", "\r\n")))[0] == ("VIN", "J1", "1", 8)
    assert len(read(FILTER.replace("\n", "\r")).pins) == 6


@pytest.mark.parametrize(
    ("alias", "field"),
    [
        ("P  NNAME1 /long/NAME", "NNAME1"),
        ("P  NNAME 1 /long/NAME", "NNAME1"),
        ("P  NNAMEm0001 /long/NAME", "m0001"),
        ("P  NNAMEm0001 /long/NAME", "M0001"),
        ("C  NNAME1 /long/NAME", "NNAME1"),
    ],
)
def test_long_names_are_written_in_four_ways(alias: str, field: str) -> None:
    assert read(f"{alias}\n{record(field, 'R1', '1')}999\n").pins[0].net == "/long/NAME"


def test_fields_that_touch_are_cut_by_columns() -> None:
    text = "317NET-(SW3-PAD1)   J13AB -A10  D0400PA00X+043550\n327VCC+5V/3.3V-AB   R16 (P-2\n999"
    assert ends(read(text)) == [("NET-(SW3-PAD1)", "J13AB", "A10", 1), ("VCC+5V/3.3V-AB", "R16 (P", "2", 2)]


def test_a_pin_on_no_net_is_a_pin_but_no_net_and_no_connection() -> None:
    export = read(
        record("GND", "U1", "1") + record("N/C", "U1", "6") + record("N/C", "U1", "7") + record("", "U1", "8") + "999"
    )
    assert [name for name, _ in export.nets] == ["GND"]
    assert [(pin.ref, pin.number, pin.net) for pin in export.open_pins] == [("U1", n, "") for n in "678"]
    part = build([export]).parts["U1"]
    assert ([pin.number for pin in part.pins], [pin.number for pin in part.open_pins]) == (["1"], ["6", "7", "8"])


def test_a_pin_that_another_export_connects_is_not_open() -> None:
    tested = read(record("GND", "U1", "1") + record("N/C", "U1", "6") + "999")
    other = readers.read(Source(name="more.csv", data=b"net,part,pin\nEN,U1,6\n"))
    part = build([tested, other]).parts["U1"]
    assert ([pin.number for pin in part.pins], part.open_pins) == (["1", "6"], ())


def test_a_part_whose_pins_are_all_open_is_a_part_without_nets() -> None:
    design = build([read(record("N/C", "R9", "1") + record("N/C", "R9", "2") + "999")])
    assert (list(design.parts), design.nets) == (["R9"], {})


def test_pads_without_a_pin_and_vias_are_no_pins() -> None:
    export = read(record("N/C", "H1", kind="367") + record("GND", "VIA") + record("GND", "R1", "1") + "999")
    assert ([part.ref for part in export.parts], len(export.pins)) == (["R1"], 1)
    assert "1 pads of parts without a pin name are left out" in [remark.text for remark in export.remarks]


def test_conductors_neighbours_and_outlines_are_passed_over_and_the_unknown_is_told() -> None:
    text = (
        record("GND", "R1", "1") + "378GND X+001 Y+001\n079A B\n389BOARD\n555what\n999\n327LATE              R2    -1\n"
    )
    export = read(text)
    assert len(export.pins) == 1
    assert export.remarks[-1].text == "records of an unknown kind are left out: line 5"


def test_names_as_long_as_their_columns_are_told() -> None:
    export = read(record("NET-(SW3-PAD1)", "R1", "1") + record("GND", "R1", "A123") + "999")
    assert "NET-(SW3-PAD1), R1-A123" in export.remarks[1].text


def test_without_values_the_bom_is_asked_for() -> None:
    assert read(FILTER).remarks[0].text == "a test netlist holds no values: they must come from a BOM"


def test_a_netlist_cut_short_is_refused() -> None:
    mistake = refused(FILTER[:-4])
    assert (mistake.problem, mistake.place.line) == ("the test netlist has no end record", 10)


def test_a_netlist_without_references_is_refused() -> None:
    mistake = refused(record("GND") + record("VCC", kind="317") + "999")
    assert mistake.problem == "the test netlist names no parts"


def test_more_lines_than_of_any_board_are_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(ipc_d_356, "MAX_LINES", 5)
    assert refused(FILTER).problem == "the file holds too many lines"


def test_an_endless_line_is_cut_by_its_columns() -> None:
    text = FILTER.replace("S3\n", "S3" + " " * 1_000_000 + "\n").replace("999", "P  NNAME" + "x" * 1_000_000 + "\n999")
    assert len(read(text).pins) == 6
    assert refused(FILTER.replace("/front", "/" + "x" * 2000)).problem == "a net name is too long"
