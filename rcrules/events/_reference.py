"""Where a delay counts from: the event, or the instant at which a supply is valid.

Of several supplies it is the one that powers the part whose pin is fed; of those one that feeds the node through
resistors; of those the one that rises last.
"""

import numpy as np

from rcrules.events._build import terminal_of
from rcrules.events._clamps import supplies_of
from rcrules.events._sources import PROJECT
from rcrules.events._transients import Scene, Transient
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.networks import Node
from rcrules.problems import LevelForm, evaluate


def hold_powering(scene: Scene, node: Node) -> None:
    """Make the supplies of the fed parts sources of the circuit, where it is known when they are valid."""
    for joint in sorted(_powering(scene, node)):
        if scene.bench.supply_fact(joint, lambda facts: facts.valid) is not None and scene.sources.rise(joint):
            terminal_of(scene.bench, scene.circuit, joint)


def reference_of(scene: Scene, node: Node, event: Transient, origin: str) -> tuple[int, LevelForm] | None:
    """Where time counts from. Raises Unmeasurable where it is a supply of which rise or valid level are not known."""
    if origin == "event":
        return None
    if not (event.empty or scene.length > 0.0) or not event.movers:
        raise Unmeasurable(f"no supply becomes valid at {scene.joint} in this event")
    powering, feeding = _powering(scene, node), _feeding(scene)
    name = min(
        event.movers,
        key=lambda mover: (
            scene.circuit.joints[mover] not in powering,
            mover not in feeding,
            -_begins(scene, scene.circuit.joints[mover]),
            mover,
        ),
    )
    joint = scene.circuit.joints[name]
    valid = scene.bench.supply_fact(joint, lambda facts: facts.valid)
    missing = [word for word, known in (("valid", valid), ("rise", scene.sources.rise(joint))) if known is None]
    if valid is None or missing:
        lines = "  ".join(f'{word} = "…"' for word in missing)
        raise Unmeasurable(f"{' and '.join(missing)} of {joint} not given", f'[supply."{joint}"] {lines}')
    offset = scene.sources.table.given(f"{joint} valid", valid, PROJECT)
    return scene.circuit.terminal(name), LevelForm(kind="voltage", offset=offset)


def _powering(scene: Scene, node: Node) -> set[str]:
    """Joints of the positive supplies of the parts whose pins the node feeds."""
    pins = [pin for key in node.feeds if (pin := scene.bench.pin(key)) is not None]
    return {joint for pin in pins for _, joint in supplies_of(scene.bench, scene.sources, pin)}


def _feeding(scene: Scene) -> set[str]:
    """Held terminals that feed the joint through resistors."""
    return {name for name in scene.circuit.held if scene.joint in scene.circuit.driven([name])}


def _begins(scene: Scene, joint: str) -> float:
    """When a supply starts to rise, nominally [s]."""
    form = scene.sources.begins(joint)
    nominal = np.array([[item.nominal for item in scene.sources.table.parameters]], dtype=float)
    return float(evaluate(form, nominal)[0])
