"""What a report file offers."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Protocol

from rcrules.findings import Document


class Render(Protocol):
    """A pure function of the document."""

    def __call__(
        self, document: Document, *, verbose: bool = False, color: bool = False, width: int | None = None
    ) -> str:
        """The whole report, ending in a newline; ``width``: columns of the terminal, None = lines stay whole."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Report:
    """One output format."""

    name: str
    """As ``--report`` names it."""
    suffix: str
    """Of a file that holds it."""
    summary: str
    """One plain sentence."""
    render: Render | Callable[..., str]
    for_programs: bool = False
    """Always UTF-8, also on standard output, which holds one such text and no more."""
    derived: bool = False
    """Tells how numbers come about: findings need their derivation and response."""
