"""What a waiver says."""

import datetime
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

from rcrules.errors import Place

PINNED: Final = ("parts", "nets", "judged")
"""Tables of an entry that hold the circumstances."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Waiver:
    """One ``[[waiver]]``."""

    place: Place
    rule: str
    net: str | None
    part: str | None
    reason: str
    who: str
    date: datetime.date
    expires: datetime.date | None
    """The last day on which it counts."""
    circuit: str
    """Fingerprint of the finding."""
    pinned: Mapping[str, Mapping[str, str]]
    """``parts``, ``nets``, ``judged`` at the time, in words."""
