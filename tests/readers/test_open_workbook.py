"""Workbooks as BOMs: the structure of an open document spreadsheet, written by hand here."""

import zipfile
from io import BytesIO
from xml.sax.saxutils import escape

import pytest

from rcrules.errors import UserMistake
from rcrules.readers import Export, Source, read

OFFICE = "urn:oasis:names:tc:opendocument:xmlns:office:1.0"
TABLE = "urn:oasis:names:tc:opendocument:xmlns:table:1.0"
TEXT = "urn:oasis:names:tc:opendocument:xmlns:text:1.0"
EMPTY = "<table:table-cell/>"


def cell(text: str, more: str = "") -> str:
    return f'<table:table-cell office:value-type="string" {more}><text:p>{escape(text)}</text:p></table:table-cell>'


def row(*cells: str, more: str = "") -> str:
    """A row of cells, each given as XML or as a plain text."""
    written = "".join(item if item.startswith("<") else cell(item) for item in cells)
    return f"<table:table-row {more}>{written}</table:table-row>"


def workbook(rows: str, name: str = "BOM", further: str = "", start: str = "") -> bytes:
    spaces = f'xmlns:office="{OFFICE}" xmlns:table="{TABLE}" xmlns:text="{TEXT}"'
    table = f'<table:table table:name="{name}">{rows}</table:table>{further}'
    content = f"{start}<office:document-content {spaces}><office:body>{table}</office:body></office:document-content>"
    stream = BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("mimetype", "application/vnd.oasis.opendocument.spreadsheet")
        archive.writestr("content.xml", content)
        archive.writestr("META-INF/manifest.xml", "<manifest/>")
    return stream.getvalue()


def export(data: bytes) -> Export:
    return read(Source(name="bom.ods", data=data))


def refusal(data: bytes) -> str:
    with pytest.raises(UserMistake) as caught:
        export(data)
    return str(caught.value)


HEAD = row("Ref", "Value")


def values(data: bytes) -> list[tuple[str, str | None]]:
    return [(part.ref, part.value.text if part.value else None) for part in export(data).parts]


def test_a_sheet_is_read_with_its_places() -> None:
    found = export(workbook(row("Gauge") + row("Ref", "Value", "Tol") + row("R1 R2", "4k7", "1 %")))
    assert (found.reader, found.kind) == ("bom-workbook", "bom")
    assert [part.ref for part in found.parts] == ["R1", "R2"]
    assert str(found.parts[0].place) == "bom.ods!BOM:3:1"
    assert found.parts[0].fields["Tol"].text == "1 %"


def test_repeated_rows_and_cells_count_for_places() -> None:
    gap = '<table:table-cell table:number-columns-repeated="2"/>'
    empty = row(EMPTY, more='table:number-rows-repeated="1000"')
    found = export(workbook(row(gap, "Ref", "Value") + empty + row(gap, "R1", "1k")))
    assert str(found.parts[0].place) == "bom.ods!BOM:1002:3"


def test_a_cell_that_is_repeated_stands_in_every_column() -> None:
    same = row(cell("Ref"), cell("Value")) + row("R1", cell("1k", 'table:number-columns-repeated="2"'))
    assert values(workbook(same)) == [("R1", "1k")]
    assert (
        export(workbook(row("Ref", "Value", "Note") + row("R1", cell("1k", 'table:number-columns-repeated="2"'))))
        .parts[0]
        .fields["Note"]
        .text
        == "1k"
    )


def test_numbers_are_taken_as_stored_and_not_as_shown() -> None:
    stored = '<table:table-cell office:value-type="float" office:value="{}"><text:p>4,70</text:p></table:table-cell>'
    assert values(workbook(HEAD + row("R1", stored.format("4.7000000000000002")))) == [("R1", "4.7")]
    assert values(workbook(HEAD + row("R1", stored.format("270")))) == [("R1", "270")]


def test_paragraphs_spans_and_blanks_are_one_text_without_notes() -> None:
    inside = "<text:p>100<text:s/><text:span>nF</text:span></text:p><text:p>16 V</text:p>"
    note = "<office:annotation><text:p>see below</text:p></office:annotation>"
    assert values(workbook(HEAD + row("C1", f"<table:table-cell>{note}{inside}</table:table-cell>"))) == [
        ("C1", "100 nF 16 V")
    ]


def test_errors_are_told() -> None:
    bad = '<table:table-cell office:value-type="error"><text:p>#REF!</text:p></table:table-cell>'
    found = export(workbook(HEAD + row("R1", bad)))
    assert (found.parts[0].value, "1 cells hold an error" in found.remarks[-1].text) == (None, True)


def test_a_second_table_is_told() -> None:
    other = f'<table:table table:name="Old">{HEAD + row("R9", "1k")}</table:table>'
    found = export(workbook(HEAD + row("R1", "1k"), further=other))
    assert [part.ref for part in found.parts] == ["R1"]
    assert "'Old' hold references too" in found.remarks[0].text


def test_what_is_out_of_bounds_is_refused() -> None:
    assert "beyond column 1024" in refusal(workbook(HEAD + row(cell("R1", 'table:number-columns-repeated="9999999"'))))
    many = row("R1", "1k", more='table:number-rows-repeated="9999999"')
    assert "more than 100000 rows" in refusal(workbook(HEAD + many))
    assert "DOCTYPE" in refusal(workbook(HEAD, start="<!DOCTYPE a [<!ENTITY b 'c'>]>"))
    assert "a ZIP archive or a workbook" in refusal(workbook(HEAD + row("R1", "1k"))[:-30])
    assert "too much inside" in refusal(workbook(HEAD + "<a/>" * 1_600_000))


def test_an_archive_of_another_kind_is_refused() -> None:
    stream = BytesIO()
    with zipfile.ZipFile(stream, "w") as archive:
        archive.writestr("content.xml", "<a/>")
    assert "ZIP archive" in refusal(stream.getvalue())
