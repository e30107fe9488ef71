"""Rules about the share of boards that pass, against the law of a uniform number."""

from dataclasses import replace

import pytest

from rcrules import tomlfile
from rcrules.errors import Place, UserMistake
from rcrules.examples import tried
from rcrules.findings import Finding
from rcrules.measures import registry
from rcrules.rulebook import Example, Rule, compile_pack, sentence

CIRCUIT = """
R1 10k 10% : +3V3, NRST
C1 100nF C0G : NRST, GND
U1 x : VDD power-in +3V3, NRST input NRST, GND power-in GND
"""
STEADY = """
[supply."+3V3"]
voltage = "3.3 V"
[conditions]
temperature = "25 degC .. 25 degC"
[part."C1"]
tolerance = "0.001 %"
"""


def rule(limit: str, share: str = "90 %") -> Rule:
    text = (
        '[pack]\nname = "team"\n[[rule]]\nid = "tried"\nlevel = "error"\nrole = "power-on-delay"\n'
        f'measure = "time_constant"\nat-most = "{limit}"\nbounds = "yield"\npassing = "{share}"'
    )
    (found,) = compile_pack(tomlfile.load("team.toml", text), registry())
    return found


def judged(limit: str, share: str = "90 %") -> Finding:
    example = Example(place=Place(file="team.toml"), circuit=CIRCUIT, project=STEADY, outcome="holds")
    (found,) = tried(replace(rule(limit, share), examples=(example,)))
    (only,) = found.findings
    return only


@pytest.mark.parametrize(("limit", "outcome"), [("1.085 ms", "holds"), ("1.075 ms", "fails")])
def test_the_share_of_a_uniform_number_below_a_limit(limit, outcome):
    """R is uniform over 9 .. 11 kΩ, so RC stays below 1.08 ms on exactly 90 % of the boards."""
    assert judged(limit).outcome == outcome


def test_what_the_random_cases_do_not_tell_is_undecided():
    found = judged("1.08 ms")
    assert found.outcome == "undecided"
    assert "of the boards pass (10000 random cases, 95 % confidence)" in found.reason


def test_what_holds_in_the_worst_case_passes_everywhere():
    assert judged("1.2 ms", "99.999 %").outcome == "holds"


def test_the_same_is_said_each_time():
    assert judged("1.075 ms").reason == judged("1.075 ms").reason


def test_the_rule_reads_aloud():
    assert sentence(rule("1 ms")).endswith("the time constant must be at most 1 ms on 90 % of the boards")


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        ('bounds = "yield"', "'passing' is missing"),
        ('passing = "99 %"', "'passing' goes with bounds = \"yield\""),
        ('bounds = "yield"\npassing = "100 %"', "random cases cannot show so much"),
        ('bounds = "yield"\npassing = "3 V"', "'passing' is a plain number or ratio, '3 V' is a voltage"),
        ('bounds = "yield"\npassing = "20 %"', "'passing' must not be below"),
    ],
)
def test_what_is_no_share_is_told(keys, words):
    text = f'[pack]\nname = "t"\n[[rule]]\nid = "a"\nlevel = "note"\nmeasure = "time_constant"\nat-most = "1 s"\n{keys}'
    with pytest.raises(UserMistake) as caught:
        compile_pack(tomlfile.load("team.toml", text), registry())
    assert words in str(caught.value)
