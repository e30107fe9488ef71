"""Numbers of a derivation, each worked out once."""

from dataclasses import replace

import numpy as np

from rcrules.derivation._known import states, value_in, values_in
from rcrules.engine import Shape
from rcrules.measures import registry
from rcrules.problems import Array, Structure

DIVIDER = Structure(
    shape=Shape(1, 2, ((1, 0), (0, 2)), ()),
    ohms=(((1.0, (0,)),), ((1.0, (1,)),)),
    farads=(),
    waveforms=(),
    states=((((12.0, ()),), ()),),
)
"""Two resistors, of the columns' values, from 12 V to 0 V; the tap between them is observed."""
asked: list[Array] = []


def _counted(structure: Structure, cases: Array) -> Array:
    del structure
    asked.append(cases)
    return cases.sum(axis=1) if cases.shape[1] else np.full(len(cases), 7.0)


class _Asks:
    """A computation that has no name of its own, as one made for a rule."""

    def __call__(self, structure: Structure, cases: Array) -> Array:
        return _counted(structure, cases)


COUNTED = replace(registry()["voltage_ratio"], compute=_counted)


def test_equal_cases_of_equal_structures_are_worked_out_once() -> None:
    asked.clear()
    cases = np.array([[1.0, 2.0], [3.0, 4.0]])
    assert list(values_in(COUNTED, DIVIDER, cases)) == [3.0, 7.0]
    assert list(values_in(COUNTED, replace(DIVIDER), cases.copy())) == [3.0, 7.0]
    assert len(asked) == 1
    assert value_in(COUNTED, replace(DIVIDER, at=2), cases[0]) == 3.0
    assert len(asked) == 2


def test_cases_without_a_column_are_told_apart_by_their_number() -> None:
    assert list(values_in(COUNTED, DIVIDER, np.zeros((2, 0)))) == [7.0, 7.0]
    assert list(values_in(COUNTED, DIVIDER, np.zeros((1, 0)))) == [7.0]
    assert value_in(COUNTED, DIVIDER, np.zeros(0)) == 7.0


def test_what_is_made_for_one_rule_is_not_kept() -> None:
    asked.clear()
    made = replace(COUNTED, compute=_Asks())
    case = np.array([5.0, 6.0])
    assert [value_in(made, DIVIDER, case), value_in(made, DIVIDER, case)] == [11.0, 11.0]
    assert len(asked) == 2


def test_states_are_those_of_the_divider() -> None:
    found = states(DIVIDER, np.array([[3e3, 1e3]]))
    np.testing.assert_allclose(found, [[3.0, 12.0, 0.0]], rtol=1e-12)
