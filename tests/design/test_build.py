"""Merging the exports of one board."""

import pytest

from rcrules import design, readers
from rcrules.design import Design
from rcrules.errors import UserMistake
from rcrules.readers import Export, Remark, Source

NETLIST = """<export version="E"><components>
<comp ref="R10"><value>4k7</value><fields><field name="Tol">1%</field></fields>
<libsource lib="Device" part="R" description="Resistor"/><sheetpath names="/a/"/></comp>
<comp ref="R2"><value>10k</value></comp>
<comp ref="TP1"><value>TP</value></comp></components><nets>
<net code="1" name="N10"><node ref="R10" pin="2"/><node ref="R2" pin="1"/><node ref="R10" pin="10"/></net>
<net code="2" name="N2"/>
<net code="3" name=""><node ref="R2" pin="2"/></net></nets></export>
"""
BOM = "Reference,Value,Tol,Description,DNP\nR10,4.7k,5%,RES 4K7 5%,\nR2,12k,,,X\nC7,100n,,,\n"


def exports(bom: str | None = BOM, netlist: str | None = NETLIST) -> list[Export]:
    given = (("gauge.xml", netlist), ("bom.csv", bom))
    return [readers.read(Source(name=name, data=text.encode())) for name, text in given if text is not None]


def built(bom: str | None = BOM, netlist: str | None = NETLIST) -> Design:
    return design.build(exports(bom, netlist))


def test_parts_nets_and_pins_stand_in_natural_order() -> None:
    made = built()
    assert list(made.parts) == ["C7", "R2", "R10", "TP1"]
    assert list(made.nets) == ["#3", "N2", "N10"]
    assert [pin.number for pin in made.parts["R10"].pins] == ["2", "10"]
    assert [pin.key for pin in made.nets["N10"].pins] == ["R2.1", "R10.2", "R10.10"]


def test_what_the_bom_says_comes_first_and_nothing_is_lost() -> None:
    part = built().parts["R10"]
    assert [(fact.text, fact.origin, str(fact.place)) for fact in part.values] == [
        ("4.7k", "BOM value", "bom.csv:2:5"),
        ("4k7", "netlist value", "gauge.xml:2"),
    ]
    assert [(fact.text, fact.origin) for fact in part.fields["tol"]] == [
        ("5%", "BOM field 'Tol'"),
        ("1%", "netlist field 'Tol'"),
    ]
    assert [fact.text for fact in part.fields["description"]] == ["RES 4K7 5%", "Resistor"]
    assert (part.symbol, part.sheet, part.description) == ("Device:R", "/a/", "RES 4K7 5%")
    assert str(part.place) == "gauge.xml:2"


def test_a_part_that_any_export_says_is_not_fitted_is_not_fitted() -> None:
    made = built()
    assert (made.parts["R2"].fitted, made.parts["R2"].fitted_why) == (False, "BOM: DNP = 'X'")
    assert made.parts["R10"].fitted


def remarks(made: Design) -> tuple[Remark, ...]:
    return (*made.remarks, *design.told(made))


def test_parts_of_one_export_alone_are_kept_and_told() -> None:
    made = built()
    assert made.parts["C7"].pins == ()
    texts = [remark.text for remark in remarks(made)]
    assert "in the BOM, not in the netlist (gauge.xml): C7" in texts
    assert "in the netlist, not in the BOM (bom.csv): TP1" in texts


def test_values_that_contradict_are_told_with_both_places() -> None:
    remark = remarks(built())[0]
    assert remark.text == "R2: BOM value '12k', netlist value '10k' (gauge.xml:4); the first is taken"
    assert str(remark.place) == "bom.csv:3:4"


def test_values_that_say_the_same_in_other_words_do_not_contradict() -> None:
    same = [
        ("4k7", "4.7K"),
        ("100n", "100 nF 16V"),
        ("10R", "10 Ohm"),
        ("0603, 1uF, 10V", "1µF"),
        ("2,2k", "2k2"),
        ("ST1, SD 4", "ST1"),
    ]
    for one, other in same:
        netlist = f"<export><components><comp ref='R1'><value>{one}</value></comp></components></export>"
        made = built(f'Ref,Value\nR1,"{other}"\n', netlist)
        assert remarks(made) == (), (one, other)


def test_the_same_contradiction_on_many_parts_is_told_once() -> None:
    refs = [f"R{number}" for number in range(1, 21)]
    components = "".join(f"<comp ref='{ref}'><value>1k</value></comp>" for ref in refs)
    made = built(f'Ref,Value\n"{",".join(refs)}",2k\n', f"<export><components>{components}</components></export>")
    (remark,) = remarks(made)
    assert remark.text.startswith("R1, R2, R3, R4, R5, R6, R7, R8, R9, R10, R11, R12 and 8 more: BOM value '2k'")


def test_many_contradictions_share_a_remark() -> None:
    components = "".join(f"<comp ref='R{number}'><value>{number}k</value></comp>" for number in range(1, 6))
    rows = "".join(f"R{number},{number}1k\n" for number in range(1, 6))
    (remark,) = remarks(built(f"Ref,Value\n{rows}", f"<export><components>{components}</components></export>"))
    assert remark.text.startswith("5 parts: the BOM value is taken, not the netlist value: R1 '11k' not '1k', R2 '21k'")


def test_files_of_different_boards_are_told() -> None:
    made = built("Ref,Value\nQ1,QX1\nQ2,QX2\n")
    assert [remark.text for remark in remarks(made)] == [
        "no reference stands in both this BOM and gauge.xml: are they of one board?"
    ]


def test_a_bom_alone_is_a_design_without_nets() -> None:
    made = built(netlist=None)
    assert (list(made.parts), dict(made.nets), remarks(made)) == (["C7", "R2", "R10"], {}, ())


def test_a_part_that_only_stands_in_the_nets_is_a_part() -> None:
    netlist = "<export><nets><net code='1' name='A'><node ref='U1' pin='3'/></net></nets></export>"
    made = built(None, netlist)
    assert made.parts["U1"].values == ()
    assert [pin.net for pin in made.parts["U1"].pins] == ["A"]


def test_remarks_of_the_readers_come_along() -> None:
    made = built("Ref,Value\nR2,10k\nR2,11k\n")
    assert any("R2 is listed again" in remark.text for remark in remarks(made))


def netlists(*texts: str) -> Design:
    """A design of pin lists a.csv, b.csv … given by their rows."""
    given = zip("abcd", texts, strict=False)
    rows = {name: "\n".join(["net,part,pin,value", *text.split()]) for name, text in given}
    return design.build([readers.read(Source(name=f"{name}.csv", data=text.encode())) for name, text in rows.items()])


FIRST = "+3V3,R1,1,10k SENSE_FILTERED,R1,2 SENSE_FILTERED,C1,1,1u GND,C1,2 SDA,U1,1,X SDA,R2,1,1k SCL,U1,2 SCL,R3,1,1k"


def test_a_second_netlist_adds_pins_but_does_not_move_them() -> None:
    made = netlists("A,R1,1 A,C1,1 A,C2,1", "B,R1,1 B,C1,1 B,R1,2 C,C2,1")
    assert [(pin.number, pin.net) for pin in made.parts["R1"].pins] == [("1", "A"), ("2", "A")]
    assert [str(remark.text) for remark in remarks(made)] == [
        "pin 1 of C2 is on 'C'; 'A' of a.csv:4:1 stands",
        "nets with the same pins have other names in a.csv: 'B' is 'A'; the latter stand",
    ]


def test_netlists_that_connect_alike_agree_though_names_are_cut_off_or_made_up() -> None:
    other = FIRST.replace("SENSE_FILTERED", "sense_filt").replace("SDA", "#17").replace("SCL", "Net-(U1-Pad2)")
    made = netlists(FIRST, other.replace(",10k", "").replace(",1u", "").replace(",1k", "").replace(",X", ""))
    assert not remarks(made)
    assert [*made.nets] == ["+3V3", "GND", "SCL", "SDA", "SENSE_FILTERED"]


def test_nets_that_are_joined_or_swapped_are_told_with_both_places() -> None:
    joined = netlists(FIRST, FIRST.replace("GND", "SENSE_FILTERED"))
    assert [f"{remark.place}: {remark.text}" for remark in remarks(joined)] == [
        "b.csv:5:1: pin 2 of C1 is on 'SENSE_FILTERED'; 'GND' of a.csv:5:1 stands"
    ]
    swapped = netlists(FIRST, FIRST.replace("SDA", "x").replace("SCL", "SDA").replace("x", "SCL"))
    assert [remark.text for remark in remarks(swapped)] == [
        "nets with the same pins have other names in a.csv: 'SCL' is 'SDA', 'SDA' is 'SCL'; the latter stand"
    ]


def test_a_netlist_without_values_gives_no_names_whatever_the_order() -> None:
    bare = "SENSE_FI,R1,2 SENSE_FI,C1,1"
    assert [*netlists(bare, FIRST).nets] == [*netlists(FIRST, bare).nets] == [*netlists(FIRST).nets]


def test_the_order_of_the_inputs_changes_nothing_that_is_decided() -> None:
    one, other = exports()
    assert design.build([one, other]).parts == design.build([other, one]).parts


def test_natural_order_counts_runs_of_digits() -> None:
    names = ["R10", "R2", "r1", "R2A", "10", "9", "A1B10", "A1B9", ""]
    assert sorted(names, key=design.natural) == ["", "9", "10", "A1B9", "A1B10", "R2", "R2A", "R10", "r1"]


def test_two_pads_of_one_number_are_two_connections():
    """A netlist that lists a pin twice on its net means two pads."""
    nets = '<net code="1" name="GND"><node ref="U1" pin="2"/><node ref="U1" pin="2"/></net>'
    made = built(None, f'<export version="E"><components><comp ref="U1"/></components><nets>{nets}</nets></export>')
    assert [pin.number for pin in made.nets["GND"].pins] == ["2", "2"]


def test_netlists_of_two_boards_are_refused() -> None:
    first = " ".join(f"A{number // 3},R{number},1" for number in range(9))
    second = " ".join(f"B{number % 3},R{number},1" for number in range(9))
    with pytest.raises(UserMistake, match=r"this netlist and a\.csv are not of one board") as caught:
        netlists(first, second)
    assert caught.value.mistakes[0].found == "6 of 9 common pins on other nets: R1.1 on 'B1' and on 'A0'"
