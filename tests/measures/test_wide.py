"""Networks of many nodes in which every part is uncertain: what the search finds is not beaten beside it."""

import numpy as np
import pytest

from rcrules.problems import Bounds, solve_bounds
from tests.bench._ladder import Asked, questions

SECTIONS = 14
"""28 uncertain parts: more than the search takes to be few."""
SHARES = (0.0, 0.25, 0.5, 0.75, 1.0)
SEARCHED = 1e-3
"""What a searched bound may miss."""


def beside(asked: Asked, case: tuple[float, ...]) -> np.ndarray:
    """The case with each number alone elsewhere in its range, and with two neighbours flipped together."""
    low, _, high = asked.problem.box()
    found = []
    for index in range(len(low)):
        for share in SHARES:
            moved = np.array(case)
            moved[index] = low[index] + share * (high[index] - low[index])
            found.append(moved)
    for index in range(len(low) - 1):
        moved, pair = np.array(case), slice(index, index + 2)
        moved[pair] = np.where(moved[pair] == low[pair], high[pair], low[pair])
        found.append(moved)
    return np.array(found)


@pytest.mark.parametrize("at", [0, 2, 7])
@pytest.mark.parametrize("number", [0, 1, 2], ids=["delay", "rise time", "corner"])
def test_no_neighbour_beats_the_bounds_of_a_wide_network(at: int, number: int) -> None:
    """Turns of single numbers went on for too few rounds once: the corner near the source was missed by 1.3 %."""
    asked = questions(SECTIONS, at)[number]
    (found,) = solve_bounds([(asked.problem, asked.measure)])
    assert isinstance(found, Bounds)
    lowest = asked.measure.compute(asked.problem.structure, beside(asked, found.low_at)).min()
    highest = asked.measure.compute(asked.problem.structure, beside(asked, found.high_at)).max()
    assert found.low <= lowest * (1.0 + SEARCHED)
    assert found.high >= highest * (1.0 - SEARCHED)


def test_the_end_of_a_ladder_is_proved_and_its_middle_is_searched() -> None:
    found = [
        solve_bounds([(asked.problem, asked.measure)])[0] for asked in (questions(40, 39)[0], questions(40, 20)[0])
    ]
    assert [isinstance(item, Bounds) and item.proved for item in found] == [True, False]


def test_all_high_is_not_the_slowest_case_of_a_middle_node() -> None:
    """What hangs behind the node takes less charge while it waits, where it is reached through more resistance."""
    asked = questions(40, 5)[0]
    _, _, high = asked.problem.box()
    (found,) = solve_bounds([(asked.problem, asked.measure)])
    assert isinstance(found, Bounds)
    assert found.high > 1.01 * float(asked.measure.compute(asked.problem.structure, high[None])[0])
