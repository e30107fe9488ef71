"""Which resistors and capacitors are connected at both ends, however far off the open end is."""

from collections import Counter
from collections.abc import Mapping, Sequence

from rcrules.design import Pin
from rcrules.networks._model import Branch
from rcrules.networks._named import Facts


def connected(items: Sequence[Branch], pins: Mapping[str, tuple[Pin, ...]], facts: Facts) -> list[Branch]:
    """The branches without those that carry no current: nothing else is at one end, nor does the project name it."""
    alive, refs = list(items), {item.ref for item in items}
    others = {joint: sum(pin.ref not in refs for pin in at) for joint, at in pins.items()}
    told = facts.project.grounds or facts.project.supplies or facts.project.nets
    named = {joint for joint, at in pins.items() if told and any(_is_named(pin.net, facts) for pin in at)}
    while True:
        ends = Counter(joint for item in alive for joint in (item.a, item.b))
        lone = {joint for joint, number in ends.items() if number + others.get(joint, 0) == 1} - named
        if not lone:
            return alive
        alive = [item for item in alive if item.a not in lone and item.b not in lone]


def _is_named(net: str, facts: Facts) -> bool:
    return facts.is_ground(net) or facts.supply(net) is not None or facts.net(net) is not None
