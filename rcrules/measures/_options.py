"""Options that several measures share."""

from rcrules.measures._measure import Option
from rcrules.vocabulary import EVENTS

PLAIN = tuple(name for name in EVENTS if name != "sample")
"""Events that any transient may start from; what a converter's sample leaves has a measure of its own."""


def event(default: str | None) -> Option:
    """What starts the transient."""
    return Option(kind="event", default=default, choices=PLAIN, summary="what starts the transient")


def level(default: str | None, summary: str) -> Option:
    """A voltage level."""
    return Option(kind="level", default=default, unit="V", summary=summary)
