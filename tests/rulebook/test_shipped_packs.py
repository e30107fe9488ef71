"""The shipped packs: every rule says why and from where, and does on its own circuits what it says."""

import pytest

from rcrules.examples import tried
from rcrules.rulebook import Rule, load, packs, sentence, shipped

RULES = load(shipped())
STANDARDS = ("IEC ", "UM10204", "ECSS", "EEE-INST")
"""Of a rule whose limit is not asked for, what may make it an error."""


def test_there_are_packs_for_what_a_board_has() -> None:
    assert len(shipped()) >= 10
    assert len(RULES) >= 50


def test_only_packs_that_need_no_facts_are_used_on_a_strange_board() -> None:
    found = sorted(pack.name for pack in packs() if not pack.needs_facts)
    assert found == ["capacitor-voltage", "inputs-agree", "stored-energy"]


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.id)
def test_each_rule_says_what_why_and_from_where(rule: Rule) -> None:
    assert rule.title
    assert rule.why.endswith((".", "?"))
    assert rule.source
    assert sentence(rule).startswith("for every ")
    if rule.level == "error":
        assert "common practice" not in rule.source
        assert "ask" in rule.given.values() or any(name in rule.source for name in STANDARDS), rule.source


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.id)
def test_each_rule_holds_and_fails_on_its_examples(rule: Rule) -> None:
    found = tried(rule)
    assert {item.example.outcome for item in found} >= {"holds", "fails"}
    told = [(item.example.outcome, [(one.outcome, one.parts, one.reason) for one in item.findings]) for item in found]
    assert [item.right for item in found] == [True] * len(found), told


def test_where_work_can_hurt_the_pack_warns() -> None:
    warned = {rule.pack.name for rule in RULES if rule.pack.caution}
    assert warned == {"stored-energy", "discharge-by-application", "capacitors-in-series"}
    for rule in RULES:
        if rule.measure.name == "discharge_time":
            assert "licensed practice" in rule.pack.caution


def test_numbers_from_memory_are_marked_as_such() -> None:
    for rule in RULES:
        if rule.pack.name.startswith("capacitor-derating"):
            assert "from memory, verify" in rule.source
