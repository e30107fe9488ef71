"""The door of the room: from parts on nets to held nets, networks and nodes."""

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import replace

from rcrules.design import Design, natural
from rcrules.networks._coverage import coverage
from rcrules.networks._draft import Draft, RawNetwork
from rcrules.networks._find import networks
from rcrules.networks._held import held_joints
from rcrules.networks._held_names import hint
from rcrules.networks._held_verdict import Verdict
from rcrules.networks._links import as_sensor
from rcrules.networks._model import Board, Branch, Held, Network, Node
from rcrules.networks._named import Facts
from rcrules.networks._roles import bridged_nodes, nodes_of, solved_with
from rcrules.networks._scene import Scene, scene
from rcrules.networks._spot import chain
from rcrules.parts import RatedPart
from rcrules.project import Project


def recognise(design: Design, parts: Mapping[str, RatedPart], project: Project) -> Board:
    """Find the held nets, the networks and their nodes of a board, and what became of each resistor and capacitor."""
    draft = draft_of(design, parts, project)
    found = [_network(draft, raw, nodes) for raw in draft.networks if (nodes := nodes_of(draft, raw))]
    found += _bridged(draft)
    found.sort(key=lambda network: natural(network.id))
    classes, reasons = coverage(draft, found)
    return Board(
        design=design,
        parts=parts,
        held=draft.held,
        joints=draft.joints,
        networks=tuple(found),
        coverage=classes,
        reasons=reasons,
    )


def draft_of(design: Design, parts: Mapping[str, RatedPart], project: Project) -> Draft:
    """The board with its joints, held nets and networks, before roles."""
    parts = {ref: as_sensor(part) for ref, part in parts.items()}
    seen = scene(design, parts, Facts(project=project))
    verdicts, local = held_joints(seen)
    draft = Draft(
        design=design,
        parts=parts,
        project=project,
        joints=seen.joints,
        members=seen.members,
        held=dict(_by_net(seen, verdicts)),
        local=local,
        pins=seen.pins,
        branches=seen.branches,
        contacts=seen.contacts,
        diodes=seen.diodes,
    )
    return replace(draft, networks=networks(draft))


def _by_net(seen: Scene, verdicts: Mapping[str, Verdict]) -> Iterator[tuple[str, Held]]:
    """What holds each net: that of its joint, and through which net it is joined."""
    for joint, verdict in verdicts.items():
        for net in seen.members[joint]:
            yield net, _held(net, joint, verdict)


def _held(net: str, joint: str, verdict: Verdict) -> Held:
    through = () if net == joint else (f"joined at DC with {joint}",)
    own = (f"name {net}",) if through and (named := hint(net)) and named.kind == verdict.kind else ()
    return Held(
        net=net,
        kind=verdict.kind,
        voltage=verdict.voltage,
        given=verdict.given,
        evidence=tuple(dict.fromkeys((*own, *through, *verdict.evidence))),
        sure=verdict.sure,
        within=verdict.within,
    )


def _network(draft: Draft, raw: RawNetwork, nodes: tuple[Node, ...]) -> Network:
    amplifier, nodes = solved_with(draft, raw, nodes)
    return Network(
        id=raw.id,
        branches=raw.branches,
        free=raw.free,
        held=raw.held,
        nodes=nodes,
        contacts=raw.contacts,
        diodes=raw.diodes,
        amplifier=amplifier,
    )


def _bridged(draft: Draft) -> Iterator[Network]:
    """Networks without a node at a free joint: resistors and capacitors side by side between two held joints."""
    for node in bridged_nodes(draft):
        ends = {node.joint, node.across}
        chains = (chain(draft, item, node.joint) for item in draft.branches_at(node.joint))
        between = [item for items, far in chains if far == node.across for item in items]
        inside = {end for item in between for end in (item.a, item.b)} - ends
        yield Network(
            id=node.net,
            branches=_ordered(between),
            free=tuple(sorted(inside, key=natural)),
            held=tuple(sorted(filter(None, ends), key=natural)),
            nodes=(node,),
        )


def _ordered(branches: Iterable[Branch]) -> tuple[Branch, ...]:
    return tuple(sorted(branches, key=lambda item: (natural(item.ref), item.a, item.b)))
