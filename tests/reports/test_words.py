"""Numbers as reports tell them."""

import pytest

from rcrules.reports._words import bounds, number


@pytest.mark.parametrize(
    ("value", "unit", "text"),
    [(8.4e-16, "s", "under 1 ps"), (1e-12, "s", "1 ps"), (0.0, "s", "0 s"), (8.4e-16, "F", "0.84 fF")],
)
def test_a_time_too_short_for_any_circuit_is_told_as_such(value: float, unit: str, text: str) -> None:
    assert number(value, unit) == text


def test_bounds_that_read_the_same_are_one_number() -> None:
    assert bounds(1e-16, 2e-16, 3e-16, "s") == "under 1 ps"
    assert bounds(1e-16, 2e-16, 3e-9, "s") == "under 1 ps .. under 1 ps .. 3 ns"
