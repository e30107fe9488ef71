"""The door of the room: any subject and measure to a problem."""

from collections.abc import Mapping

from rcrules.design import Pin
from rcrules.events._bench import Bench, bench
from rcrules.events._discharge import pose_part_discharge
from rcrules.events._node import pose_network, pose_node
from rcrules.events._options import OptionValue, chosen
from rcrules.events._part import pose_part_event, pose_states
from rcrules.events._pin import pose_pin
from rcrules.events._stated import pose_stated, to_be_stated
from rcrules.events._string import pose_string, pose_value
from rcrules.events._supply import pose_supply
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import Board, Held, Network, Node
from rcrules.parts import RatedPart
from rcrules.problems import Problem
from rcrules.project import Project

Subject = Node | RatedPart | Pin | Held | Network


def pose(
    board: Board,
    project: Project,
    subject: Subject,
    measure: Measure,
    options: Mapping[str, OptionValue] | None = None,
) -> Problem:
    """What a measure asks of a subject, in numbers.

    options: values by option name, SI; defaults are filled in. Raises Unmeasurable, with the project line that would
    help.
    """
    at, values = bench(board, project), chosen(measure, options or {})
    kind = _kind(subject)
    if kind not in (measure.subject, *measure.also):
        raise Unmeasurable(f"{measure.name} is measured at a {measure.subject}, not at a {kind}")
    if isinstance(subject, Node):
        return pose_node(at, subject, measure, values)
    if isinstance(subject, Pin):
        return pose_pin(at, subject, measure, values)
    if isinstance(subject, Held):
        return pose_supply(at, subject, measure, values)
    if isinstance(subject, Network):
        return pose_network(at, subject, measure, values)
    if measure.poses == "states":
        return _pose_states(at, subject, measure, values)
    by_kind = {
        "discharge": pose_part_discharge,
        "value": pose_value,
        "string": pose_string,
    }
    return by_kind.get(measure.poses, pose_part_event)(at, subject, measure, values)


def _pose_states(bench: Bench, part: RatedPart, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """What lies across a part, as the project file says it or as its circuit gives it. Raises Unmeasurable."""
    if part.across is not None and part.kind == "capacitor":
        return pose_stated(bench, part, part.across, measure, options)
    try:
        return pose_states(bench, part, measure, options)
    except Unmeasurable as error:
        reason, ask = error.reason, error.ask
    raise Unmeasurable(reason, to_be_stated(bench, part, ask))  # with no error behind it, whose frames hold the board


def _kind(subject: Subject) -> str:
    """What a measure calls a subject."""
    kinds: dict[type, str] = {Node: "node", Pin: "pin", Held: "supply", Network: "network"}
    return subject.kind if isinstance(subject, RatedPart) else kinds[type(subject)]
