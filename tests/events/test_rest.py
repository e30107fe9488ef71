"""Questions about a network without an event, posed on small boards."""

from math import hypot, pi, sqrt

import pytest

from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'


def low_pass(project: str = "") -> Bench:
    """500 Ω and 7 µF from a connector to a converter's pin."""
    nets = """
        IN: J1.1 R1.1
        N: R1.2 C1.1 U1.1/AIN0/input
        GND: J1.2 C1.2 U1.2/GND/power_in
        +5V: U1.3/VDD/power_in
    """
    return bench("R1 500, C1 7u, J1 IN, U1 QX7301", nets, EXACT + project)


@pytest.mark.parametrize(("hertz", "published"), [(40.0, 0.7508), (50.0, 0.6728)])
def test_gain_of_a_low_pass(hertz: float, published: float):
    """Kuphaldt, Lessons in Electric Circuits, AC, chapter 8."""
    assert low_pass().measure("N", "gain", frequency=hertz).nominal == pytest.approx(published, abs=1e-4)
    assert low_pass().measure("N", "gain", frequency=hertz).proved


def test_gain_is_that_of_the_formula():
    x = 2 * pi * 40.0 * 500 * 7e-6
    assert low_pass().measure("N", "gain", frequency=40.0).nominal == pytest.approx(1 / hypot(1, x), rel=1e-12)


def test_noise_is_taken_over_the_temperatures_of_the_project():
    """k = 1.380649e-23 J/K (SI)."""
    found = low_pass('[conditions]\ntemperature = "-20 degC .. 60 degC"\n').measure("N", "thermal_noise")
    assert found.nominal == pytest.approx(sqrt(1.380649e-23 * 293.15 / 7e-6), rel=1e-9)
    problem = low_pass('[conditions]\ntemperature = "-20 degC .. 60 degC"\n').pose("N", "thermal_noise")
    heat = next(item for item in problem.parameters if item.name == "temperature")
    assert (heat.low, heat.high, heat.assumed) == (pytest.approx(253.15), pytest.approx(333.15), ())


def test_a_temperature_that_nobody_gives_is_an_assumption():
    problem = low_pass().pose("N", "thermal_noise")
    heat = next(item for item in problem.parameters if item.name == "temperature")
    assert (heat.nominal, heat.ask) == (298.15, '[conditions] temperature = "…"')
    assert heat.assumed


def test_a_gain_needs_its_frequency():
    with pytest.raises(Unmeasurable, match="'frequency'"):
        low_pass().pose("N", "gain")
