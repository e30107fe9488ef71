"""What of a board stands at a joint: nets, networks and nodes."""

from collections import defaultdict
from collections.abc import Mapping
from functools import cached_property

from rcrules.networks import Board, Network, Node


class Places:
    """Each index is made once, when it is asked for."""

    def __init__(self, board: Board) -> None:
        self.board = board

    def joint(self, net: str) -> str:
        """The net that stands for all that are joined with this one at DC."""
        return self.board.joints.get(net, net)

    def network_at(self, joint: str) -> Network | None:
        """The network that a free joint is in."""
        return self._networks.get(joint)

    def node_at(self, joint: str) -> Node | None:
        """The node at a joint, other than one between two held nets."""
        return self._nodes.get(joint)

    def nets_of(self, node: Node) -> tuple[str, ...]:
        """Every net joined to the node; it answers to each name."""
        joints = tuple(item for item in (node.joint, node.across) if item)
        return tuple(dict.fromkeys((*joints, *(net for joint in joints for net in self.members.get(joint, ())))))

    @cached_property
    def members(self) -> Mapping[str, list[str]]:
        """Joint -> the nets joined there."""
        members: dict[str, list[str]] = defaultdict(list)
        for net, joint in self.board.joints.items():
            members[joint].append(net)
        return dict(members)

    @cached_property
    def _networks(self) -> Mapping[str, Network]:
        return {joint: network for network in self.board.networks for joint in network.free}

    @cached_property
    def _nodes(self) -> Mapping[str, Node]:
        return {node.joint: node for network in self.board.networks for node in network.nodes if node.across is None}
