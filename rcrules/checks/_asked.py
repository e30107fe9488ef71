"""What findings are to tell besides their verdict."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True, kw_only=True)
class Asked:
    """Each costs time, so none is told unasked."""

    derived: bool = False
    """How their numbers come about."""
    samples: int = 0
    """Random cases of each; 0 = no statistics."""
    seed: int = 0
    """Of the random cases, >= 0."""
