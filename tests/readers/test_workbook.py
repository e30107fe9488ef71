"""Workbooks as BOMs: the structure of ECMA-376 part 1, written by hand here."""

import zipfile
from io import BytesIO
from xml.sax.saxutils import escape

import pytest

from rcrules.errors import UserMistake
from rcrules.readers import Export, Source, read

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
OFFICE = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
PACKAGE = "http://schemas.openxmlformats.org/package/2006/relationships"
Rows = list[list[str]]


def inline(text: str) -> str:
    return f'<c t="inlineStr"><is><t>{escape(text)}</t></is></c>'


def sheet(rows: Rows) -> str:
    """A sheet of cells, each given as XML or as a plain text."""
    lines = ["".join(cell if cell.startswith("<c") else inline(cell) for cell in row) for row in rows]
    inside = "".join(f"<row>{line}</row>" for line in lines)
    return f'<worksheet xmlns="{MAIN}"><sheetData>{inside}</sheetData></worksheet>'


def workbook(
    *sheets: tuple[str, str], strings: str = "", hidden: str = "", extra: dict[str, bytes] | None = None
) -> bytes:
    names = "".join(
        f'<sheet name="{name}" sheetId="{at}" r:id="r{at}" state="{"hidden" if name == hidden else "visible"}"/>'
        for at, (name, _) in enumerate(sheets)
    )
    links = "".join(f'<Relationship Id="r{at}" Target="worksheets/s{at}.xml"/>' for at in range(len(sheets)))
    stream = BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("[Content_Types].xml", "<Types/>")
        archive.writestr(
            "xl/workbook.xml", f'<workbook xmlns="{MAIN}" xmlns:r="{OFFICE}"><sheets>{names}</sheets></workbook>'
        )
        archive.writestr("xl/_rels/workbook.xml.rels", f'<Relationships xmlns="{PACKAGE}">{links}</Relationships>')
        for at, (_, text) in enumerate(sheets):
            archive.writestr(f"xl/worksheets/s{at}.xml", text)
        if strings:
            archive.writestr("xl/sharedStrings.xml", f'<sst xmlns="{MAIN}">{strings}</sst>')
        for name, data in (extra or {}).items():
            archive.writestr(name, data)
    return stream.getvalue()


def export(data: bytes) -> Export:
    return read(Source(name="bom.xlsx", data=data))


def refusal(data: bytes) -> str:
    with pytest.raises(UserMistake) as caught:
        export(data)
    return str(caught.value)


BOM = [["Gauge"], ["Reference", "Value", "Qty"], ["R1, R2", "4k7", "2"], ["C1", "100n", "1"]]


def test_a_sheet_with_a_title_row_is_read_with_its_places():
    found = export(workbook(("Parts", sheet(BOM))))
    assert [(part.ref, part.value.text) for part in found.parts if part.value] == [
        ("R1", "4k7"),
        ("R2", "4k7"),
        ("C1", "100n"),
    ]
    assert str(found.parts[2].value.place) == "bom.xlsx!Parts:4:2"
    assert found.kind == "bom"
    assert found.remarks == ()


def test_shared_strings_are_joined_from_their_runs_without_phonetic_hints():
    strings = "<si><t>Reference</t></si><si><r><t>4</t></r><r><t>k7</t></r><rPh><t>x</t></rPh></si>"
    rows = [['<c t="s"><v>0</v></c>', "Value"], ["R1", '<c t="s"><v>1</v></c>']]
    (part,) = export(workbook(("S", sheet(rows)), strings=strings)).parts
    assert part.value is not None
    assert part.value.text == "4k7"


@pytest.mark.parametrize(
    ("stored", "text"), [("270", "270"), ("4.7000000000000002", "4.7"), ("1E-7", "1e-07"), ("270.0", "270.0")]
)
def test_a_stored_number_is_the_shortest_text_that_reads_back(stored: str, text: str):
    (part,) = export(workbook(("S", sheet([["Reference", "Value"], ["R1", f"<c><v>{stored}</v></c>"]])))).parts
    assert part.value is not None
    assert part.value.text == text


def test_an_address_places_its_cell_and_gaps_stay_empty():
    rows = [["Reference", "Note", "Value"], ['<c r="A2" t="str"><v>R1</v></c><c r="C2" t="str"><v>10k</v></c>']]
    (part,) = export(workbook(("S", sheet(rows)))).parts
    assert part.value is not None
    assert part.value.text == "10k"


def test_errors_and_formulas_without_a_result_are_told():
    rows = [["Reference", "Value"], ["R1", '<c t="e"><v>#REF!</v></c>'], ["R2", "<c><f>A1</f></c>"], ["R3", "1k"]]
    found = export(workbook(("S", sheet(rows))))
    (remark,) = found.remarks
    assert "2 cells hold an error" in remark.text
    assert str(remark.place) == "bom.xlsx!S:2:2"


def test_hidden_sheets_are_left_out_and_a_second_table_is_told():
    other = sheet([["Reference", "Value"], ["R9", "1k"]])
    data = workbook(("Old", other), ("Parts", sheet(BOM)), ("Spare", other), hidden="Old")
    found = export(data)
    assert [part.ref for part in found.parts] == ["R1", "R2", "C1"]
    assert "'Spare' hold references too" in found.remarks[0].text


def test_quantities_that_are_all_nought_are_not_compared():
    rows = [["Reference", "Value", "Qty"], *([f"R{at}", "1k", "<c><v>0</v></c>"] for at in range(1, 6))]
    (remark,) = export(workbook(("S", sheet(rows)))).remarks
    assert remark.text == "every quantity is 0; quantities are not compared"


def test_pieces_of_a_part_are_no_parts():
    found = export(workbook(("S", sheet([["Reference", "Value"], ["J1#1, J1#2", "HOUSING"], ["J2", "PLUG"]]))))
    assert [part.ref for part in found.parts] == ["J2"]
    assert "J1#1, J1#2" in found.remarks[0].text


def test_a_workbook_without_references_is_refused():
    text = refusal(workbook(("Notes", sheet([["a", "b"], ["c", "d"]]))))
    assert "no column of references found in the workbook" in text
    assert "'Notes'" in text


def test_a_bomb_is_refused_by_what_it_declares():
    assert "more or larger entries" in refusal(
        workbook(("S", sheet(BOM)), extra={"xl/big.xml": b" " * (65 * 1024 * 1024)})
    )


def test_a_document_type_inside_is_refused():
    bomb = f'<!DOCTYPE w [<!ENTITY a "b">]>{sheet(BOM)}'
    assert "workbook cannot be read" in refusal(workbook(("S", bomb)))


def test_a_far_cell_is_refused():
    rows = [["Reference", "Value"], ['<c r="XFD1048576" t="str"><v>R1</v></c>']]
    assert "beyond column" in refusal(workbook(("S", sheet(rows))))


def test_a_cut_workbook_is_refused_in_one_message():
    data = workbook(("S", sheet(BOM)))
    assert refusal(data[: len(data) // 2]).count("\n  do") == 1


def test_another_archive_is_named():
    stream = BytesIO()
    with zipfile.ZipFile(stream, "w") as archive:
        archive.writestr("readme.txt", "x")
    assert "ZIP" in refusal(stream.getvalue())


def test_a_workbook_that_unpacks_to_more_than_any_bom_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    head = [["Ref", "Value"], ["R1", "10k"]]
    monkeypatch.setattr("rcrules.readers._sheets.MAX_STRINGS", 3)
    assert "more than 3 texts" in refusal(workbook(("BOM", sheet(head)), strings="<si><t>a</t></si>" * 4))
    monkeypatch.setattr("rcrules.readers._sheets.MAX_CELLS", 5)
    assert "or 5 cells in sheet 'BOM'" in refusal(workbook(("BOM", sheet([*head, ['<c r="C9"/>', "C1"]]))))
    monkeypatch.setattr("rcrules.readers._xml.MAX_MARKS", 1000)
    junk = sheet(head).replace("<sheetData>", "<sheetData>" + "<a/>" * 1000)
    assert "too much inside one component, net or row" in refusal(workbook(("BOM", junk)))


def test_numbers_that_are_none_are_texts() -> None:
    rows = [["Ref", "Value"], ["R1", "<c><v>1e999</v></c>"], ["R2", "<c><v>nan</v></c>"]]
    parts = export(workbook(("BOM", sheet(rows)))).parts
    assert [part.value.text for part in parts if part.value] == ["1e999", "nan"]
