"""A rule in one plain sentence."""

import pytest

from rcrules import rulebook, tomlfile
from rcrules.measures import registry


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        (
            'role = ["power-on-delay", "debounce"]\nname = "RST"\nmeasure = "delay"\nat-least = "hold_time"\n'
            'with = { event = "power-up", from = "supply valid", to = "may switch" }\ngiven = { hold_time = "ask" }',
            "for every node with role power-on-delay or debounce named RST, the shortest delay after power-up "
            "from supply valid to 'may switch' must be at least hold_time (asked)",
        ),
        (
            'kind = "capacitor"\ndielectric = "X7R"\nwhen = "voltage_high > 60 V"\n'
            'measure = "voltage_ratio"\nat-most = "80 %"',
            "for every capacitor of dielectric X7R where voltage_high > 60 V, "
            "the highest voltage ratio must be at most 80 %",
        ),
        (
            'measure = "settling_time"\nwith = { event = "step-up", band = "1 %" }\nat-most = "acquisition_time"',
            "for every node, the longest settling time after step-up band 1 % "
            "must be at most acquisition_time (of the project file)",
        ),
        (
            'measure = "time_constant"\nat-least = "1 ms"\nat-most = { by = "mode", slow = "1 s", fast = "0.1 s" }\n'
            'not = { net = "A" }\nany-of = [{ part = "R1" }, { value = ">= 1 uF" }]\nnever = "holds"\npolarised = true',
            "for every node polarised either of reference R1, or of at least 1 µF except those on net A, "
            "the time constant must be at least 1 ms and at most 1 s where mode is slow, 100 ms where mode is fast; "
            "never reaching the level is fine",
        ),
        (
            'measure = "time_constant"\nat-most = "longest"\ngiven = { longest = "20 ms" }\nvalue = "<= 1 kohm"',
            "for every node of at most 1 kΩ, the longest time constant must be at most longest "
            "(20 ms unless the project says otherwise)",
        ),
        (
            'every = { subject = "contact pin", has-no = { kind = "capacitor", to = "ground" } }',
            "for every contact pin, the number of capacitors to ground on its nets must be at most 0",
        ),
        (
            'value = "resistance"\none-of = ["4.7 kohm", "10 kohm"]\nrole = "bus-pull-up"',
            "for every resistor with role bus-pull-up, the resistance at nominal values must be 4.7 kohm or 10 kohm",
        ),
        (
            'subject = "resistor"\nvalue = "(power / 1 W)^2 * 2^bits"\nat-most = "5"\ngiven = { bits = "3" }\n'
            "when = \"size = '0402'\"",
            "for every resistor where size = '0402', the highest value of (power / 1 W)^2 * 2^bits must be at most 5",
        ),
    ],
)
def test_a_rule_reads_aloud(keys, words):
    text = f'[pack]\nname = "a"\n[[rule]]\nid = "one"\nlevel = "note"\n{keys}\n'
    (rule,) = rulebook.compile_pack(tomlfile.load("a.toml", text), registry())
    assert rulebook.sentence(rule) == words
