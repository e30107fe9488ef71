"""Curves for the drawing of a finding."""

import math
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from rcrules.derivation import response
from rcrules.engine import Shape
from rcrules.findings import Document
from rcrules.measures import registry
from rcrules.pipeline import Job, run
from rcrules.problems import (
    Bounds,
    LevelForm,
    Parameter,
    Problem,
    Request,
    Structure,
    Waveform,
    column,
    constant,
    solve_bounds,
)

DEMO = Path(__file__).parents[2] / "rcrules" / "demo"
EDGES = {"low": 0.1, "high": 0.9}
ENDS = {"nominal": "nominal", "low_case": "low", "high_case": "high"}


@pytest.fixture(scope="module")
def demo() -> Document:
    """The demo with all responses."""
    with pytest.MonkeyPatch.context() as patch:
        patch.chdir(DEMO)
        return run(Job(project="rcrules.toml", derived=True))


def of(document: Document, rule: str) -> dict[str, Any]:
    found = next(item.response for item in document.findings if item.rule == rule)
    assert found is not None
    return found


def test_every_curve_meets_its_level_where_the_marks_say(demo: Document) -> None:
    """The time axis counts from where the measure counts, in each case."""
    found = of(demo, "reset-lifts-late-enough")
    (level,) = found["thresholds"]
    supplies = {"nominal": 3.3, "low_case": 3.3 * 0.97, "high_case": 3.3 * 1.03}
    for curve, end in ENDS.items():
        volts = np.interp(found["crossing"][end], found["time"], found[curve])
        assert volts == pytest.approx(0.3 * supplies[curve], rel=1e-3)
    assert level["nominal"] == pytest.approx(0.3 * 3.3)
    assert found["limit"] == {"at_least": 0.03}


def test_a_band_is_told_by_both_edges(demo: Document) -> None:
    found = of(demo, "input-settles-in-window")
    upper, lower = (row["nominal"] for row in found["thresholds"])
    last = np.interp(found["crossing"]["nominal"], found["time"], found["nominal"])
    assert min(abs(last - upper), abs(last - lower)) < 0.1 * (upper - lower)


def test_a_discharge_is_drawn_down_to_its_level(demo: Document) -> None:
    found = of(demo, "field-side-bleeds-down")
    assert np.interp(found["crossing"]["high"], found["time"], found["high_case"]) == pytest.approx(5.0, rel=1e-2)


def test_times_rise_and_are_few(demo: Document) -> None:
    found = [item.response for item in demo.findings if item.response is not None]
    assert len(found) > 5
    for item in found:
        assert len(item["time"]) <= 200
        assert all(np.diff(item["time"]) > 0.0)
        assert {len(item[key]) for key in ENDS} == {len(item["time"])}


def stepped(tau: float, late: float, measure: str) -> dict[str, Any]:
    """1 V behind R and C, and a second node whose time constant is as much slower as ``late`` says."""
    parameter = Parameter(
        name="R1", unit="Ω", low=tau, nominal=tau, high=tau, given_low=tau, given_high=tau, origin="the test"
    )
    structure = Structure(
        shape=Shape(free=2, held=2, resistors=((0, 2), (1, 2)), capacitors=((0, 3), (1, 3))),
        ohms=(column(0), constant(late * tau)),
        farads=(constant(1.0), constant(1.0)),
        waveforms=(Waveform(before=(), points=(((), constant(1.0)),)), Waveform(before=(), points=(((), ()),))),
        levels=tuple((name, LevelForm(kind="step", fraction=constant(part))) for name, part in EDGES.items()),
        options=(("band", 0.01),),
    )
    problem = Problem(structure=structure, parameters=(parameter,))
    (bounds,) = solve_bounds([Request(problem, registry()[measure])])
    assert isinstance(bounds, Bounds)
    found = response(problem, registry()[measure], bounds, None)
    assert found is not None
    return found


@pytest.mark.parametrize("measure", ["settling_time", "time_to_63"])
def test_straight_lines_between_the_points_follow_the_exponential(measure: str) -> None:
    """1 - e^(-t/tau), within 0.2 % of the step, and at its level within 1e-6 (hand derivation)."""
    found = stepped(1e-3, 1.0, measure)
    time = np.linspace(0.0, found["time"][-1], 5000)
    drawn = np.interp(time, found["time"], found["nominal"])
    assert np.abs(drawn - (1.0 - np.exp(-time / 1e-3))).max() < 2e-3
    crossing = found["crossing"]["nominal"]
    assert np.interp(crossing, found["time"], found["nominal"]) == pytest.approx(1 - math.exp(-crossing / 1e-3))


def test_a_slow_mode_elsewhere_does_not_stretch_the_drawing() -> None:
    assert stepped(1e-3, 1e6, "time_to_63")["time"][-1] < 10e-3


def test_before_the_event_the_node_rests() -> None:
    found = stepped(1e-3, 1.0, "settling_time")
    assert found["time"][0] < 0.0
    assert {volts for time, volts in zip(found["time"], found["nominal"], strict=True) if time < 0.0} == {0.0}


def test_a_span_of_time_has_no_marks() -> None:
    """A rise time does not start at the event, so that no instant of the axis is meant."""
    found = stepped(1e-3, 1.0, "rise_time")
    assert found["crossing"] is None
    assert [row["nominal"] for row in found["thresholds"]] == pytest.approx([0.1, 0.9])
