"""Filters around one ideal amplifier, from parts on nets to numbers, held to the formulas of textbooks."""

import math

import pytest

from rcrules.events import pose
from rcrules.measures import registry
from rcrules.networks import Board, Node
from rcrules.problems import solve_bounds
from rcrules.project import Project
from tests.networks.boards import board

AMPLIFIER = "U1 [op-amp] ~:output=VO -:input={minus} +:input={plus} V+:power-in=+12V V-:power-in=-12V\n"
SOURCE = "U2 [DAC] VOUTA:output=IN VDD:power-in=+5V GND:power-in=GND\nU3 [ADC] AIN0:input=VO VDD:power-in=+5V GND=GND\n"
LOW = SOURCE + AMPLIFIER.format(minus="VO", plus="B") + "R1 {} IN A\nR2 {} A B\nC1 {} A VO\nC2 {} B GND"
HIGH = SOURCE + AMPLIFIER.format(minus="VO", plus="B") + "C1 {} IN A\nC2 {} A B\nR1 {} A VO\nR2 {} B GND"
FEEDBACK = (
    SOURCE + AMPLIFIER.format(minus="N", plus="GND") + "R1 {} IN A\nR2 {} A VO\nR3 {} A N\nC1 {} A GND\nC2 {} N VO"
)
INTEGRATOR = SOURCE + AMPLIFIER.format(minus="N", plus="GND") + "R1 10k IN N\nR2 100k N VO\nC1 1n N VO"


def nodes(found: Board) -> dict[str, Node]:
    return {node.net: node for network in found.networks for node in network.nodes}


def nominal(text: str, net: str, measure: str, **options: float | str) -> float:
    found = board(text)
    problem = pose(found, Project(), nodes(found)[net], registry()[measure], options)
    (bounds,) = solve_bounds([(problem, registry()[measure])])
    return float(bounds.nominal)  # type: ignore[union-attr]  # a failure has no bounds, and fails the test


def test_sallen_key_low_pass_of_equal_resistors() -> None:
    """w0 = 1/(R sqrt(C1 C2)), Q = sqrt(C1/C2)/2 (Sallen and Key, 1955; from memory); Butterworth: the corner is w0."""
    text = LOW.format("10k", "10k", "20n", "10n")
    expected = 1.0 / (2.0 * math.pi * 10e3 * 10e-9 * math.sqrt(2.0))
    assert nominal(text, "B", "corner_frequency") == pytest.approx(expected, rel=1e-9)
    assert nodes(board(text))["B"].role == "low-pass"
    assert nodes(board(text))["B"].active is None


def test_sallen_key_low_pass_that_rings_settles_with_its_envelope() -> None:
    """Q = 5: overshoot exp(-pi zeta/sqrt(1 - zeta²)); the last peak outside 1 % is the 14th."""
    text = LOW.format("10k", "10k", "100n", "1n")
    half = math.pi / (1e4 * math.sqrt(0.99))
    settled = nominal(text, "B", "settling_time", event="step-up", band=0.01)
    assert 14 * half < settled < 14.5 * half
    assert math.exp(-1e3 * 14 * half) > 0.01 > math.exp(-1e3 * 15 * half)


def test_sallen_key_high_pass() -> None:
    """w0 = 1/(C sqrt(R1 R2)), Q = sqrt(R2/R1)/2 with equal capacitors; Butterworth at R2 = 2 R1 (from memory)."""
    text = HIGH.format("10n", "10n", "10k", "20k")
    expected = 1.0 / (2.0 * math.pi * 10e-9 * 10e3 * math.sqrt(2.0))
    assert nominal(text, "B", "corner_frequency") == pytest.approx(expected, rel=1e-9)
    assert nodes(board(text))["B"].fed_from == ("IN",)


def test_multiple_feedback_low_pass() -> None:
    """w0 = 1/sqrt(R2 R3 C1 C2), gain -R2/R1, 1/(w0 Q) = C2 (R2 + R3 + R2 R3/R1) (from memory)."""
    r1, r2, r3, c1, c2 = 10e3, 10e3, 4.7e3, 22e-9, 2.2e-9
    text = FEEDBACK.format("10k", "10k", "4.7k", "22n", "2.2n")
    omega = 1.0 / math.sqrt(r2 * r3 * c1 * c2)
    q = 1.0 / (omega * c2 * (r2 + r3 + r2 * r3 / r1))
    inner = 1.0 - 1.0 / (2.0 * q * q)
    expected = omega * math.sqrt(inner + math.sqrt(inner * inner + 1.0)) / (2.0 * math.pi)
    assert nominal(text, "N", "corner_frequency") == pytest.approx(expected, rel=1e-9)
    assert nominal(text, "N", "gain", frequency=0.0) == pytest.approx(1.0, rel=1e-9)


def test_integrator_with_a_resistor_across_its_capacitor() -> None:
    """Gain R2/R1, corner 1/(2 pi R2 C) (Kuphaldt, Lessons in Electric Circuits, volume 3, chapter 8)."""
    assert nominal(INTEGRATOR, "N", "gain", frequency=0.0) == pytest.approx(10.0, rel=1e-9)
    assert nominal(INTEGRATOR, "N", "corner_frequency") == pytest.approx(1.0 / (2e-4 * math.pi), rel=1e-9)
    settled = nominal(INTEGRATOR, "N", "settling_time", event="step-up", band=0.01)
    assert settled == pytest.approx(1e-4 * math.log(100.0), rel=1e-9)


def test_coupling_into_a_virtual_ground() -> None:
    """1/(2 pi R C): the inverting input stays where the other one is."""
    text = SOURCE + AMPLIFIER.format(minus="N", plus="GND") + "C1 100n IN A\nR1 10k A N\nR2 100k N VO\n"
    assert nodes(board(text))["A"].role == "high-pass"
    assert nominal(text, "A", "corner_frequency") == pytest.approx(1.0 / (2e-3 * math.pi), rel=1e-9)
