"""Where rules come from."""

from pathlib import Path

import pytest

from rcrules import project, rulebook
from rcrules.errors import UserMistake

RULE = '[[rule]]\nid = "{id}"\nlevel = "note"\nmeasure = "delay"\nwith = {{ event = "power-up", to = "1 V" }}\n{keys}\n'


def write(folder: Path, name: str, *rules: str) -> None:
    (folder / name).write_text(f'[pack]\nname = "{name.removesuffix(".toml")}"\n' + "".join(rules), encoding="utf-8")


def mistakes(caught: pytest.ExceptionInfo[UserMistake]) -> list[str]:
    return [f"{item.place}: {item.problem}" for item in caught.value.mistakes]


def test_every_shipped_pack_is_named_as_its_file_and_compiles():
    assert [pack.name for pack in rulebook.packs()] == list(rulebook.shipped())
    assert rulebook.load(rulebook.shipped())


def test_shipped_rules_say_why_and_by_what_source():
    for rule in rulebook.load(rulebook.shipped()):
        assert rule.why, rule.id
        assert rule.source, rule.id


def test_files_are_taken_from_a_folder_and_packs_by_name(tmp_path):
    write(tmp_path, "own.toml", RULE.format(id="own-one", keys='at-most = "1 s"'))
    found = rulebook.load(["own.toml", "debounce", "own.toml"], tmp_path)
    assert found[0].id == "own-one"
    assert found[0].pack.file == "own.toml"
    assert {rule.pack.name for rule in found} == {"own", "debounce"}
    assert len([rule for rule in found if rule.id == "own-one"]) == 1


def test_mistakes_of_all_files_come_in_one_run(tmp_path):
    write(tmp_path, "a.toml", RULE.format(id="one", keys='at-most = "1 V"'))
    write(tmp_path, "b.toml", RULE.format(id="two", keys='at-lest = "1 s"\nat-most = "2 s"'))
    with pytest.raises(UserMistake) as caught:
        rulebook.load(["a.toml", "b.toml", "debunce", "no.toml"], tmp_path)
    assert mistakes(caught) == [
        "a.toml:8:12: 'delay' is a time, '1 V' is a voltage",
        "b.toml:8:1: unknown key 'at-lest'; did you mean 'at-least'?",
        "rules: no pack is called 'debunce'; did you mean 'debounce'?",
        "no.toml: cannot be read: No such file or directory",
    ]


def test_no_two_packs_share_the_id_of_a_rule(tmp_path):
    for name in ("a.toml", "b.toml"):
        write(tmp_path, name, RULE.format(id="one", keys='at-most = "1 s"'))
    with pytest.raises(UserMistake) as caught:
        rulebook.load(["a.toml", "b.toml"], tmp_path)
    assert mistakes(caught) == ["b.toml:3:1: the rule id 'one' is taken"]


def test_settings_are_held_against_the_rules(tmp_path):
    write(tmp_path, "a.toml", RULE.format(id="one", keys='at-most = "hold_time"\ngiven = { hold_time = "ask" }'))
    text = '[settings."one"]\nhold_time = "3 V"\nholdtime = "1 s"\n'
    text += '[net."A"]\nset = { hold_time = "slow" }\n[settings."else"]\nx = 1'
    with pytest.raises(UserMistake) as caught:
        rulebook.load(["a.toml"], tmp_path, project.load("rcrules.toml", text))
    assert mistakes(caught) == [
        "rcrules.toml:2:13: 'hold_time' is a time, found a voltage",
        "rcrules.toml:3:12: rule 'one' has no setting 'holdtime'; did you mean 'hold_time'?",
        "rcrules.toml:4:1: [net.\"A\"] 'hold_time' is a time, found a word",
    ]


def test_settings_of_the_right_kind_pass(tmp_path):
    table = 'at-most = { by = "mode", fast = "1 s" }\ngiven = { mode = "ask" }'
    write(tmp_path, "a.toml", RULE.format(id="one", keys=table))
    assert rulebook.load(["a.toml"], tmp_path, project.load("p", '[settings."one"]\nmode = "fast"'))
    with pytest.raises(UserMistake, match="'mode' must be a word"):
        rulebook.load(["a.toml"], tmp_path, project.load("p", '[settings."one"]\nmode = 3'))
