"""Bills of materials as XML, whatever their elements are called."""

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, Source

AS_ELEMENTS = """<?xml version="1.0"?>
<schematic>
 <component><Reference>R1</Reference><Value>10k</Value><Tol>1%</Tol></component>
 <component>
  <Reference>C1</Reference><Value>100 nF
   16 V</Value><DNP>yes</DNP></component>
</schematic>
"""
AS_ATTRIBUTES = """<bom>
 <part ref="R1" value="10k" Tol="1%"/>

 <part ref="C1" value="100 nF 16 V" DNP="yes"/></bom>"""
AS_FIELDS = """<list><parts>
 <item RefDes="R1"><fields><field name="Value">10k</field><field name="Tol" value="1%"/></fields></item>
 <item RefDes="C1"><fields><field name="Value" value="100 nF 16 V"/><field name="DNP">yes</field></fields></item>
</parts></list>"""


def read(text: str, **columns: str) -> Export:
    return readers.read(Source(name="bom.xml", data=text.encode()), columns)


def refused(text: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(text)
    return caught.value.mistakes[0]


def parts(export: Export) -> list[tuple[str, str | None, bool | None]]:
    return [(part.ref, part.value.text if part.value else None, part.fitted) for part in export.parts]


@pytest.mark.parametrize("text", [AS_ELEMENTS, AS_ATTRIBUTES, AS_FIELDS])
def test_cells_are_elements_attributes_or_named_fields(text: str) -> None:
    export = read(text)
    assert (export.reader, export.kind) == ("bom-xml", "bom")
    assert parts(export) == [("R1", "10k", None), ("C1", "100 nF 16 V", False)]
    assert export.parts[0].fields["Tol"].text == "1%"


def test_parts_have_lines_and_no_columns() -> None:
    assert [str(part.place) for part in read(AS_ELEMENTS).parts] == ["bom.xml:3", "bom.xml:4"]
    value = read(AS_ATTRIBUTES).parts[1].value
    assert value is not None
    assert str(value.place) == "bom.xml:4"


def test_an_item_may_hold_several_references() -> None:
    item = "<i><value>1k</value><qty>3</qty><refs>{refs}</refs></i>"
    for refs in ("R1, R2 R3", "<ref>R1</ref><ref>R2</ref><ref>R3</ref>"):
        export = read("<bom>" + item.format(refs=refs) + "</bom>")
        assert [part.ref for part in export.parts] == ["R1", "R2", "R3"]
        assert export.remarks == ()


def test_names_of_two_words_and_names_of_the_project_are_known() -> None:
    assert parts(read("<b><i><PartReference>R1</PartReference><PartValue>1k</PartValue></i></b>")) == [
        ("R1", "1k", None)
    ]
    own = "<b><i Kennung='R1' Wert='1k'/></b>"
    assert refused(own).found == "XML with the root <b>"
    assert parts(read(own, reference="Kennung")) == [("R1", "1k", None)]


def test_namespaces_and_comments_do_not_matter() -> None:
    text = AS_ELEMENTS.replace("<schematic>", '<schematic xmlns="urn:x"><!-- R9 -->')
    assert parts(read(text)) == parts(read(AS_ELEMENTS))


def test_a_reference_listed_again_is_told() -> None:
    export = read("<b><i ref='R1' value='1k'/>\n<i ref='R1' value='2k'/></b>")
    assert parts(export) == [("R1", "1k", None)]
    assert export.remarks[0].text == "R1 is listed again with value '2k' instead of '1k'; line 1 stands"


def test_other_xml_is_refused_by_its_root() -> None:
    mistake = refused("<rss><channel><title>x</title><ref>R1</ref></channel></rss>".replace("ref>", "link>"))
    assert mistake.found == "XML with the root <rss>"


def test_deep_and_endless_xml_is_refused() -> None:
    assert "depth" in str(refused("<b>" + "<ref>" * 300).found)
    assert refused("<b>" + "<i/>" * 1_600_000 + "</b>").problem == "the file holds too many elements"
    assert refused(f"<b><i ref='R1' value='{'x' * 200_000}'/></b>").problem == "a text is too long"
    wide = "".join(f"<f{n}>x</f{n}>" for n in range(2000))
    assert refused(f"<b><i><ref>R1</ref>{wide}</i></b>").problem == "the file holds too many different names of cells"
