"""IPC-2581 files, revisions A to C."""

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, ExportPart, Source

FRAME = """<?xml version="1.0" encoding="UTF-8"?>
<IPC-2581 revision="C" xmlns="http://webstds.ipc.org/2581">
 <Content roleRef="Owner"><FunctionMode mode="USERDEF"/>{content}</Content>
 <LogisticHeader><Enterprise id="E1" name="Nord Parts" code="NONE"/></LogisticHeader>
 {boms}
 <Ecad name="a"><CadData>{steps}</CadData></Ecad>
 {avl}
</IPC-2581>
"""
ITEMS = """
  <BomItem OEMDesignNumberRef="RES-4K7" quantity="1" category="ELECTRICAL" description="thick film">
   <RefDes name="R1" packageRef="R0402" populate="true" layerRef="TOP"/>
   <Characteristics category="ELECTRICAL">
    <Measured measuredCharacteristicName="RESISTANCE" measuredCharacteristicValue="4700"
     engineeringUnitOfMeasure="OHM" engineeringNegativeTolerance="47" engineeringPositiveTolerance="47"/>
    <Ranged rangedCharacteristicName="TEMP" rangedCharacteristicLowerValue="-55" rangedCharacteristicUpperValue="125"
     engineeringUnitOfMeasure="degC"/>
    <Enumerated enumeratedCharacteristicName="GRADE" enumeratedCharacteristicValue="A"/></Characteristics></BomItem>
  <BomItem OEMDesignNumberRef="CAP-100N" quantity="2" internalPartNumber="I-77">
   <RefDes name="C1" packageRef="C0402"/>
   <RefDes name="C2" packageRef="C0402" populate=" false "/>
   <Characteristics><Textual textualCharacteristicName="Comp_Value" textualCharacteristicValue="100n"/>
    <Textual textualCharacteristicName="VOLT" textualCharacteristicValue="16 V"/></Characteristics></BomItem>"""
BOM = f'<Bom name="B1"><BomHeader assembly="a"><StepRef name="tiny"/></BomHeader>{ITEMS}</Bom>'
PARTS = """
  <Package name="IC8"><Pin number="1" name="NRST"/><Pin number="2" name="2"/></Package>
  <Component refDes="R1" packageRef="R0402" part="RES-4K7"/>
  <Component refDes="C1" part="CAP-100N"/>
  <Component refDes="U1" packageRef="IC8" part="QX"><NonstandardAttribute name="VALUE" value="QX7301"/></Component>"""
NETS = """
  <LogicalNet name="SENSE"><PinRef componentRef="R1" pin="2"/><PinRef componentRef="C1" pin="1"/>
   <PinRef componentRef="U1" pin="1"/></LogicalNet>
  <LogicalNet name="No Net"><PinRef componentRef="U1" pin="2"/></LogicalNet>
  <LogicalNet name="LONE"/>"""
PADS = """
  <LayerFeature layerRef="TOP">
   <Set net="SENSE"><Pad><PinRef componentRef="R1" pin="2"/></Pad><Pad><PinRef pin="3"/></Pad></Set>
   <Set net="SENSE"><Pad><PinRef componentRef="C1" pin="1"/></Pad></Set>
   <Set net="SENSE"><Pad><PinRef componentRef="C1" pin="1"/></Pad></Set>
   <Set><Pad><PinRef componentRef="C1" pin="9"/></Pad></Set>
   <Set net="No Net"><Pad><PinRef componentRef="U1" pin="2"/></Pad></Set></LayerFeature>
  <PadStack net="GND"><LayerPad layerRef="TOP"><PinRef componentRef="C1" pin="2"/></LayerPad></PadStack>"""
AVL = """<Avl name="A"><AvlItem OEMDesignNumber="RES-4K7">
  <AvlVmpn qualified="true"><AvlMpn name="OTHER"/><AvlVendor enterpriseRef="E1"/></AvlVmpn>
  <AvlVmpn chosen="true"><AvlMpn name="QR4701" rank="1"/><AvlVendor enterpriseRef="E1"/></AvlVmpn></AvlItem>
 <AvlItem OEMDesignNumber="CAP-100N"/></Avl>"""


def step(inside: str, name: str = "tiny") -> str:
    return f'<Step name="{name}">{inside}</Step>'


def read(
    boms: str = BOM, steps: str = step(PARTS + NETS), content: str = '<StepRef name="tiny"/>', avl: str = AVL
) -> Export:
    text = FRAME.format(boms=boms, steps=steps, content=content, avl=avl)
    return readers.read(Source(name="board.xml", data=text.encode()))


def refused(**parts: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(**parts)
    return caught.value.mistakes[0]


def part(export: Export, ref: str) -> ExportPart:
    return next(part for part in export.parts if part.ref == ref)


def fields(found: ExportPart) -> dict[str, str]:
    return {name: cell.text for name, cell in found.fields.items()}


def ends(export: Export) -> list[tuple[str, str, str]]:
    return [(pin.net, pin.ref, pin.number) for pin in export.pins]


def said(export: Export) -> list[str]:
    return [remark.text for remark in export.remarks]


def test_logical_nets_components_and_bom_are_one_board() -> None:
    export = read()
    assert (export.reader, export.kind) == ("ipc-2581", "netlist")
    assert ends(export) == [("SENSE", "R1", "2"), ("SENSE", "C1", "1"), ("SENSE", "U1", "1")]
    assert [name for name, _ in export.nets] == ["SENSE", "LONE"]
    assert [(pin.ref, pin.number) for pin in export.open_pins] == [("U1", "2")]
    assert sorted(part.ref for part in export.parts) == ["C1", "C2", "R1", "U1"]
    assert said(export) == ["connectivity is that of the logical nets (LogicalNet)"]


def test_parts_pins_and_nets_have_lines() -> None:
    export = read(boms=BOM, steps="\n\n" + step(PARTS + NETS))
    lines = {part.ref: part.place.line for part in export.parts}
    text = FRAME.format(
        boms=BOM, steps="\n\n" + step(PARTS + NETS), content='<StepRef name="tiny"/>', avl=AVL
    ).splitlines()
    assert '<Component refDes="R1"' in text[(lines["R1"] or 0) - 1]
    assert '<RefDes name="C2"' in text[(lines["C2"] or 0) - 1]
    assert '<PinRef componentRef="U1" pin="1"' in text[(export.pins[2].place.line or 0) - 1]
    assert '<LogicalNet name="LONE"' in text[(export.nets[1][1].line or 0) - 1]


def test_measured_values_carry_unit_and_tolerance() -> None:
    found = part(read(), "R1")
    assert found.value is not None
    assert found.value.text == "4700 OHM"
    assert fields(found)["Tolerance"] == "1 %"
    assert fields(found)["TEMP"] == "-55 degC .. 125 degC"
    assert fields(found)["GRADE"] == "A"


def test_tolerances_of_two_sizes_are_told_apart() -> None:
    export = read(boms=BOM.replace('NegativeTolerance="47"', 'NegativeTolerance="94"'))
    assert fields(part(export, "R1"))["Tolerance"] == "-2 % +1 %"


def test_textual_values_and_fields_are_read() -> None:
    found = part(read(), "C1")
    assert found.value is not None
    assert found.value.text == "100n"
    assert fields(found) == {"VOLT": "16 V", "internalPartNumber": "I-77", "OEMDesignNumberRef": "CAP-100N"}


def test_the_chosen_makers_number_is_joined_by_the_design_number() -> None:
    found = fields(part(read(), "R1"))
    assert (found["MPN"], found["Manufacturer"]) == ("QR4701", "Nord Parts")
    assert part(read(), "R1").description == "thick film"


def test_what_is_not_populated_is_not_fitted() -> None:
    export = read()
    assert part(export, "C2").fitted is False
    assert "populate = false" in part(export, "C2").fitted_why
    assert part(export, "C1").fitted is None


def test_pin_names_come_from_the_package() -> None:
    pins = {(pin.ref, pin.number): pin.name for pin in read().pins}
    assert (pins["U1", "1"], pins["R1", "2"]) == ("NRST", "")


def test_an_attribute_of_the_component_gives_the_value_where_the_bom_has_none() -> None:
    value = part(read(), "U1").value
    assert value is not None
    assert value.text == "QX7301"


def test_without_logical_nets_pads_connect_each_pin_once() -> None:
    export = read(steps=step(PARTS + PADS))
    assert ends(export) == [("SENSE", "R1", "2"), ("SENSE", "C1", "1"), ("GND", "C1", "2")]
    assert [(pin.ref, pin.number) for pin in export.open_pins] == [("U1", "2")]
    assert said(export) == ["connectivity is that of the pads (Set, PinRef): the file has no logical nets"]


def test_pads_are_held_against_the_logical_nets() -> None:
    moved = PADS.replace(
        '<Set net="SENSE"><Pad><PinRef componentRef="R1"', '<Set net="OTHER"><Pad><PinRef componentRef="R1"'
    )
    export = read(steps=step(PARTS + NETS + moved))
    assert ends(export)[0] == ("SENSE", "R1", "2")
    assert "the first is pin 2 of R1, on 'OTHER' instead of 'SENSE'" in said(export)[1]
    assert len(said(read(steps=step(PARTS + NETS + PADS)))) == 1


def test_logical_net_pins_of_older_files_are_read() -> None:
    nets = NETS.replace("<PinRef", "<LogicalNetPin")
    assert ends(read(steps=step(PARTS + nets))) == ends(read())


def test_pins_of_logical_nets_without_a_part_are_told() -> None:
    export = read(
        steps=step(
            PARTS + NETS.replace('<LogicalNet name="LONE"/>', '<LogicalNet name="L"><PinRef pin="1"/></LogicalNet>')
        )
    )
    assert "1 pins of logical nets that name no part are left out" in said(export)


def test_the_step_that_the_content_names_is_taken_and_the_other_told() -> None:
    panel = step(
        '<Component refDes="R9"/><LogicalNet name="X"><PinRef componentRef="R9" pin="1"/></LogicalNet>', "panel"
    )
    export = read(steps=panel + step(PARTS + NETS))
    assert ends(export) == ends(read())
    assert any("only step 'tiny' is read" in text for text in said(export))
    bare = read(
        steps=step('<StepRepeat stepRef="tiny"/>', "panel") + step(PARTS + NETS), content='<StepRef name="panel"/>'
    )
    assert (ends(bare), len(said(bare))) == (ends(read()), 1)


def test_the_bom_of_the_step_is_taken_and_the_others_told() -> None:
    other = f'<Bom name="B0"><BomHeader><StepRef name="other"/></BomHeader>{ITEMS.replace("100n", "1u")}</Bom>'
    export = read(boms=other + BOM)
    value = part(export, "C1").value
    assert value is not None
    assert value.text == "100n"
    assert "only BOM 'B1' is read; the file also holds B0" in said(export)


def test_a_file_with_a_bom_alone_is_a_bom() -> None:
    export = read(steps="")
    assert (export.kind, [part.ref for part in export.parts], export.pins) == ("bom", ["R1", "C1", "C2"], ())


def test_a_file_with_nets_alone_gives_parts_by_their_pins() -> None:
    export = read(boms="", steps=step(PADS), avl="")
    assert [part.ref for part in export.parts] == ["R1", "C1", "U1"]
    assert "3 parts stand in the nets alone: R1, C1, U1" in said(export)


def test_a_quantity_that_contradicts_the_references_is_told() -> None:
    export = read(boms=BOM.replace('quantity="2"', 'quantity="3"'))
    assert "quantity 3, but 2 references: C1, C2" in said(export)


def test_prefixes_on_all_names_are_stripped() -> None:
    tagged = step(PARTS + NETS)
    for name in ("R1", "C1", "U1"):
        tagged = tagged.replace(f'="{name}"', f'="CMP:{name}"')
    tagged = tagged.replace('name="SENSE"', 'name="NET:SENSE"').replace('name="LONE"', 'name="NET:LONE"')
    export = read(boms="", steps=tagged)
    assert ends(export) == ends(read())
    assert [part.ref for part in export.parts] == ["R1", "C1", "U1"]
    assert ends(read(steps=tagged))[0] == ("NET:SENSE".removeprefix("NET:"), "CMP:R1", "2")  # R1 of the BOM has none


def test_a_file_without_namespace_and_of_another_revision_is_read() -> None:
    text = FRAME.format(boms=BOM, steps=step(PARTS + NETS), content="", avl="").replace(
        ' xmlns="http://webstds.ipc.org/2581"', ""
    )
    export = readers.read(Source(name="a", data=text.replace('revision="C"', 'revision="A"').encode()))
    assert ends(export) == ends(read())


def test_a_file_with_neither_parts_nor_nets_is_refused() -> None:
    assert refused(boms="", steps="", avl="").problem == "the IPC-2581 file holds neither parts nor nets"
