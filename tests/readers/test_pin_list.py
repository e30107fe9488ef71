"""Delimited pin lists."""

import pytest

from rcrules import readers
from rcrules.errors import UserMistake
from rcrules.readers import Export, Source


def read(text: str, **columns: str) -> Export:
    return readers.read(Source(name="pins.csv", data=text.encode()), columns)


def ends(export: Export) -> list[tuple[str, str, str]]:
    return [(pin.net, pin.ref, pin.number) for pin in export.pins]


def test_rows_of_net_part_and_pin() -> None:
    export = read("net,part,pin\nGND,R1,2\nGND,C1,2\nNRST,R1,1\n")
    assert (export.reader, export.kind) == ("pin-list", "netlist")
    assert ends(export) == [("GND", "R1", "2"), ("GND", "C1", "2"), ("NRST", "R1", "1")]
    assert [part.ref for part in export.parts] == ["R1", "C1"]
    assert [(name, place.line) for name, place in export.nets] == [("GND", 2), ("NRST", 4)]
    assert str(export.pins[1].place) == "pins.csv:3:1"


@pytest.mark.parametrize(
    "header",
    [
        "Net Name;RefDes;Pin Number",
        "NET;REF;PIN",
        "Signal;Component;Pin No.",
        "NetName;Part;Pad",
        "Netz;Ref;Pin#",
    ],
)
def test_headers_are_spelled_as_in_life(header: str) -> None:
    assert ends(read(f"{header}\nGND;R1;2\n")) == [("GND", "R1", "2")]


def test_columns_may_stand_in_any_order_and_carry_names_types_and_values() -> None:
    export = read("RefDes\tPin\tPin Name\tPin Type\tNet\tValue\nU1\t7\tNRST\tBiDi\t/RST\tQX7301\n")
    pin = export.pins[0]
    assert (pin.number, pin.name, pin.type, pin.net) == ("7", "NRST", "bidirectional", "/RST")
    assert export.parts[0].value is not None
    assert export.parts[0].value.text == "QX7301"


@pytest.mark.parametrize("cell", ["R1.2 U1.NRST", '"R1-2,U1-NRST"', "R1.2;U1.NRST".replace(";", " ; ")])
def test_part_and_pin_may_be_joined_in_lists(cell: str) -> None:
    assert ends(read(f"Net,Pins\nGND,{cell}\n")) == [("GND", "R1", "2"), ("GND", "U1", "NRST")]


def test_a_net_without_pins_and_a_part_without_net_are_kept() -> None:
    export = read("net,part,pin,value\nLONE,,,\n,R1,1,10k\n")
    assert [name for name, _ in export.nets] == ["LONE"]
    assert [part.ref for part in export.parts] == ["R1"]
    assert export.pins == ()


def test_a_value_given_once_counts_for_every_row_of_the_part() -> None:
    export = read("net,part,pin,value\nA,R1,1,\nB,R1,2,10k\n")
    assert export.parts[0].value is not None
    assert export.parts[0].value.text == "10k"


def test_contradictions_are_said() -> None:
    export = read("net,part,pin,value\nA,R1,1,10k\nB,R1,1,12k\nC,R2,,\n")
    assert [remark.text for remark in export.remarks] == [
        "R1 has the value '12k' here; '10k' of pins.csv:2:3 stands",
        "pin 1 of R1 is on net 'A' and on net 'B'; both are kept",
        "R2 has no pin number here; the connection is left out",
    ]


def test_a_joined_cell_without_pin_is_said() -> None:
    export = read("net,pins\nA,R1.1 R2\n")
    assert export.remarks[0].text == "'R2' names no part and pin, such as R1.2; left out"


def test_title_rows_above_the_header_are_passed_over() -> None:
    assert ends(read("Board,harbour gauge\n\nnet,part,pin\nGND,R1,2\n")) == [("GND", "R1", "2")]


def test_the_projects_column_names_come_first() -> None:
    export = read("net,knot,part,pin\nold,GND,R1,2\n", net="knot")
    assert ends(export) == [("GND", "R1", "2")]


def test_a_header_hidden_by_broken_letters_is_refused() -> None:
    data = b"net,part\xf4pin,pin name\nGND,R1,2\n"
    with pytest.raises(UserMistake, match=r"pins\.csv:1: no header row that names nets and pins"):
        readers.read(Source(name="pins.csv", data=data))


def test_a_row_of_marks_and_known_words_is_no_header_of_a_bom() -> None:
    with pytest.raises(UserMistake, match="no column of references found"):
        read("?,pin,type\n!,1,in\n")


def test_a_pin_list_is_told_by_the_headers_that_the_project_names() -> None:
    text = "Knoten;Bauteil;Anschluss\nGND;R1;2\nNRST;R1;1\n"
    export = read(text, net="Knoten", reference="Bauteil", pin="Anschluss")
    assert export.reader == "pin-list"
    assert ends(export) == [("GND", "R1", "2"), ("NRST", "R1", "1")]
