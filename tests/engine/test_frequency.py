"""Transfer functions and corner frequencies."""

import numpy as np
import pytest

from rcrules.engine import Shape, corner, solve, transfer
from tests.engine.networks import random_shape, random_values
from tests.engine.test_response import nodal

approx = pytest.approx


def test_transfer_solves_the_complex_nodal_equations():
    rng = np.random.default_rng(21)
    for _ in range(60):
        shape = random_shape(rng, int(rng.integers(1, 7)))
        ohms, farads = random_values(rng, shape, 10, 4.0)
        omega = 10.0 ** rng.uniform(2.0, 6.0, 10)
        admittance = nodal(shape, shape.resistors, 1.0 / ohms) + 1j * omega[:, None, None] * nodal(
            shape, shape.capacitors, farads
        )
        free = shape.free
        wanted = np.linalg.solve(admittance[:, :free, :free], -admittance[:, :free, free : free + 1])[:, :, 0]
        found = transfer(shape, ohms, farads, free, omega)
        assert np.abs(found - wanted).max() < 1e-10


def test_a_loaded_low_pass():
    """12 V source through 30 kΩ, 10 kΩ to ground, 100 nF: 1/(2 pi 7.5 kΩ 100 nF) = 212.207 Hz, gain 1/4."""
    shape = Shape(1, 2, ((1, 0), (0, 2)), ((0, 2),))
    ohms, farads = np.array([[30e3, 10e3]]), np.array([[100e-9]])
    found = corner(shape, ohms, farads, 1, 0)
    assert found / (2.0 * np.pi) == approx([212.207], abs=5e-4)
    assert np.abs(transfer(shape, ohms, farads, 1, 0.0)) == approx(np.array([[0.25]]))
    assert np.abs(transfer(shape, ohms, farads, 1, found)) == approx(np.array([[0.25 / np.sqrt(2.0)]]), rel=1e-13)


def test_two_equal_stages_that_load_each_other():
    """0.374239/(R C) (hand: x² + 7 x - 1 = 0 with x = (w R C)²)."""
    shape = Shape(2, 2, ((2, 0), (0, 1)), ((0, 3), (1, 3)))
    found = corner(shape, np.ones((1, 2)), np.ones((1, 2)), 2, 1)
    assert found == approx([np.sqrt((np.sqrt(53.0) - 7.0) / 2.0)], rel=1e-13)
    assert found == approx([0.374239], abs=5e-7)


def test_a_high_pass_falls_downwards():
    shape = Shape(1, 2, ((0, 2),), ((1, 0),))
    ohms, farads = np.array([[1e3], [2e3]]), np.array([[1e-6], [1e-6]])
    assert corner(shape, ohms, farads, 1, 0, "high") == approx([1e3, 500.0], rel=1e-13)


def test_what_never_falls_has_no_corner():
    """A divider without capacitor passes everything; a bridged one settles at 1/2 above 2/3."""
    plain = Shape(1, 2, ((1, 0), (0, 2)), ())
    assert list(corner(plain, np.ones((1, 2)), np.zeros((1, 0)), 1, 0)) == [np.inf]
    assert list(corner(plain, np.ones((1, 2)), np.zeros((1, 0)), 1, 0, "high")) == [0.0]
    bridged = Shape(1, 2, ((1, 0), (0, 2)), ((1, 0), (0, 2)))
    assert list(corner(bridged, np.array([[1.0, 2.0]]), np.ones((1, 2)), 1, 0)) == [np.inf]


def test_no_gain_in_the_pass_band_is_not_defined():
    shape = Shape(1, 2, ((0, 2),), ((1, 0),))
    assert np.isnan(corner(shape, np.array([[1e3]]), np.array([[1e-6]]), 1, 0, "low")).all()


@pytest.mark.parametrize("passes", ["low", "high"])
def test_the_gain_at_the_corner_is_three_decibels_down(passes):
    rng = np.random.default_rng(22)
    shape = Shape(2, 2, ((2, 0), (0, 1), (1, 3)), ((0, 3), (2, 1), (1, 3)))
    ohms, farads = random_values(rng, shape, 50, 3.0)
    found = corner(shape, ohms, farads, 2, 1, passes)
    there = np.isfinite(found) & (found > 0.0)
    assert there.any()
    edge = 0.0 if passes == "low" else 1e6 / solve(shape, ohms, farads).taus.min(axis=1)
    gains = [np.abs(transfer(shape, ohms, farads, 2, omega)[:, 1]) for omega in (edge, np.where(there, found, 1.0))]
    assert gains[1][there] / gains[0][there] == approx(np.sqrt(0.5), rel=1e-9)
