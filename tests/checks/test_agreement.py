"""What several inputs of one board say differently about a part: findings of the pack inputs-agree."""

import re
from pathlib import Path

import pytest

from rcrules.findings import Document
from rcrules.pipeline import Job, run
from tests.cli._board import NETLIST

BOM = "Reference,Value,Description,DNP\nR1,10k 1%,,\nC1,1uF 10% 16V,,\nC2,100nF 10% 16V,,\n"


@pytest.fixture(autouse=True)
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    return tmp_path


def judged(bom: str | None = BOM, netlist: str = NETLIST, *, rules: tuple[str, ...] = ("inputs-agree",)) -> Document:
    Path("board.xml").write_text(netlist, encoding="utf-8")
    if bom is not None:
        Path("bom.csv").write_text(bom, encoding="utf-8")
    return run(Job(inputs=("board.xml", "bom.csv") if bom is not None else ("board.xml",), rules=rules))


def failing(document: Document) -> list[tuple[str, list[str], str | None]]:
    return [(item.rule, item.parts, item.reason) for item in document.findings if item.outcome == "fails"]


def test_inputs_that_agree_hold_on_the_board_as_a_whole() -> None:
    document = judged()
    assert [(item.outcome, item.parts) for item in document.findings] == [("holds", [])] * 4


def test_another_value_is_a_finding_with_both_places() -> None:
    reason = "BOM value '12k 1%' (bom.csv:2:4), netlist value '10k 1%' (board.xml:4)"
    assert failing(judged(BOM.replace("R1,10k", "R1,12k"))) == [("values-agree", ["R1"], reason)]


@pytest.mark.parametrize("text", ["0.01M 1%", "10kÂ\u03a9", "10000", "10K 0.1W"])
def test_one_value_in_other_letters_agrees(text: str) -> None:
    assert [rule for rule, _, _ in failing(judged(BOM.replace("R1,10k 1%", f"R1,{text}")))] in ([], ["ratings-agree"])


def test_a_part_of_one_input_alone_is_a_finding() -> None:
    found = failing(judged(BOM.replace("C2,", "C9,")))
    assert found == [
        ("parts-in-both", ["C2"], "in the netlist, not in the BOM (bom.csv)"),
        ("parts-in-both", ["C9"], "in the BOM, not in the netlist (board.xml)"),
    ]


def test_a_part_that_one_of_them_leaves_out_is_a_finding() -> None:
    (found,) = failing(judged(BOM.replace("R1,10k 1%,,", "R1,10k 1%,,X")))
    assert found[:2] == ("fitting-agrees", ["R1"])
    assert found[2] == "not fitted by the BOM (bom.csv:2:1: DNP = 'X'), but listed by the netlist (board.xml:4)"


def test_a_value_text_that_says_so_too_agrees() -> None:
    bom = BOM.replace("R1,10k 1%,,", "R1,10k 1%,,X")
    assert failing(judged(bom, NETLIST.replace("10k 1%", "10k 1% DNP"))) == []


def test_other_ratings_are_a_finding() -> None:
    (found,) = failing(judged(BOM.replace("C1,1uF 10% 16V,", "C1,1uF 10%,CAP 1uF 25V")))
    assert found[:2] == ("ratings-agree", ["C1"])


def test_what_is_a_finding_is_no_remark_as_well() -> None:
    other = BOM.replace("R1,10k", "R1,12k")
    texts = [item["text"] for item in judged(other).problems]
    assert not any("12k" in text for text in texts)
    texts = [item["text"] for item in judged(other, rules=("capacitor-voltage",)).problems]
    assert any("'12k 1%', netlist value '10k 1%'" in text for text in texts)


def test_they_do_not_make_a_part_judged() -> None:
    assert judged(BOM.replace("R1,10k", "R1,12k")).coverage["judged"] == judged().coverage["judged"] == 0


def test_one_input_alone_has_nothing_to_agree_with() -> None:
    assert judged(None).findings == []


CONNECTED = """
[pack]
name = "own"
title = "Own"
[[rule]]
id = "connections-agree"
title = "The netlists connect a part alike"
level = "error"
subject = "listed part"
value = "agreement on connections"
one-of = ["yes"]
why = "What is made is not what was drawn."
source = "common practice"
"""


def test_another_connection_in_a_second_netlist_is_a_finding_of_the_teams_rule() -> None:
    Path("own.toml").write_text(CONNECTED, encoding="utf-8")
    Path("board.xml").write_text(NETLIST, encoding="utf-8")
    Path("tested.csv").write_text("net,part,pin\n3V3,R1,1\nNRS,R1,2\nNRS,C1,1\n3V3,C1,2\n", encoding="utf-8")
    (found,) = failing(run(Job(inputs=("board.xml", "tested.csv"), rules=("own.toml",))))
    assert found[:2] == ("connections-agree", ["C1"])
    assert re.fullmatch(r"pin 2 on 'GND' \(board\.xml:\d+\), on '3V3' \(tested\.csv:5:1\)", found[2] or "")
