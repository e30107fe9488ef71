"""The nodes of a network, each with its role, what shows it, the parts that set its time and what it feeds."""

from collections.abc import Callable
from dataclasses import replace
from fnmatch import fnmatchcase
from typing import Final

from rcrules.networks._amplifiers import ideal
from rcrules.networks._draft import Draft, RawNetwork
from rcrules.networks._fed import feeding, kind_fed, kinds
from rcrules.networks._model import Amplifier, Node
from rcrules.networks._role import SURE, UNSURE, Judged
from rcrules.networks._role_active import bootstrap, gate_drive, oscillator, timing
from rcrules.networks._role_feedback import feedback, outputs
from rcrules.networks._role_filters import divider, high_pass, low_pass
from rcrules.networks._role_lines import bias, bus_pull_up, sense_shunt, termination
from rcrules.networks._role_pairs import bridged
from rcrules.networks._role_parts import FAR, Ways, ways
from rcrules.networks._role_resets import called_reset, power_on_delay, pulled, supply_filter
from rcrules.networks._role_switching import debounce, snubber
from rcrules.networks._role_words import arms_text, fed_text
from rcrules.networks._spot import Spot, View
from rcrules.project import match

ORDER: Final[tuple[Callable[[View, Spot], Judged | None], ...]] = (
    oscillator,
    bootstrap,
    feedback,
    timing,
    debounce,
    gate_drive,
    called_reset,
    termination,
    snubber,
    sense_shunt,
    supply_filter,
    bias,
    high_pass,
    divider,
    bus_pull_up,
    power_on_delay,
    low_pass,
)
"""What is tried, in order: what pins and neighbours show before what values and the bare shape show."""

_OTHER: Final = Judged(role="other", sure=False, why=("no known arrangement",))


def nodes_of(draft: Draft, network: RawNetwork) -> tuple[Node, ...]:
    """The free joints of a network where resistors and capacitors act together, in the network's order."""
    view = View(draft)
    spots = (view.at(joint) for joint in network.free)
    nodes = tuple(_node(view, here) for here in spots if _is_node(view, here))
    return _beside_loops(view, network, nodes) if nodes else ()


def solved_with(
    draft: Draft, network: RawNetwork, nodes: tuple[Node, ...]
) -> tuple[Amplifier | None, tuple[Node, ...]]:
    """The one amplifier with which all of a network is linear, and the nodes, which are then no longer active."""
    refs = {node.amplifier for node in nodes if node.active}
    ref = next(iter(refs)) if len(refs) == 1 else None
    found = ideal(View(draft), network, ref) if ref is not None else None
    if found is None:
        return None, nodes
    said = f"{found.ref} taken as an ideal amplifier"
    return found, tuple(
        replace(node, active=None, amplifier=found.ref, evidence=(*node.evidence, said)) for node in nodes
    )


def _beside_loops(view: View, network: RawNetwork, nodes: tuple[Node, ...]) -> tuple[Node, ...]:
    """The nodes; those that lead to a control loop of their network are active as the loop is."""
    found = (feedback(view, view.at(joint)) for joint in network.free if view.at(joint).pins)
    loops = [judged for judged in found if judged is not None]
    helped = next((node for node in nodes if node.active and node.amplifier), None)
    if loops:
        active, amplifier = loops[0].active, loops[0].amplifier
    elif helped is not None:
        active, amplifier = helped.active, helped.amplifier
    else:
        return nodes
    return tuple(node if node.active else replace(node, active=active, amplifier=amplifier) for node in nodes)


def bridged_nodes(draft: Draft) -> tuple[Node, ...]:
    """Held joints bridged by resistors and capacitors, as nodes named ``A <-> B``."""
    return tuple(_corrected(draft, node) for node in bridged(draft))


def _is_node(view: View, here: Spot) -> bool:
    """A resistor (or a pull inside a pin, given) and a capacitor (or wiring of a capacitance, given) at the joint.

    Or a feedback resistor with its capacitor behind a small one.
    """
    if not here.resistors and not pulled(view, here):
        return False
    if here.capacitors or _wired(view.draft, here.joint):
        return True
    return any(view.at(arm.far).capacitors for arm in view.stoppers(here)) and feedback(view, here) is not None


def _wired(draft: Draft, joint: str) -> bool:
    """Whether the project file gives the net a capacitance of its wiring."""
    names = (joint, *draft.members.get(joint, ()))
    given = (pattern for pattern, facts in draft.project.nets.items() if facts.wiring_capacitance is not None)
    return any(match(pattern, name) for pattern in given for name in names)


def _node(view: View, here: Spot) -> Node:
    judged = next((found for judge in ORDER if (found := judge(view, here)) is not None), _OTHER)
    met = ways(view, here, judged)
    pins = feeding(view, here)
    fed_from = _fed_from(view, here, met, judged)
    doubts, helped = _doubts(view, fed_from), _helped(view, met, judged)
    node = Node(
        net=here.joint,
        joint=here.joint,
        across=None,
        role=judged.role,
        certainty=SURE if judged.sure and not doubts else UNSURE,
        evidence=(*arms_text(view, here, met.parts), *judged.why, *doubts, *fed_text(view, pins)),
        parts=met.parts,
        fed_from=fed_from,
        feeds=tuple(pin.key for pin in pins),
        kinds_fed=_kinds_fed(view, here),
        active=judged.active or (f"an amplifier drives {helped[0]}" if helped else None),
        amplifier=judged.amplifier or (helped[1] if helped else None),
    )
    return _corrected(view.draft, node)


def _doubts(view: View, sources: tuple[str, ...]) -> tuple[str, ...]:
    """One sentence for each source whose own voltage is not sure."""
    held = (view.draft.held_joint(joint) for joint in sources)
    return tuple(f"what holds {one.net} is not sure" for one in held if one is not None and not one.sure)


def _helped(view: View, met: Ways, judged: Judged) -> tuple[str, str] | None:
    """A capacitor on the way that returns to the output of an amplifier, which moves its far end, and the amplifier."""
    if judged.role not in ("low-pass", "divider-low-pass"):
        return None
    found = ((ref, pin.ref) for ref, arm in met.capacitors.items() for pin in outputs(view, arm))
    return next(found, None)


def _kinds_fed(view: View, here: Spot) -> tuple[str, ...]:
    connectors = {kind_fed(view, pin) for pin in here.pins if view.kind(pin) == "connector"}
    return tuple(sorted({*kinds(view, feeding(view, here)), *connectors}))


def _coupled_from(view: View, here: Spot) -> tuple[str, ...]:
    """Driven joints that capacitors alone reach, the nearest first."""
    seen, todo = {here.joint: None}, [here]
    while todo and len(seen) < FAR:
        arms = todo.pop(0).capacitors
        driven = tuple(arm.far for arm in arms if arm.to == "driven")
        if driven:
            return driven
        onward = [arm.far for arm in arms if arm.held is None and arm.far not in seen]
        seen.update(dict.fromkeys(onward))
        todo += [view.at(joint) for joint in onward]
    return ()


def _fed_from(view: View, here: Spot, met: Ways, judged: Judged) -> tuple[str, ...]:
    """Held joints behind the resistors; a ground only at a divider or where there is nothing else."""
    sources = [joint for joint, kind in met.sources.items() if kind != "ground"]
    if judged.role == "high-pass":
        return _coupled_from(view, here) or tuple(sources)
    if judged.role in ("divider-low-pass", "feedback") or not sources:
        return tuple(met.sources)
    return tuple(sources)


def _corrected(draft: Draft, node: Node) -> Node:
    """The role that the project file gives to the net, if it does."""
    for name, facts in draft.project.nets.items():
        if facts.role is not None and any(fnmatchcase(net, name) for net in _names(draft, node)):
            return _with_role(node, facts.role, f'project [net."{name}"] role')
    return node


def _names(draft: Draft, node: Node) -> tuple[str, ...]:
    return (node.net, *draft.members.get(node.joint, ())) if node.across is None else (node.net,)


def _with_role(node: Node, role: str, origin: str) -> Node:
    active, amplifier = (node.active, node.amplifier) if role == node.role else (None, None)
    evidence = (origin, *node.evidence)
    return replace(node, role=role, certainty=SURE, evidence=evidence, active=active, amplifier=amplifier)
