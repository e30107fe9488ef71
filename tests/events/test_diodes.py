"""Questions about networks with diodes: which of them matter, what is assumed of them, what is answered."""

from math import exp, log

import pytest

from rcrules.events import Unmeasurable
from rcrules.measures import registry
from rcrules.problems import Failure, solve_bounds
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
SUPPLY = '[supply."+3V3"]\nvoltage = "3.3 V"\n'
DIODE = '[part."D1"]\nforward = "0.6 V"\non-resistance = "10 ohm"\n'
approx = pytest.approx


def reset(diode: str = "D1 1N4148", project: str = SUPPLY, more: str = "", pins: str = "") -> Bench:
    """10 kΩ and 100 nF at a reset pin, a diode from it to its supply."""
    nets = f"""
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in D1.1
        NRST: R1.2 C1.1 U1.7/NRST/input D1.2 {pins}
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
        {more}
    """
    return bench(f"R1 10k, C1 100n, U1 QX7301, U2 QX3300, {diode}", nets, project + EXACT)


def refusal(board: Bench, at: str, measure: str, **options: str | float) -> Unmeasurable:
    with pytest.raises(Unmeasurable) as caught:
        board.pose(at, measure, **options)
    return caught.value


def test_a_diode_to_the_rail_is_open_while_the_rail_is_up():
    problem = reset().pose("NRST", "delay", event="power-up", to="1 V")
    assert not problem.structure.diodes
    assert reset().measure("NRST", "delay", event="power-up", to="1 V").nominal == approx(1e-3 * log(3.3 / 2.3))


def test_a_diode_to_the_rail_discharges_the_capacitor_when_the_rail_falls():
    """Through 10 Ω and 0.6 V beside 10 kΩ down to 0.6 V, then through 10 kΩ alone."""
    board = reset(project=SUPPLY + DIODE)
    both, rest = 10.0 * 10e3 / 10010.0, 0.6 * 10e3 / 10010.0
    fast = 100e-9 * both * log((3.3 - rest) / (1.0 - rest))
    slow = 100e-9 * both * log((3.3 - rest) / (0.6 - rest)) + 1e-3 * log(0.6 / 0.2)
    assert board.measure("NRST", "delay", event="power-down", to="1 V").nominal == approx(fast, rel=1e-9)
    assert board.measure("NRST", "delay", event="power-down", to="0.2 V").nominal == approx(slow, rel=1e-9)


def test_what_is_not_said_of_a_diode_is_assumed_by_its_kind_and_asked_for():
    problem = reset().pose("NRST", "delay", event="power-down", to="0.2 V")
    drop, ohms = (next(item for item in problem.parameters if item.name == f"D1 {word}") for word in WORDS)
    assert drop.assumed == ("D1 is a silicon diode and drops 0.4 V to 1 V when it conducts",)
    assert (drop.low, drop.nominal, drop.high, drop.given_low, drop.given_high) == (0.4, 0.65, 1.0, 0.65, 0.65)
    assert (drop.ask, ohms.ask) == ('[part."D1"] forward = "…"', '[part."D1"] on-resistance = "…"')


WORDS = ("forward", "on-resistance")


def test_drops_of_all_diodes_can_be_given_at_once():
    board = reset(project=SUPPLY + '[defaults.diode]\nforward = "0.2 V .. 0.3 V"\non-resistance = "1 ohm"\n')
    problem = board.pose("NRST", "delay", event="power-down", to="0.1 V")
    drop = next(item for item in problem.parameters if item.name == "D1 forward")
    assert (drop.low, drop.high, drop.assumed) == (0.2, 0.3, ())


def test_the_diode_of_a_reset_can_lead_to_what_nobody_knows():
    board = reset(more="TRST: D2.1 J1.1", pins="D2.2", diode="D1 1N4148, D2 1N4148, J1 DEBUG")
    error = refusal(board, "NRST", "delay", event="power-up", to="1 V")
    assert error.reason == "diode D2 leads to TRST, and what drives TRST is not known"
    assert error.ask == '[net."TRST"] swing = "…"'


def test_a_driver_of_known_swing_holds_a_reset_low_through_its_diode():
    """A driver that rests at 0 V pulls 10 kΩ from 3.3 V down to 0.6 V and the drop on 10 Ω."""
    facts = SUPPLY + DIODE.replace("D1", "D2") + '[net."TRST"]\nswing = "0 V"\n'
    board = reset(more="TRST: D2.1 J1.1", pins="D2.2", diode="D1 1N4148, D2 1N4148, J1 DEBUG", project=facts)
    found = board.measure("NRST", "final_voltage", event="power-up")
    assert found.nominal == approx(0.6 + 2.7 * 10.0 / 10010.0)


def test_a_button_behind_a_diode_joins_the_network_of_its_own_pull_up():
    """Pressed, the button pulls both: 10 kΩ from 3.3 V through 0.6 V and 10 Ω to the contact."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 R2.1 U1.3/VDD/power_in
        NRST: R1.2 C1.1 U1.7/NRST/input D1.2
        KEY: R2.2 C2.1 D1.1 SW1.1 U1.8/PB0/input
        GND: U2.2/GND/power_in C1.2 C2.2 U1.2/GND/power_in SW1.2
    """
    contact = '[part."SW1"]\ncontact-resistance = "0 ohm"\n'
    parts = "R1 10k, R2 10k, C1 100n, C2 1n, U1 QX7301, U2 QX3300, D1 1N4148, SW1 KEY"
    board = bench(parts, nets, SUPPLY + DIODE + contact + EXACT)
    both, rest = 10.0 * 10e3 / 10010.0, 0.6 + 2.7 * 10.0 / 10010.0
    found = board.measure("NRST", "delay", event="press", to="1 V")
    assert found.nominal == approx(100e-9 * both * log((3.3 - rest) / (1.0 - rest)), rel=1e-6)
    assert board.measure("NRST", "final_voltage", event="press").nominal == approx(rest)


def test_a_rectified_input_charges_through_its_diode():
    """5 V through 0.6 V and 10 Ω into 10 kΩ and 100 nF; nothing but the diode feeds the node."""
    nets = """
        IN: J1.1 D1.2
        PEAK: D1.1 R1.1 C1.1 U1.1/AIN0/input
        GND: J1.2 R1.2 C1.2 U1.2/GND/power_in
        +3V3: U1.3/VDD/power_in
    """
    facts = '[net."IN"]\nswing = "0 V .. 5 V"\n' + DIODE + EXACT
    board = bench("R1 10k, C1 100n, D1 1N4148, J1 IN, U1 QX7301", nets, facts)
    both, end = 10.0 * 10e3 / 10010.0, 4.4 * 10e3 / 10010.0
    up = board.measure("PEAK", "voltage_at", event="step-up", time=1e-6)
    assert up.nominal == approx(end * (1.0 - exp(-1e-6 / (100e-9 * both))), rel=1e-9)
    down = board.measure("PEAK", "delay", event="step-down", to="1 V")
    assert down.nominal == approx(1e-3 * log(end / 1.0), rel=1e-6)


def divider(zener: str, more: str = "", volts: str = "12 V") -> Bench:
    """12 V through 20 kΩ and 10 kΩ to a converter, a Zener diode across 10 kΩ and 100 nF."""
    nets = """
        +12V: J1.1 U2.3/VI/power_in R1.1
        N: R1.2 R2.1 C1.1 U1.1/AIN0/input D1.1
        GND: J1.2 R2.2 C1.2 U1.2/GND/power_in U2.2/GND/power_in D1.2
        +3V3: U1.3/VDD/power_in U2.1/VO/power_out
    """
    facts = f'[supply."+12V"]\nvoltage = "{volts}"\n' + more + EXACT
    return bench(f"R1 20k, R2 10k, C1 100n, D1 {zener}, J1 IN, U1 QX7301, U2 QX3300", nets, facts)


def test_a_zener_that_stays_below_its_voltage_is_a_diode():
    found = divider("ZENER 5V1").measure("N", "final_voltage", event="power-up")
    assert found.nominal == approx(4.0)


def test_a_zener_that_would_break_down_leaves_the_finding_open():
    problem = divider("ZENER 5V1", volts="15 V").pose("N", "final_voltage", event="power-up")
    found = solve_bounds([(problem, registry()["final_voltage"])])[0]
    assert found == Failure(reason="more than 4.59 V in reverse across D1: its breakdown is not modelled")


def test_a_suppressor_of_unknown_voltage_is_asked_for():
    error = refusal(divider("TVS"), "N", "final_voltage", event="power-up")
    assert error.reason == "D1 is a suppressor diode that may break down in reverse, and at what voltage is not known"
    assert error.ask == '[part."D1"] breakdown = "…"'
    given = divider("TVS", '[part."D1"]\nbreakdown = "6 V .. 7 V"\n')
    assert given.measure("N", "final_voltage", event="power-up").nominal == approx(4.0)


def test_a_suppressor_beyond_all_supplies_is_left_out():
    given = divider("TVS", '[part."D1"]\nbreakdown = "15 V .. 18 V"\n')
    assert not given.pose("N", "final_voltage", event="power-up").structure.diodes


def test_a_clamp_counts_in_the_voltage_that_a_pin_and_a_capacitor_meet():
    """With +3V3 off and 5 V at the connector the diode into +3V3 holds the pin at 0.6 V and its resistance's drop."""
    nets = """
        IN: J1.1 R1.1
        N: R1.2 C1.1 U1.1/AIN0/input D1.2
        GND: J1.2 C1.2 U1.2/GND/power_in
        +3V3: U1.3/VDD/power_in D1.1
    """
    facts = SUPPLY + '[net."IN"]\nswing = "0 V .. 9 V"\n' + DIODE + EXACT
    board = bench("R1 1k, C1 100n, D1 1N4148, J1 IN, U1 QX7301", nets, facts)
    most = 3.9 + (9.0 - 3.9) * 10.0 / 1010.0
    assert board.measure("C1", "applied_voltage").nominal == approx(most)
    assert board.measure("R1", "power").nominal == approx((9.0 - 0.6) ** 2 * 1000.0 / 1010.0**2)


def test_diodes_do_not_let_a_measure_count_in_parts_of_an_unknown_swing():
    nets = """
        IN: J1.1 R1.1
        N: R1.2 C1.1 U1.1/AIN0/input D1.2
        GND: J1.2 C1.2 U1.2/GND/power_in
        +3V3: U1.3/VDD/power_in D1.1
    """
    board = bench("R1 1k, C1 100n, D1 1N4148, J1 IN, U1 QX7301", nets, SUPPLY + EXACT)
    assert refusal(board, "N", "settling_time", band=0.01).ask == '[net."IN"] swing = "…"'


def test_a_step_comes_through_a_resistor_where_one_feeds_the_node():
    """The supply behind 10 kΩ steps, not the driver behind the diode."""
    facts = SUPPLY + DIODE.replace("D1", "D2") + '[net."TRST"]\nswing = "0 V .. 5 V"\n'
    board = reset(more="TRST: D2.1 J1.1", pins="D2.2", diode="D1 1N4148, D2 1N4148, J1 DEBUG", project=facts)
    problem = board.pose("NRST", "delay", event="step-up", to="1 V")
    waves = problem.structure.waveforms
    names = problem.names.terminals[problem.structure.shape.free :]
    moved = [name for name, wave in zip(names, waves, strict=True) if wave.points[-1][1] != wave.before]
    assert moved == ["+3V3"]
