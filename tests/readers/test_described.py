"""Exports of a team's own, read as [[format]] in the project file describes them."""

import pytest

from rcrules import project, readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, Source, _described_records

XML_FORMAT = """
[[format]]
name  = "house netlist"
kind  = "xml"
has   = "<board-export"
parts = { each = "//parts/part", reference = "@id", value = "attr[@k='val']/@v", footprint = "pkg", Note = "note" }
pins  = { each = "/board-export/nets/net/pin", net = "../@name", reference = "@part", pin = "no", pin-type = "@dir" }
"""
XML = """<?xml version="1.0"?>
<board-export xmlns="urn:house">
 <parts>
  <part id="R1"><attr k="tol" v="1%"/><attr k="val" v="10k"/><pkg>R0402</pkg></part>
  <part id="C1"><attr k="val" v="1u"/><note>DNP</note></part>
 </parts>
 <nets>
  <net name="RST"><pin part="R1"><no>2</no></pin><pin part="C1" dir="passive"><no>1</no></pin></net>
  <net name=""><pin part="U1"><no>7</no></pin></net>
 </nets>
</board-export>
"""
LINES_FORMAT = """
[[format]]
name  = "house lines"
kind  = "lines"
has   = "%HOUSE"
end   = "%END"
parts = { after = "%PARTS", words = ["reference", "footprint", "value"] }
pins  = { after = "NET", title = "net", words = ["ends"], between = ":" }
"""
LINES = """\
%HOUSE 1.0
%PARTS
R1  R0402  10 kOhm
C1  C0402  1u
%OTHER-NOT-A-MARKER R0402 X
NET RST
R1:2, C1:1
  U1:A7
NET EMPTY
%END
"""
TABLE_FORMAT = """
[[format]]
name    = "house table"
kind    = "delimited"
has     = "Signal;Bauteil"
columns = { net = "Signal", reference = "Bauteil", pin = "Anschluss", value = "Wert", Tolerance = "Tol" }
"""
TABLE = "House list\nSignal;Bauteil;Anschluss;Wert;Tol\nRST;R1;2;10k;1%\nRST;C1;1;1u;\n;U1;7;;\n"
BOM_FORMAT = """
[[format]]
name    = "house BOM"
kind    = "delimited"
has     = "Lage|"
columns = { reference = "Lage", value = "Was" }
"""
BOM = "Lage|Was\nR1-R3|10k\nC1, C2|1u\n"


def read(described: str, text: str) -> Export:
    formats = project.load("rcrules.toml", described).formats
    return readers.read(Source(name="board.dat", data=text.encode()), {}, formats)


def refused(described: str, text: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(described, text)
    return caught.value.mistakes[0]


def ends(export: Export) -> list[tuple[str, str, str, int | None]]:
    return [(pin.net, pin.ref, pin.number, pin.place.line) for pin in export.pins]


def parts(export: Export) -> list[tuple[str, str | None, str, int | None]]:
    return [(p.ref, p.value.text if p.value else None, p.footprint, p.place.line) for p in export.parts]


def test_an_xml_is_read_by_paths() -> None:
    export = read(XML_FORMAT, XML)
    assert (export.reader, export.kind) == ("format house netlist", "netlist")
    assert parts(export) == [("R1", "10k", "R0402", 4), ("C1", "1u", "", 5), ("U1", None, "", 9)]
    assert ends(export) == [("RST", "R1", "2", 8), ("RST", "C1", "1", 8)]
    assert [(pin.ref, pin.number) for pin in export.open_pins] == [("U1", "7")]
    assert (export.parts[1].fitted, export.pins[1].type) == (False, "passive")


def test_sections_of_lines_are_read_by_words() -> None:
    export = read(LINES_FORMAT, LINES.replace("%OTHER-NOT-A-MARKER R0402 X\n", ""))
    assert parts(export) == [("R1", "10 kOhm", "R0402", 3), ("C1", "1u", "C0402", 4), ("U1", None, "", 7)]
    assert ends(export) == [("RST", "R1", "2", 6), ("RST", "C1", "1", 6), ("RST", "U1", "A7", 7)]
    assert [name for name, _ in export.nets] == ["RST", "EMPTY"]


def test_a_list_with_an_end_is_refused_where_it_breaks_off() -> None:
    mistake = refused(LINES_FORMAT, LINES.removesuffix("%END\n"))
    assert (mistake.problem, mistake.expected) == ("the list has no end", "a last line %END")


def test_a_table_with_nets_is_a_netlist_and_one_without_a_bom() -> None:
    export = read(TABLE_FORMAT, TABLE)
    assert parts(export) == [("R1", "10k", "", 3), ("C1", "1u", "", 4), ("U1", None, "", 5)]
    assert ends(export) == [("RST", "R1", "2", 3), ("RST", "C1", "1", 4)]
    assert export.parts[0].fields["Tolerance"].text == "1%"
    bom = read(BOM_FORMAT, BOM)
    assert (bom.kind, [ref for ref, *_ in parts(bom)]) == ("bom", ["R1", "R2", "R3", "C1", "C2"])


def test_files_without_the_text_are_read_as_ever() -> None:
    assert read(XML_FORMAT, "net,part,pin\nA,R1,1\n").reader == "pin-list"


def test_a_file_that_is_not_as_described_is_refused_with_both_places() -> None:
    empty = refused(XML_FORMAT, "<board-export/>")
    assert empty.problem == "nothing in this file is what the format 'house netlist' describes"
    assert empty.expected == "parts or pins as rcrules.toml:2:1 says"
    header = refused(TABLE_FORMAT, TABLE.replace("Anschluss", "Pin"))
    assert (header.place.line, header.expected) == (1, "Signal, Bauteil, Anschluss, Wert, Tol")
    assert refused(XML_FORMAT, "%<board-export").problem == "no XML, as the format 'house netlist' says"
    assert refused(LINES_FORMAT, LINES.replace("R1:2", "R1")).problem == "a connection that names no part or no pin"
    assert "DOCTYPE" in refused(XML_FORMAT, "<!DOCTYPE x><board-export/>").problem


def test_paths_end_in_bounded_work(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(_described_records, "MAX_STEPS", 1000)
    pins = "<pin/>" * 60
    far = XML_FORMAT.replace("../@name", "../gone[@a='b']/x")
    mistake = refused(far, f'<board-export><nets><net name="A">{pins}</net></nets></board-export>')
    assert "too many steps" in mistake.problem
