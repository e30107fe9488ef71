"""Files whose words are taken away, doubled, moved and replaced, led to those that are still read."""

import re

import pytest
from hypothesis import HealthCheck, event, given, settings, target
from hypothesis import strategies as st

from rcrules.design import build
from rcrules.readers import Export
from tests.readers.test_damaged import (
    BOARD,
    BRACKETS,
    DECK,
    DOLLARS,
    EDIF,
    LISTED,
    MADE,
    NODES,
    PINS,
    SEXPR,
    STAMPED,
    STARS,
    TESTED,
    outcome,
)

SEEDS = {"edif": EDIF, "ipc-d-356": TESTED, "ipc-2581": BOARD, "bom-xml": LISTED, "sexpr": SEXPR, "pins": PINS}
SEEDS |= {"star-list": STARS, "dollar-list": DOLLARS, "bracket-list": BRACKETS, "spice": DECK}
SEEDS |= {"parenthesised-list": STAMPED, "nodes": NODES, "primitives": MADE}
WORD = re.compile(rb"\s+|[()<>/=,\"]|[^\s()<>/=,\"]+")
ODD = (
    b"",
    b"0",
    b"-1",
    b"99999999999",
    b"%37%",
    b"&1",
    b"A" * 300,
    b"N/C",
    b"\xd0\xba",
    b"\xff",
    b"\0",
    b"\xe2\x80\xae",
)
EDITS = st.lists(
    st.tuples(st.sampled_from(("drop", "double", "swap", "odd", "copy")), st.integers(0, 9999), st.integers(0, 9999)),
    min_size=1,
    max_size=6,
)


@pytest.mark.parametrize("name", SEEDS)
@settings(
    max_examples=120, derandomize=True, deadline=None, suppress_health_check=[HealthCheck.too_slow], database=None
)
@given(edits=EDITS)
def test_edited_files_are_read_whole_or_refused(name: str, edits: list[tuple[str, int, int]]) -> None:
    export = outcome(edited(SEEDS[name], edits))
    event("read" if export is not None else "refused")
    if export is not None:
        target(float(len(export.pins) + len(export.parts) + len(export.remarks)))
        hold(export)


def edited(data: bytes, edits: list[tuple[str, int, int]]) -> bytes:
    """The data with words taken away, doubled, exchanged, replaced by odd ones, or by a run of others."""
    words = WORD.findall(data)
    for kind, first, second in edits:
        at, other = first % len(words), second % len(words)
        match kind:
            case "drop":
                words[at] = b""
            case "double":
                words[at] *= 2
            case "swap":
                words[at], words[other] = words[other], words[at]
            case "odd":
                words[at] = ODD[second % len(ODD)]
            case "copy":
                words[at] += b"".join(words[other : other + 12])
    return b"".join(words)


def hold(export: Export) -> None:
    """What is true of every export, however odd its file."""
    nets = {name for name, _ in export.nets}
    assert all(pin.net in nets and pin.ref and pin.place.line for pin in export.pins)
    assert all(not pin.net for pin in export.open_pins)
    assert len({part.ref for part in export.parts}) == len(export.parts)
    assert all(part.place.line for part in export.parts)
    design = build([export])
    assert sum(len(part.pins) for part in design.parts.values()) == sum(len(net.pins) for net in design.nets.values())
