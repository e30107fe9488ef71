"""What was read about each part, and from where."""

from dataclasses import replace

from rcrules.reports import reports
from tests.reports._sample import DOCUMENT


def rows(*changes):
    """Rows like the first capacitor of the sample, each with its changes."""
    model = next(row for row in DOCUMENT.parts if row["kind"] == "capacitor" and row["value"] is not None)
    return replace(DOCUMENT, parts=[{**model, **change} for change in changes], problems=[])


def told(*changes, verbose=False):
    return reports()["parts"].render(rows(*changes), verbose=verbose)


def test_parts_read_alike_share_a_line():
    lines = told({"ref": "C1"}, {"ref": "C2"}).splitlines()
    assert len(lines) == 3
    assert lines[0].endswith("2 parts in 1 line")
    assert lines[2].startswith("C1, C2 ")


def test_what_was_not_understood_comes_first_with_the_reason():
    unread = {"ref": "C9", "value": None, "why_unknown": "'4.7' has no unit: pF or µF", "text": "4.7"}
    lines = told({"ref": "C1"}, unread).splitlines()
    assert lines[0].endswith("value not understood: 1")
    assert lines[2].startswith("C9")
    assert """'4.7' has no unit: pF or µF   [part."C9"] value = "…\"""" in lines[2]


def test_every_fact_has_its_source_and_on_request_its_line():
    origin = {"from": "BOM field 'MPN' by part-number pattern 'QX'", "file": "bom.csv", "line": 3, "column": 9}
    change = {"origins": {"value": origin, "rated_voltage": origin}}
    assert "value, rated voltage: BOM field 'MPN' by part-number pattern 'QX'" in told(change)
    assert "pattern 'QX' (bom.csv:3)" in told(change, verbose=True)


def test_parts_that_differ_in_their_source_do_not_share_a_line():
    origin = {"from": "BOM value", "file": "bom.csv", "line": 3, "column": 9}
    other = {**origin, "from": "netlist value"}
    assert "in 2 lines" in told({"ref": "C1", "origins": {"value": origin}}, {"ref": "C2", "origins": {"value": other}})


def test_parts_not_fitted_are_marked():
    assert "not fitted" in told({"fitted": False})
