"""JUnit XML held to what CI servers read: order of elements, counts, names that keep a case's history."""

from dataclasses import replace
from typing import Any

import pytest
from lxml import etree

from rcrules.findings import Document
from rcrules.reports import reports
from tests.reports._sample import DOCUMENT, FINDINGS, finding

ORDER = ["properties", "testcase", "system-out", "system-err"]


def tree(document: Document) -> Any:
    return etree.fromstring(reports()["junit"].render(document).encode())


def only(document: Document) -> Any:
    """The one case of a document with one finding."""
    (case,) = tree(document).iter("testcase")
    return case


def test_a_suite_is_a_rule_and_a_case_is_a_subject() -> None:
    found = tree(DOCUMENT)
    assert [suite.get("name") for suite in found] == sorted({item.rule for item in FINDINGS})
    assert len(list(found.iter("testcase"))) == len(FINDINGS)
    reset = found.find("testsuite[@name='reset-lifts-late-enough']/testcase")
    assert reset.attrib == {
        "classname": "harbour gauge.reset-lifts-late-enough",
        "name": "NRST: R12, C7 -> U3.NRST",
        "time": "0",
        "file": "gauge.xml",
        "line": "812",
    }


def test_counts_agree_with_the_content() -> None:
    found = tree(DOCUMENT)
    for element in (found, *found):
        for key, path in (("tests", "testcase"), ("failures", "failure"), ("errors", "error"), ("skipped", "skipped")):
            assert int(element.get(key)) == len(list(element.iter(path)))
    assert (found.get("failures"), found.get("errors"), found.get("skipped")) == ("4", "0", "5")


def test_elements_stand_in_the_order_of_the_strict_schemas() -> None:
    for suite in tree(DOCUMENT):
        places = [ORDER.index(child.tag) for child in suite]
        assert places == sorted(places)
        assert all(len(case) <= 1 for case in suite.iter("testcase"))


def test_a_failure_says_by_how_much_where_and_why() -> None:
    case = only(replace(DOCUMENT, findings=[finding()]))
    (failure,) = case
    assert failure.get("message").startswith("delay at power-up from supply valid")
    assert "short by 8.1 ms" in failure.get("message")
    assert failure.get("type") == "error"
    assert "shortest at C7 -38.1 % (tolerance -20 %" in failure.text
    assert "why: The controller needs" in failure.text


def test_what_is_undecided_is_skipped_with_the_reason_and_the_line_to_add() -> None:
    (skipped,) = only(replace(DOCUMENT, findings=[FINDINGS[0]]))
    assert skipped.tag == "skipped"
    assert skipped.get("message") == (
        "undecided: settling_window is not given; one line decides it: "
        '[settings."input-settles-in-window"] settling_window = "…"'
    )


def test_what_is_waived_is_skipped_with_who_and_why() -> None:
    (skipped,) = only(replace(DOCUMENT, findings=[finding(outcome="waived", waiver=0)]))
    assert skipped.get("message").startswith("waived by analogue team on 2026-03-01, until 2027-03-01: the surge")


@pytest.mark.parametrize(("baseline", "tag"), [("new", "failure"), ("unchanged", "skipped"), ("moved", "skipped")])
def test_against_a_saved_document_only_what_is_new_is_a_failure(baseline: str, tag: str) -> None:
    (told,) = only(replace(DOCUMENT, comparison={}, findings=[finding(baseline=baseline)]))
    assert told.tag == tag


def test_names_hold_no_values_and_no_lines_so_that_history_stays() -> None:
    moved = finding(places=[{"file": "gauge.xml", "line": 9}], measured=None, margin=-1.0)
    names = [
        (case.get("classname"), case.get("name"))
        for case in (only(replace(DOCUMENT, findings=[item])) for item in (finding(), moved))
    ]
    assert names[0] == names[1]


def test_two_cases_of_one_name_are_numbered() -> None:
    cases = tree(replace(DOCUMENT, findings=[finding(), finding()])).iter("testcase")
    assert [case.get("name")[-4:] for case in cases] == ["NRST", " (2)"]


def test_a_dot_in_the_name_of_the_board_makes_no_level_of_its_own() -> None:
    board = {**DOCUMENT.board, "name": "gauge 1.2"}
    assert only(replace(DOCUMENT, board=board, findings=[finding()])).get("classname").count(".") == 1
