"""What a role is found to be at a joint, before it becomes a node."""

from dataclasses import dataclass
from typing import Final

from rcrules.networks._spot import Arm

SURE: Final = "sure"
UNSURE: Final = "unsure"


@dataclass(frozen=True, slots=True, kw_only=True)
class Judged:
    """A role with what speaks for it."""

    role: str
    """One of vocabulary.ROLES."""
    sure: bool = True
    why: tuple[str, ...] = ()
    """Short plain sentences beyond the list of parts."""
    active: str | None = None
    """Why the passive model is not true here, else None."""
    amplifier: str | None = None
    """The amplifier that is the reason, by reference."""
    also: tuple[Arm, ...] = ()
    """Resistors that belong to the role although they lead only to pins or contacts."""
    alone: bool = False
    """Whether the parts are those at the joint alone, whatever feeds their far ends."""
    only: tuple[Arm, ...] | None = None
    """The arms at the joint that set its time, where not all of them do; None = all that act."""
