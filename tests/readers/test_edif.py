"""EDIF 2 0 0 netlists, the circuits written by hand."""

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, ExportPart, Limits, Source

PARTS = """(library PARTS (edifLevel 0)
 (technology (numberDefinition (scale 1 (E 1 -12) (unit CAPACITANCE))))
 (cell RES (cellType GENERIC) (view NL (viewType NETLIST)
  (interface (port &1 (direction INOUT) (designator "1")) (port &2 (direction INOUT) (designator "2")))))
 (cell CAP (cellType GENERIC) (view NL (viewType NETLIST)
  (interface (port &1 (direction INOUT)) (port &2 (direction INOUT)))))
 (cell HDR (cellType GENERIC) (view NL (viewType NETLIST)
  (interface (port (array (rename P "P[1:2]") 2) (direction INOUT)))))
 (cell IC (cellType GENERIC) (view NL (viewType NETLIST)
  (interface (port NRST (direction INPUT) (designator "7")) (port Q (direction OUTPUT) (designator "8"))
   (port (array (rename D "D[1:0]") 2) (direction INOUT)) (property Package (string "QFN8"))))))
"""


def edif(contents: str, *, design: str = "(design TINY (cellRef TOP (libraryRef D)))", cells: str = "") -> str:
    """A file whose board holds the given instances and nets."""
    return (
        f"(edif TINY (edifVersion 2 0 0) (edifLevel 0) (keywordMap (keywordLevel 0))\n{PARTS}"
        f"(library D (edifLevel 0) (technology (numberDefinition)) {cells}\n"
        f"(cell TOP (cellType GENERIC) (view NL (viewType NETLIST) (interface)\n(contents {contents}))))\n{design})"
    )


def placed(name: str, cell: str, more: str = "", library: str = "(libraryRef PARTS)") -> str:
    return f"(instance {name} (viewRef NL (cellRef {cell} {library})) {more})\n"


def net(name: str, *ends: str, more: str = "") -> str:
    """A net of ends such as ``R1.&1``, or ``IN`` for a port of the cell itself."""
    written = []
    for end in ends:
        instance, _, port = end.rpartition(".")
        written.append(f"(portRef {port} (instanceRef {instance}))" if instance else f"(portRef {port})")
    return f"(net {name} (joined {' '.join(written)}){more})\n"


TWO = placed("R1", "RES") + placed("C1", "CAP")
FILTER = """(cell RCF (cellType GENERIC) (view NL (viewType NETLIST)
 (interface (port IN (direction INPUT)) (port OUT (direction OUTPUT)) (port COM (direction INOUT)))
 (contents
  (instance R1 (viewRef NL (cellRef RES (libraryRef PARTS))) (designator "R1") (property VALUE (string "4k7 1%37%")))
  (instance C1 (viewRef NL (cellRef CAP (libraryRef PARTS))) (designator "C1") (property VALUE (string "100n")))
  (net IN (joined (portRef IN) (portRef &1 (instanceRef R1))))
  (net OUT (joined (portRef OUT) (portRef &2 (instanceRef R1)) (portRef &1 (instanceRef C1))))
  (net COM (joined (portRef COM) (portRef &2 (instanceRef C1)))))))"""


def read(text: str) -> Export:
    return readers.read(Source(name="board.edn", data=text.encode()))


def refused(text: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(text)
    return caught.value.mistakes[0]


def ends(export: Export) -> dict[str, list[str]]:
    """Part and pin of each connection by net."""
    found: dict[str, list[str]] = {name: [] for name, _ in export.nets}
    for pin in export.pins:
        found[pin.net].append(f"{pin.ref}.{pin.number}")
    return found


def part(export: Export, ref: str) -> ExportPart:
    return next(part for part in export.parts if part.ref == ref)


def value(export: Export, ref: str) -> str | None:
    cell = part(export, ref).value
    return cell.text if cell is not None else None


def test_a_block_is_flattened_and_the_outer_names_of_its_nets_stand() -> None:
    top = placed("F1", "RCF", library="") + placed("J1", "HDR", '(designator "J1")')
    top += '(net (rename VIN_ "+VIN") (joined (portRef IN (instanceRef F1)) (portRef (member P 0) (instanceRef J1))))'
    top += (
        net("SENSE", "F1.OUT")
        + "(net GND (joined (portRef COM (instanceRef F1)) (portRef (member P 1) (instanceRef J1))))"
    )
    export = read(edif(top, cells=FILTER))
    assert (export.reader, export.kind, export.title) == ("edif", "netlist", "TINY")
    assert ends(export) == {"+VIN": ["J1.1", "F1/R1.1"], "SENSE": ["F1/R1.2", "F1/C1.1"], "GND": ["J1.2", "F1/C1.2"]}
    assert (value(export, "F1/R1"), value(export, "F1/C1")) == ("4k7 1%", "100n")
    assert (part(export, "F1/R1").sheet, part(export, "F1/R1").symbol) == ("F1", "parts:RES")


def test_a_block_placed_twice_is_two_circuits_with_inner_nets_of_their_own() -> None:
    inner = FILTER.replace("(net OUT (joined (portRef OUT)", "(net MID (joined")
    top = placed("F1", "RCF", library="") + placed("F2", "RCF", library="") + net("GND", "F1.COM", "F2.COM")
    export = read(edif(top, cells=inner))
    assert ends(export)["F1/MID"] == ["F1/R1.2", "F1/C1.1"]
    assert ends(export)["F2/MID"] == ["F2/R1.2", "F2/C1.1"]
    assert ends(export)["GND"] == ["F1/C1.2", "F2/C1.2"]


def test_parts_pins_and_nets_have_lines() -> None:
    text = edif("\n" + TWO + net("A", "R1.&1") + net("B", "R1.&2", "C1.&1"))
    export = read(text)
    lines = text.splitlines()
    assert lines[(part(export, "C1").place.line or 0) - 1].startswith("(instance C1")
    assert lines[(export.pins[-1].place.line or 0) - 1].startswith("(net B")
    assert lines[(export.nets[0][1].line or 0) - 1].startswith("(net A")


def test_case_does_not_count_in_keywords_and_identifiers() -> None:
    text = edif(TWO + "(Net video2 (Joined (PortRef &2 (InstanceRef r1)) (portref &1 (instanceref c1))))")
    text = text.replace("(cellRef RES", "(CellRef res").replace("(library D", "(Library d")
    assert ends(read(text)) == {"video2": ["R1.2", "C1.1"]}


def test_renamed_names_are_shown_and_identifiers_are_looked_up() -> None:
    top = '(instance (rename I_7 "R7/a") (viewRef NL (cellRef RES (libraryRef PARTS))))'
    top += '(net (rename N_1 "~{RST}") (joined (portRef &1 (instanceRef I_7))))'
    top += '(net (rename N_2 (stringDisplay "+3V3" (display D))) (joined (portRef (name &2) (instanceRef (name I_7)))))'
    assert ends(read(edif(top))) == {"~{RST}": ["R7/a.1"], "+3V3": ["R7/a.2"]}


def test_names_that_differ_only_in_case_are_two_nets() -> None:
    top = TWO + '(net (rename A1 "Vin") (joined (portRef &1 (instanceRef R1))))'
    top += '(net (rename A2 "VIN") (joined (portRef &1 (instanceRef C1))))'
    assert ends(read(edif(top))) == {"Vin": ["R1.1"], "VIN": ["C1.1"]}


def test_pages_hold_the_parts_and_nets_of_one_name_are_one() -> None:
    pages = "(page P1 " + placed("R1", "RES") + net("MID", "R1.&2") + ")"
    pages += "(page P2 " + placed("C1", "CAP") + net("MID", "C1.&1")
    pages += '(net (rename OTHER "MID") (joined (portRef &2 (instanceRef C1)))))'
    assert ends(read(edif(pages))) == {"MID": ["R1.2", "C1.1", "C1.2"]}


def test_connectors_between_pages_join_their_nets() -> None:
    pages = "(page P1 " + placed("R1", "RES") + "(offPageConnector X)" + net("N1", "R1.&2", "X") + ")"
    pages += "(page P2 " + placed("C1", "CAP") + net("N2", "C1.&1", "X") + ")"
    assert ends(read(edif(pages))) == {"N1": ["R1.2", "C1.1"]}


def test_segments_bundles_and_global_references_are_followed() -> None:
    top = TWO + net("A", "R1.&1", more=net("inner", "C1.&1"))
    top += "(netBundle B (listOfNets " + net("B0", "R1.&2") + net("B1", "C1.&2", more="(property P (string x))") + "))"
    assert ends(read(edif(top))) == {"A": ["R1.1", "C1.1"], "B0": ["R1.2"], "B1": ["C1.2"]}
    inner = FILTER.replace("(portRef COM) ", "(globalPortRef GND) ")
    export = read(
        edif(
            placed("F1", "RCF", library="")
            + placed("C9", "CAP")
            + net("G", "C9.&1").replace("(joined", "(joined (globalPortRef gnd)"),
            cells=inner,
        )
    )
    assert ends(export)["gnd"] == ["C9.1", "F1/C1.2"]


def test_arrays_of_nets_and_ports_are_joined_member_by_member() -> None:
    top = placed("U1", "IC") + placed("R1", "RES")
    top += '(net (array (rename B "B[7:6]") 2) (joined (portRef D (instanceRef U1))))'
    top += '(net (rename B6 "B[6]") (joined (portRef &1 (instanceRef R1))))'
    assert ends(read(edif(top))) == {"B[7]": ["U1.D[1]"], "B[6]": ["U1.D[0]", "R1.1"]}


def test_arrays_of_instances_are_parts_of_their_own() -> None:
    top = '(instance (array (rename R "R[1:2]") 2) (viewRef NL (cellRef RES (libraryRef PARTS))))'
    top += net("A", "R.&1") + "(net B (joined (portRef &2 (instanceRef (member R 1)))))"
    assert ends(read(edif(top))) == {"A": ["R[1].1", "R[2].1"], "B": ["R[2].2"]}


def test_pin_numbers_are_designators_of_the_placement_or_the_port() -> None:
    top = (
        placed("U1", "IC", '(portInstance Q (designator "12"))')
        + net("A", "U1.NRST")
        + net("B", "U1.Q")
        + net("C", "U1.d")
    )
    pins = {(pin.number, pin.name, pin.type) for pin in read(edif(top)).pins}
    assert {("7", "NRST", "input"), ("12", "Q", "output")} < pins


def test_sections_of_one_part_are_one_part() -> None:
    gate = placed(
        "G{0}", "RES", '(designator "U1") (portInstance &1 (designator "{0}1")) (portInstance &2 (designator "{0}2"))'
    )
    export = read(edif(gate.format(1) + gate.format(2) + net("A", "G1.&1", "G2.&2")))
    assert ([part.ref for part in export.parts], ends(export)) == (["U1"], {"A": ["U1.11", "U1.22"]})
    assert export.remarks == ()


def test_a_bare_percent_sign_stays_and_codes_between_two_are_characters() -> None:
    for written, meant in (
        ("1%", "1%"),
        ("10% 50V", "10% 50V"),
        ("5%% 10%", "5%% 10%"),
        ("3%34%%37 65%", '3"%A'),
        ("1%999%", "1%999%"),
        ("a%0%b", "a%0%b"),
        ("C:\\parts\\", "C:\\parts\\"),
        ("two\nlines", "twolines"),
    ):
        assert (
            value(read(edif(placed("R1", "RES", f'(property Value (string "{written}"))') + net("A", "R1.&1"))), "R1")
            == meant
        )


def test_properties_are_fields_and_one_of_them_is_the_value() -> None:
    more = '(property Comment (string "10k")) (property (rename DNP_ "Do Not Fit") (boolean (true)))'
    more += '(property PCB Footprint (string "R0402")) (property TOL (number (e 5 -1))) (property N (integer 3))'
    export = read(edif(placed("R1", "RES", more) + placed("U1", "IC") + net("A", "R1.&1")))
    found = part(export, "R1")
    assert (value(export, "R1"), found.footprint, found.fitted) == ("10k", "R0402", False)
    assert (found.fields["TOL"].text, found.fields["N"].text) == ("0.5", "3")
    assert part(export, "U1").footprint == "QFN8"


def test_numbers_with_a_unit_are_scaled_by_their_library() -> None:
    scale = "(technology (numberDefinition (scale 1 (E 1 -12) (unit CAPACITANCE))))"
    for written in ("(number 100)", "(integer 100)", "(number (e 1 2))", "(miNoMax (mnm 90 100 110))"):
        text = edif(placed("C1", "CAP", f"(property VALUE {written} (unit CAPACITANCE))") + net("A", "C1.&1"))
        text = text.replace("(technology (numberDefinition)) ", scale)
        assert value(read(text), "C1") == "1e-10 F"


def test_symbols_that_name_a_net_are_no_parts() -> None:
    supply = "(cell VCC (cellType GENERIC) (view NL (viewType NETLIST) (interface (port P (direction INOUT)))))"
    top = placed("R1", "RES") + placed("I3", "VCC", library="") + net("VCC", "R1.&1", "I3.P")
    export = read(edif(top, cells=supply))
    assert ends(export) == {"VCC": ["R1.1"]}
    assert export.remarks[0].text == "1 placed symbols that only name their net are no parts"
    point = placed("TP1", "VCC", '(designator "TP1")', library="")
    assert len(read(edif(point + net("VCC", "TP1.P"), cells=supply)).parts) == 1


def test_a_reference_to_a_cell_or_instance_that_is_not_there_is_told_or_kept() -> None:
    export = read(edif(placed("X1", "GONE") + net("A", "X1.&1", "R9.&1")))
    assert ends(export) == {"A": ["X1.1"]}
    assert "1 connections to instances that the file does not hold are left out: 'r9'" in export.remarks[0].text


def test_without_a_design_the_cell_that_no_other_places_is_taken() -> None:
    export = read(edif(placed("F1", "RCF", library="") + net("A", "F1.IN"), design="", cells=FILTER))
    assert ends(export)["A"] == ["F1/R1.1"]
    assert export.remarks[0].text == "the file names no design; the cell 'TOP', which no other places, is taken"
    twice = edif(TWO + net("A", "R1.&1"), design="(design A (cellRef TOP)) (design B (cellRef RCF))", cells=FILTER)
    assert "names no one design" in read(twice).remarks[0].text


def test_a_cell_that_contains_itself_is_refused() -> None:
    other = "(cell OTHER (cellType GENERIC) (view NL (viewType NETLIST) (interface) (contents "
    mistake = refused(edif(placed("X", "OTHER", library=""), cells=other + placed("Y", "TOP", library="") + "))) "))
    assert (mistake.problem, mistake.found) == ("a cell contains itself", "OTHER in TOP in OTHER")


def test_blocks_that_multiply_without_end_are_refused() -> None:
    cells = "".join(
        f"(cell B{level} (cellType GENERIC) (view NL (viewType NETLIST) (interface) (contents "
        + "".join(
            placed(f"X{n}", f"B{level - 1}" if level else "RES", library="" if level else "(libraryRef PARTS)")
            for n in range(10)
        )
        + ")))"
        for level in range(40)
    )
    text = edif(placed("X", "B39", library=""), cells=cells)
    with pytest.raises(UserMistake, match="the file holds too many parts"):
        readers.read(Source(name="a", data=text.encode(), limits=Limits(parts=10_000)))


def test_other_versions_and_files_without_a_board_are_refused() -> None:
    assert refused(edif("").replace("2 0 0", "4 0 0")).found == "4 0 0"
    assert "no cell with instances" in refused(edif("")).problem
    assert refused("(edif X (edifLevel 0))").problem == "the EDIF file does not say its version"


def test_damage_is_pointed_at() -> None:
    whole = edif(TWO + net("A", "R1.&1"))
    assert refused(whole[:-40]).problem == "the file ends inside a bracket"
    assert refused(whole + "\n)").problem == "text after the end of the netlist"
    assert refused("(edif " + "(a " * 300_000).problem == "brackets nested too deeply"
    assert refused(edif(placed("R" * 2000, "RES"))).problem == "a name is too long"
    wide = "(net (array A 9999999) (joined))"
    assert refused(edif(wide)).problem == "the file holds too many members of one array"
