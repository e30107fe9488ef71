"""Free nets in the order in which they are drawn from left to right."""

from collections import deque
from collections.abc import Mapping, Sequence


def chain(
    free: Sequence[str],
    resistors: Sequence[tuple[str, str]],
    capacitors: Sequence[tuple[str, str]],
    held: Mapping[str, str],
) -> list[str]:
    """The longest of the shortest ways through the network first, its fed end on the left; then what hangs on it.

    Capacitors count as a way only between what resistors do not join.
    """
    near: dict[str, list[str]] = {net: [] for net in free}
    for a, b in resistors:
        _join(near, a, b)
    for a, b in capacitors:
        if a in near and b not in _ways(a, near):
            _join(near, a, b)
    order: list[str] = []
    for net in free:
        if net not in order:
            order += _part(net, near, _fed([*resistors, *capacitors], held))
    return order


def _join(near: dict[str, list[str]], a: str, b: str) -> None:
    if a in near and b in near and a != b:
        near[a].append(b)
        near[b].append(a)


def _fed(branches: Sequence[tuple[str, str]], held: Mapping[str, str]) -> set[str]:
    """Free nets with a part to a supply or driven net."""
    pairs = [*branches, *((b, a) for a, b in branches)]
    return {a for a, b in pairs if a not in held and held.get(b) in ("supply", "driven")}


def _part(net: str, near: Mapping[str, list[str]], fed: set[str]) -> list[str]:
    """One connected part of the network."""
    end = list(_ways(net, near))[-1]
    came = _ways(end, near)
    way = [list(came)[-1]]
    while (before := came[way[-1]]) is not None:
        way.append(before)
    if way[-1] in fed and way[0] not in fed:
        way.reverse()
    return way + [name for name in came if name not in way]


def _ways(start: str, near: Mapping[str, list[str]]) -> dict[str, str | None]:
    """Net -> the one before it on the shortest way from the start; the farthest last."""
    came: dict[str, str | None] = {start: None}
    queue = deque([start])
    while queue:
        net = queue.popleft()
        for other in sorted(near[net]):
            if other not in came:
                came[other] = net
                queue.append(other)
    return came
