"""Questions about supplies, posed on small boards."""

from math import inf, log

import numpy as np
import pytest
from scipy.integrate import solve_ivp

from rcrules.events import Unmeasurable, pose
from rcrules.measures import registry
from rcrules.problems import Bounds, Problem, solve_bounds
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\ndielectric = "film"\n'


def board(capacitors: str, facts: str, further: str = "", tolerance: str = EXACT) -> Bench:
    """Capacitors, and further parts, from +12V to ground."""
    parts = [item.strip() for item in f"{capacitors}, {further}".split(",") if item.strip()]
    refs = [item.split()[0] for item in parts]
    nets = f"""
        +12V: U2.1/VO/power_out U1.3/VDD/power_in {" ".join(f"{ref}.1" for ref in refs)}
        GND: U2.2/GND/power_in U1.2/GND/power_in {" ".join(f"{ref}.2" for ref in refs)}
    """
    return bench(f"{', '.join(parts)}, U1 QX7301, U2 QX3300", nets, f'[supply."+12V"]\n{facts}\n' + tolerance)


def posed(at: Bench, measure: str, **options: str) -> Problem:
    return pose(at.board, at.project, at.board.held["+12V"], registry()[measure], options)


def measured(at: Bench, measure: str, **options: str) -> Bounds:
    found = solve_bounds([(posed(at, measure, **options), registry()[measure], True)])[0]
    assert isinstance(found, Bounds)
    return found


def test_capacitors_at_a_supply_add_up():
    at = board("C1 100u, C2 47u, C3 1u", 'voltage = "12 V +/- 10 %"')
    assert measured(at, "total_capacitance").nominal == pytest.approx(148e-6)
    assert measured(at, "total_capacitance").proved
    energy = measured(at, "stored_energy")
    assert (energy.nominal, energy.high) == (pytest.approx(74e-6 * 144), pytest.approx(74e-6 * 13.2**2))
    assert energy.proved


def test_inrush_is_charge_over_rise():
    at = board("C1 100u", 'voltage = "12 V +/- 10 %"\nrise = "1 ms .. 2 ms"')
    found = measured(at, "inrush_current")
    assert (found.low, found.high) == (pytest.approx(100e-6 * 10.8 / 2e-3), pytest.approx(100e-6 * 13.2 / 1e-3))
    assert found.proved
    with pytest.raises(Unmeasurable) as caught:
        posed(board("C1 100u", 'voltage = "12 V"'), "inrush_current")
    assert caught.value.ask == '[supply."+12V"] rise = "…"'


@pytest.mark.parametrize(
    ("farads", "facts", "to", "seconds"),
    [
        ("114.286u", 'voltage = "400 V"\nload = "200 W"', "300 V", 20e-3),
        ("57.143u", 'voltage = "400 V"\nload = "100 W"', "300 V", 20e-3),
        ("1000000u", 'voltage = "5 V"\nload = "10 mA"', "3 V", 200.0),
    ],
    ids=["C = 2 P t/(V1² - V2²), 114 µF", "57.1 µF", "1 F at 10 mA, 200 s"],
)
def test_hold_up_examples(farads: str, facts: str, to: str, seconds: float):
    """Published worked examples of hold-up: a maker's 200 W and 100 W at 400 V to 300 V in 20 ms, and 1 F from 5 V."""
    found = measured(board(f"C1 {farads}", facts), "hold_up_time", to=to)
    assert found.nominal == pytest.approx(seconds, rel=1e-5)
    assert found.proved


def test_a_third_of_a_quarter_of_voltage_is_two_fifths_of_energy():
    """From 390 V to 300 V uses 41 % of the energy (40.83 %), from 100 % to 90 % of the voltage 19 % (published)."""
    whole = measured(board("C1 100u", 'voltage = "390 V"\nload = "100 W"'), "hold_up_time", to="0 V").nominal
    part = measured(board("C1 100u", 'voltage = "390 V"\nload = "100 W"'), "hold_up_time", to="300 V").nominal
    tenth = measured(board("C1 100u", 'voltage = "390 V"\nload = "100 W"'), "hold_up_time", to="351 V").nominal
    assert (part / whole, tenth / whole) == (pytest.approx(0.4083, abs=5e-5), pytest.approx(0.19, abs=1e-9))


def test_a_bleeder_draws_along():
    """Alone RC ln(V/v); with a current as if discharged towards -IR."""
    bleeder = measured(board("C1 100u", 'voltage = "12 V"\nload = "0 A"', "R1 10k"), "hold_up_time", to="6 V")
    assert bleeder.nominal == pytest.approx(1.0 * log(2))
    both = measured(board("C1 100u", 'voltage = "12 V"\nload = "1 mA"', "R1 10k"), "hold_up_time", to="6 V")
    assert both.nominal == pytest.approx(1.0 * log(22 / 16))
    watts = measured(board("C1 100u", 'voltage = "12 V"\nload = "10 mW"', "R1 10k"), "hold_up_time", to="6 V")
    assert watts.nominal == pytest.approx(0.5 * log((0.01 + 0.0144) / (0.01 + 0.0036)))


def test_hold_up_over_a_range_of_load():
    found = measured(board("C1 100u", 'voltage = "12 V"\nload = "0 A .. 10 mA"'), "hold_up_time", to="6 V")
    assert (found.low, found.high) == (pytest.approx(0.06), inf)
    late = measured(board("C1 100u", 'voltage = "12 V"\nload = "10 mA"'), "hold_up_time", to="13 V")
    assert late.nominal == 0.0


def test_a_load_that_is_not_known_is_asked_for():
    with pytest.raises(Unmeasurable) as caught:
        posed(board("C1 100u", 'voltage = "12 V"'), "hold_up_time", to="6 V")
    assert caught.value.ask == '[supply."+12V"] load = "…"'


def test_a_supply_discharges_as_its_capacitors_do():
    at = board("C1 100u, C2 47u", 'voltage = "48 V"', "R1 100k")
    assert measured(at, "discharge_time", to="5 V").nominal == pytest.approx(14.7 * log(48 / 5))


def test_one_open_resistor_leaves_the_other():
    two = board("C1 100u", 'voltage = "48 V"', "R1 100k, R2 220k")
    found = measured(two, "discharge_time", to="5 V", fault="any one resistor open")
    assert found.nominal == pytest.approx(22.0 * log(48 / 5))
    assert found.proved
    one = board("C1 100u", 'voltage = "48 V"', "R1 100k")
    assert measured(one, "discharge_time", to="5 V", fault="any one resistor open").nominal == inf
    assert measured(one, "discharge_time", to="60 V", fault="any one resistor open").nominal == 0.0


@pytest.mark.parametrize("seed", range(6))
def test_hold_up_agrees_with_integrating_the_load(seed: int):
    """C v' = -(I + v/R), or -(P/v + v/R), stepped until the level is passed (scipy, LSODA)."""
    rng = np.random.default_rng(seed)
    farads, ohms, volts = 10 ** rng.uniform(-6, -3), 10 ** rng.uniform(2, 5), rng.uniform(5, 60)
    low, load, power = volts * rng.uniform(0.3, 0.9), 10 ** rng.uniform(-4, -1), seed % 2 == 1
    unit = "W" if power else "A"
    facts = f'voltage = "{volts!r} V"\nload = "{load!r} {unit}"'
    at = board(f"C1 {farads * 1e6:.12f}u", facts, f"R1 {ohms:.9f}")
    found = measured(at, "hold_up_time", to=f"{low!r} V").nominal

    def falls(_: float, v: np.ndarray) -> np.ndarray:
        return -((load / v if power else load) + v / ohms) / farads

    def passed(_: float, v: np.ndarray) -> float:
        return float(v[0] - low)

    passed.terminal = True  # type: ignore[attr-defined]  # the way of solve_ivp
    stepped = solve_ivp(falls, (0, 3 * found), [volts], events=passed, rtol=1e-11, atol=1e-12, method="LSODA")
    assert found == pytest.approx(float(stepped.t_events[0][0]), rel=1e-7)
