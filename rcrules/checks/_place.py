"""Whether a subject is the one of a name."""

from rcrules.checks._subject import Subject


def stands_at(subject: Subject, at: str) -> bool:
    """Whether a subject is the net, part or pin of that name."""
    if subject.kind in ("capacitor", "resistor"):
        return subject.refs == (at,)
    if subject.kind == "pin":
        return at in subject.feeds
    return at == subject.net or at in subject.nets or at in subject.feeds
