"""BOMs as delimited text, with the troubles of real ones."""

import pytest

from rcrules import readers
from rcrules.readers import Export, ExportPart, Source


def read(text: str | bytes, **columns: str) -> Export:
    data = text if isinstance(text, bytes) else text.encode()
    return readers.read(Source(name="bom.csv", data=data), columns)


def values(export: Export) -> dict[str, str]:
    return {part.ref: part.value.text if part.value else "" for part in export.parts}


def only(export: Export) -> ExportPart:
    (part,) = export.parts
    return part


def test_a_plain_bom_keeps_every_column_and_place() -> None:
    export = read('Reference,Qty,Value,Footprint,Voltage\n"C1, C2",2,100n,0603,16 V\nR1,1,10k,0402,\n')
    assert (export.reader, export.kind, values(export)) == ("bom", "bom", {"C1": "100n", "C2": "100n", "R1": "10k"})
    second = export.parts[1]
    assert second.footprint == "0603"
    assert second.fields["Voltage"].text == "16 V"
    assert (second.fields["Voltage"].place.line, second.fields["Voltage"].place.column) == (2, 22)
    assert second.value is not None
    assert (str(second.place), str(second.value.place)) == ("bom.csv:2:1", "bom.csv:2:12")
    assert "Voltage" not in export.parts[2].fields
    assert export.remarks == ()


@pytest.mark.parametrize("delimiter", [",", ";", "\t", "|"])
def test_the_delimiter_is_found(delimiter: str) -> None:
    text = delimiter.join(["Ref", "Value", "Note"]) + "\n" + delimiter.join(["R1", '"4,7k; 1%"', "x"]) + "\n"
    assert values(read(text)) == {"R1": "4,7k; 1%"}


def test_lists_with_commas_do_not_mislead_a_table_with_semicolons() -> None:
    text = "REF;VALUE;CANT\n" + "".join(f"C{n}1, C{n}2, C{n}3;10nF;3\n" for n in range(1, 9))
    assert len(read(text).parts) == 24


def test_title_rows_and_comments_are_passed_over() -> None:
    text = "Source:,/a/board.sch\nTitle,harbour gauge\nComponent Count:,1\n\n\nRef,Value\n### passives\nR1,10k\n"
    export = read(text)
    assert (values(export), export.title, export.remarks) == ({"R1": "10k"}, "harbour gauge", ())


def test_two_tables_of_one_board_give_each_reference_once() -> None:
    text = (
        "Individual Components:\n\nItem,Qty,Reference(s),Value,LibPart\n,,C1,100n,device:C\n,,C2,100n,device:C\n\n"
        'Collated Components:\n\nItem,Qty,Reference(s),Value,LibPart,Tol\n1,2,"C1, C2",100n,device:C,5%\n'
    )
    export = read(text)
    assert (values(export), export.remarks) == ({"C1": "100n", "C2": "100n"}, ())
    assert export.parts[0].symbol == "device:C"
    assert export.parts[0].fields["Tol"].text == "5%"


def test_a_reference_with_two_values_is_said_and_the_first_stands() -> None:
    export = read("Ref,Value\nR1,10k\nR1,12k\n")
    assert values(export) == {"R1": "10k"}
    assert export.remarks[0].text == "R1 is listed again with value '12k' instead of '10k'; line 2 stands"


def test_a_table_without_header_is_told_by_its_cells() -> None:
    export = read('15p,2,"C79 C81"\nQX-913,1,"BT1"\n10k,3,"R1 R2 R3"\n')
    assert values(export)["C81"] == "15p"
    assert export.remarks[0].text == "no header row; column 3 is taken as references, column 1 as values"


def test_a_header_sorted_to_the_last_row_still_counts() -> None:
    export = read("C1,100n,0603\nR1,10k,0402\nReference,Value,Package\n")
    assert values(export) == {"C1": "100n", "R1": "10k"}
    assert export.parts[1].footprint == "0402"
    assert export.remarks[0].text == "the header stands in the last row"


def test_blanks_after_commas_in_header_and_rows_do_no_harm() -> None:
    assert values(read('Reference, Quantity, Value\nC1 C2 ,2, "100n"\n')) == {"C1": "100n", "C2": "100n"}


@pytest.mark.parametrize(
    ("cell", "refs"),
    [
        ("P101-P103,P107", ["P101", "P102", "P103", "P107"]),
        ("R1-4", ["R1", "R2", "R3", "R4"]),
        ("R1..R3", ["R1", "R2", "R3"]),
        ("R01 – R03", ["R01", "R02", "R03"]),
        ("R1 to R3;R9", ["R1", "R2", "R3", "R9"]),
        ("R4-R1", ["R4-R1"]),
        ("R1-C4", ["R1-C4"]),
        ("U1-A", ["U1-A"]),
        ("C1,C2,", ["C1", "C2"]),
        ("C1\nC2", ["C1", "C2"]),
        ("LOGO", ["LOGO"]),
    ],
)
def test_lists_and_ranges_of_references(cell: str, refs: list[str]) -> None:
    assert [part.ref for part in read(f'Ref,Value\n"{cell}",x\nQ9,y\n').parts][:-1] == refs


def test_a_range_stays_one_name_where_the_quantity_says_so() -> None:
    assert [part.ref for part in read("Ref,Qty,Value\nR1-4,1,10k\nR9,1,1k\n").parts] == ["R1-4", "R9"]


def test_a_quantity_that_contradicts_the_list_is_said() -> None:
    export = read('Ref,Qty,Value\n"R1,R2",3,10k\nR3,1,1k\n')
    assert len(export.parts) == 3
    assert str(export.remarks[0].place) == "bom.csv:2:9"
    assert export.remarks[0].text == "quantity 3, but 2 references: R1, R2"


def test_quantities_for_several_boards_are_said_once() -> None:
    rows = "".join(f'"R{n}1,R{n}2",10,1k\n' for n in range(1, 6))
    remarks = read(f"Ref,Qty,Value\n{rows}").remarks
    assert [remark.text for remark in remarks] == [
        "every quantity is 5 times the number of references; taken as for 5 boards"
    ]


def test_rows_without_references_are_said() -> None:
    export = read("Ref,Value\nR1,10k\n,screw M3\n,washer\n")
    assert export.remarks == ()
    export = read("Ref,Qty,Value\nR1,1,10k\n,4,screw M3\n")
    assert export.remarks[0].text == "rows without references left out: line 3 (the first: '4 | screw M3')"


@pytest.mark.parametrize(
    "header", ["Value", "Comment", "Name", "Part", "Description", "Designation", "Valor", "LibRef", "VALUE", "Wert"]
)
def test_the_value_column_has_many_names(header: str) -> None:
    assert values(read(f"Designator,{header}\nR1,10k\n")) == {"R1": "10k"}


@pytest.mark.parametrize(
    "header", ["Reference(s)", "Designator", "Ref Des", "RefDes", "Refs", "REF", "Part Reference", "Referencia"]
)
def test_the_reference_column_has_many_names(header: str) -> None:
    assert values(read(f"Value;{header}\n10k;R1\n")) == {"R1": "10k"}


def test_a_value_column_wins_over_a_comment_and_the_description_is_kept() -> None:
    part = only(read("Ref,Comment,Value,Description\nC1,near U1,1u,CAP 1UF 16V\n"))
    assert part.value is not None
    assert (part.value.text, part.description, part.fields["Comment"].text) == ("1u", "CAP 1UF 16V", "near U1")


def test_two_value_columns_are_kept_beside_a_composed_value() -> None:
    part = only(read("Reference, Value, Value1, Value2\nC1,CAP_10u0_25V_0805,10u0,20% 25V X5R\n"))
    assert part.value is not None
    assert part.value.text == "CAP_10u0_25V_0805"
    assert {name: cell.text for name, cell in part.fields.items()} == {"Value1": "10u0", "Value2": "20% 25V X5R"}


def test_the_same_header_twice_loses_no_cell() -> None:
    export = read("Ref,Value,Note,Note\nR1,10k,a,b\n")
    assert {name: cell.text for name, cell in only(export).fields.items()} == {"Note": "a", "Note (2)": "b"}
    assert "two columns are headed 'Note'" in export.remarks[0].text


@pytest.mark.parametrize(
    ("header", "cell", "fitted"),
    [
        ("DNP", "X", False),
        ("DNP", "1", False),
        ("DNP", "no", True),
        ("DNP", "", None),
        ("Populate", "No", False),
        ("Populate", "yes", True),
        ("Mounted", "0", False),
        ("Mounted", "", None),
        ("Fitted", "DNP", False),
        ("MPN", "DNP", False),
        ("Note", "do not populate", False),
        ("Note", "near the DNPX chip", None),
        ("Remarks", "n.p.", False),
    ],
)
def test_columns_say_whether_a_part_is_fitted(header: str, cell: str, fitted: bool | None) -> None:
    assert only(read(f"Ref,Value,{header}\nR1,10k,{cell}\n")).fitted is fitted


@pytest.mark.parametrize(
    "value",
    [
        *("DNP", "dnp", "DNI", "OPT", "TBD", "n.p.", "No Soldar", "DO NOT POPULATE", "0R-DNP", "dnp 100p"),
        *("22ohm (DNP)", "120k n.p.", "100 - No Soldar", "not fitted"),
    ],
)
def test_value_texts_say_that_a_part_is_not_fitted(value: str) -> None:
    part = only(read(f"Ref,Value\nR1,{value}\n"))
    assert (part.fitted, part.fitted_why) == (False, f"value {value!r}")


@pytest.mark.parametrize("value", ["10k", "100n", "4.7n/NP0", "OPTO-4", "22p/NP0", "NCP 10", "10k OPT2"])
def test_value_texts_that_only_look_like_it_are_fitted(value: str) -> None:
    assert only(read(f"Ref,Value\nR1,{value}\n")).fitted is None


def test_an_asterisk_is_said_and_the_part_is_taken_as_fitted() -> None:
    export = read("Ref,Value\nR1,10k*\nR2,10k\n")
    assert [part.fitted for part in export.parts] == [None, None]
    assert export.remarks[0].text == "values marked with an asterisk, taken as fitted: R1"


def test_windows_1252_is_read_with_a_remark_on_the_first_such_line() -> None:
    export = read("Ref,Value\nR1,10k\nC1,10 µF\n".encode("cp1252"))
    assert values(export)["C1"] == "10 µF"
    assert export.remarks[0].place.line == 3


def test_lines_in_utf_8_stay_whole_beside_lines_in_windows_1252() -> None:
    data = "Fecha de Generación\n".encode("cp1252") + "Ref,Value\nC1,10 µF\n".encode()
    assert values(read(data)) == {"C1": "10 µF"}


@pytest.mark.parametrize("encoding", ["utf-8-sig", "utf-16", "utf-16-le", "utf-16-be"])
def test_unicode_with_and_without_a_mark_is_read(encoding: str) -> None:
    assert values(read("ID\tName\tDesignator\n1\t4,7 µF\tC1\n2\t10k\tR1\n".encode(encoding)))["C1"] == "4,7 µF"


def test_a_spreadsheets_protection_of_texts_is_taken_off() -> None:
    assert only(read('Ref,Value,Package\nR1,10k,="0402"\n')).footprint == "0402"


def test_the_projects_column_names_come_first() -> None:
    text = "Ref,Value,Pos,Wert2,Tol.\nx,y,R1,10k,1%\n"
    export = read(text, reference="Pos", value="Wert2", tolerance="Tol.")
    assert values(export) == {"R1": "10k"}
    assert only(export).fields["tolerance"].text == "1%"


def test_a_column_name_of_the_project_that_is_no_header_is_said() -> None:
    export = read("Ref,Value\nR1,10k\n", value="Wert", net="Netz")
    assert values(export) == {"R1": "10k"}
    assert export.remarks[0].text == "[columns] value = 'Wert' is the header of no column here"


def test_a_header_alone_is_a_bom_without_parts() -> None:
    assert read("Reference,Value\n\n,\n").parts == ()


def test_a_decimal_comma_that_cuts_a_value_in_two_is_put_back_and_said() -> None:
    export = read("Ref,Value,Desc,Package\nR1,10k,,0402\nC2,4,7uF,CAP TANT 4,7uF 6,3V,1206\nU1,QX7301,A,SOT23,x\n")
    assert values(export) == {"R1": "10k", "C2": "4,7uF", "U1": "QX7301"}
    assert (export.parts[1].description, export.parts[1].footprint) == ("CAP TANT 4,7uF 6,3V", "1206")
    assert export.remarks[0].text == (
        "2 rows hold more cells than the header, for commas in cells that are not quoted; numbers cut in two are put "
        "together again in line 3; cells may stand in the wrong column in line 4"
    )


def test_a_first_row_longer_than_most_heads_is_still_a_table() -> None:
    assert values(read(f"Ref,Value,Note\nR1,10k,{'long ' * 3000}\nR2,1k,\n")) == {"R1": "10k", "R2": "1k"}
    wide = ",".join(f"extra {number}" for number in range(900))
    assert values(read(f"Ref,Value,{wide}\nR1,10k\n")) == {"R1": "10k"}
