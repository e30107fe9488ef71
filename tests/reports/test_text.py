import math
import re
from dataclasses import replace
from typing import Any

import pytest

from rcrules.findings import Document, Finding
from rcrules.reports import reports
from tests.reports._sample import DOCUMENT, FINDINGS, finding


def text(document: Document, **how: bool) -> str:
    return reports()["text"].render(document, **how)


def of(*findings: Finding) -> str:
    return text(replace(DOCUMENT, findings=list(findings)))


def test_names_cannot_steer_the_terminal() -> None:
    found = text(DOCUMENT, verbose=True)
    assert "\x1b" not in found
    assert "\u202e" not in found
    assert r"POR \x1b[2J\u202egnp.exe" in found


def test_a_line_break_in_a_name_does_not_make_a_line() -> None:
    assert "nothing fails\\x0aerror" in of(finding(net="nothing fails\nerror"))


def test_colour_only_adds_escapes() -> None:
    colored = text(DOCUMENT, color=True)
    assert re.sub("\x1b\\[[0-9;]*m", "", colored) == text(DOCUMENT)
    assert colored != text(DOCUMENT)


def test_failing_findings_come_before_undecided_ones_and_errors_before_warnings() -> None:
    found = text(DOCUMENT)
    places = [found.index(word) for word in ("error   reset-lifts-late", "warning reset-lifts-soon", "undecided:")]
    assert places == sorted(places)


def test_the_line_that_decides_most_comes_first() -> None:
    found = text(DOCUMENT)
    assert found.index("one line decides 2 findings") < found.index("one line decides 1 finding ")


def test_one_cause_on_many_parts_is_one_block() -> None:
    found = text(DOCUMENT)
    assert found.count("voltage-within-rating") == 1
    assert "the same on  C2 100 µF" in found


def test_a_level_that_is_never_reached_reads_so() -> None:
    assert "never reached" in of(*(item for item in FINDINGS if item.detail.get("never")))


def test_the_caution_of_a_pack_stands_with_its_findings() -> None:
    broken = finding(pack="stored-energy")
    assert "caution stored-energy   A calculation is not a measurement." in of(broken)
    assert "caution" not in of(finding())


def test_undecided_findings_carry_the_caution_too() -> None:
    assert "caution stored-energy   A calculation is not a measurement." in of(
        *(item for item in FINDINGS if item.pack == "stored-energy")
    )


def test_ratios_are_shown_as_the_rule_writes_them() -> None:
    assert "0 % .. 100 % .. 105 %   must be at most 100 %   over by 5 percentage points" in text(DOCUMENT)


def test_a_number_far_off_its_nominal_is_shown_as_it_is() -> None:
    worst = [{"parameter": "SW1 contact", "value": 0.1, "unit": "Ω", "relative": 1e8, "why": "", "from": ""}]
    assert "SW1 contact 100 mΩ" in of(finding(detail={"side": "at_least", "worst": worst}))


def test_parameters_that_move_alike_stand_together_and_the_rest_is_counted() -> None:
    moved = [("R1", 0.01), ("C1", 0.2), ("R2", 0.01), ("C2", 0.1), ("C3", 0.05), ("C4", 0.04), ("C5", 0.03)]
    worst = [
        {"parameter": name, "value": 1.0, "unit": "F", "relative": share, "why": "tolerance", "from": ""}
        for name, share in moved
    ]
    found = of(finding(detail={"side": "at_least", "worst": worst}))
    assert "R1, R2 +1 % (tolerance), C1 +20 % (tolerance), C2 +10 % (tolerance), C3 +5 % (tolerance), 2 more\n" in found


def test_options_are_told_apart_from_the_measure() -> None:
    asking = finding(measure="settling_time", options={"event": "step-up", "band": "0.1 %"}, detail={})
    assert "settling time at step-up, band 0.1 %   " in of(asking)


def test_a_limit_met_exactly_reads_so() -> None:
    exact = finding(outcome="holds", margin=0.0)
    assert "exactly at the limit   proved" in text(replace(DOCUMENT, findings=[exact]), verbose=True)


@pytest.mark.parametrize(
    ("milder", "worse"),
    [
        ({"margin": -0.001}, {"margin": -0.02}),
        ({"margin": -0.02}, {"margin": -math.inf}),
        (
            {"limit": {"at_least": 0.03, "unit": "s", "text": "", "from": ""}, "margin": -0.01},
            {
                "limit": {"at_most": 5.0, "unit": "V", "text": "", "from": ""},
                "margin": -9.0,
                "detail": {"side": "at_most"},
            },
        ),
    ],
)
def test_of_one_level_what_is_broken_most_comes_first(milder: dict[str, Any], worse: dict[str, Any]) -> None:
    found = of(finding(net="MILD", cause="", **milder), finding(net="WORSE", cause="", **worse))
    assert found.index("WORSE") < found.index("MILD")


def test_all_that_assume_the_same_share_a_line() -> None:
    rows = [{"about": ref, "text": "assumed: no tolerance given, 20 %", "ask": "ask"} for ref in ("C1", "C2")]
    found = text(replace(DOCUMENT, assumptions=rows), verbose=True)
    assert "  C1, C2: no tolerance given, 20 %   ask\n" in found


def test_nothing_found_says_so() -> None:
    found = of()
    assert "no rule applies to anything on it" in found
    assert "nothing judged, 1 assumption" in found


def test_lines_that_ask_the_same_of_many_parts_share_an_entry() -> None:
    asking = [
        finding(
            outcome="undecided", net=None, parts=[ref], reason="not given", ask=[f'[part."{ref}"] rated-voltage = "…"']
        )
        for ref in ("C1", "C2", "C3")
    ]
    found = of(*asking)
    assert 'one line each decides 3 findings   [part."C1"] rated-voltage = "…"   and so for C2, C3' in found
    assert found.count("undecided:") == 1


def test_many_reasons_are_counted_and_listed_on_request() -> None:
    reasons = [f"{word} is not known" for word in "abcdefghi"]
    document = replace(
        DOCUMENT, findings=[finding(outcome="undecided", net=word, ask=[], reason=word) for word in reasons]
    )
    assert "and 3 more (--verbose lists them)" in text(document)
    assert "i is not known" in text(document, verbose=True)


def test_reasons_that_differ_only_by_a_name_are_one_line() -> None:
    reasons = [f"active network: amplifier IC{number} inside the loop" for number in range(201, 217)]
    reasons += [f"diode {name} may conduct, and diodes are not modelled" for name in ("D1", "D2")]
    asking = [finding(outcome="undecided", net=f"N{n}", ask=[], reason=reason) for n, reason in enumerate(reasons)]
    found = of(*asking)
    assert "   N0, N1, N2 and 13 more   active network: amplifier IC201 and 15 more inside the loop" in found
    assert "   N16, N17   diode D1 and 1 more may conduct, and diodes are not modelled" in found
    verbose = text(replace(DOCUMENT, findings=asking), verbose=True)
    assert "amplifier IC210 inside the loop" in verbose


def test_reasons_that_differ_in_two_places_stay_apart() -> None:
    reasons = ["#1: #1 is 3.3 V; holds where #1 is at most 3 V", "#2: #2 is 5 V; holds where #2 is at most 4 V"]
    found = of(*(finding(outcome="undecided", net="N", ask=[], reason=reason) for reason in reasons))
    assert all(reason in found for reason in reasons)


def test_parts_of_one_cause_are_all_named_on_request() -> None:
    document = replace(DOCUMENT, findings=[finding(net=f"N{n}") for n in range(20)])
    assert "N12 and 7 more\n" in text(document)
    assert "N18, N19\n" in text(document, verbose=True)


def test_conditions_are_told_on_request() -> None:
    assert "conditions   temperature -20 °C .. 60 °C, life 10 year\n" in text(DOCUMENT, verbose=True)
    assert "conditions" not in text(DOCUMENT)
    none = {"low": None, "nominal": None, "high": None, "unit": "s"}
    document = replace(DOCUMENT, conditions={**DOCUMENT.conditions, "life": none})
    assert "temperature -20 °C .. 60 °C, no life given\n" in text(document, verbose=True)
