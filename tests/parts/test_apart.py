"""A change of value is the product of its shares; what they leave is the loss by bias."""

import pytest

from rcrules.parts import Known, RatedPart, Share, apart
from tests.parts.parts_by_hand import part


def share(name: str, low: float, high: float) -> Share:
    return Share(name=name, low=low, high=high, given=True, origin="the test")


SHARES = (share("tolerance", -0.2, 0.2), share("temperature", -0.15, 0.15), share("bias", -0.6, 0.0))
VALUE = Known(si=1e-5, origin="the test")
PART = RatedPart(part=part("C7"), kind="capacitor", kind_why="", text="", value=VALUE, shares=SHARES)


def moves(relative: float) -> dict[str, float]:
    return {share.name: move for share, move in apart(PART, relative)}


def test_the_upper_end_is_made_of_upper_shares_and_no_bias() -> None:
    assert moves(1.2 * 1.15 - 1) == {"tolerance": 0.2, "temperature": 0.15}


def test_what_tolerance_and_temperature_leave_at_the_lower_end_is_bias() -> None:
    assert moves(0.8 * 0.85 * 0.9 - 1)["bias"] == pytest.approx(-0.1)


def test_a_value_between_the_ends_is_not_taken_apart() -> None:
    assert moves(0.1) == {}
