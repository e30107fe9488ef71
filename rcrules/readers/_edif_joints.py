"""Nets of all levels of a hierarchy, joined where one continues another."""

from dataclasses import dataclass
from typing import Final

from rcrules.readers import _bounds
from rcrules.readers._export import Source

_WORK: Final = 4
"""Nets, before they are joined, for each one that a board may have."""


@dataclass(frozen=True, slots=True)
class _Seen:
    depth: int
    path: str
    text: str
    line: int


class Joints:
    """A set of nets that are joined two by two; the outermost name of joined nets stands."""

    def __init__(self, source: Source) -> None:
        self._source, self._file = source, source.name
        self._over: list[int] = []
        self._seen: list[_Seen] = []

    def new(self, depth: int, path: str, text: str, line: int) -> int:
        """A further net, with its level, the path of its block, its name and line. Raises UserMistake."""
        self._seen.append(_Seen(depth, path, text, line))
        self._over.append(len(self._over))
        _bounds.bound(self._file, line, "nets of all levels", len(self._over), _WORK * self._source.limits.nets)
        return len(self._over) - 1

    def find(self, net: int) -> int:
        """The net that stands for all that are joined with this one."""
        over = self._over
        while over[net] != net:
            over[net] = over[over[net]]
            net = over[net]
        return net

    def join(self, one: int, other: int) -> None:
        """Make two nets one; the outer one stands, of two on one level the earlier."""
        one, other = self.find(one), self.find(other)
        if one != other:
            first, second = sorted((one, other), key=lambda net: (self._seen[net].depth, net))
            self._over[second] = first

    def standing(self) -> list[tuple[int, str, int]]:
        """Each net that stands, with its full name and line."""
        nets = [(net, self._seen[net]) for net in range(len(self._over)) if self._over[net] == net]
        return [(net, f"{seen.path}/{seen.text}" if seen.path else seen.text, seen.line) for net, seen in nets]
