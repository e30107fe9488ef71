"""Remarks of one file, kept to a number that people can read."""

from typing import Final

from rcrules.errors import Place
from rcrules.readers._export import Remark

MOST: Final = 200
"""Remarks of one file that are told one by one; the rest is counted."""


class Remarks:
    """Collects remarks; beyond ``MOST`` only their number and the first place are kept."""

    def __init__(self) -> None:
        self._told: list[Remark] = []
        self._more = 0
        self._first_more: Place | None = None

    def add(self, place: Place, text: str) -> None:
        """Keep something odd that does not stop the run."""
        if len(self._told) < MOST:
            self._told.append(Remark(place=place, text=text))
            return
        self._more += 1
        self._first_more = self._first_more or place

    def all(self) -> tuple[Remark, ...]:
        """Every remark, and one for those that were only counted."""
        if self._first_more is None:
            return tuple(self._told)
        return (
            *self._told,
            Remark(place=self._first_more, text=f"{self._more} more remarks from here on"),
        )
