"""Worked examples of books, standards and makers, from a netlist to the printed answer; the source beside each."""

from math import log, sqrt

import pytest

from rcrules.events import pose
from rcrules.measures import registry
from rcrules.problems import Bounds, solve_bounds
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'


def charging(ohms: str, farads: str, volts: str, further: str = "") -> Bench:
    """A resistor from a supply, a capacitor to ground."""
    nets = """
        VS: U2.1/VO/power_out R1.1
        N: R1.2 C1.1 U1.7/RESET/input
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    facts = f'[supply."VS"]\nvoltage = "{volts}"\n' + EXACT + further
    return bench(f"R1 {ohms}, C1 {farads}, U1 QX7301, U2 QX3300", nets, facts)


def printed(text: str) -> object:
    """A published number with the rounding of its last digit."""
    digits = text.partition("e")[0].replace(".", "").lstrip("0")
    number = float(text)
    return pytest.approx(number, rel=0.5000001 / float(digits))


CHARGING = {
    "University Physics 2, neon lamp to 80 V": ("101 ohm", "50000u", "100 V", "80 V", "8.13"),
    "University Physics 2, wiper with 10 kΩ": ("10k", "10000u", "12 V", "10 V", "179.18"),
    "College Physics, time to 3.24 V of 24 V with 1 kΩ, 1 mF": ("1k", "1000u", "24 V", "3.24 V", "0.145"),
    "Lessons in Electric Circuits, 12.970 V of 15 V": ("10k", "100u", "15 V", "12.970 V", "2.0000"),
    "College Physics, 90 % through 75 MΩ and 100 pF": ("75M", "100p", "10 V", "9 V", "1.73e-2"),
    "College Physics, 24 V through 1.2 kΩ, 1 mF to 99 %": ("1.2k", "1000u", "24 V", "23.76 V", "5.53"),
}


@pytest.mark.parametrize("name", CHARGING)
def test_time_to_a_voltage(name: str):
    """OpenStax University Physics 2 (10.5), College Physics (21.6), Kuphaldt (DC 16); 0.145 s is derived."""
    ohms, farads, volts, to, seconds = CHARGING[name]
    found = charging(ohms, farads, volts).measure("N", "delay", event="power-up", to=to)
    assert found.nominal == printed(seconds)


def test_initial_current():
    """University Physics 2: 500 Ω, 1.5 µF, 6.16 V: 12.3 mA at first, τ 7.50e-4 s, then 3.89 V."""
    board = charging("500", "1.5u", "6.16 V")
    assert board.measure("R1", "peak_current", event="power-up").nominal == printed("12.3e-3")
    assert board.measure("N", "time_constant").nominal == printed("7.50e-4")
    assert board.measure("N", "voltage_at", event="power-up", time=7.5e-4).nominal == printed("3.89")


def test_energy_in_a_capacitor():
    """University Physics 2 (8.3): 12 µF at 4 V 96 µJ, 4 µF at 8 V 128 µJ; 8 µF at 10 kV 400 J."""
    for farads, volts, joules in (("12u", "4 V", 96e-6), ("4u", "8 V", 128e-6), ("8u", "10 kV", 400.0)):
        found = charging("1k", farads, volts).measure("C1", "stored_energy")
        assert found.nominal == pytest.approx(joules)


def test_human_body_model():
    """ANSI/ESDA/JEDEC JS-001: 100 pF through 1500 Ω; at 2 kV 1.3333 A, 0.2 mJ, 150 ns (derived)."""
    body = charging("1500", "100p", "2 kV")
    assert body.measure("R1", "peak_current", event="power-down").nominal == pytest.approx(4 / 3)
    assert body.measure("R1", "pulse_energy", event="power-down").nominal == pytest.approx(0.2e-3)
    assert body.measure("N", "time_constant").nominal == pytest.approx(150e-9)


@pytest.mark.parametrize(("ohms", "published"), [("30k", "2.795"), ("40k", "3.726"), ("50k", "4.658")])
def test_controller_reset_with_an_internal_pull_up(ohms: str, published: str):
    """A controller's data sheet: V_IH 2.0 V at 3.3 V, pull-up 30/40/50 kΩ, 0.1 µF recommended (times derived)."""
    found = charging(ohms, "100n", "3.3 V").measure("N", "delay", event="power-up", to="2.0 V")
    assert found.nominal * 1e3 == printed(published)


def test_controller_reset_at_nine_tenths():
    """Another one: V_IH = 0.9 V_CC: 2.302585 RC, 6.908 .. 13.816 ms with 100 nF and 30 .. 60 kΩ."""
    nets = """
        VCC: U2.1/VO/power_out U1.1/VCC/power_in
        N: C1.1 U1.7/RESET/input
        GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in
    """
    pin = '[pin."U1.RESET"]\npull-up = "30 kohm .. 60 kohm to VCC"\nlow = "10 % of VCC"\nhigh = "90 % of VCC"\n'
    board = bench("C1 100n, U1 QX7301, U2 QX5000", nets, '[supply."VCC"]\nvoltage = "5 V"\n' + pin + EXACT)
    found = board.measure("N", "delay", event="power-up", to="must have switched", given_only=True)
    assert (found.low * 1e3, found.high * 1e3) == (printed("6.908"), printed("13.816"))


BLEED = {
    "264 V, 60 V in 2 s": (264.0, "60 V", 2.0, 3.3151e6),
    "264 V, 34 V in 1 s": (264.0, "34 V", 1.0, 1.2646e6),
    "264 V, 60 V in 1 s": (264.0, "60 V", 1.0, 1.6576e6),
    "264 V, 60 V in 5 s": (264.0, "60 V", 5.0, 8.2878e6),
}


@pytest.mark.parametrize("name", BLEED)
def test_the_largest_bleeder_of_a_line_capacitor(name: str):
    """IEC 62368-1 5.5.2.2 (60 V after 2 s), IEC 60335-1 22.5 (34 V after 1 s), IEC 60204-1 (60 V in 5 s); R derived."""
    volts, to, seconds, ohms = BLEED[name]
    nets = """
        L: J1.1 R1.1 C1.1
        GND: J1.2 R1.2 C1.2
    """
    facts = f'[supply."L"]\nvoltage = "{volts * sqrt(2):.6f} V"\n' + EXACT
    line = bench(f"R1 {ohms:.0f}, C1 0.33u, J1 IN", nets, facts)
    assert line.measure("C1", "discharge_time", to=to).nominal == pytest.approx(seconds, rel=5e-5)


def test_thirty_seven_percent_is_a_little_less_than_one_time_constant():
    """IEC 60950-1 2.1.1.7: 37 % in 1 s is τ = 1.005781 s, 3.0478 MΩ at 0.33 µF; not 1 s and 3.0303 MΩ (derived)."""
    facts = '[supply."L"]\nvoltage = "100 V"\n' + EXACT
    for ohms, seconds in ((3.0478e6, 1.0), (3.0303e6, 0.994252)):
        line = bench(f"R1 {ohms:.0f}, C1 0.33u, J1 IN", "L: J1.1 R1.1 C1.1\nGND: J1.2 R1.2 C1.2", facts)
        assert line.measure("C1", "discharge_time", to="37 V").nominal == pytest.approx(seconds, rel=2e-5)


def test_worst_case_of_a_time_constant_is_the_product_of_its_factors():
    """R 10 kΩ 5 %, 100 ppm/K over 60 K; C 1 µF 10 %, X7R ±15 %: 7.223895 .. 13.362195 ms, not ±30.6 % (derived)."""
    facts = """
        [conditions]
        temperature = "-35 degC .. 85 degC"
        life = "1000 h"
        [part."R1"]
        tolerance = "5 %"
        tcr = "100 ppm/K"
        [part."C1"]
        tolerance = "10 %"
        dielectric = "X7R"
        bias-curve = [["0 V", "100 %"]]
    """
    nets = "VS: U2.1/VO/power_out R1.1\nN: R1.2 C1.1 U1.7/RESET/input\nGND: U2.2/GND/power_in C1.2 U1.2/GND/power_in"
    board = bench("R1 10k, C1 1u, U1 QX7301, U2 QX3300", nets, '[supply."VS"]\nvoltage = "5 V"\n' + facts)
    aged = 1 / (1 - 0.025 * 3)  # marked for 1000 h, met from 1 h on: +8.1 %, beyond the example
    found = board.measure("N", "time_constant", given_only=True)
    assert found.low == pytest.approx(7.223895e-3, rel=1e-6)
    assert found.high == pytest.approx(13.362195e-3 * aged, rel=1e-6)
    assert found.proved


def test_a_divider_of_one_percent_resistors():
    """10 kΩ and 10 kΩ at ±1 %: 0.495 .. 0.505 of the voltage (derived)."""
    nets = """
        VS: U2.1/VO/power_out R1.1
        N: R1.2 R2.1 C1.1 U1.7/IN/input
        GND: U2.2/GND/power_in R2.2 C1.2 U1.2/GND/power_in
    """
    facts = '[supply."VS"]\nvoltage = "1 V"\n[defaults.resistor]\ntolerance = "1 %"\n'
    board = bench("R1 10k, R2 10k, C1 100n, U1 QX7301, U2 QX3300", nets, facts)
    found = board.measure("N", "final_voltage", given_only=True)
    assert (found.low, found.high, found.proved) == (pytest.approx(0.495), pytest.approx(0.505), True)


def held_up(volts: str, farads: str, load: str, to: str) -> float:
    nets = "VS: U2.1/VO/power_out U1.1/VDD/power_in C1.1\nGND: U2.2/GND/power_in U1.2/GND/power_in C1.2"
    board = bench(
        f"C1 {farads}, U1 QX7301, U2 QX3300", nets, f'[supply."VS"]\nvoltage = "{volts}"\nload = "{load}"\n' + EXACT
    )
    problem = pose(board.board, board.project, board.board.held["VS"], registry()["hold_up_time"], {"to": to})
    found = solve_bounds([(problem, registry()["hold_up_time"], True)])[0]
    assert isinstance(found, Bounds)
    return found.nominal


def test_hold_up():
    """A power maker: 200 W for 20 ms from 400 to 300 V takes 114 µF; a question-and-answer site: 1 F, 10 mA, 200 s."""
    assert held_up("400 V", "114.286u", "200 W", "300 V") == pytest.approx(20e-3, rel=1e-5)
    assert held_up("5 V", "1F", "10 mA", "3 V") == pytest.approx(200.0)


def test_a_timer_of_one_and_a_tenth_time_constants():
    """Kuphaldt: 27 kΩ and 100 µF to two thirds of the supply, ln 3 RC = 2.96625 s, about 3 s."""
    found = charging("27k", "100u", "9 V").measure("N", "delay", event="power-up", to="6 V").nominal
    assert found == pytest.approx(2.7 * log(3))
    assert found == printed("2.96625")
