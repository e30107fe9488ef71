"""Questions about pins and contacts, posed on small boards."""

from math import inf

import pytest

from rcrules.events import Unmeasurable, pose
from rcrules.measures import registry
from rcrules.problems import Bounds, Problem, solve_bounds
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
SUPPLY = '[supply."+3V3"]\nvoltage = "3.3 V"\n'
POWER = """
    +3V3: U2.1/VO/power_out U1.3/VDD/power_in {more}
    GND: U2.2/GND/power_in U1.2/GND/power_in {ground}
"""


def posed(board: Bench, key: str, measure: str, **options: str) -> Problem:
    ref, _, name = key.partition(".")
    pin = next(pin for pin in board.board.design.parts[ref].pins if name in (pin.name, pin.number))
    return pose(board.board, board.project, pin, registry()[measure], options)


def measured(board: Bench, key: str, measure: str, **options: str) -> Bounds:
    found = solve_bounds([(posed(board, key, measure, **options), registry()[measure], True)])[0]
    assert isinstance(found, Bounds)
    return found


def pulled_up(ohms: str, pin: str, tolerance: str = EXACT) -> Bench:
    """A pull-up to 3.3 V, a contact to ground, and 100 nF."""
    nets = POWER.format(more="R1.1", ground="C1.2 SW1.2") + "KEY: R1.2 C1.1 SW1.1 U1.7/KEY/input\n"
    project = SUPPLY + tolerance + f'[pin."U1.KEY"]\n{pin}\n[part."SW1"]\ncontact-resistance = "100 ohm"\n'
    return bench(f"R1 {ohms}, C1 100n, SW1 push, U1 QX7301, U2 QX3300", nets, project)


def test_leakage_takes_from_the_high_level_what_it_drops_across_the_pull_up():
    found = measured(pulled_up("1M", 'leakage = "-1 uA .. 1 uA"'), "U1.KEY", "input_voltage_high")
    assert found.low == pytest.approx(2.3)
    assert found.high == pytest.approx(3.3)  # leakage from the rail pushes no further
    assert found.proved


def test_the_low_level_is_that_of_the_pressed_contact():
    found = measured(pulled_up("10k", 'leakage = "0 A"'), "U1.KEY", "input_voltage_low")
    assert found.nominal == pytest.approx(3.3 * 100 / 10100)
    assert found.proved


@pytest.mark.parametrize(("supply", "ohms"), [(3.3, "966.667"), (5.0, "1533.33"), (2.5, "700")])
def test_the_smallest_pull_up_lets_a_pin_reach_its_low_level(supply: float, ohms: str):
    """UM10204 section 7.1, table 9: Rp(min) = (VDD - 0.4 V)/3 mA; TI SLVA689 prints 966.667 Ω for 3.3 V."""
    nets = POWER.format(more="R1.1 U3.3/VDD/power_in", ground="U3.2/GND/power_in")
    nets += "SDA: R1.2 U1.7/SDA/bidirectional U3.7/SDA/bidirectional\n"
    project = f'[supply."+3V3"]\nvoltage = "{supply} V"\n[net."SDA"]\nwiring-capacitance = "100 pF"\n'
    project += '[pin."*.SDA"]\ndrive = "0.4 V at 3 mA"\n'
    board = bench(f"R1 {ohms}, U1 QX7301, U2 QX3300, U3 QX7301", nets, project + EXACT)
    assert measured(board, "U1.SDA", "input_voltage_low").nominal == pytest.approx(0.4, rel=1e-5)


def test_a_level_that_nothing_known_makes_is_no_level():
    nets = POWER.format(more="R1.1", ground="C1.2") + "EN: R1.2 C1.1 U1.7/EN/input\n"
    board = bench("R1 10k, C1 1u, U1 QX7301, U2 QX3300", nets, SUPPLY + EXACT)
    assert measured(board, "U1.EN", "input_voltage_high").nominal == pytest.approx(3.3)
    with pytest.raises(Unmeasurable, match=r"drives U1\.EN low"):
        posed(board, "U1.EN", "input_voltage_low")


def two_supplies(limit: str = '[pin."U1.IN"]\nmax-voltage = "+3V3 + 0.3 V"\n') -> Bench:
    """A divider from 5 V to a pin of a part at 3.3 V."""
    nets = """
        +5V: U2.3/VI/power_in R1.1
        +3V3: U2.1/VO/power_out U1.3/VDD/power_in
        N: R1.2 R2.1 C1.1 U1.7/IN/input
        GND: U2.2/GND/power_in U1.2/GND/power_in R2.2 C1.2
    """
    project = SUPPLY + '[supply."+5V"]\nvoltage = "5 V"\n' + limit + EXACT
    return bench("R1 10k, R2 15k, C1 1n, U1 QX7301, U2 QX3300", nets, project)


def test_a_pin_meets_most_while_all_supplies_are_on():
    found = measured(two_supplies(), "U1.IN", "pin_voltage")
    assert (found.nominal, found.proved) == (pytest.approx(3.0), True)
    assert measured(two_supplies(), "U1.IN", "pin_voltage", extreme="least").nominal == pytest.approx(0.0)


def test_a_pin_may_be_over_its_limit_while_its_own_supply_is_off():
    """3 V at a pin that may carry 0.3 V while +3V3 is off; with both on it is 0.6 V below the limit."""
    assert measured(two_supplies(), "U1.IN", "pin_voltage", above="limit").nominal == pytest.approx(2.7)


def test_a_limit_that_is_not_known_is_asked_for():
    with pytest.raises(Unmeasurable) as caught:
        posed(two_supplies(""), "U1.IN", "pin_voltage", above="limit")
    assert caught.value.ask == '[pin."U1.IN"] max-voltage = "…"'


def shorted(ohms: str) -> Bench:
    """Circuit 6: 10 kΩ to A with the contact, 1 kΩ to N with 1 µF."""
    nets = POWER.format(more="R1.1", ground="C1.2 SW1.2") + "A: R1.2 R2.1 SW1.1\nN: R2.2 C1.1 U1.7/KEY/input\n"
    project = SUPPLY + EXACT + f'[part."SW1"]\ncontact-resistance = "{ohms}"\n'
    return bench("R1 10k, R2 1k, C1 1u, SW1 push, U1 QX7301, U2 QX3300", nets, project)


def test_a_resistor_limits_what_a_contact_shorts():
    """Circuit 6: 3.3 V/1 kΩ from the capacitor and 3.3 V/10 kΩ from the pull-up."""
    found = measured(shorted("0 ohm"), "SW1.1", "peak_pin_current")
    assert found.nominal == pytest.approx(3.63e-3, rel=1e-6)


def test_energy_divides_between_contact_and_resistor():
    found = measured(shorted("250 ohm"), "SW1.1", "discharged_energy")
    whole = 0.5e-6 * 3.3**2
    rest = 3.3 * 250 / 10250  # where it ends
    seen = 1000 + 10e3 * 250 / 10250
    assert found.nominal == pytest.approx(
        (3.3 - rest) ** 2 / seen**2 * (10e3 / 10250) ** 2 * 250 * seen * 1e-6 / 2, rel=1e-9
    )
    assert found.nominal < 0.25 * whole


def test_a_bare_contact_takes_the_whole_energy():
    nets = POWER.format(more="R1.1", ground="C1.2 SW1.2") + "KEY: R1.2 C1.1 SW1.1 U1.7/KEY/input\n"
    bare = bench(
        "R1 10k, C1 100u, SW1 push, U1 QX7301, U2 QX3300",
        nets,
        SUPPLY + EXACT + '[part."SW1"]\ncontact-resistance = "0 ohm"\n',
    )
    assert measured(bare, "SW1.1", "discharged_energy").nominal == pytest.approx(0.5e-4 * 3.3**2, rel=1e-6)
    assert measured(bare, "SW1.1", "peak_pin_current").nominal == inf


def test_a_pin_that_drives_low_is_limited_by_its_strength():
    board = pulled_up("10k", 'drive = "0.4 V at 8 mA"')
    assert measured(board, "U1.KEY", "peak_pin_current").nominal == pytest.approx(3.3 / 50)
    with pytest.raises(Unmeasurable) as caught:
        posed(pulled_up("10k", 'leakage = "0 A"'), "U1.KEY", "peak_pin_current")
    assert caught.value.ask == '[pin."U1.KEY"] drive = "… V at … mA"'
