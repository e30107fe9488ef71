"""Descriptions proposed for files that no reader knows."""

from pathlib import Path

import pytest

from rcrules import project, readers
from rcrules.cli import main
from rcrules.readers import Source

XML = """<board-export>
<parts><part id="R1"><worth>10k</worth><package>R0402</package></part>
<part id="C1"><value>1u</value><package>C0402</package></part></parts>
<nets><net name="RST"><pin part="R1" number="2"/><pin part="C1" number="1"/></net></nets></board-export>
"""
TABLE = "Signal;Pad;Bauteil\nRST;2;links\nRST;1;rechts\n"


def proposed(text: str) -> str:
    found = readers.proposal(Source(name="board.dat", data=text.encode()))
    assert found is not None
    return found


def test_a_proposal_for_xml_names_parts_and_pins_and_reads_the_file() -> None:
    text = proposed(XML)
    assert 'parts = { each = "//parts/part", reference = "@id", value = "value", footprint = "package" }' in text
    assert 'pins = { each = "//net/pin", net = "../@name", reference = "@part", pin = "@number" }' in text
    export = readers.read(Source(name="a.xml", data=XML.encode()), {}, project.load("f.toml", text).formats)
    assert [(pin.net, pin.ref, pin.number) for pin in export.pins] == [("RST", "R1", "2"), ("RST", "C1", "1")]


def test_what_no_name_tells_is_asked_for() -> None:
    assert 'columns = { net = "Signal", pin = "Pad", reference = "?" }\n# also in the file: Bauteil' in proposed(TABLE)
    assert 'parts = { each = "//?", reference = "?", value = "?" }' in proposed("<list><thing a='1'/></list>")


def test_a_text_without_columns_is_not_described() -> None:
    assert readers.proposal(Source(name="a.txt", data=b"a letter\nto someone\n")) is None


def test_start_prints_the_proposal_and_writes_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(tmp_path)
    (tmp_path / "board.xml").write_text(
        XML.replace('id="', 'unit="').replace("<package>", "<p>").replace("</package>", "</p>")
    )
    assert main(["start", "board.xml"]) == 2
    told = capsys.readouterr()
    assert told.out.startswith('[[format]]\nname = "house format"\nkind = "xml"\nhas = "<board-export"\n')
    assert "put the description above into rcrules.toml" in told.err
    assert not (tmp_path / "rcrules.toml").exists()
