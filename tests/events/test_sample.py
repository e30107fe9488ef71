"""A converter that samples a node, posed on small boards; circuit 19, worked out apart from this project."""

from math import exp

import pytest

from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'
NETS = """
    IN: J1.1 R1.1
    N: R1.2 C1.1 U1.1/AIN0/input
    GND: J1.2 C1.2 U1.2/GND/power_in
    +5V: U1.3/VDD/power_in
"""
LSB = 4096


def converter(farads: str, ohms: str = "0 ohm", tolerances: str = EXACT) -> Bench:
    """1 kΩ and a capacitor at a pin that samples with 8 pF."""
    pin = f'[pin."U1.AIN0"]\nsample-capacitance = "8 pF"\nsample-resistance = "{ohms}"\n'
    return bench(f"R1 1k, C1 {farads}, J1 IN, U1 QX7301", NETS, pin + tolerances)


@pytest.mark.parametrize(("farads", "kick"), [("1n", 32.508), ("10n", 3.2742), ("100n", 0.32765)])
def test_the_kick_is_shared_charge(farads: str, kick: float):
    found = converter(farads).measure("N", "sample_error", time=0.0)
    assert found.nominal * LSB == pytest.approx(kick, rel=2e-5)
    assert found.proved


def test_what_is_left_of_it_decays_through_the_source():
    found = converter("1n").measure("N", "sample_error", time=2e-6)
    assert found.nominal * LSB == pytest.approx(4.46986, rel=2e-6)


def test_a_larger_capacitor_kicks_less_and_settles_slower():
    """After 1 µs the error is greatest where C + Cs = t/R, inside the range of C: Cs R/(t e), at the largest R."""
    spread = '[defaults.resistor]\ntolerance = "1 %"\n[defaults.capacitor]\ntolerance = "10 %"\n'
    bounds = converter("1n", tolerances=spread).measure("N", "sample_error", time=1e-6, given_only=True)
    ends = [8e-12 / (c + 8e-12) * exp(-1e-6 / (990.0 * (c + 8e-12))) for c in (0.9e-9, 1.1e-9)]
    assert bounds.low == pytest.approx(min(ends))
    assert bounds.high == pytest.approx(8e-12 * 1010.0 / 1e-6 * exp(-1), rel=1e-6)
    assert not bounds.proved


def test_the_switch_slows_the_sampling_capacitor():
    """1 kΩ with 100 nF hardly moves: 3 kΩ and 8 pF, e^(-t/24 ns), from a full scale down to the kick."""
    found = converter("100n", "3 kohm")
    assert found.measure("N", "sample_error", time=0.0).nominal == pytest.approx(1.0)
    assert found.measure("N", "sample_error", time=48e-9).nominal == pytest.approx(exp(-2), rel=1e-3)
    kick = found.measure("N", "sample_error", time=1e-6).nominal
    assert kick == pytest.approx(8e-12 / 100e-9, rel=2e-2)


@pytest.mark.parametrize(
    ("facts", "line"),
    [
        ("", '[pin."U1.AIN0"] sample-capacitance = "…"  sample-resistance = "…"'),
        ('[pin."U1.AIN0"]\nsample-capacitance = "8 pF"\n', '[pin."U1.AIN0"] sample-resistance = "…"'),
    ],
)
def test_what_is_not_known_of_the_converter_is_asked_for(facts: str, line: str):
    board = bench("R1 1k, C1 1n, J1 IN, U1 QX7301", NETS, facts + EXACT)
    with pytest.raises(Unmeasurable) as caught:
        board.pose("N", "sample_error", time=1e-6)
    assert caught.value.ask == line
