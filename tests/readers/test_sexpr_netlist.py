"""S-expression netlists, and that they say the same as their XML twins."""

from rcrules import readers
from rcrules.readers import Export, Source

QUOTED = """(export (version "E")
  (components
    (comp (ref "R1") (value "4k7") (footprint "R:0402")
      (fields (field (name "Tolerance") "1%"))
      (property (name "Tolerance") (value "1%"))
      (libsource (lib "Device") (part "R") (description "Resistor"))
      (sheetpath (names "/") (tstamps "/")))
    (comp (ref C1) (value 100n))
    (comp (ref "C2") (value ~) (property (name "dnp"))))
  (libparts
    (libpart (lib "Device") (part "R")
      (pins (pin (num "1") (name "~") (type "passive")) (pin (num "2") (name "B") (type "passive")))))
  (nets
    (net (code "1") (name "GND") (class "Default")
      (node (ref "C1") (pin "2") (pintype "passive")))
    (net (code "2") (name "/RX{slash}TX") (node (ref "R1") (pin "2")))
    (net (code 12) (name ""))
    (net (code 13) (name ""))))
"""
TWIN = """<export version="E">
<components>
<comp ref="R1"><value>4k7</value><footprint>R:0402</footprint>
<fields><field name="Tolerance">1%</field></fields>
<property name="Tolerance" value="1%"/>
<libsource lib="Device" part="R" description="Resistor"/>
<sheetpath names="/" tstamps="/"/></comp>
<comp ref="C1"><value>100n</value></comp>
<comp ref="C2"><value>~</value><property name="dnp"/></comp></components>
<libparts>
<libpart lib="Device" part="R">
<pins><pin num="1" name="~" type="passive"/><pin num="2" name="B" type="passive"/></pins></libpart></libparts>
<nets>
<net code="1" name="GND" class="Default">
<node ref="C1" pin="2" pintype="passive"/></net>
<net code="2" name="/RX/TX"><node ref="R1" pin="2"/></net>
<net code="12" name=""/>
<net code="13" name=""/></nets></export>
"""


def read(text: str) -> Export:
    return readers.read(Source(name="gauge.net", data=text.encode()))


def test_twins_give_the_same_export() -> None:
    """The XML twin is written with each item on the same line."""
    export, twin = read(QUOTED), read(TWIN)
    assert (export.reader, twin.reader) == ("sexpr-netlist", "xml-netlist")
    assert export.parts == twin.parts
    assert export.pins == twin.pins
    assert export.nets == twin.nets


def test_parts_pins_and_nets_know_their_lines() -> None:
    export = read(QUOTED)
    assert [part.place.line for part in export.parts] == [3, 8, 9]
    assert [pin.place.line for pin in export.pins] == [15, 16]
    assert [place.line for _, place in export.nets] == [14, 16, 17, 18]


def test_empty_net_names_are_distinct_nets() -> None:
    assert [name for name, _ in read(QUOTED).nets] == ["GND", "/RX/TX", "#12", "#13"]


def test_unquoted_atoms_are_texts() -> None:
    text = "(export (version D) (components (comp (ref nil) (value 1E3) (footprint 0402))))"
    part = read(text).parts[0]
    assert part.value is not None
    assert (part.ref, part.value.text, part.footprint) == ("nil", "1E3", "0402")


def test_one_token_on_a_line_reads_like_one_line() -> None:
    spread = QUOTED.replace(" ", "\n").replace("(", "\n(\n").replace(")", "\n)\n")
    assert [part.ref for part in read(spread).parts] == ["R1", "C1", "C2"]


def test_carriage_returns_end_lines() -> None:
    assert read(QUOTED.replace("\n", "\r\n")).parts == read(QUOTED).parts
    assert read(QUOTED.replace("\n", "\r")).parts == read(QUOTED).parts


def test_brackets_escapes_and_line_breaks_inside_quotes_are_text() -> None:
    text = '(export\n(components\n(comp (ref R1) (value "a \\"b\\" (c\nd"))\n(comp (ref R2))))'
    first, second = read(text).parts
    assert first.value is not None
    assert first.value.text == 'a "b" (c\nd'
    assert second.place.line == 5


def test_unknown_brace_escapes_and_overbars_stay() -> None:
    text = '(export (nets (net (code 1) (name "/~{RST}{odd}{brace}"))))'
    assert read(text).nets[0][0] == "/~{RST}{odd}{"


def test_old_texts_in_windows_1252_are_read_with_a_remark() -> None:
    data = '(export\n (components\n (comp (ref R1) (value "10 µF"))))'.encode("cp1252")
    export = readers.read(Source(name="old.net", data=data))
    assert export.parts[0].value is not None
    assert export.parts[0].value.text == "10 µF"
    assert export.remarks[0].place.line == 3
