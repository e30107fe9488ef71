import math

import pytest
from scipy import stats

from rcrules.statistics import root_sum_square, wilson


@pytest.mark.parametrize(("failing", "count"), [(0, 10), (1, 10), (31, 1000), (5000, 10000), (10, 10), (0, 1), (1, 1)])
def test_the_interval_is_that_of_a_general_purpose_library(failing: int, count: int) -> None:
    """Source: scipy.stats.binomtest, method "wilson", 95 %."""
    found = wilson(failing, count)
    other = stats.binomtest(failing, count).proportion_ci(0.95, method="wilson")
    assert found.fraction == failing / count
    assert (found.low, found.high) == pytest.approx((other.low, other.high), abs=1e-12)


def test_root_sum_square_of_the_worked_example() -> None:
    """5 %, 0.6 %, 10 % and 15 % give 18.72 %, where the plain sum is 30.6 % (hand derivation)."""
    assert round(root_sum_square([5.0, 0.6, 10.0, 15.0]), 2) == 18.72


def test_what_is_not_finite_is_not_defined() -> None:
    assert math.isnan(root_sum_square([1.0, math.inf]))
    assert root_sum_square([]) == 0.0
