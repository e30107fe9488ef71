"""Cases of a structure, solved."""

from dataclasses import replace

import numpy as np
import pytest

from rcrules.engine import Shape
from rcrules.problems import LevelForm, Structure, Waveform, column, constant, solved, steady_states

STILL = Waveform(before=(), points=(((), ()),))
CASES = np.array([[1.0, 3.0, 2.0], [2.0, 2.0, 2.0]])


def divider(**changes: object) -> Structure:
    """Columns: R from the source to the node, R to ground, C; 8 V before, 4 V after."""
    wave = Waveform(before=constant(8.0), points=(((), constant(4.0)),))
    structure = Structure(
        shape=Shape(1, 2, ((0, 1), (0, 2)), ((0, 2),)),
        ohms=(column(0), column(1)),
        farads=(column(2),),
        waveforms=(wave, STILL),
    )
    return replace(structure, **changes)  # type: ignore[arg-type]  # any field


def test_the_start_is_the_steady_state_before_and_the_end_that_after():
    case = solved(divider(), CASES)
    assert case.start == pytest.approx([6.0, 4.0])
    assert case.signal.initial() == pytest.approx([6.0, 4.0])
    assert case.final == pytest.approx([3.0, 2.0])


def test_empty_capacitors_start_at_zero():
    case = solved(divider(empty=True), CASES)
    assert case.start.tolist() == [0.0, 0.0]
    assert case.signal.initial().tolist() == [0.0, 0.0]


def test_a_contact_gives_the_start_another_shape():
    earlier = (Shape(1, 2, ((0, 1),), ((0, 2),)), (column(0),))
    assert solved(divider(earlier=earlier), CASES).start == pytest.approx([8.0, 8.0])


def test_pinned_terminals_start_where_their_source_held_them():
    """Two free nodes: the first held at 6 V, the second a divider of it; then left open."""
    shape = Shape(2, 1, ((0, 1), (1, 2)), ((0, 2), (1, 2)))
    structure = Structure(
        shape=shape,
        ohms=(column(0), column(1)),
        farads=(column(2), column(2)),
        waveforms=(STILL,),
        pinned=((0, constant(6.0)),),
    )
    assert solved(structure, CASES).volts_before.tolist() == pytest.approx(np.array([[6.0, 4.5, 0.0], [6.0, 3.0, 0.0]]))


def test_levels_are_fixed_or_follow_or_are_parts_of_the_step():
    case = solved(divider(), CASES)
    fixed = case.above(LevelForm(kind="voltage", offset=constant(1.0)))
    assert fixed[1] == pytest.approx([5.0, 3.0])
    follows = case.above(LevelForm(kind="voltage", follows=((1, constant(0.5)),)))
    assert follows[1] == pytest.approx([2.0, 0.0])
    assert follows[0].initial() == pytest.approx([4.0, 2.0])
    assert case.above(LevelForm(kind="step", fraction=constant(0.5)))[0].final() == pytest.approx([-1.5, -1.0])
    assert case.above(LevelForm(kind="final", fraction=constant(0.5)))[0].final() == pytest.approx([1.5, 1.0])


def test_a_reference_is_the_time_at_which_a_supply_is_valid():
    ramp = Waveform(before=(), points=(((), ()), (column(0), constant(4.0))))
    structure = divider(waveforms=(ramp, STILL), reference=(1, LevelForm(kind="voltage", offset=constant(3.0))))
    assert solved(structure, CASES).reference == pytest.approx([0.75, 1.5])


def test_states_are_solved_without_free_nodes_too():
    alone = Structure(shape=Shape(0, 2, (), ()), ohms=(), farads=(), waveforms=(STILL, STILL))
    states = ((constant(5.0), constant(3.0)), ((), constant(3.0)))
    found = steady_states(replace(alone, states=states), CASES)
    assert found[0].tolist() == [[5.0, 3.0], [0.0, 3.0]]
