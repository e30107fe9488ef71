"""What a rule may be held against, from a board in text."""

from rcrules import tomlfile
from rcrules.checks import check
from rcrules.checks._subjects import Subjects
from rcrules.findings import Finding
from rcrules.measures import registry
from rcrules.rulebook import compile_pack
from tests.events.boards import Bench, bench

NETS = """
    +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in C2.1
    KEY: R1.2 C1.1 SW1.1 U1.7/KEY/input
    GND: U2.2/GND/power_in U1.2/GND/power_in C1.2 C2.2 SW1.2
"""


def board(project: str = "") -> Bench:
    return bench("R1 10k, C1 100n, C2 10u, SW1 push, U1 QX7301, U2 QX3300", NETS, project)


def judged(keys: str, at: Bench) -> list[Finding]:
    """The findings of one rule."""
    text = f'[pack]\nname = "house"\n[[rule]]\nid = "rule"\nlevel = "error"\n{keys}\n'
    rules = compile_pack(tomlfile.load("house.toml", text), registry())
    return check(at.board, at.project, rules).findings


def test_pins_are_those_of_active_parts_and_contacts_at_free_nets():
    found = Subjects(board().board).of("pin")
    assert [item.feeds for item in found] == [("SW1.1",), ("U1.KEY",)]
    assert [item.net for item in found] == ["KEY", "KEY"]


def test_a_supply_is_one_subject_and_a_network_is_one():
    assert [item.net for item in Subjects(board().board).of("supply")] == ["+3V3"]
    assert [item.refs for item in Subjects(board().board).of("network")] == [("C1", "R1")]


def test_a_rule_may_ask_for_contacts_apart_from_pins():
    project = '[supply."+3V3"]\nvoltage = "3.3 V"\n[part."SW1"]\ncontact-resistance = "10 ohm"\n'
    (found,) = judged('measure = "peak_pin_current"\nkind = "contact"\nat-most = "100 mA"', board(project))
    assert (found.subject, found.feeds, found.outcome) == ("pin", ["SW1.1"], "fails")
    assert found.measured is not None
    assert abs(found.measured.nominal - 0.33) < 1e-9


def test_a_pin_may_be_selected_by_its_name():
    project = '[supply."+3V3"]\nvoltage = "3.3 V"\n[pin."U1.KEY"]\nhigh = "2.31 V"\nleakage = "-1 uA .. 1 uA"\n'
    (found,) = judged('measure = "input_voltage_high"\npin = "U1.*"\nat-least = "2.31 V"', board(project))
    assert (found.feeds, found.outcome) == (["U1.KEY"], "holds")


def test_a_rule_names_the_subject_of_a_measure_that_several_have():
    project = '[supply."+3V3"]\nvoltage = "3.3 V"\n[defaults.resistor]\nrated-voltage = "50 V"\n'
    (found,) = judged('measure = "voltage_ratio"\nsubject = "resistor"\nat-most = "80 %"', board(project))
    assert (found.subject, found.parts, found.outcome) == ("resistor", ["R1"], "holds")
