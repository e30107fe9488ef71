"""What the document tells of its inputs."""

from pathlib import Path

import pytest

from rcrules.findings import dumps
from rcrules.pipeline import Job, run

NETLIST = """<export><components><comp ref='R1'><value>10k</value></comp><comp ref='C1'><value>1u</value></comp>
</components><nets>
<net code='1' name='VIN'><node ref='R1' pin='1'/></net>
<net code='2' name='OUT'><node ref='R1' pin='2'/><node ref='C1' pin='1'/></net>
<net code='3' name='GND'><node ref='C1' pin='2'/></net>
</nets></export>"""


@pytest.fixture
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A netlist and its BOM in the working folder."""
    (tmp_path / "board.xml").write_text(NETLIST)
    (tmp_path / "a-bom.csv").write_text("Reference,Value,Tolerance\nR1,10k,1 %\nC1,1u,10 %\n")
    monkeypatch.chdir(tmp_path)
    return tmp_path


@pytest.mark.usefixtures("folder")
def test_the_order_in_which_netlist_and_bom_are_given_does_not_matter() -> None:
    there, back = (run(Job(inputs=names)) for names in (("board.xml", "a-bom.csv"), ("a-bom.csv", "board.xml")))
    assert [item["file"] for item in there.inputs] == ["board.xml", "a-bom.csv"]
    assert there.board["name"] == "board"
    assert dumps(there) == dumps(back)


@pytest.mark.usefixtures("folder")
def test_a_bom_alone_has_parts_and_no_nets() -> None:
    document = run(Job(inputs=("a-bom.csv",)))
    assert (document.networks, document.held, document.findings) == ([], [], [])
    assert document.board == {"name": "a-bom", "parts": 2, "nets": 0, "pins": 0, "resistors": 1, "capacitors": 1}
    assert {row["coverage"] for row in document.parts} == {"elsewhere"}
    assert {row["reason"] for row in document.parts} == {"no netlist"}


def test_a_net_joined_at_dc_names_the_net_that_stands_for_it(folder: Path) -> None:
    joined = NETLIST.replace("<comp ref='C1'>", "<comp ref='L1'><value>10uH</value></comp><comp ref='C1'>")
    joined = joined.replace(
        "<net code='3' name='GND'>",
        "<net code='4' name='AGND'><node ref='L1' pin='1'/></net><net code='3' name='GND'><node ref='L1' pin='2'/>",
    )
    (folder / "board.xml").write_text(joined)
    held = {row["net"]: row["joined"] for row in run(Job(inputs=("board.xml",))).held}
    assert sorted((held["GND"], held["AGND"]), key=str) in (["AGND", None], ["GND", None])
