"""Power-down of supplies that are left open, fall, or stay up."""

from math import exp, inf, log

import numpy as np
import pytest
from scipy.linalg import expm
from scipy.optimize import brentq

from rcrules.errors import UserMistake
from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'


def board(
    fall: str = 'fall = "open"', parts: str = "R2 10k", more: str = "R2.1", ground: str = "R2.2", facts: str = ""
) -> Bench:
    """A reset of 100 kΩ and 1 µF at +3V3, which has 10 µF and further parts of its own."""
    nets = f"""
        +3V3: U2.1/VO/power_out R1.1 C2.1 U1.3/VDD/power_in {more.partition("|")[0]}
        NRST: R1.2 C1.1 U1.7/NRST/input {more.partition("|")[2].partition("|")[0]}
        GND: U2.2/GND/power_in C1.2 C2.2 U1.2/GND/power_in {ground}
        {more.partition("|")[2].partition("|")[2]}
    """
    listed = f"R1 100k, C1 1u, C2 10u, U1 QX7301, U2 QX3300{', ' if parts else ''}{parts}"
    return bench(listed, nets.strip(), f'[supply."+3V3"]\nvoltage = "3.3 V"\n{fall}\n{facts}' + EXACT)


def decayed(seconds: float) -> tuple[float, float]:
    """Supply and node: C v' = -G v from 3.3 V, by the matrix exponential."""
    g = np.array([[1 / 1e4 + 1 / 1e5, -1 / 1e5], [-1 / 1e5, 1 / 1e5]])
    c = np.diag([10e-6, 1e-6])
    supply, node = expm(-np.linalg.solve(c, g) * seconds) @ np.array([3.3, 3.3])
    return float(supply), float(node)


def test_an_open_supply_is_a_node_of_its_networks():
    found = board().measure("NRST", "voltage_at", event="power-down", time=0.1)
    assert found.nominal == pytest.approx(decayed(0.1)[1], rel=1e-9)
    crossing = brentq(lambda t: decayed(t)[1] - 0.99, 0.01, 1.0, xtol=1e-13)
    assert board().measure("NRST", "delay", event="power-down", to="0.99 V").nominal == pytest.approx(
        crossing, rel=1e-9
    )


def test_a_level_follows_the_open_supply():
    """The node lags behind the supply that pulls it down: 90 % of what is left of that it never falls to."""
    assert decayed(0.05)[1] > decayed(0.05)[0]
    assert board().measure("NRST", "delay", event="power-down", to="90 % of +3V3").nominal == inf
    fixed = board().measure("NRST", "delay", event="power-down", to="2.97 V").nominal
    assert decayed(fixed)[1] == pytest.approx(2.97)


def test_falling_at_once_is_another_thing():
    assert board("").measure("NRST", "delay", event="power-down", to="0.99 V").nominal == pytest.approx(
        0.1 * log(10 / 3)
    )


def test_another_supply_feeds_back_into_an_open_one():
    """10 kΩ from +5V, which stays up, against the bleeder of 10 kΩ: 2.5 V in the end (by hand)."""
    facts = '[supply."+5V"]\nvoltage = "5 V"\nfall = "never"\n'
    fed = board(parts="R2 10k, R3 10k", more="R2.1 R3.1||+5V: U2.3/VI/power_in R3.2", facts=facts)
    assert fed.measure("NRST", "final_voltage", event="power-down").nominal == pytest.approx(2.5)
    gone = board(
        parts="R2 10k, R3 10k", more="R2.1 R3.1||+5V: U2.3/VI/power_in R3.2", facts=facts.replace("never", "1 ms")
    )
    assert gone.measure("NRST", "final_voltage", event="power-down").nominal == pytest.approx(0.0, abs=1e-12)


def test_two_open_supplies_share_what_they_hold():
    """10 µF at 3.3 V and 10 µF at 5 V through 10 kΩ, one bleeder: conserved until it is bled (matrix exponential)."""
    facts = '[supply."+5V"]\nvoltage = "5 V"\nfall = "open"\n'
    two = board(
        parts="R2 10k, R3 10k, C3 10u",
        more="R2.1 R3.1||+5V: U2.3/VI/power_in R3.2 C3.1",
        ground="R2.2 C3.2",
        facts=facts,
    )
    g = np.array([[2e-4 + 1e-5, -1e-5, -1e-4], [-1e-5, 1e-5, 0.0], [-1e-4, 0.0, 1e-4]])
    c = np.diag([10e-6, 1e-6, 10e-6])
    expected = (expm(-np.linalg.solve(c, g) * 0.05) @ np.array([3.3, 3.3, 5.0]))[1]
    found = two.measure("NRST", "voltage_at", event="power-down", time=0.05).nominal
    assert found == pytest.approx(expected, rel=1e-9)


def test_what_nothing_discharges_stays_up():
    with pytest.raises(Unmeasurable, match=r"nothing that is known discharges \+3V3"):
        board(parts="", more="", ground="").pose("NRST", "delay", event="power-down", to="0.99 V")


def test_what_circuits_draw_or_drive_is_no_bleeder():
    """A pull-up to a pin of unknown level, and a pin that leaks, change nothing."""
    facts = '[pin."U1.7"]\nleakage = "-1 uA .. 1 uA"\n'
    loaded = board(parts="R2 10k, R3 1k", more="R2.1 R3.1||EN: R3.2 U1.9/PA1/bidirectional", facts=facts)
    found = loaded.measure("NRST", "voltage_at", event="power-down", time=0.1)
    assert (found.nominal, loaded.pose("NRST", "voltage_at", event="power-down", time=0.1).structure.amps) == (
        pytest.approx(decayed(0.1)[1], rel=1e-9),
        (),
    )


def test_a_diode_discharges_the_reset_into_the_open_supply():
    """A diode of 0.3 V and 1 Ω: the node follows the supply a drop above it, never more."""
    facts = '[part."D1"]\nforward = "0.3 V"\non-resistance = "1 ohm"\n'
    helped = board(parts="R2 10k, D1 D_Schottky", more="R2.1 D1.1/K/passive|D1.2/A/passive", facts=facts)
    late = helped.measure("NRST", "voltage_at", event="power-down", time=0.5).nominal
    plain = board().measure("NRST", "voltage_at", event="power-down", time=0.5).nominal
    assert late < plain
    early = helped.measure("NRST", "voltage_at", event="power-down", time=1e-3).nominal
    assert early == pytest.approx(decayed(1e-3)[1], rel=1e-6)


def test_energy_of_a_bleeder_that_empties_an_open_supply():
    """What 10 µF and 1 µF hold at 3.3 V goes into the bleeder and the reset's resistor: 59.9 µJ in all."""
    whole = 0.5 * 11e-6 * 3.3**2
    parts = [board().measure(ref, "pulse_energy", event="power-down").nominal for ref in ("R1", "R2")]
    assert sum(parts) == pytest.approx(whole, rel=1e-9)


def test_what_a_supply_may_do_is_said():
    with pytest.raises(UserMistake, match="'fall'"):
        board('fall = "slowly"')


def driven(edge: str) -> Bench:
    nets = """
        IN: J1.1 R1.1
        N: R1.2 C1.1 U1.1/AIN0/input
        +3V3: U1.3/VDD/power_in
        GND: J1.2 C1.2 U1.2/GND/power_in
    """
    return bench("R1 10k, C1 100n, J1 IN, U1 QX7301", nets, f'[net."IN"]\nswing = "0 V .. 3.3 V"\n{edge}\n' + EXACT)


def test_a_driver_takes_its_time_for_an_edge():
    """A ramp T = RC to 3.3 V: v(T) = 3.3 V/e; later it goes on from there (by hand)."""
    board_ = driven('edge = "1 ms"')
    assert board_.measure("N", "voltage_at", event="step-up", time=1e-3).nominal == pytest.approx(3.3 * exp(-1))
    assert board_.measure("N", "delay", event="step-up", to="50 % of step").nominal == pytest.approx(
        1e-3 + 1e-3 * log((1 - exp(-1)) / 0.5)
    )
    down = board_.measure("N", "voltage_at", event="step-down", time=1e-3).nominal
    assert down == pytest.approx(3.3 * (1 - exp(-1)))
