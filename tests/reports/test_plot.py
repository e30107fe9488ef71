"""The response of a finding as a drawing: where curves, levels, limits and crossings stand."""

import itertools
import math
import re

import pytest
from lxml import etree

from rcrules.findings import Json
from rcrules.reports._page._plot import plot, ticks
from tests.reports._answer import TIMES, response
from tests.reports._sample import answering

END = 3 * 0.0497
"""The response is shown until three times as late as the level is met."""
START = -0.05 * END
LEFT, RIGHT, TOP, BOTTOM = 62, 640 - 132, 18, 260 - 34


def drawn(found: Json | None, **changed: object) -> str:
    return str(plot(answering(response=found, **changed)) or "")


def paths(text: str, look: str) -> list[list[float]]:
    """The numbers of every path of a class."""
    tree = etree.fromstring(text)
    return [
        [float(number) for number in re.findall(r"-?\d+\.?\d*", item.get("d"))]
        for item in tree.iter("path")
        if item.get("class") == look
    ]


def test_without_a_response_there_is_no_drawing() -> None:
    assert drawn(None) == ""
    assert drawn(response(time=[0.0], nominal=[0.0], low_case=[0.0], high_case=[0.0])) == ""


def test_the_nominal_curve_meets_its_level_where_the_crossing_stands() -> None:
    """R·C·ln(3.3 / (3.3 - 0.99)) = 35.67 ms at 100 ms (hand derivation)."""
    text = drawn(response())
    (numbers,) = paths(text, "nominal")
    points = list(zip(numbers[::2], numbers[1::2], strict=True))
    (_, level, _) = paths(text, "threshold")[0]
    (mark,) = paths(text, "crossing")
    before = max(x for x, y in points if y > level)
    after = min(x for x, y in points if y <= level)
    assert before <= mark[0] <= after


def test_a_limit_in_time_stands_upright_with_the_forbidden_side_shaded() -> None:
    for key, left in (("at_least", True), ("at_most", False)):
        text = drawn(response(limit={key: 0.03}), limit={key: 0.03, "unit": "s", "text": "", "from": ""})
        (line,) = paths(text, "limit")
        (shade,) = paths(text, "forbidden")
        assert line[0] == pytest.approx(LEFT + (RIGHT - LEFT) * (0.03 - START) / (END - START), abs=0.1)
        assert (shade[0], shade[2]) == ((LEFT, line[0]) if left else (line[0], RIGHT))
        assert "limit 30 ms" in text


def test_a_limit_in_volts_lies_across() -> None:
    for told in ({"at_most": 3.0}, None):
        text = drawn(response(limit=told), limit={"at_most": 3.0, "unit": "V", "text": "", "from": ""})
        (line,) = paths(text, "limit")
        assert (line[0], line[2]) == (LEFT, RIGHT)
        assert TOP < line[1] < BOTTOM


def test_a_limit_a_little_later_widens_the_frame_and_one_far_off_is_told_at_its_edge() -> None:
    for late, text in ((0.2, "limit 200 ms<"), (4.0, "limit 4 s →<")):
        found = drawn(response(limit={"at_most": late}), limit={"at_most": late, "unit": "s", "text": "", "from": ""})
        (line,) = paths(found, "limit")
        assert text in found
        assert (line[0] < RIGHT) == (late < 1.0)


def test_a_curve_ends_at_the_frame_on_the_line_between_its_points() -> None:
    """Straight line from (0, 0) to (1 s, 10 V): 1.5 V at 0.15 s (hand derivation)."""
    line = {"time": [0.0, 1.0], "nominal": [0.0, 10.0], "low_case": None, "high_case": None, "thresholds": []}
    text = drawn(response(**line, limit=None, crossing={"low": 0.01, "nominal": 0.02, "high": 0.05}))
    (numbers,) = paths(text, "nominal")
    (axis,) = paths(text, "axis")
    assert len(numbers) == 4
    assert numbers[2] == RIGHT
    assert axis[2] == BOTTOM
    assert (numbers[1] - numbers[3]) / (BOTTOM - TOP) == pytest.approx(1.5 / (10.0 * 1.12), abs=0.005)


def test_a_level_is_called_as_the_rule_calls_it() -> None:
    rows = [{"name": "to", "low": 0.96, "nominal": 0.99, "high": 1.02}]
    assert ">may switch</text>" in drawn(response(thresholds=rows))


def test_what_is_never_reached_has_no_mark() -> None:
    text = drawn(response(crossing={"low": 0.0219, "nominal": math.inf, "high": math.inf}))
    assert paths(text, "crossing") == []
    assert len(paths(text, "crossing end")) == 1
    assert paths(text, "reach") == []


def test_what_is_not_known_is_left_out() -> None:
    text = drawn(response(low_case=None, high_case=None, thresholds=[], limit=None, crossing=None))
    assert [len(paths(text, look)) for look in ("nominal", "spread", "case", "limit", "crossing")] == [1, 0, 0, 0, 0]


def test_names_that_would_overlap_are_moved_apart() -> None:
    rows = [{"name": f"level {index}", "low": None, "nominal": 1.0 + 0.01 * index, "high": None} for index in range(3)]
    text = drawn(response(thresholds=rows))
    heights = sorted(
        float(item.get("y")) for item in etree.fromstring(text).iter("text") if item.get("class") == "threshold-text"
    )
    assert all(after - before >= 11.9 for before, after in itertools.pairwise(heights))


def test_a_drawing_stays_small() -> None:
    """A thousand of them are 5 MB; a general plotting library writes 23 kB for each (measured)."""
    long = [0.0002 * index for index in range(1001)]
    many = response(time=long, nominal=long, low_case=long, high_case=long)
    assert len(drawn(many)) < 5000


@pytest.mark.parametrize(
    ("low", "high", "expected"),
    [
        (0.0, 1.0, [0.0, 0.2, 0.4, 0.6, 0.8, 1.0]),
        (-0.1, 3.5, [0.0, 1.0, 2.0, 3.0]),
        (0.0, 0.0497, [0.0, 0.01, 0.02, 0.03, 0.04]),
        (48.0, 51.0, [48.0, 49.0, 50.0, 51.0]),
    ],
)
def test_ticks_are_round(low: float, high: float, expected: list[float]) -> None:
    assert ticks(low, high) == expected


def test_a_flat_response_has_a_frame_too() -> None:
    flat = [0.0] * len(TIMES)
    text = drawn(response(nominal=flat, low_case=flat, high_case=flat, thresholds=[], limit=None, crossing=None))
    (numbers,) = paths(text, "nominal")
    assert len(set(numbers[1::2])) == 1
