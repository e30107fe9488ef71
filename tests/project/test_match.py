"""Which table of the project file speaks about a thing."""

from rcrules import project


def test_an_exact_name_comes_before_a_glob_and_keys_add_up():
    found = project.load(
        "p", '[net."AIN0"]\nswing = "0 V .. 1 V"\n[net."AIN*"]\nswing = "0 V .. 3 V"\nsource-resistance = "50 ohm"'
    )
    assert project.net_facts(found, "AIN0").swing.high == 1
    assert project.net_facts(found, "AIN0").source_resistance.high == 50
    assert project.net_facts(found, "AIN1").swing.high == 3
    assert project.net_facts(found, "OUT") is None


def test_a_glob_with_more_letters_comes_before_one_with_fewer():
    found = project.load(
        "p", '[part."C1?"]\ndielectric = "X7R"\n[part."C*"]\ndielectric = "X5R"\n[part."C12"]\nfitted = true'
    )
    assert project.part_facts(found, "C12").dielectric == "X7R"
    assert project.part_facts(found, "C2").dielectric == "X5R"


def test_of_equal_globs_the_later_wins():
    found = project.load("p", '[supply."+5*"]\nvoltage = "5 V"\n[supply."+*V"]\nvoltage = "4 V"')
    assert project.supply_for(found, "+5V").voltage.high == 4


def test_a_pin_goes_by_name_and_by_number():
    found = project.load("p", '[pin."U3.7"]\nleakage = "1 uA"\n[pin."U3.N*"]\ncapacitance = "5 pF"')
    facts = project.pin_facts(found, ["U3.NRST", "U3.7"])
    assert facts.leakage.high == 1e-6
    assert facts.capacitance is not None
    assert set(facts.set) == {"leakage", "capacitance"}


def test_brackets_in_a_name_are_taken_literally_first():
    found = project.load("p", '[ground]\nnets = ["D[0]"]')
    assert project.is_ground(found, "D[0]")
    assert not project.is_ground(found, "D1")


def test_names_that_mean_nothing_are_reported_with_the_nearest():
    found = project.load(
        "p",
        '[ground]\nnets = ["GND"]\n[net."RESTN"]\nheld = "free"\n[pin."U9.*"]\n[part."R1"]\n'
        '[supply."+5V"]\nafter = "+3V"',
    )
    told = project.unmatched(found, ["GND", "RESETN", "+5V", "+3V3"], ["U1.A", "U1.1"], ["R1"])
    assert [f"{item.place.line}: {item.text}" for item in told] == [
        "3: [net] RESTN names no net of this board (4 nets; nearest: RESETN)",
        "5: [pin] U9.* matches no pin of this board (2 pins)",
        '7: [supply."+5V"] after +3V names no net of this board (4 nets; nearest: +3V3)',
    ]


def test_globs_cannot_hang():
    found = project.load("p", f'[net."{"*a" * 90}b"]\nheld = "free"')
    assert project.net_facts(found, "a" * 5000) is None


def test_one_table_may_name_several_things():
    found = project.load("p", '[part."C7, C8, D?"]\ndielectric = "X7R"')
    assert [bool(project.part_facts(found, ref)) for ref in ("C7", "C8", "D1", "C9")] == [True, True, True, False]
    assert project.unmatched(found, [], [], ["C8"]) == []
    assert len(project.unmatched(found, [], [], ["R1"])) == 1


def test_nets_that_levels_and_pulls_follow_are_looked_for_too():
    found = project.load(
        "p", '[pin."U1.A"]\nlow = "30 % of +3V3"\nhigh = "70 % of +9V"\npull-up = "25 kohm to +3V"\nmax-voltage = "5 V"'
    )
    told = project.unmatched(found, ["+3V3", "+5V"], ["U1.A"], [])
    assert [item.text for item in told] == [
        '[pin."U1.A"] high +9V names no net of this board (2 nets; nearest: +5V)',
        '[pin."U1.A"] pull-up +3V names no net of this board (2 nets; nearest: +3V3)',
    ]
