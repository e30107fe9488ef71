"""How much voltage a capacitor can meet, where that follows from the sources alone; its bias loss is taken up to there.

In a network without sources of current whose capacitors all go to 0 V, every node stays within the span of the source
voltages, 0 V included, whatever the sources do (the system is cooperative, Kamke-Müller). A lone capacitor is charged
towards differences of source voltages and never beyond their span. A capacitor between a node and a source that moves
can push nodes beyond the span by one more span. Capacitors between two free nodes are not bounded here.
"""

from collections.abc import Iterable, Sequence

from rcrules.events._sources import Sources
from rcrules.networks import Branch


def most_across(
    sources: Sources, branches: Sequence[Branch], free: Iterable[str], further: Iterable[str] = ()
) -> float | None:
    """Highest voltage across any capacitor of the branches [V]; None = not bounded, or a source is not known.

    further: held joints that pins pull to.
    """
    inside = set(free)
    capacitors = [item for item in branches if item.kind == "capacitor"]
    ends = [[joint for joint in (item.a, item.b) if joint not in inside] for item in capacitors]
    held = {joint for item in branches for joint in (item.a, item.b) if joint not in inside}
    span = spanned(sources, held.union(further))
    if span is None or not all(ends):
        return None
    calm = len(capacitors) == 1 or all(sources.kind(joint) == "ground" for joints in ends for joint in joints)
    return span if calm else 2 * span


def spanned(sources: Sources, held: Iterable[str]) -> float | None:
    """Span of the voltages of held joints, 0 V included [V]; None = one of them is not known."""
    low = high = 0.0
    for joint in held:
        if sources.kind(joint) == "ground":
            continue
        volts = sources.most(joint)
        if volts is None:
            return None
        low, high = min(low, volts.low), max(high, volts.high)
    return high - low
