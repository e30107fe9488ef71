"""Random boards written in each format read back equal."""

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from rcrules import readers
from rcrules.parts import read_value
from rcrules.readers import Export, Source
from tests.readers.writers import VALUED, WRITERS, Board

VALUES = {"R": ("10k", "100", "2.2MEG", "47"), "C": ("100n", "10p", "2.2u"), "U": ("QX7301", "QX12"), "P": ("HDR4",)}
NET = st.from_regex(r"[A-Z+][A-Z0-9_+]{0,11}", fullmatch=True)


@st.composite
def boards(draw: st.DrawFn) -> Board:
    """Up to a dozen parts; every pin of a part is on a net, resistors and capacitors have two of them."""
    refs = draw(st.lists(st.from_regex(r"[RCUP][1-9][0-9]{0,2}", fullmatch=True), min_size=1, max_size=12, unique=True))
    names = draw(st.lists(NET, min_size=1, max_size=8, unique_by=str.lower))
    nets: dict[str, list[tuple[str, str]]] = {}
    for ref in refs:
        count = 2 if ref[0] in "RC" else draw(st.integers(2, 5))
        for number in range(1, count + 1):
            nets.setdefault(draw(st.sampled_from(names)), []).append((ref, str(number)))
    parts = {ref: draw(st.sampled_from(VALUES[ref[0]])) for ref in refs}
    return Board(parts=parts, nets={name: tuple(ends) for name, ends in nets.items()})


@pytest.mark.parametrize("name", WRITERS)
@settings(max_examples=12, derandomize=True, deadline=None, database=None, suppress_health_check=[HealthCheck.too_slow])
@given(board=boards())
def test_a_board_reads_back_equal(name: str, board: Board) -> None:
    export = readers.read(Source(name="board.dat", data=WRITERS[name](board).encode()))
    assert (export.reader, export.kind) == (name, "netlist")
    assert sorted((pin.net, pin.ref, pin.number) for pin in export.pins) == sorted(
        (net, ref, pin) for net, ends in board.nets.items() for ref, pin in ends
    )
    assert {key for key, _ in export.nets} == {*board.nets}
    assert {part.ref for part in export.parts} == {*board.parts}
    if name in VALUED:
        assert worth(export) == {ref: amount(ref, value) for ref, value in board.parts.items()}


def worth(export: Export) -> dict[str, object]:
    return {part.ref: amount(part.ref, part.value.text if part.value else "") for part in export.parts}


def amount(ref: str, text: str) -> object:
    """What a text is worth; a deck writes megohms as MEG."""
    if ref[0] == "R":
        return read_value(text.replace("MEG", "M"), "resistor").value
    return read_value(text, "capacitor").value if ref[0] == "C" else text
