"""Rules tried: on their own examples, and on a board."""

import re
from pathlib import Path

import pytest

from rcrules.cli import main

EXAMPLE = """
[[rule.example]]
outcome = "{outcome}"
circuit = '''
R1 10k 1% : +3V3, NRST
C1 100nF 5% C0G : NRST, GND
U1 controller : VDD power-in +3V3, NRST input NRST, GND power-in GND
'''
"""
RULE = """[pack]
name = "team"
[[rule]]
id = "reset-has-a-millisecond"
level = "warning"
role = "power-on-delay"
measure = "time_constant"
at-least = "0.5 ms"
"""


def told(tmp_path: Path, capsys: pytest.CaptureFixture[str], text: str, *more: str) -> tuple[int, str]:
    (tmp_path / "team.toml").write_text(text, encoding="utf-8")
    code = main(["rules", str(tmp_path / "team.toml"), *more])
    return code, capsys.readouterr().out


def test_an_example_that_comes_out_as_its_rule_says_is_right(tmp_path, capsys):
    code, out = told(tmp_path, capsys, RULE + EXAMPLE.format(outcome="holds"), "--try")
    assert code == 0
    assert "right       reset-has-a-millisecond   1 example: holds" in out
    assert "rules 1, examples 1, wrong 0, rules without an example 0" in out


def test_an_example_that_does_not_is_told_with_its_place_and_numbers(tmp_path, capsys):
    code, out = told(tmp_path, capsys, RULE + EXAMPLE.format(outcome="fails"), "--try")
    assert code == 1
    assert "wrong       reset-has-a-millisecond" in out
    assert "team.toml:10:1   expected fails, found holds: NRST   " in out
    assert "must be at least 500 µs" in out


def test_a_rule_that_meets_nothing_in_its_example_is_wrong(tmp_path, capsys):
    text = RULE.replace("power-on-delay", "snubber") + EXAMPLE.format(outcome="holds")
    code, out = told(tmp_path, capsys, text, "--try")
    assert code == 1
    assert "and the rule meets nothing in this circuit" in out


def test_a_rule_without_an_example_is_told(tmp_path, capsys):
    code, out = told(tmp_path, capsys, RULE, "--try")
    assert code == 0
    assert "no example  reset-has-a-millisecond" in out


def test_a_circuit_that_is_not_understood_is_a_mistake_of_the_file(tmp_path, capsys):
    assert main(["rules", _written(tmp_path, RULE + EXAMPLE.replace(" : NRST, GND", "")), "--try"]) == 2
    assert "a line of the circuit is no part" in capsys.readouterr().err


def _written(tmp_path: Path, text: str) -> str:
    (tmp_path / "team.toml").write_text(text.format(outcome="holds"), encoding="utf-8")
    return str(tmp_path / "team.toml")


@pytest.mark.usefixtures("board")
def test_a_rule_on_a_board_shows_what_it_meets_with_its_numbers(tmp_path, capsys):
    code, out = told(tmp_path, capsys, RULE, "--on", "board.xml")
    assert code == 0
    assert "reset-has-a-millisecond   meets 1 of 1 nodes" in out
    assert "holds   NRST" in out
    assert "holds for a limit up to" in out


@pytest.mark.usefixtures("board")
def test_a_limit_in_per_cent_turns_in_per_cent(tmp_path, capsys):
    text = RULE.replace('role = "power-on-delay"\nmeasure = "time_constant"\nat-least = "0.5 ms"', "").rstrip()
    rule = f'{text}\nmeasure = "voltage_ratio"\nat-most = "80 %"\n'
    _, out = told(tmp_path, capsys, rule, "--on", "board.xml")
    assert re.search(r"holds for a limit from [0-9.]+ %", out)


@pytest.mark.usefixtures("board")
def test_a_near_miss_is_told_with_the_key_that_leaves_it_out(tmp_path, capsys):
    text = RULE.replace('"power-on-delay"', '["debounce", "snubber"]')
    _, out = told(tmp_path, capsys, text, "--on", "board.xml")
    assert "meets 0 of 1 nodes" in out
    assert "near miss   NRST   role: power-on-delay, asked for debounce or snubber" in out


@pytest.mark.usefixtures("board")
def test_what_differs_in_more_than_one_key_is_counted(tmp_path, capsys):
    text = RULE.replace('"power-on-delay"', '"debounce"\nnet = "KEY_*"')
    _, out = told(tmp_path, capsys, text, "--on", "board.xml")
    assert "differ in more than one key: 1" in out
