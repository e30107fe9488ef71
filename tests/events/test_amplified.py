"""Capacitors around amplifiers: the output stays within its rails, and nothing else is needed for a bound."""

import pytest

from rcrules.events import Unmeasurable, pose
from rcrules.measures import registry
from rcrules.problems import Bounds, solve_bounds
from rcrules.project import Project
from tests.networks.boards import board

SUPPLIES = "J1 1=+12V 2=GND 3=-12V\nC7 100n +12V GND\nC8 100n -12V GND\n"
SOURCE = "U2 [op-amp] ~:output=IN -:input=IN +:input=X V+:power-in=+12V V-:power-in=-12V\n"
STAGE = "U1 [op-amp] ~:output=VO -:input=N +:input=GND V+:power-in=+12V V-:power-in=-12V\nR1 10k IN N\nR2 100k N VO\n"
TEXT = SUPPLIES + SOURCE + STAGE + "C1 1n N VO\n"


def measured(text: str, ref: str, measure: str = "applied_voltage") -> Bounds:
    found = board(text)
    problem = pose(found, Project(), found.parts[ref], registry()[measure])
    (bounds,) = solve_bounds([(problem, registry()[measure])])
    assert isinstance(bounds, Bounds)
    return bounds


def test_a_capacitor_behind_a_buffer_sees_at_most_its_rail() -> None:
    bounds = measured(SUPPLIES + SOURCE + "R3 1k IN F\nC2 10n F GND\n", "C2")
    assert bounds.high == pytest.approx(12.0 * 1.05)
    assert bounds.low == pytest.approx(0.0, abs=1e-9)


def test_a_capacitor_in_the_feedback_of_an_amplifier_is_bounded_by_its_rails() -> None:
    """Between the node and the output: at most twice the span, whatever the amplifier does."""
    bounds = measured(TEXT, "C1")
    assert 12.0 <= bounds.high <= 2.0 * 24.0 * 1.05


def test_how_far_the_output_goes_is_an_assumption_that_one_line_replaces() -> None:
    found = board(TEXT)
    problem = pose(found, Project(), found.parts["C1"], registry()["applied_voltage"])
    reach = {item.name: item for item in problem.parameters}["VO reach"]
    assert (reach.low, reach.high) == (0.0, 1.0)
    assert reach.ask == '[net."VO"] swing = "…"'


def test_an_output_whose_rails_are_not_known_bounds_nothing() -> None:
    text = TEXT.replace("+12V", "VPOS").replace("-12V", "VNEG")
    found = board(text)
    with pytest.raises(Unmeasurable, match="what drives"):
        pose(found, Project(), found.parts["C1"], registry()["applied_voltage"])
