"""Supplies that dip: whether, and for how long, a reset follows."""

from math import exp, inf, log

import pytest

from rcrules.events import Unmeasurable, pose
from rcrules.measures import registry
from rcrules.problems import Bounds, solve_bounds
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
PIN = '[pin."U1.NRST"]\nlow = "0.99 V"\nhigh = "2.31 V"\n'


def reset(supply: str = "", further: str = "", more: str = "", pin: str = PIN) -> Bench:
    """Circuit 18: 100 kΩ to 3.3 V, 1 µF to ground."""
    nets = f"""
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in {more.partition("|")[0]}
        NRST: R1.2 C1.1 U1.7/NRST/input {more.partition("|")[2]}
        GND: U2.2/GND/power_in U1.2/GND/power_in C1.2
    """
    project = '[supply."+3V3"]\nvoltage = "3.3 V"\n' + supply + pin + EXACT
    return bench(f"R1 100k, C1 1u, U1 QX7301, U2 QX3300{further}", nets, project)


def test_a_short_dip_leaves_the_reset_as_it_is():
    """After 10 ms the node is at 2.98596 V; it needs 120.397 ms to fall to 0.99 V (worked out apart)."""
    assert reset().measure("NRST", "dip_rearm", length=0.010).nominal == 0.0
    assert reset().measure("NRST", "dip_rearm", length=0.120396).nominal == 0.0
    assert 0.0 < reset().measure("NRST", "dip_rearm", length=0.120398).nominal < 1e-6


def test_a_reset_after_a_dip_is_shorter_than_one_from_empty():
    """After 200 ms at 0.446606 V: 21.1261 ms to 0.99 V, not 35.6675 (worked out apart)."""
    assert reset().measure("NRST", "dip_rearm", length=0.2).nominal == pytest.approx(21.1261e-3, rel=3e-6)
    assert reset().measure("NRST", "dip_rearm", length=50.0).nominal == pytest.approx(35.6675e-3, rel=3e-6)


def test_the_network_is_a_subject_too():
    board = reset()
    problem = pose(board.board, board.project, board.board.networks[0], registry()["dip_rearm"], {"length": 0.2})
    found = solve_bounds([(problem, registry()["dip_rearm"], True)])[0]
    assert isinstance(found, Bounds)
    assert found.nominal == pytest.approx(21.1261e-3, rel=3e-6)


def test_time_may_count_from_the_valid_supply():
    """Ramp T = 1 ms, valid at 3 V after 0.909 ms: RC ln((V k - v)/(V - 0.99 V)), k = RC/T (e^(T/RC) - 1) (by hand)."""
    board = reset('rise = "1 ms"\nvalid = "3 V"\n')
    event = board.measure("NRST", "dip_rearm", length=0.2).nominal
    late = 100 * (exp(0.01) - 1)
    assert event == pytest.approx(0.1 * log((3.3 * late - 3.3 * exp(-2)) / 2.31), rel=1e-9)
    valid = board.measure("NRST", "dip_rearm", length=0.2, from_="supply valid").nominal
    assert valid == pytest.approx(event - 1e-3 / 1.1, rel=1e-9)


def test_a_diode_to_the_supply_re_arms_at_once():
    """A Schottky diode of 0.3 V discharges within microseconds to its drop; then 0.3 V e^(-t/RC) (by hand)."""
    facts = PIN + '[part."D1"]\nforward = "0.3 V"\non-resistance = "1 ohm"\n'
    board = reset(further=", D1 D_Schottky", more="D1.1/K/passive | D1.2/A/passive", pin=facts)
    left = 0.3 * exp(-0.010 / 0.1)
    found = board.measure("NRST", "dip_rearm", length=0.010).nominal
    assert found == pytest.approx(0.1 * log((3.3 - left) / (3.3 - 0.99)), rel=1e-3)


def test_an_active_high_reset_pulses_again_with_what_has_leaked_away():
    """Circuit 3 after a dip of RC: the step comes back to 5 V (1 - 1/e), and RC ln(V/1.5 V) passes to 1.5 V."""
    nets = """
        +5V: U2.1/VO/power_out C1.1 U1.3/VDD/power_in
        RST: C1.2 R1.1 U1.7/RST/input
        GND: U2.2/GND/power_in R1.2 U1.2/GND/power_in
    """
    project = '[supply."+5V"]\nvoltage = "5 V"\n' + EXACT
    board = bench("R1 10k, C1 100n, U1 QX7301, U2 QX5000", nets, project)
    levels = {"armed": "1.5 V", "to": "1.5 V"}
    found = board.measure("RST", "dip_rearm", length=1e-3, **levels).nominal
    assert found == pytest.approx(1e-3 * log(5 * (1 - exp(-1)) / 1.5), rel=1e-6)
    assert board.measure("RST", "dip_rearm", length=0.1e-3, **levels).nominal == 0.0


def test_a_level_above_the_rest_is_never_left():
    found = reset().measure("NRST", "dip_rearm", length=0.2, to="3.4 V").nominal
    assert found == inf


def test_thresholds_are_asked_for():
    with pytest.raises(Unmeasurable) as caught:
        reset(pin="").pose("NRST", "dip_rearm", length=0.2)
    assert caught.value.ask == '[pin."U1.NRST"] low = "…"  high = "…"'


def test_what_is_held_at_both_ends_has_no_reset():
    nets = """
        +3V3: U2.1/VO/power_out R1.1 C1.1 U1.3/VDD/power_in
        GND: U2.2/GND/power_in U1.2/GND/power_in R1.2 C1.2
    """
    board = bench("R1 100k, C1 1u, U1 QX7301, U2 QX3300", nets, '[supply."+3V3"]\nvoltage = "3.3 V"\n' + EXACT)
    with pytest.raises(Unmeasurable, match="nothing moves there"):
        board.pose("+3V3 <-> GND", "dip_rearm", length=0.1)
