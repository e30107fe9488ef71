"""Rules that extend, override or take away rules of other packs."""

from pathlib import Path

import pytest

from rcrules import rulebook, tomlfile
from rcrules.errors import UserMistake
from rcrules.measures import registry
from rcrules.rulebook import Rule

BASE = """[pack]
name = "base"
[[rule]]
id = "settles"
title = "It settles"
level = "error"
role = "low-pass"
measure = "settling_time"
with = { event = "step-up", band = "1 %" }
at-most = "longest"
given = { longest = "ask" }
why = "Because."
source = "a table"
[[rule.example]]
circuit = "R1 1k : A, B"
outcome = "holds"
"""


def load(tmp_path: Path, own: str, *, base: str = BASE) -> list[Rule]:
    (tmp_path / "base.toml").write_text(base, encoding="utf-8")
    (tmp_path / "own.toml").write_text(f'[pack]\nname = "own"\n{own}', encoding="utf-8")
    return rulebook.load(["base.toml", "own.toml"], tmp_path)


def told(tmp_path: Path, own: str, *, base: str = BASE) -> str:
    with pytest.raises(UserMistake) as caught:
        load(tmp_path, own, base=base)
    return str(caught.value)


def test_without_an_id_it_stands_in_the_place_of_the_other(tmp_path):
    (rule,) = load(tmp_path, '[[rule]]\nextends = "settles"\nlevel = "note"')
    assert (rule.id, rule.level, rule.pack.name, rule.measure.name) == ("settles", "note", "own", "settling_time")
    assert (rule.title, rule.why, rule.source) == ("It settles", "Because.", "a table")
    assert rule.selection.role == ("low-pass",)


def test_with_an_id_of_its_own_it_stands_beside_the_other(tmp_path):
    rules = load(tmp_path, '[[rule]]\nextends = "settles"\nid = "settles-fast"\nat-most = "1 ms"')
    assert [rule.id for rule in rules] == ["settles", "settles-fast"]


def test_a_limit_of_its_own_has_no_source_from_elsewhere(tmp_path):
    (rule,) = load(tmp_path, '[[rule]]\nextends = "settles"\nat-least = "longest"\nat-most = "1 ms"')
    assert rule.source == ""
    assert rule.why == "Because."
    assert {limit.kind: limit.text for limit in rule.limits} == {"at-most": "1 ms", "at-least": "longest"}


def test_options_and_given_numbers_are_joined_name_by_name(tmp_path):
    (rule,) = load(tmp_path, '[[rule]]\nextends = "settles"\nwith = { band = "5 %" }\ngiven = { longest = "2 ms" }')
    assert (rule.options["event"], rule.options["band"]) == ("step-up", 0.05)
    assert rule.given["longest"].nominal == 0.002


def test_examples_are_not_inherited(tmp_path):
    (rule,) = load(tmp_path, '[[rule]]\nextends = "settles"')
    assert rule.examples == ()


def test_off_takes_the_other_away(tmp_path):
    assert load(tmp_path, '[[rule]]\nextends = "settles"\nlevel = "off"') == []


def test_another_measure_leaves_the_options_of_the_first(tmp_path):
    (rule,) = load(tmp_path, '[[rule]]\nextends = "settles"\nmeasure = "time_constant"')
    assert (rule.measure.name, rule.options) == ("time_constant", {})


def test_a_shipped_rule_is_found_though_its_pack_is_not_asked_for():
    text = '[pack]\nname = "own"\n[[rule]]\nextends = "voltage-within-rating"\nlevel = "note"'
    (rule,) = rulebook.compile_pack(tomlfile.load("own.toml", text), registry())
    assert (rule.id, rule.level, rule.pack.name) == ("voltage-within-rating", "note", "own")


def test_rules_may_extend_rules_that_extend(tmp_path):
    own = '[[rule]]\nextends = "settles"\nid = "b"\nlevel = "note"\n[[rule]]\nextends = "b"\nid = "c"\nat-most = "3 s"'
    rules = {rule.id: rule for rule in load(tmp_path, own)}
    assert (rules["c"].level, rules["c"].limits[0].text, rules["c"].selection.role) == ("note", "3 s", ("low-pass",))


def test_a_mistyped_name_is_guessed(tmp_path):
    message = told(tmp_path, '[[rule]]\nextends = "setles"\nlevel = "note"')
    assert "own.toml:4:12: no rule is called 'setles'; did you mean 'settles'?" in message


def test_a_ring_is_refused(tmp_path):
    own = '[[rule]]\nid = "a"\nextends = "b"\n[[rule]]\nid = "b"\nextends = "a"'
    assert "rules extend one another in a ring, or too far" in told(tmp_path, own)


def test_a_mistake_in_what_is_inherited_points_at_extends(tmp_path):
    base = BASE.replace('at-most = "longest"\ngiven = { longest = "ask" }', 'at-most = "1 s"')
    message = told(tmp_path, '[[rule]]\nextends = "settles"\nmeasure = "corner_frequency"', base=base)
    assert "own.toml:4:1: 'corner_frequency' is a frequency, '1 s' is a time" in message
    assert "it comes from the rule 'settles'; say it anew here" in message


def test_two_files_cannot_stand_in_the_place_of_one(tmp_path):
    (tmp_path / "base.toml").write_text(BASE, encoding="utf-8")
    for name in ("one", "two"):
        text = f'[pack]\nname = "{name}"\n[[rule]]\nextends = "settles"\nlevel = "note"'
        (tmp_path / f"{name}.toml").write_text(text, encoding="utf-8")
    with pytest.raises(UserMistake):
        rulebook.load(["base.toml", "one.toml", "two.toml"], tmp_path)
