"""Networks with ideal amplifiers, held to closed forms of two-pole filters and to a general-purpose solver."""

import math

import numpy as np
import pytest
from scipy import signal

from rcrules.engine import Amplified, FloatingNode, Shape

SALLEN_KEY = Shape(3, 2, ((4, 0), (0, 1)), ((0, 2), (1, 3)))
"""Terminals: first node, plus input, output; 0 V, source."""


def low_pass(r1: float, r2: float, c1: float, c2: float) -> Amplified:
    return Amplified(shape=SALLEN_KEY, amplifiers=((1, 2, 2),), ohms=np.array([[r1, r2]]), farads=np.array([[c1, c2]]))


def test_modes_of_a_two_pole_low_pass_oscillate_as_the_quadratic_says() -> None:
    """Unity-gain Sallen-Key: 1 + s C2 (R1 + R2) + s² R1 R2 C1 C2 (Sallen and Key, 1955; from memory)."""
    r1, r2, c1, c2 = 10e3, 12e3, 22e-9, 4.7e-9
    roots = np.roots([r1 * r2 * c1 * c2, c2 * (r1 + r2), 1.0])
    taus = low_pass(r1, r2, c1, c2).taus[0]
    found = sorted((-1.0 / taus[np.abs(taus) > 0.0]).tolist(), key=lambda pole: pole.imag)
    assert found == pytest.approx(sorted(roots.tolist(), key=lambda pole: pole.imag), rel=1e-12)


def test_corner_of_a_butterworth_low_pass_is_its_natural_frequency() -> None:
    """Q = sqrt(R1 R2 C1 C2) / (C2 (R1 + R2)) = 1/sqrt(2) for equal resistors and C1 = 2 C2."""
    found = low_pass(10e3, 10e3, 20e-9, 10e-9).corner(4, 2)
    assert found[0] == pytest.approx(1.0 / (10e3 * 10e-9 * math.sqrt(2.0)), rel=1e-12)


def test_corner_of_a_resonant_low_pass_follows_the_published_factor() -> None:
    """-3 dB at w0 sqrt(1 - 1/(2Q²) + sqrt((1 - 1/(2Q²))² + 1)), from |H| = 1/sqrt(2)."""
    q = 0.5 * math.sqrt(100.0)
    inner = 1.0 - 1.0 / (2.0 * q * q)
    found = low_pass(10e3, 10e3, 100e-9, 1e-9).corner(4, 2)
    assert found[0] == pytest.approx(1e5 / math.sqrt(100.0) * math.sqrt(inner + math.sqrt(inner**2 + 1.0)), rel=1e-10)


def test_high_pass_with_exchanged_parts_has_the_mirrored_corner() -> None:
    shape = Shape(3, 2, ((0, 2), (1, 3)), ((4, 0), (0, 1)))
    net = Amplified(
        shape=shape, amplifiers=((1, 2, 2),), ohms=np.array([[10e3, 20e3]]), farads=np.array([[10e-9, 10e-9]])
    )
    assert net.corner(4, 2, "high")[0] == pytest.approx(1.0 / (10e-9 * math.sqrt(10e3 * 20e3)), rel=1e-10)


@pytest.mark.parametrize("c1", [8e-9, 40e-9, 400e-9, 1e-6])
def test_step_settles_as_a_general_solver_says(c1: float) -> None:
    """Against scipy.signal.step of the same transfer function, scanned finely."""
    net = low_pass(10e3, 10e3, c1, 10e-9)
    weights = np.array([[0.0, 0.0, 1.0, 0.0, 0.0]])
    found = net.step(weights, np.array([[0.0, 0.0]]), np.array([[0.0, 2.0]]))
    system = signal.TransferFunction([1.0], [10e3**2 * c1 * 10e-9, 2 * 10e3 * 10e-9, 1.0])
    times = np.linspace(0.0, 80e-3, 800_001)
    _, response = signal.step(system, T=times)
    assert found.at(times[None, ::1000])[0] == pytest.approx(2.0 * response[::1000], abs=1e-9)
    last = times[np.abs(response - 1.0) > 0.01].max()
    assert found.last_exit(1.98, 2.02)[0] == pytest.approx(last, abs=2e-7)


def test_critically_damped_modes_are_right_although_they_are_equal() -> None:
    """(1 + t/tau) exp(-t/tau) is left of the step: 1 % at 6.638352 tau (root of (1 + x) exp(-x) = 0.01)."""
    net = low_pass(10e3, 10e3, 10e-9, 10e-9)
    weights = np.array([[0.0, 0.0, 1.0, 0.0, 0.0]])
    settled = net.step(weights, np.zeros((1, 2)), np.array([[0.0, 1.0]])).last_exit(0.99, 1.01)
    assert settled[0] == pytest.approx(6.638352e-4, rel=1e-6)


def test_integrator_with_a_resistor_across_has_gain_and_corner_of_the_feedback() -> None:
    """-R2/R1 / (1 + s R2 C) (Kuphaldt, Lessons in Electric Circuits, volume 3, chapter 8)."""
    shape = Shape(2, 2, ((3, 0), (0, 1)), ((0, 1),))
    net = Amplified(shape=shape, amplifiers=((2, 0, 1),), ohms=np.array([[10e3, 100e3]]), farads=np.array([[1e-9]]))
    assert net.transfer(3, 0.0)[0, 1] == pytest.approx(-10.0)
    assert net.corner(3, 1)[0] == pytest.approx(1.0 / (100e3 * 1e-9), rel=1e-12)
    assert net.settles[0]


def test_positive_feedback_does_not_settle() -> None:
    """The inputs exchanged: an ideal amplifier has the same state, a real one leaves it."""
    shape = Shape(2, 2, ((3, 0), (0, 1)), ((0, 1),))
    net = Amplified(shape=shape, amplifiers=((0, 2, 1),), ohms=np.array([[10e3, 100e3]]), farads=np.array([[1e-9]]))
    assert not net.settles[0]


def test_integrator_without_a_resistor_has_no_steady_state() -> None:
    shape = Shape(2, 2, ((3, 0),), ((0, 1),))
    net = Amplified(shape=shape, amplifiers=((2, 0, 1),), ohms=np.array([[10e3]]), farads=np.array([[1e-9]]))
    with pytest.raises(FloatingNode):
        net.steady(np.zeros((1, 2)))


def test_multiple_feedback_low_pass_follows_its_design_formulas() -> None:
    """w0 = 1/sqrt(R2 R3 C1 C2), gain -R2/R1 (R2 from the output, R3 to the input; from memory)."""
    r1, r2, r3, c1, c2 = 10e3, 20e3, 4.7e3, 22e-9, 2.2e-9
    shape = Shape(3, 2, ((4, 0), (0, 2), (0, 1)), ((0, 3), (1, 2)))
    net = Amplified(shape=shape, amplifiers=((3, 1, 2),), ohms=np.array([[r1, r2, r3]]), farads=np.array([[c1, c2]]))
    taus = net.taus[0][np.abs(net.taus[0]) > 0.0]
    assert net.transfer(4, 0.0)[0, 2] == pytest.approx(-2.0)
    assert abs(np.prod(taus)) == pytest.approx(r2 * r3 * c1 * c2, rel=1e-12)
    assert np.sum(taus) == pytest.approx(c2 * (r2 + r3 + r2 * r3 / r1), rel=1e-12)
