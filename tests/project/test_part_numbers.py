"""Part-number patterns in the project file and in team files."""

import pytest

from rcrules import project
from rcrules.errors import UserMistake

PATTERN = '[[part-number]]\nname = "{}"\nkind = "resistor"\nfields = [ {{ text = "Q" }}, {{ value = "rest" }} ]\n'


def test_patterns_of_the_file_come_before_those_of_the_team(tmp_path):
    (tmp_path / "team").mkdir()
    (tmp_path / "team" / "parts.toml").write_text(PATTERN.format("team"))
    path = tmp_path / "rcrules.toml"
    path.write_text('[board]\npart-numbers = ["team/parts.toml"]\n' + PATTERN.format("own"))
    assert [item.name for item in project.read(path).part_numbers] == ["own", "team"]


def test_codes_are_si_numbers_and_words():
    text = PATTERN.format("own").replace("{ value", '{ rated-voltage = 1, codes = { A = "1 kV" } }, { value')
    field = project.load("rcrules.toml", text).part_numbers[0].fields[1]
    assert (field.what, field.width, field.codes) == ("rated-voltage", 1, {"A": 1000.0})


def test_mistakes_of_a_team_file_are_told_with_its_name(tmp_path):
    (tmp_path / "parts.toml").write_text('[[part-number]]\nname = "team"\n[rules]\n')
    path = tmp_path / "rcrules.toml"
    path.write_text('[board]\npart-numbers = ["parts.toml", "gone.toml"]\n')
    with pytest.raises(UserMistake) as caught:
        project.read(path, "rcrules.toml")
    told = "\n".join(map(str, caught.value.mistakes))
    assert "gone.toml" in told
    assert "parts.toml:3:2: unknown key 'rules'" in told


def test_the_columns_of_a_pattern_are_named_in_any_case():
    text = PATTERN.format("own") + 'in = ["Description", "Order No."]\n'
    assert project.load("rcrules.toml", text).part_numbers[0].columns == ("description", "order no.")
