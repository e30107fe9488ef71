"""Options that several measures share."""

from rcrules.measures._measure import Option
from rcrules.vocabulary import EVENTS


def event(default: str | None) -> Option:
    """What starts the transient."""
    return Option(kind="event", default=default, choices=EVENTS, summary="what starts the transient")


def level(default: str | None, summary: str) -> Option:
    """A voltage level."""
    return Option(kind="level", default=default, unit="V", summary=summary)
