"""The door of the room: any subject and measure to a problem."""

from collections.abc import Mapping

from rcrules.events._bench import bench
from rcrules.events._discharge import pose_discharge
from rcrules.events._node import pose_node
from rcrules.events._options import OptionValue, chosen
from rcrules.events._part import pose_part_event, pose_states
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import Board, Node
from rcrules.parts import RatedPart
from rcrules.problems import Problem
from rcrules.project import Project


def pose(
    board: Board,
    project: Project,
    subject: Node | RatedPart,
    measure: Measure,
    options: Mapping[str, OptionValue] | None = None,
) -> Problem:
    """What a measure asks of a subject, in numbers.

    options: values by option name, SI; defaults are filled in. Raises Unmeasurable, with the project line that would
    help.
    """
    at, values = bench(board, project), chosen(measure, options or {})
    if isinstance(subject, Node):
        if measure.subject != "node":
            raise Unmeasurable(f"{measure.name} is measured at a {measure.subject}")
        return pose_node(at, subject, measure, values)
    if measure.subject != subject.kind:
        raise Unmeasurable(f"{measure.name} is measured at a {measure.subject}; {subject.ref} is a {subject.kind}")
    by_kind = {"states": pose_states, "discharge": pose_discharge}
    return by_kind.get(measure.poses, pose_part_event)(at, subject, measure, values)
