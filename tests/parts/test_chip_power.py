"""Rated power of chip resistors by size, against data sheets of several makers, of which each row is the range."""

import pytest

from rcrules.parts import chip_power


@pytest.mark.parametrize(
    ("size", "least", "usual"),
    [
        ("0402", 1 / 16, 0.063),  # 0.063 W and 1/16 W
        ("0603", 1 / 16, 1 / 10),  # older sheets 1/16 W, newer ones 1/10 W
        ("0805", 1 / 10, 1 / 8),
        ("1206", 1 / 8, 1 / 4),
        ("2512", 1 / 2, 1.0),  # thin film 0.5 W, thick film 1 W
    ],
)
def test_the_whole_rating_holds_up_to_70_degrees(size: str, least: float, usual: float) -> None:
    assert chip_power(size, 70.0) == (least, usual)
    assert chip_power(size, -20.0) == (least, usual)


def test_above_it_falls_along_a_line_to_nothing_at_155_degrees() -> None:
    """Thick-film data sheets: full power to 70 °C, none at 155 °C; half way between them half of it."""
    assert chip_power("0805", 112.5) == pytest.approx((0.05, 0.0625))
    assert chip_power("0805", 155.0) is None


def test_of_another_size_nothing_is_known() -> None:
    assert chip_power("", 25.0) is None
    assert chip_power("9999", 25.0) is None
