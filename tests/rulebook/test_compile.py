"""Rules from TOML, with measures made by hand."""

import numpy as np
import pytest

from rcrules import rulebook, tomlfile
from rcrules.errors import UserMistake
from rcrules.levels import parse_level
from rcrules.measures import Measure, Option, Theory
from rcrules.quantities import Spread
from rcrules.rulebook import Comparison, Rule


def nothing(_structure, cases):
    return np.zeros(len(cases))


def unproved(_structure, _low, _high):
    return Theory(signs=())


MEASURES = {
    measure.name: measure
    for measure in (
        Measure(
            name="lateness",
            subject="node",
            unit="s",
            summary="How late it is.",
            compute=nothing,
            theory=unproved,
            options={
                "event": Option(kind="event", default="power-up"),
                "to": Option(kind="level", default="50 % of step", unit="V"),
                "band": Option(kind="quantity", default=0.01),
                "side": Option(kind="choice", default="above", choices=("above", "below")),
            },
        ),
        Measure(
            name="fullness",
            subject="capacitor",
            unit="1",
            summary="How full it is.",
            compute=nothing,
            theory=unproved,
        ),
    )
}
PACK = '[pack]\nname = "team"\ntitle = "Team rules"\nneeds-facts = false\ncaution = "Mind the gap."\n'


def rule(keys: str, measure: str = "lateness") -> Rule:
    text = f'{PACK}[[rule]]\nid = "one"\nlevel = "note"\nmeasure = "{measure}"\n{keys}'
    (found,) = rulebook.compile_pack(tomlfile.load("team.toml", text), MEASURES)
    return found


def told(keys: str, measure: str = "lateness") -> str:
    with pytest.raises(UserMistake) as caught:
        rule(keys, measure)
    return str(caught.value)


def number(value: float, unit: str) -> Spread:
    return Spread(low=value, nominal=value, high=value, unit=unit)


def test_a_rule_knows_its_pack_and_its_place():
    found = rule('at-most = "1 s"\nwhy = "Because."\nsource = "A standard"\nmust-meet = 2\nnever = "holds"')
    assert (found.pack.name, found.pack.title, found.pack.needs_facts) == ("team", "Team rules", False)
    assert found.pack.caution == "Mind the gap."
    assert str(found.place) == "team.toml:6:1"
    assert (found.title, found.why, found.source, found.must_meet, found.never) == (
        "one", "Because.", "A standard", 2, "holds",
    )  # fmt: skip


def test_options_that_a_rule_leaves_out_have_their_defaults():
    assert rule('at-most = "1 s"').options == {
        "event": "power-up",
        "to": parse_level("50 % of step"),
        "band": 0.01,
        "side": "above",
    }


def test_options_may_be_levels_quantities_choices_and_names():
    found = rule('with = { to = "1.2 V", band = "reach", side = "below" }\nat-most = "1 s"\ngiven = { reach = "2 %" }')
    assert found.options["to"].offset == number(1.2, "V")
    assert found.options["band"] == "?reach"
    assert found.options["side"] == "below"
    assert found.given == {"reach": number(0.02, "1")}
    assert found.given_units == {"reach": "1"}


def test_a_level_may_be_a_given_number():
    found = rule('with = { to = "safe" }\nat-most = "1 s"\ngiven = { safe = "60 V" }')
    assert found.options["to"] == "?safe"
    assert found.given_units == {"safe": "V"}


def test_limits_may_be_numbers_names_and_tables():
    found = rule('at-least = "1 ms"\nat-most = { by = "mode", slow = "2 s", fast = "1 s" }\ngiven = { mode = "ask" }')
    least, most = found.limits
    assert (least.kind, least.value) == ("at-least", number(0.001, "s"))
    assert most.table == ("mode", {"slow": number(2, "s"), "fast": number(1, "s")})
    assert found.given_units == {"mode": "word"}
    asked = rule('at-most = "hold_time"\ngiven = { hold_time = "ask" }')
    assert asked.limits[0].name == "hold_time"
    assert asked.given == {"hold_time": "ask"}


def test_numbers_that_the_project_file_knows_need_not_be_given():
    found = rule('at-most = "acquisition_time"')
    assert found.limits[0].name == "acquisition_time"
    assert found.given_units == {"acquisition_time": "s"}


def test_a_ratio_may_be_a_plain_number_or_a_percentage():
    assert rule("at-most = 0.8", "fullness").limits[0].value == number(0.8, "1")
    assert rule('at-most = "80 %"', "fullness").limits[0].value == number(0.8, "1")


def test_every_selection_key_is_kept():
    chosen = rule(
        'role = "debounce"\nname = ["RST", "power good"]\nnet = "A*"\npin = ["U3.*"]\npart = "C1"\nsheet = "/in"\n'
        'kind = "capacitor"\nkind-fed = "adc"\ndielectric = ["X7R"]\ncertainty = "sure"\npolarised = true\n'
        'value = "1 uF .. 10 uF"\nwhen = "supply_high >= 1.8 V"\nany-of = [{ net = "B" }, { part = "C2" }]\n'
        'not = { name = "DBG" }\nat-most = "1 s"'
    ).selection
    assert (chosen.role, chosen.name, chosen.net, chosen.pin) == (
        ("debounce",),
        ("RST", "power good"),
        ("A*",),
        ("U3.*",),
    )
    assert (chosen.part, chosen.sheet, chosen.kind, chosen.kind_fed) == (("C1",), ("/in",), ("capacitor",), ("adc",))
    assert (chosen.dielectric, chosen.certainty, chosen.polarised) == (("X7R",), ("sure",), True)
    assert (chosen.value_at_least.nominal, chosen.value_at_most.nominal) == pytest.approx((1e-6, 1e-5))
    assert chosen.when == Comparison(left="supply_high", right=1.8, sign=">=")
    assert [item.net or item.part for item in chosen.any_of] == [("B",), ("C2",)]
    assert [item.name for item in chosen.exclude] == [("DBG",)]


@pytest.mark.parametrize(
    ("text", "low", "high"), [(">= 1 kohm", 1000, None), ("<=1 kohm", None, 1000), ("1 kohm .. 2 kohm", 1000, 2000)]
)
def test_values_are_ranges(text, low, high):
    chosen = rule(f'value = "{text}"\nat-most = "1 s"').selection
    assert (chosen.value_at_least and chosen.value_at_least.nominal) == low
    assert (chosen.value_at_most and chosen.value_at_most.nominal) == high


def test_examples_are_kept():
    found = rule('at-most = "1 s"\n[[rule.example]]\ncircuit = "R1 10k A B"\noutcome = "fails"')
    assert [(item.circuit, item.outcome) for item in found.examples] == [("R1 10k A B", "fails")]


def test_a_wrong_dimension_is_told_by_the_measure():
    assert told('at-least = "3 V"') == (
        "team.toml:10:13: 'lateness' is a time, '3 V' is a voltage\n"
        '  at-least = "3 V"\n'
        "              ^~~\n"
        "  expected  such as '1 ms'"
    )


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        ('with = { evnt = "press" }\nat-most = "1 s"', "unknown key 'evnt'; did you mean 'event'?"),
        ('with = { side = "left" }\nat-most = "1 s"', "'left' is not known as 'side'"),
        ('with = { band = "1 % .. 2 %" }\nat-most = "1 s"', "'band' must be one number, not a range"),
        ('with = { band = "reach" }\nat-most = "1 s"', "no number is called 'reach'"),
        ('at-most = "1 s"\ngiven = { "A b" = 1 }', "cannot be the name of a number"),
        ('at-most = { slow = "1 s" }', "needs by = the name of a word"),
        ('at-most = { by = "mode" }', "has no limit for any word"),
        ('at-most = { by = "mode", a = "1 s" }\ngiven = { mode = "a" }', "'mode' is a word, which a rule cannot bring"),
        ("at-most = 3", "'at-most' must be a time such as '1.2 ms' in quotes"),
        ("net = [" + '"A",' * 201 + ']\nat-most = "1 s"', "'net' must hold 1 to 200 texts"),
        (f"net = '{'a' * 201}'\nat-most = '1 s'", "a glob that is too long"),
    ],
)
def test_what_cannot_be_understood_is_told(keys, words):
    assert words in told(keys)


def test_a_file_with_very_many_rules_is_refused():
    text = PACK + '[[rule]]\nid = "a"\n' * 501
    with pytest.raises(UserMistake, match="too many rules"):
        rulebook.compile_pack(tomlfile.load("team.toml", text), MEASURES)
