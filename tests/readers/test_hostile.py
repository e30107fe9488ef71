"""Broken, foreign and hostile sources: one clear message, soon, with a place; nothing partial is given as whole."""

from pathlib import Path

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Limits, Source, _sexpr
from tests.work import Work

DEFAULTS = Limits()
MOST_CALLS = 10_000_000
"""About five seconds' work."""


def refused(data: bytes | str, name: str = "board.net", limits: Limits = DEFAULTS) -> Mistake:
    """The one mistake of a source, found with bounded work."""
    source = Source(name=name, data=data.encode() if isinstance(data, str) else data, limits=limits)
    with Work() as work, pytest.raises(UserMistake) as caught:
        readers.read(source)
    assert work.calls < MOST_CALLS
    assert len(caught.value.mistakes) == 1
    mistake = caught.value.mistakes[0]
    assert mistake.place.file == name
    assert mistake.do
    return mistake


FOREIGN = {
    "a ZIP archive or a workbook": b"PK\x03\x04\x14\x00",
    "an old workbook (OLE2), or a workbook with a password": b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1",
    "a gzip archive": b"\x1f\x8b\x08\x00",
    "binary data": b"\x00\x01\x02\x03" * 300,
    "a parenthesised text, but no netlist known here": b"(netlist (R1))",
    "XML with the root <schematic>": b"<schematic><component/></schematic>",
    "a JSON text": b'{"parts": ["R1"],\n "nets": []}\n',
}


@pytest.mark.parametrize(("found", "data"), FOREIGN.items())
def test_foreign_content_is_named_and_what_to_export_instead(found: str, data: bytes) -> None:
    mistake = refused(data)
    assert mistake.found == found
    assert mistake.place.line == 1
    assert mistake.expected is not None


def test_an_empty_file_is_refused() -> None:
    assert refused(b"").problem == "the file is empty"
    assert refused(b" \r\n\t\n").problem == "the file is empty"


def test_prose_is_refused() -> None:
    assert refused("just a note\nabout nothing\n").found == "text that starts with 'just a note'"


def test_a_table_without_references_says_how_to_name_the_column() -> None:
    mistake = refused("colour, taste\nred, sweet\ngreen, sour\n", "menu.csv")
    assert mistake.problem == "no column of references found"
    assert mistake.do == 'name the column in the project file: [columns] reference = "…"'


def test_a_whole_refusal_reads_well() -> None:
    text = str(refused("(export\n (components\n  (comp (ref R1)"))
    assert text == (
        "board.net:3: the file ends inside a bracket\n"
        "  found     3 brackets not closed; the innermost is (comp …\n"
        "  expected  a closing bracket for each opening one\n"
        "  do        export the netlist again; check that the file was not cut"
    )


def test_brackets_nested_without_end_are_refused() -> None:
    mistake = refused("(export " + "(a " * 300_000)
    assert (mistake.problem, mistake.expected) == ("brackets nested too deeply", "at most 256 levels")


def test_a_bracket_too_many_is_pointed_at() -> None:
    mistake = refused("(export (nets))\n )")
    assert (mistake.place.line, mistake.place.column, mistake.found) == (2, 2, ")")


def test_a_quote_that_is_not_closed_is_pointed_at() -> None:
    mistake = refused('(export\n (components (comp (ref R1) (value "4k7')
    assert (mistake.problem, mistake.place.line, mistake.place.column) == ("a quoted text is not closed", 2, 36)


def test_too_many_brackets_in_one_component_are_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(_sexpr, "MAX_KEPT", 20_000)
    problem = "too much inside one component, or outside of any"
    assert refused("(export (components (comp " + "(a)" * 20_000).problem == problem
    assert refused("(export " + "()" * 200_000 + ")").problem == problem
    assert refused("(export (components (comp (ref " + "a " * 500_000 + "))))").problem == problem


def test_a_text_without_end_is_refused() -> None:
    assert refused('(export (nets "' + "\\\\" * 1_000_000 + '"))').problem == "a text is too long"


def test_an_entity_bomb_is_refused() -> None:
    entities = "".join(f'<!ENTITY e{n} "{f"&e{n - 1};" * 10}">' for n in range(1, 10))
    bomb = f'<?xml version="1.0"?>\n<!DOCTYPE export [<!ENTITY e0 "lol">{entities}]>\n<export>&e9;</export>'
    mistake = refused(bomb)
    assert "DOCTYPE" in mistake.problem
    assert mistake.place.line == 2


def test_a_file_named_by_an_entity_is_not_read(tmp_path: Path) -> None:
    secret = tmp_path / "secret.txt"
    secret.write_text("secret", encoding="utf-8")
    hostile = f'<!DOCTYPE export [<!ENTITY x SYSTEM "{secret.as_uri()}">]><export><comp ref="&x;"/></export>'
    assert "DOCTYPE" in refused(hostile).problem


def test_a_doctype_behind_a_long_comment_is_refused() -> None:
    hidden = "<!--" + "x" * 20_000 + "-->"
    assert "DOCTYPE" in refused(f"{hidden}<!DOCTYPE export [<!ENTITY a 'b'>]><export>&a;</export>").problem


def test_an_entity_without_a_doctype_is_refused_with_its_place() -> None:
    mistake = refused("<export>\n<components>&nbsp;</components></export>")
    assert (mistake.place.line, mistake.problem) == (2, "the XML breaks off or is damaged")


def test_xml_nested_without_end_is_refused() -> None:
    assert "depth" in str(refused("<export>" + "<a>" * 300_000).found)


def test_xml_cut_short_is_refused_with_its_line() -> None:
    cut = '<export>\n<components>\n<comp ref="R1"><value>4k7</value></comp>\n<comp ref="R2"><val'
    assert refused(cut).place.line == 4
    assert refused("<export>\n<components/>\n").place.line == 3


def test_a_nul_character_in_a_text_is_pointed_at() -> None:
    mistake = refused(b"Ref,Value\nR1,10\0k\nR2,1k\n", "bom.csv")
    assert (mistake.place.line, mistake.place.column) == (2, 6)
    assert "NUL" in refused(b"(export (nets\0))").problem


def test_text_broken_under_its_own_mark_is_refused() -> None:
    assert refused("Ref,Value\nR1,10k\n".encode("utf-16") + b"x").found == "bytes that are no UTF-16-LE"


def test_an_endless_row_or_cell_is_refused() -> None:
    assert refused("Ref,Value\n" + "R1,10k," * 500_000).problem == "a row has too many cells"
    assert refused("Ref,Value\nR1," + "1" * 2_000_000 + "\n").problem == "a cell is too long"


def test_a_quoted_cell_that_is_not_closed_is_refused_where_it_starts() -> None:
    mistake = refused('Ref,Value\nR1,"10k\n' + "R2,1k\n" * 1000, "bom.csv")
    assert (mistake.place.line, mistake.place.column, mistake.found) == (2, 4, '"10k')


def test_ranges_that_stand_for_more_parts_than_any_board_has_are_refused() -> None:
    one_cell = "Ref;Value\n" + "R1-R999," * 60 + ";1k\n"
    assert refused(one_cell).found == "59940 references in one cell"
    many_rows = "Ref;Value\n" + "".join(f"R{n}000-R{n}999;1k\n" for n in range(1, 50))
    assert refused(many_rows, limits=Limits(parts=10_000)).found == "more than 10000 references in all"


def test_remarks_without_end_are_counted() -> None:
    twice = '<comp ref="R1"><value>1k</value></comp>' * 1000
    remarks = readers.read(Source(name="a", data=f"<export>{twice}</export>".encode())).remarks
    assert len(remarks) == 201
    assert remarks[-1].text == "799 more remarks from here on"


def test_a_file_over_the_limit_is_refused_unread(tmp_path: Path) -> None:
    path = tmp_path / "large.xml"
    path.write_bytes(b"x" * (2**20 + 1))
    with pytest.raises(UserMistake, match="the file is too large"):
        readers.load(str(path), Limits(file_size=1))


def test_a_file_that_cannot_be_opened_is_a_mistake_of_the_user(tmp_path: Path) -> None:
    with pytest.raises(UserMistake, match="no such file"):
        readers.load(str(tmp_path / "absent.xml"))
    with pytest.raises(UserMistake, match="cannot be read"):
        readers.load(str(tmp_path))
