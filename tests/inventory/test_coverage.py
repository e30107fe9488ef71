from rcrules.findings import Finding
from rcrules.inventory import CLASSES, counts, coverage
from tests.checks._objects import board, part
from tests.reports._sample import finding

REFS = ("R1", "C1", "C2", "R7", "C8", "C9")
BEFORE = {
    "R1": "network",
    "C1": "network",
    "C2": "decoupling",
    "R7": "elsewhere",
    "C8": "not_fitted",
    "C9": "unreadable",
}


def classes(*findings: Finding) -> dict[str, str]:
    parts = {ref: part(ref, "capacitor" if ref.startswith("C") else "resistor", 1.0, "A", "B") for ref in REFS}
    return dict(coverage(board(parts=parts, coverage=BEFORE), findings))


def test_without_findings_parts_in_networks_met_no_rule() -> None:
    assert list(classes().values()) == ["unruled", "unruled", "decoupling", "elsewhere", "not_fitted", "unreadable"]


def test_judged_goes_before_undecided() -> None:
    found = classes(finding(parts=["R1", "C1"], outcome="undecided"), finding(parts=["C1"], outcome="holds"))
    assert (found["R1"], found["C1"]) == ("undecided", "judged")


def test_a_judged_decoupling_capacitor_counts_as_judged() -> None:
    assert classes(finding(parts=["C2"]))["C2"] == "judged"


def test_what_is_not_fitted_stays_so() -> None:
    assert classes(finding(parts=["C8", "C9"]))["C8"] == "not_fitted"


def test_every_part_is_counted_once() -> None:
    found = counts(classes(finding(parts=["R1"])))
    assert tuple(found) == CLASSES
    assert sum(found.values()) == len(REFS)
