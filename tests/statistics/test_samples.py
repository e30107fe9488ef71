"""Random cases against the distributions of a general-purpose library."""

import numpy as np
import pytest
from scipy import stats

from rcrules.engine import Shape
from rcrules.measures import Theory
from rcrules.problems import Array, Parameter, Problem, Structure
from rcrules.statistics import samples, values

EMPTY = Structure(shape=Shape(free=0, held=0, resistors=(), capacitors=()), ohms=(), farads=(), waveforms=())

COUNT = 40_000


def parameter(low: float, nominal: float, high: float, name: str = "R1") -> Parameter:
    return Parameter(
        name=name, unit="Ω", low=low, nominal=nominal, high=high, given_low=low, given_high=high, origin="the test"
    )


def drawn(distribution: str, low: float = 90.0, nominal: float = 100.0, high: float = 120.0) -> np.ndarray:
    return samples([parameter(low, nominal, high)], [distribution], COUNT, 7)[:, 0]


def test_uniform_samples_are_uniform_between_the_limits() -> None:
    """Kolmogorov-Smirnov against scipy.stats.uniform; the seed is fixed, so the outcome is too."""
    assert stats.kstest(drawn("uniform"), stats.uniform(loc=90.0, scale=30.0).cdf).pvalue > 0.01


def test_normal_samples_are_normal_around_the_nominal_and_cut_off_at_the_limits() -> None:
    """Kolmogorov-Smirnov of each side against scipy.stats.truncnorm at three standard deviations."""
    found = drawn("normal")
    for side, scale in ((found[found < 100.0], 10.0 / 3), (found[found >= 100.0], 20.0 / 3)):
        low, high = (-3.0, 0.0) if side.max() < 100.0 else (0.0, 3.0)
        assert stats.kstest(side, stats.truncnorm(low, high, loc=100.0, scale=scale).cdf).pvalue > 0.01
    assert abs(np.median(found) - 100.0) < 0.1
    assert found.min() >= 90.0
    assert found.max() <= 120.0


@pytest.mark.parametrize(("nominal", "low", "high"), [(90.0, 0.0, 3.0), (120.0, -3.0, 0.0)])
def test_with_its_nominal_at_a_limit_a_normal_number_lies_to_the_other_side(
    nominal: float, low: float, high: float
) -> None:
    found = drawn("normal", nominal=nominal)
    assert stats.kstest(found, stats.truncnorm(low, high, loc=nominal, scale=10.0).cdf).pvalue > 0.01


def test_the_two_are_told_apart() -> None:
    """The checks above can fail: each kind fails the other's."""
    assert stats.kstest(drawn("normal"), stats.uniform(loc=90.0, scale=30.0).cdf).pvalue < 1e-6
    assert stats.kstest(drawn("uniform"), stats.truncnorm(-3.0, 3.0, loc=100.0, scale=5.0).cdf).pvalue < 1e-6


def test_the_same_seed_gives_the_same_cases_and_another_others() -> None:
    one = samples([parameter(1.0, 2.0, 3.0)] * 2, ["uniform", "normal"], 10, 1)
    assert (one == samples([parameter(1.0, 2.0, 3.0)] * 2, ["uniform", "normal"], 10, 1)).all()
    assert (one != samples([parameter(1.0, 2.0, 3.0)] * 2, ["uniform", "normal"], 10, 2)).any()


def test_numbers_of_different_names_are_independent() -> None:
    found = samples([parameter(0.0, 1.0, 2.0), parameter(0.0, 1.0, 2.0, "R2")], ["uniform", "uniform"], COUNT, 3)
    assert abs(stats.pearsonr(found[:, 0], found[:, 1]).statistic) < 0.02


def test_a_number_is_the_same_wherever_it_acts() -> None:
    alone = samples([parameter(0.0, 1.0, 2.0)], ["uniform"], 100, 3)[:, 0]
    beside = samples([parameter(0.0, 1.0, 2.0, "C1"), parameter(0.0, 1.0, 2.0)], ["uniform"] * 2, 100, 3)[:, 1]
    assert (alone == beside).all()


@pytest.mark.parametrize("distribution", ["uniform", "normal"])
def test_a_number_without_spread_stays(distribution: str) -> None:
    assert (samples([parameter(5.0, 5.0, 5.0)], [distribution], 10, 1) == 5.0).all()


class Count:
    """A measure that notes how many cases it is asked at a time."""

    def __init__(self) -> None:
        self.portions: list[int] = []

    def compute(self, structure: Structure, cases: Array) -> Array:  # noqa: ARG002
        self.portions.append(len(cases))
        return cases[:, 0] * 2.0

    def theory(self, structure: Structure, low: Array, high: Array) -> Theory:  # noqa: ARG002
        return Theory(signs=(1,))


@pytest.mark.parametrize("count", [1, 20_000, 100_001])
def test_values_come_in_order_from_portions_that_fit_into_memory(count: int) -> None:
    """Whatever the number of samples, memory holds the intermediate results of a portion alone."""
    measure = Count()
    cases = np.arange(float(count))[:, None]
    problem = Problem(structure=EMPTY, parameters=(parameter(0.0, 1.0, 2.0),))
    assert (values(problem, measure, cases) == cases[:, 0] * 2.0).all()
    assert max(measure.portions) <= 20_000
