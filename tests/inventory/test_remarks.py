"""Remarks about what the inputs say of parts."""

from pathlib import Path

import pytest

from rcrules.pipeline import Job, run

COMP = "<comp ref='R{n}'><value>10k 1/4W</value><description>RES 10K OHM 1/10W 0603</description></comp>"


def test_facts_that_disagree_alike_on_many_parts_are_one_remark(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    components = "".join(COMP.format(n=number) for number in range(1, 15))
    Path("board.xml").write_text(f"<export><components>{components}</components><nets/></export>")
    (remark,) = run(Job(inputs=("board.xml",), with_rules=False)).problems
    assert remark["text"] == (
        "R1, R2, R3, R4, R5, R6, R7, R8, R9, R10, R11, R12 and 2 more: "
        "rated power 250 mW (netlist value) is taken, not 100 mW (netlist description)"
    )
