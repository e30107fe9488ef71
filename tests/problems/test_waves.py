"""Waveforms of several sources become one list of straight pieces."""

import numpy as np
import pytest

from rcrules.engine import Shape
from rcrules.problems import Structure, Waveform, column, constant
from rcrules.problems._waves import before, currents, drive, reached


def structure(*waves: Waveform) -> Structure:
    return Structure(shape=Shape(1, len(waves), (), ()), ohms=(), farads=(), waveforms=waves, amps=((0, column(0)),))


RAMP = Waveform(before=(), points=(((), ()), (column(0), constant(4.0))))
STEP = Waveform(before=constant(1.0), points=(((), constant(2.0)),))
LATE = Waveform(before=(), points=(((), ()), (constant(3.0), ()), (constant(3.0), constant(5.0))))


def test_a_piece_starts_wherever_a_source_bends():
    cases = np.array([[2.0], [4.0]])
    found = drive(structure(RAMP, STEP, LATE), cases)
    assert found.starts.tolist() == [[0.0, 2.0, 3.0], [0.0, 3.0, 4.0]]
    assert found.levels[0].tolist() == [[0.0, 2.0, 0.0], [4.0, 2.0, 0.0], [4.0, 2.0, 5.0]]
    assert found.levels[1, :, 0].tolist() == [0.0, 3.0, 4.0]
    assert found.slopes[0, :, 0].tolist() == [2.0, 0.0, 0.0]


def test_a_ramp_of_no_length_is_a_step():
    found = drive(structure(RAMP), np.array([[0.0]]))
    assert found.levels[0, :, 0].tolist() == [4.0, 4.0]


def test_voltages_before_and_currents_are_those_of_the_forms():
    cases = np.array([[2.0], [3.0]])
    assert before(structure(RAMP, STEP), cases).tolist() == [[0.0, 1.0], [0.0, 1.0]]
    assert currents(structure(RAMP), cases).tolist() == [[2.0], [3.0]]


def test_a_level_is_reached_on_the_ramp_or_never():
    cases = np.array([[2.0], [8.0]])
    assert reached(RAMP, np.array([3.0, 3.0]), cases) == pytest.approx([1.5, 6.0])
    assert reached(RAMP, np.array([4.5, 0.0]), cases).tolist() == [np.inf, 0.0]
