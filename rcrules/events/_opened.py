"""A network at power-down whose supplies are left open: they are free then, and join all that hangs on them.

What else feeds an open supply counts: every other supply, by the resistors that lead to it. What integrated circuits
draw never counts, nor do the nets that they drive, which are taken as open.
"""

from dataclasses import replace

from rcrules.events._bench import Bench
from rcrules.events._bleed import without_dead_ends
from rcrules.events._diodes import widened
from rcrules.events._sources import Sources
from rcrules.events._table import Table
from rcrules.networks import Branch, Network


def opened(bench: Bench, network: Network) -> Network:
    """The network with every open supply that it reaches as a free joint, and the networks around those."""
    sources = Sources(bench=bench, table=Table())
    waiting = [joint for joint in network.held if sources.opens(joint)]
    if not waiting:
        return network
    owners = {joint: item for item in bench.board.networks for joint in item.free}
    found, free = [network], set(waiting)
    lone: dict[str, Branch] = {}
    while waiting:
        joint = waiting.pop()
        for item in bench.branches.get(joint, ()):
            lone[item.ref] = item
        far = {item.b if item.a == joint else item.a for item in bench.branches.get(joint, ())}
        met = [other for end in far if (other := owners.get(end)) is not None and other not in found]
        found += [other for position, other in enumerate(met) if other not in met[:position]]
        reached = [end for end in (*far, *(held for other in met for held in other.held)) if sources.opens(end)]
        waiting += [end for end in dict.fromkeys(reached) if end not in free]
        free |= set(reached)
    return widened(bench, _joined(sources, found, lone, free))


def _joined(sources: Sources, found: list[Network], lone: dict[str, Branch], opens: set[str]) -> Network:
    network = found[0]
    free = {joint: None for item in found for joint in item.free} | dict.fromkeys(sorted(opens))
    branches = {item.ref: item for other in found for item in other.branches} | lone
    known = {joint for joint in network.held if joint not in opens}
    ends = {end for item in branches.values() for end in (item.a, item.b)} - set(free)
    held = {end for end in ends if end in known or sources.kind(end) in ("ground", "supply")}
    kept = [item for item in branches.values() if {item.a, item.b} <= free.keys() | held]
    kept = without_dead_ends(kept, {*network.free, *opens, *held})
    met = {end for item in kept for end in (item.a, item.b)}
    return replace(
        network,
        branches=tuple(kept),
        free=tuple(joint for joint in free if joint in met),
        held=tuple(joint for joint in sorted(held) if joint in met),
        nodes=tuple(node for other in found for node in other.nodes),
        contacts=tuple(dict.fromkeys(contact for other in found for contact in other.contacts)),
        diodes=tuple(dict.fromkeys(diode for other in found for diode in other.diodes)),
    )
