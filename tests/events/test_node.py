"""Questions about nodes, posed on small boards."""

from dataclasses import replace
from math import exp, inf, log

import numpy as np
import pytest
from scipy.integrate import solve_ivp

from rcrules.events import Unmeasurable, pose
from rcrules.measures import registry
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
SUPPLY = '[supply."+3V3"]\nvoltage = "3.3 V"\n'


def reset(project: str = SUPPLY, extra: str = "", parts: str = "") -> Bench:
    """10 kΩ and 100 nF at a reset pin."""
    nets = f"""
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in {extra and "D1.1"}
        NRST: R1.2 C1.1 U1.7/NRST/input {extra}
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    return bench(f"R1 10k, C1 100n, U1 QX7301, U2 QX3300{parts}", nets, project + EXACT)


def low_pass(project: str = "") -> Bench:
    """1 kΩ and 100 nF from a connector to a converter."""
    nets = """
        IN: J1.1 R1.1
        N: R1.2 C1.1 U1.1/AIN0/input
        GND: J1.2 C1.2 U1.2/GND/power_in
        +3V3: U1.3/VDD/power_in
    """
    return bench("R1 1k, C1 100n, J1 IN, U1 QX7301", nets, project + EXACT)


def refusal(board: Bench, at: str, measure: str, **options: str | float) -> Unmeasurable:
    with pytest.raises(Unmeasurable) as caught:
        board.pose(at, measure, **options)
    return caught.value


def test_an_active_network_is_not_measured():
    board = low_pass()
    node = replace(board.node("N"), active="amplifier U7 inside the loop")
    with pytest.raises(Unmeasurable, match="active network: amplifier U7 inside the loop"):
        pose(board.board, board.project, node, registry()["time_constant"])


def test_a_driver_of_unknown_swing_does_not_matter_to_parts_of_the_step():
    assert low_pass().measure("N", "settling_time", band=0.01).nominal == pytest.approx(1e-4 * log(100))
    assert low_pass().measure("N", "time_to_63").nominal == pytest.approx(1e-4)


def test_a_driver_of_unknown_swing_is_asked_for_where_volts_count():
    error = refusal(low_pass(), "N", "delay", event="step-up", to="1 V")
    assert "IN" in error.reason
    assert error.ask == '[net."IN"] swing = "…"'


def test_thresholds_of_the_fed_pin_are_asked_for():
    error = refusal(reset(), "NRST", "delay", event="power-up", to="may switch")
    assert error.ask == '[pin."U1.NRST"] low = "…"  high = "…"'


def test_counting_from_a_valid_supply_needs_its_rise_and_level():
    error = refusal(reset(), "NRST", "delay", event="power-up", from_="supply valid", to="1 V")
    assert error.ask == '[supply."+3V3"] valid = "…"  rise = "…"'


def test_a_supply_known_by_its_name_is_an_assumption_of_five_percent():
    problem = reset(project="").pose("NRST", "delay", event="power-up", to="1 V")
    supply = next(item for item in problem.parameters if item.name == "+3V3")
    assert (supply.low, supply.nominal, supply.high) == pytest.approx((3.135, 3.3, 3.465))
    assert supply.given_low == supply.given_high == supply.nominal
    assert "by its name or pins" in supply.assumed[0]
    assert supply.ask == '[supply."+3V3"] voltage = "…"'


def test_a_supply_without_rise_is_said_to_rise_at_once():
    problem = reset().pose("NRST", "delay", event="power-up", to="1 V")
    assert any("rises at once" in text for item in problem.parameters for text in item.assumed)


def test_a_supply_that_feeds_and_sets_the_threshold_is_one_column():
    facts = '[supply."+3V3"]\nvoltage = "3.3 V +/- 3 %"\n[pin."U1.NRST"]\nlow = "30 % of +3V3"\nhigh = "70 % of +3V3"\n'
    problem = reset(facts).pose("NRST", "delay", event="power-up", to="may switch")
    assert [item.name for item in problem.parameters].count("+3V3") == 1
    assert "U1.NRST low" in [item.name for item in problem.parameters]


@pytest.mark.parametrize(
    ("event", "to", "volts"),
    [
        ("power-up", "may switch", 1.2),
        ("power-up", "must have switched", 1.9),
        ("power-down", "may switch", 1.4),
        ("power-down", "must have switched", 0.8),
    ],
)
def test_a_schmitt_pin_has_edges_by_direction(event: str, to: str, volts: float):
    pin = '[pin."U1.NRST"]\nrising = "1.2 V .. 1.9 V"\nfalling = "0.8 V .. 1.4 V"\n'
    left = (3.3 - volts) / 3.3 if event == "power-up" else volts / 3.3
    found = reset(SUPPLY + pin).measure("NRST", "delay", event=event, to=to)
    assert found.nominal == pytest.approx(-1e-3 * log(left))


def test_the_drivers_own_resistance_adds_to_the_filter():
    board = low_pass('[net."IN"]\nsource-resistance = "1 kohm"\n')
    assert board.measure("N", "time_constant").nominal == pytest.approx(2e-4)
    assert board.measure("N", "time_to_63").nominal == pytest.approx(2e-4)


def test_pins_and_wiring_load_the_node():
    pin = '[pin."U1.AIN0"]\ncapacitance = "50 nF"\n[net."N"]\nwiring-capacitance = "50 nF"\n'
    assert low_pass(pin).measure("N", "time_constant").nominal == pytest.approx(2e-4)


def test_a_pull_up_inside_the_pin_is_a_resistor():
    pin = SUPPLY + '[pin."U1.NRST"]\npull-up = "10 kohm to +3V3"\n'
    assert reset(pin).measure("NRST", "time_constant").nominal == pytest.approx(0.5e-3)


def test_both_ends_held_have_a_time_constant_but_no_events():
    nets = """
        +48V: U1.1/VIN/power_in C1.1 R1.1
        GND: U1.2/GND/power_in C1.2 R1.2
    """
    board = bench("R1 1M, C1 1n, U1 QX4805", nets, EXACT)
    pair = next(node for network in board.board.networks for node in network.nodes if node.across)
    assert board.measure(pair, "time_constant").nominal == pytest.approx(1e-3)
    with pytest.raises(Unmeasurable, match="both ends"):
        board.pose(pair, "delay", event="power-up", to="1 V")


def test_no_contact_is_told():
    assert "no contact" in refusal(reset(), "NRST", "delay", event="press", to="1 V").reason


def test_supplies_rise_in_their_order():
    """+3V3 starts when +5V, 10 ms from 0 to 5 V, has reached 2.5 V."""
    facts = '[supply."+5V"]\nvoltage = "5 V"\nrise = "10 ms"\nvalid = "2.5 V"\n'
    later = '[supply."+3V3"]\nvoltage = "3.3 V"\nafter = "+5V"\n'
    nets = """
        +5V: U2.3/VI/power_in
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        NRST: R1.2 C1.1 U1.7/NRST/input
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    board = bench("R1 10k, C1 100n, U1 QX7301, U2 QX3300", nets, facts + later + EXACT)
    found = board.measure("NRST", "delay", event="power-up", to="1 V")
    assert found.nominal == pytest.approx(5e-3 + 1e-3 * log(3.3 / 2.3))


def leaking(leakage: str, ohms: str = "1M", supply: str = "") -> Bench:
    """Circuit 7: 1 MΩ, 1 µF, and a pin that leaks into or out of the node."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        NRST: R1.2 C1.1 U1.7/NRST/input
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    facts = f'[supply."+3V3"]\nvoltage = "3.3 V"\n{supply}\n[pin."U1.7"]\nleakage = "{leakage}"\n'
    exact = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
    return bench(f"R1 {ohms}, C1 1u, U1 QX7301, U2 QX3300", nets, facts + exact)


def test_leakage_pushes_no_node_beyond_its_rails():
    """1 µA through 1 MΩ would end at 4.3 V, or stay at 2.3 V; the upper rail takes it at 3.3 V."""
    found = leaking("-1 uA .. 1 uA").measure("NRST", "final_voltage", given_only=True)
    assert (found.low, found.high) == (pytest.approx(2.3), pytest.approx(3.3, rel=1e-8))
    assert leaking("4 uA .. 5 uA").measure("NRST", "final_voltage").nominal == pytest.approx(0.0, abs=1e-7)


def test_a_level_beyond_the_rail_is_never_reached():
    found = leaking("-1 uA .. 1 uA").measure("NRST", "delay", event="power-up", to="3.5 V", given_only=True)
    assert (found.low, found.high) == (inf, inf)


def test_a_level_within_the_rails_is_reached_as_with_a_current():
    """Circuit 7: 0.770480 s with 1 µA into the node, never with 1 µA out of it (worked out apart)."""
    found = leaking("-1 uA .. 1 uA").measure("NRST", "delay", event="power-up", to="2.31 V", given_only=True)
    assert (found.low, found.high) == (pytest.approx(0.770480, rel=2e-6), inf)


def test_a_node_waits_at_ground_for_its_supply():
    """0.5 µA through 1 MΩ hold it at 0 V until the ramp has passed 0.5 V; then it charges as from rest (by hand)."""
    slow = leaking("0.5 uA", supply='rise = "20 s"').measure("NRST", "voltage_at", time=12.0).nominal
    begins = 0.5 / (3.3 / 20)
    since = 12.0 - begins
    assert slow == pytest.approx(3.3 / 20 * (since - 1.0 * (1 - exp(-since))), rel=1e-6)


def test_what_leakage_hardly_moves_stays_a_linear_circuit():
    assert leaking("-1 uA .. 1 uA", "10k").pose("NRST", "delay", event="power-up", to="2.31 V").structure.diodes == ()
    high = leaking("-1 uA .. 1 uA", "10k").measure("NRST", "final_voltage", given_only=True).high
    assert high == pytest.approx(3.3, rel=1e-8)


def test_two_supplies_in_sequence_against_stepping_the_circuit():
    """+5V ramps first, +3V3 from its valid level on; a node between both follows (scipy)."""
    nets = """
        +5V: U2.1/VO/power_out R1.1
        +3V3: U3.1/VO/power_out R2.1 U1.3/VDD/power_in
        N: R1.2 R2.2 C1.1 U1.7/IN/input
        GND: U2.2/GND/power_in U3.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    facts = """
        [supply."+5V"]
        voltage = "5 V"
        valid = "4 V"
        rise = "2 ms"
        [supply."+3V3"]
        voltage = "3.3 V"
        rise = "3 ms"
        after = "+5V"
    """
    board = bench("R1 22k, R2 10k, C1 100n, U1 QX7301, U2 QX5000, U3 QX3300", nets, facts + EXACT)
    begins = 2e-3 * 4 / 5

    def rises(t: float, v: np.ndarray) -> np.ndarray:
        five, three = 5 * min(t / 2e-3, 1.0), 3.3 * min(max(t - begins, 0.0) / 3e-3, 1.0)
        return ((five - v) / 22e3 + (three - v) / 10e3) / 100e-9

    stepped = solve_ivp(rises, (0, 10e-3), [0.0], rtol=1e-10, atol=1e-12, max_step=2e-5, dense_output=True)
    for instant in (0.5e-3, 1.8e-3, 3e-3, 6e-3):
        found = board.measure("N", "voltage_at", event="power-up", time=instant).nominal
        assert found == pytest.approx(float(stepped.sol(instant)[0]), abs=1e-7)
