"""What cannot be measured, and what would make it measurable."""


class Unmeasurable(Exception):  # noqa: N818 - a word of the room's contract; it is an answer, no error
    """The passive model is not true at a subject, or a fact is missing."""

    def __init__(self, reason: str, ask: str = "") -> None:
        super().__init__(reason)
        self.reason = reason
        """In words, half a sentence."""
        self.ask = ask
        """The project line that would help: ``[pin."U3.NRST"] low = "…"  high = "…"``; '' = none."""
