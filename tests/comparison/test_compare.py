import json
import math
from dataclasses import replace
from typing import Any

import jsonschema
import pytest

from rcrules.comparison import compared
from rcrules.findings import Document, Finding, dumps, loads, schema_text
from rcrules.reports import reports
from tests.reports._sample import DOCUMENT, finding


def document(*findings: Finding, **changed: Any) -> Document:
    return replace(DOCUMENT, findings=list(findings), **changed)


def holding(**changed: Any) -> Finding:
    return finding(outcome="holds", margin=0.005, **changed)


def rows(old: Document, new: Document, share: float = 0.05) -> list[dict[str, Any]]:
    found = compared(old, new, share).comparison
    assert found is not None
    return found["findings"]  # type: ignore[no-any-return]


def changes(old: Finding | None, new: Finding | None) -> list[str]:
    both = [document(*([] if item is None else [item])) for item in (old, new)]
    return [row["change"] for row in rows(*both)]


def baseline(old: Finding, new: Finding) -> str | None:
    return compared(document(old), document(new)).findings[0].baseline


def test_what_is_told_of_a_pair() -> None:
    assert changes(holding(), finding()) == ["broke"]
    assert changes(None, finding()) == ["broke"]
    assert changes(finding(outcome="undecided"), finding()) == ["broke"]
    assert changes(finding(), finding()) == ["still failing"]
    assert changes(finding(level="warning"), finding(level="error")) == ["broke"]
    assert changes(finding(), holding()) == ["mended"]
    assert changes(finding(), finding(outcome="waived")) == ["mended"]
    assert changes(finding(), None) == ["mended"]
    assert changes(holding(), holding()) == []
    assert changes(None, holding()) == []
    assert changes(holding(), finding(outcome="undecided")) == ["moved"]


def test_only_what_is_new_or_worse_is_new() -> None:
    assert baseline(holding(), finding()) == "new"
    assert baseline(holding(), finding(outcome="undecided")) == "new"
    assert baseline(finding(), finding(outcome="undecided")) == "moved"
    assert baseline(finding(), finding()) == "unchanged"
    assert baseline(finding(level="warning"), finding(level="error")) == "new"
    assert baseline(finding(level="error"), finding(level="warning")) == "unchanged"


@pytest.mark.parametrize(("factor", "told"), [(1.04, []), (1.06, ["moved"]), (math.inf, ["moved"])])
def test_a_number_is_told_when_it_moved_by_more_than_the_share(factor: float, told: list[str]) -> None:
    measured = finding().measured
    assert measured is not None
    moved = replace(measured, high=measured.high * factor)
    assert changes(holding(), holding(measured=moved)) == told


def test_never_stays_never() -> None:
    measured = finding().measured
    assert measured is not None
    never = replace(measured, low=math.inf, nominal=math.nan, high=math.inf)
    assert changes(holding(measured=never), holding(measured=never)) == []


def test_the_cause_is_told_by_part() -> None:
    parts = [row | {"value": 4.7e-06} if row["ref"] == "C7" else row for row in DOCUMENT.parts]
    assert rows(document(holding()), document(finding(), parts=parts))[0]["causes"] == ["C7 10 µF → 4.7 µF"]


def test_parts_elsewhere_are_no_cause_of_a_finding() -> None:
    parts = [row | {"value": 4.7e-06} if row["ref"] == "C1" else row for row in DOCUMENT.parts]
    new = document(finding(), parts=parts)
    assert rows(document(holding()), new)[0]["causes"] == []
    found = compared(document(holding()), new).comparison
    assert found is not None
    assert found["changes"] == [{"about": "C1", "what": "value", "was": "100 µF", "now": "4.7 µF"}]


def test_limits_levels_sources_and_conditions_are_causes() -> None:
    assert finding().limit is not None
    new = finding(level="error", limit={**finding().limit, "at_least": 0.035})  # type: ignore[dict-item]
    old = finding(level="warning")
    held = [row | {"high": 3.6} if row["net"] == "+3V3" else row for row in DOCUMENT.held]
    conditions = {**DOCUMENT.conditions, "temperature": {"low": 0.0, "nominal": 25.0, "high": 60.0, "unit": "degC"}}
    assert rows(document(old), document(new, held=held, conditions=conditions))[0]["causes"] == [
        "level warning → error",
        "limit at least 30 ms → at least 35 ms",
        "+3V3 supply 3.2 V .. 3.4 V → supply 3.2 V .. 3.6 V",
        "temperature -20 °C .. 60 °C → 0 °C .. 60 °C",
    ]


def test_parts_that_came_went_or_were_moved_are_told() -> None:
    networks = json.loads(json.dumps(DOCUMENT.networks))
    networks[0]["branches"][1]["nets"] = ["+5V", "NRST"]
    gone = [row for row in DOCUMENT.parts if row["ref"] != "C7"]
    found = compared(document(), document(parts=gone, networks=networks)).comparison
    assert found is not None
    assert found["changes"] == [
        {"about": "C7", "what": "part", "was": "10 µF", "now": None},
        {"about": "R12", "what": "connection", "was": "+3V3 to NRST", "now": "+5V to NRST"},
    ]
    assert rows(document(holding()), document(finding(), parts=gone, networks=networks))[0]["causes"] == [
        "C7 removed (10 µF)",
        "R12 +3V3 to NRST → +5V to NRST",
    ]


def test_networks_that_came_or_went_are_told_by_their_parts() -> None:
    other = {"id": "SDA", "branches": [{"part": "R90", "nets": ["+3V3", "SDA"]}], "nodes": []}
    found = compared(document(), document(networks=[*DOCUMENT.networks, other])).comparison
    assert found is not None
    assert found["networks"] == {"added": ["SDA"], "removed": []}
    renamed = [{**DOCUMENT.networks[0], "id": "RESET_N"}]
    found = compared(document(), document(networks=renamed)).comparison
    assert found is not None
    assert found["networks"] == {"added": [], "removed": []}


def test_a_comparison_is_saved_and_valid() -> None:
    new = compared(document(holding()), document(finding(), finding(rule="other", outcome="undecided")))
    assert loads(dumps(new)) == new
    jsonschema.Draft202012Validator(json.loads(schema_text())).validate(json.loads(dumps(new)))


def test_a_document_against_itself_changed_nowhere() -> None:
    found = compared(DOCUMENT, DOCUMENT)
    assert found.comparison is not None
    assert {row["change"] for row in found.comparison["findings"]} == {"still failing"}
    assert found.comparison["changes"] == []
    assert "new" not in {item.baseline for item in found.findings}


@pytest.mark.parametrize("name", ["text", "markdown"])
def test_reports_tell_what_broke_and_why_and_count_what_still_fails(name: str) -> None:
    parts = [row | {"value": 4.7e-06} if row["ref"] == "C7" else row for row in DOCUMENT.parts]
    old = document(holding(), finding(rule="old-one", net="OLD"), finding(rule="gone-one"))
    new = compared(old, document(finding(), finding(rule="old-one", net="OLD"), parts=parts))
    text = reports()[name].render(new).replace("\\", "").replace("`", "")
    assert "1 broke, 1 still fail, 1 mended" in text
    assert "C7 10 µF → 4.7 µF" in text
    assert ("at NRST" if name == "markdown" else "broke   reset-lifts-late-enough") in text
    assert "error   old-one" not in text
