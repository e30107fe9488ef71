"""Variants of a board, named by the netlist or by columns of the BOM."""

import pytest

from rcrules.design import Design, build, vary
from rcrules.errors import Place, UserMistake
from rcrules.readers import Export, Source, read

LITE = '<variants><variant name="lite"><property name="dnp" value="1"/></variant></variants>'
FULL = '<variants><variant name="full"><fields><field name="Value">22k</field></fields></variant></variants>'
XML = (
    f"<export><components><comp ref='R1'><value>10k</value>{LITE}</comp>"
    f"<comp ref='R2'><value>10k</value>{FULL}</comp></components></export>"
)
SEXPR = """(export (version "E") (components
 (comp (ref "R1") (value "10k") (variants (variant (name "lite") (property (name "dnp") (value "1")))))
 (comp (ref "R2") (value "10k")
  (variants (variant (name "full") (fields (field (name "Value") "22k"))))))
 (nets))"""
ASKED = Place(file="--variant")


def export(name: str, text: str) -> Export:
    return read(Source(name=name, data=text.encode()))


def varied(name: str, *exports: Export) -> Design:
    return build(vary(exports, name, ASKED))


def fitted(design: Design) -> dict[str, bool]:
    return {ref: part.fitted for ref, part in design.parts.items()}


@pytest.mark.parametrize("text", [XML, SEXPR], ids=["xml", "s-expression"])
def test_a_variant_of_the_netlist_leaves_parts_out_and_changes_values(text: str) -> None:
    board = export("board.net", text)
    assert fitted(varied("lite", board)) == {"R1": False, "R2": True}
    assert varied("lite", board).parts["R1"].fitted_why == "netlist: variant 'lite'"
    assert fitted(varied("full", board)) == {"R1": True, "R2": True}
    assert varied("full", board).parts["R2"].values[0].text == "22k"


def test_without_a_name_the_base_is_taken_and_the_variants_are_told() -> None:
    design = varied("", export("board.xml", XML))
    assert fitted(design) == {"R1": True, "R2": True}
    (remark,) = design.remarks
    assert "variants of this board (full, lite); the base is taken" in remark.text


@pytest.mark.parametrize(
    ("cells", "expected"),
    [
        (("X", ""), {"R1": True, "R2": False}),
        (("", "DNP"), {"R1": True, "R2": False}),
        (("yes", "no"), {"R1": True, "R2": False}),
        (("1", "0"), {"R1": True, "R2": False}),
    ],
)
def test_a_column_of_the_bom_is_a_variant(cells: tuple[str, str], expected: dict[str, bool]) -> None:
    bom = export("bom.csv", "Ref,Value,Lite,Full\nR1,10k,{},X\nR2,12k,{},X\n".format(*cells))
    assert fitted(varied("lite", bom)) == expected
    assert fitted(varied("", bom)) == {"R1": True, "R2": True}


def test_a_cell_of_the_column_may_be_another_value() -> None:
    bom = export("bom.csv", "Ref,Value,Lite\nR1,10k,4k7\nR2,12k,DNP\nR3,15k,\n")
    lite = varied("Lite", bom)
    assert fitted(lite) == {"R1": True, "R2": False, "R3": True}
    assert lite.parts["R1"].values[0].text == "4k7"


def test_a_column_may_list_the_variants_in_which_a_part_is_fitted() -> None:
    bom = export("bom.csv", 'Ref,Value,Variant\nR1,10k,"lite, full"\nR2,12k,full\nR3,15k,\n')
    assert fitted(varied("lite", bom)) == {"R1": True, "R2": False, "R3": True}


def test_a_name_that_no_input_knows_is_refused_with_those_there_are() -> None:
    bom = export("bom.csv", "Ref,Value,Qty,DNP,Basic\nR1,10k,1,,X\nR2,12k,1,X,X\n")
    with pytest.raises(UserMistake) as caught:
        vary([export("board.xml", XML), bom], "lite2", ASKED)
    (mistake,) = caught.value.mistakes
    assert (mistake.found, mistake.expected) == ("'lite2'", "one of full, lite, Basic")


def test_without_any_variant_it_says_where_they_could_come_from() -> None:
    with pytest.raises(UserMistake, match="a BOM with a column of that name"):
        vary([export("bom.csv", "Ref,Value\nR1,10k\n")], "lite", ASKED)
