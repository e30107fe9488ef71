"""XML netlists of versions D and E."""

from rcrules import readers
from rcrules.readers import Cell, Export, Source

HEAD = '<?xml version="1.0" encoding="UTF-8"?>\n'
VERSION_E = (
    HEAD
    + """<export version="E">
 <design><sheet number="1" name="/"><title_block><title>tide gauge</title></title_block></sheet></design>
 <components>
  <comp ref="R1">
   <value>4k7</value>
   <footprint>R:0402</footprint>
   <fields><field name="Tolerance ">1%</field><field name="Empty"/></fields>
   <libsource lib="Device" part="R" description="Resistor"/>
   <property name="Tolerance" value="1%"/>
   <property name="Sheetname" value="Root"/>
   <sheetpath names="/filter/" tstamps="/1/"/>
  </comp>
  <comp ref="C1"><value>~</value></comp>
  <comp ref="C2"><value>1u</value><property name="dnp"/></comp>
  <comp ref="C3"><value>1u</value><property name="dnp" value="0"/></comp>
 </components>
 <nets>
  <net code="1" name="GND"><node ref="C1" pin="2" pintype="passive"/></net>
  <net code="2" name=""><node ref="R1" pin="2" pinfunction="~" pintype="input+no_connect"/></net>
  <net code="3" name="LONE"/>
 </nets>
</export>
"""
)


def read(text: str | bytes) -> Export:
    data = text if isinstance(text, bytes) else text.encode()
    return readers.read(Source(name="gauge.xml", data=data))


def test_a_component_keeps_its_texts_and_lines() -> None:
    export = read(VERSION_E)
    part = export.parts[0]
    assert (export.reader, export.kind, export.title) == ("xml-netlist", "netlist", "tide gauge")
    assert (part.ref, part.footprint, part.symbol, part.description) == ("R1", "R:0402", "Device:R", "Resistor")
    assert part.sheet == "/filter/"
    assert part.value is not None
    assert (part.value.text, str(part.value.place), str(part.place)) == ("4k7", "gauge.xml:6", "gauge.xml:5")


def test_a_property_repeats_a_field_only_once_and_sheet_properties_are_left_out() -> None:
    fields = read(VERSION_E).parts[0].fields
    assert list(fields) == ["Tolerance"]
    assert fields["Tolerance"].place.line == 8


def test_a_tilde_is_no_value() -> None:
    assert read(VERSION_E).parts[1].value is None


def test_the_dnp_flag_counts_by_presence_unless_its_value_denies_it() -> None:
    flagged, denied = read(VERSION_E).parts[2:4]
    assert (flagged.fitted, flagged.fitted_why) == (False, "flag 'dnp'")
    assert denied.fitted is not False


def test_nets_without_a_name_go_by_their_code_and_nets_without_pins_are_kept() -> None:
    export = read(VERSION_E)
    assert [name for name, _ in export.nets] == ["GND", "#2", "LONE"]
    assert export.pins[1].net == "#2"


def test_pin_types_lose_their_no_connect_suffix_and_tilde_names_are_none() -> None:
    pin = read(VERSION_E).pins[1]
    assert (pin.ref, pin.number, pin.name, pin.type, pin.place.line) == ("R1", "2", "", "input", 20)


def version_d(kind: str = "BiDi", alias: str = "") -> str:
    aliases = f"<aliases><alias>{alias}</alias></aliases>" if alias else ""
    return (
        HEAD
        + f"""<export version="D"><components>
 <comp ref="U1"><value>QX7301</value><libsource lib="mine" part="{alias or "QX"}"/></comp></components>
 <libparts><libpart lib="mine" part="QX">{aliases}<description>a chip</description>
  <pins><pin num="3" name="NRST" type="{kind}"/></pins></libpart></libparts>
 <nets><net code="1" name="/RST"><node ref="U1" pin="3"/></net></nets></export>"""
    )


def test_version_d_takes_pin_names_and_types_from_the_library() -> None:
    export = read(version_d())
    assert (export.pins[0].name, export.pins[0].type) == ("NRST", "bidirectional")
    assert export.parts[0].description == "a chip"


def test_a_part_may_name_an_alias_of_its_library_part() -> None:
    assert read(version_d(alias="QX2")).pins[0].name == "NRST"


def test_older_spellings_of_pin_types_are_known() -> None:
    spelled = {
        "openCol": "open-collector",
        "openEm": "open-emitter",
        "3state": "tri-state",
        "NotConnected": "no-connect",
        "unspc": "unspecified",
        "power_in": "power-in",
    }
    assert {text: read(version_d(text)).pins[0].type for text in spelled} == spelled


def test_an_unknown_pin_type_is_taken_as_unspecified_and_said() -> None:
    export = read(version_d("wobbly"))
    assert export.pins[0].type == "unspecified"
    assert export.remarks[0].text == "pin type 'wobbly' is not known; taken as unspecified"


def test_pin_names_that_end_with_the_pin_number_lose_it() -> None:
    """Newer exports write NAME_number; the suffix goes where every name has it."""
    nodes = "".join(f'<node ref="U1" pin="{n}" pinfunction="{name}_{n}"/>' for n, name in ((1, "VDD"), (2, "OUT")))
    export = read(f'<export version="E"><components/><nets><net code="1" name="A">{nodes}</net></nets></export>')
    assert [pin.name for pin in export.pins] == ["VDD", "OUT"]


def test_an_empty_netlist_is_valid() -> None:
    export = read("<export version='E'><components/><nets/></export>")
    assert (export.parts, export.nets) == ((), ())


def test_a_reference_listed_twice_is_said_and_the_first_stands() -> None:
    twice = '<comp ref="R1"><value>1k</value></comp>\n<comp ref="R1"><value>2k</value></comp>'
    export = read(f"<export><components>{twice}</components></export>")
    assert [part.value for part in export.parts] == [Cell(text="1k", place=export.parts[0].place)]
    assert export.remarks[0].text == "R1 is listed again with value '2k' instead of '1k'; the one of line 1 stands"


def test_a_pin_on_two_nets_and_a_pin_of_no_listed_part_are_said() -> None:
    net = '<net code="{0}" name="N{0}"><node ref="R1" pin="1"/></net>'
    export = read(f"<export><components/><nets>{net.format(1)}{net.format(2)}</nets></export>")
    assert len(export.pins) == 2
    assert {remark.text for remark in export.remarks} == {
        "pin 1 of R1 is on net 'N1' and on net 'N2'; both are kept",
        "R1 stands in the nets but not in the list of components",
    }


def test_a_net_name_listed_twice_is_one_net_and_said() -> None:
    net = '<net code="{0}" name="A"><node ref="R{0}" pin="1"/></net>'
    export = read(f"<export><nets>{net.format(1)}{net.format(2)}</nets></export>")
    assert [name for name, _ in export.nets] == ["A"]
    assert any("listed again" in remark.text for remark in export.remarks)


def test_fields_say_that_a_part_is_not_fitted() -> None:
    for name, text in (("Populate", "No"), ("Note", "DNP"), ("DNP", "X"), ("Mounted", "0")):
        field = f'<fields><field name="{name}">{text}</field></fields>'
        part = read(f'<export><components><comp ref="R1">{field}</comp></components></export>').parts[0]
        assert (part.fitted, part.fitted_why) == (False, f"{name} = {text!r}")


def test_what_variants_have_otherwise_at_a_component_is_kept() -> None:
    variants = (
        '<variants><variant name="lite"><property name="dnp" value="1"/></variant>'
        '<variant name="full"><property name="dnp" value="0"/><fields><field name="Value">22k</field>'
        '<field name="Tol">1%</field></fields></variant></variants>'
    )
    (part,) = read(f'<export><components><comp ref="R1">{variants}</comp></components></export>').parts
    assert {name: item.fitted for name, item in part.variants.items()} == {"lite": False, "full": True}
    full = part.variants["full"]
    assert full.value is not None
    assert (full.value.text, full.fields["Tol"].text) == ("22k", "1%")


def test_blank_lines_before_the_declaration_do_not_shift_line_numbers() -> None:
    assert read("\n\n" + VERSION_E).parts[0].place.line == 7


def test_utf_16_is_read() -> None:
    text = VERSION_E.replace("UTF-8", "UTF-16").replace("4k7", "4,7 kΩ")
    value = read(text.encode("utf-16")).parts[0].value
    assert value is not None
    assert value.text == "4,7 kΩ"


def test_a_namespace_is_looked_through() -> None:
    assert len(read(VERSION_E.replace("<export ", '<export xmlns="urn:any" ')).parts) == 4


def test_connections_and_components_that_name_no_part_are_left_out_and_told() -> None:
    nodes = '<node ref="" pin="1"/><node ref="R1"/><node ref="R1" pin="2"/>'
    text = f'<export><components><comp/><comp ref="R1"/></components><nets><net name="A">{nodes}</net></nets></export>'
    export = readers.read(Source(name="a.xml", data=text.encode()))
    assert ([part.ref for part in export.parts], len(export.pins)) == (["R1"], 1)
    assert [remark.text for remark in export.remarks] == [
        "a component without a reference is left out",
        "a connection that names no part or no pin is left out",
        "a connection that names no part or no pin is left out",
    ]
