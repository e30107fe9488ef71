"""The facts of a subject as selections ask for them."""

from collections.abc import Iterable
from dataclasses import dataclass, field

from rcrules.networks import Network, Node
from rcrules.parts import RatedPart


@dataclass(frozen=True, slots=True, kw_only=True)
class View:
    """The facts of one subject at one node; a part at several nodes has several views."""

    roles: tuple[str, ...]
    certainty: str
    nets: tuple[str, ...]
    around: tuple[str, ...]
    """Held nets around the network; of a part between held nets those two."""
    fed_from: tuple[str, ...]
    feeds: tuple[str, ...]
    kinds_fed: tuple[str, ...]
    parts: tuple[RatedPart, ...]
    told: dict[str, float] = field(default_factory=dict, compare=False, repr=False)
    """Facts that are numbers, once they have been worked out."""


def view_at(node: Node, network: Network, nets: Iterable[str], parts: tuple[RatedPart, ...]) -> View:
    """The facts at a node, for the node itself or for a part at it."""
    return View(
        roles=(node.role,),
        certainty=node.certainty,
        nets=tuple(dict.fromkeys((node.net, *nets))),
        around=network.held,
        fed_from=node.fed_from,
        feeds=node.feeds,
        kinds_fed=node.kinds_fed,
        parts=parts,
    )


def view_around(
    nets: tuple[str, ...],
    around: tuple[str, ...],
    parts: tuple[RatedPart, ...],
    *,
    feeds: tuple[str, ...] = (),
    certainty: str = "sure",
) -> View:
    """The facts of a pin that is at no node, or of a supply."""
    return View(
        roles=(),
        certainty=certainty,
        nets=nets,
        around=around,
        fed_from=around,
        feeds=feeds,
        kinds_fed=(),
        parts=parts,
    )


def view_apart(part: RatedPart, nets: tuple[str, ...], coverage: str) -> View:
    """The facts of a part that hangs on no node."""
    roles = ("decoupling",) if coverage == "decoupling" else ()
    return View(
        roles=roles, certainty="sure", nets=nets, around=nets, fed_from=nets, feeds=(), kinds_fed=(), parts=(part,)
    )
