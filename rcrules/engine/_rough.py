"""Whether answers are wanted for a search alone, which may be had faster where a network has many nodes."""

from collections.abc import Iterator
from contextlib import contextmanager
from contextvars import ContextVar
from typing import Final

MANY: Final = 8
"""Nodes from which a dense eigensolver goes first, and alone where the answer is for a search."""
_ROUGH: Final[ContextVar[bool]] = ContextVar("rough", default=False)


@contextmanager
def roughly() -> Iterator[None]:
    """Inside, networks of MANY nodes and more are solved for a search, never for a result.

    What is lost is the relative precision of time constants far below the longest: the dense eigensolver rounds to
    that of the longest, and one order of elimination serves all cases.
    """
    token = _ROUGH.set(True)
    try:
        yield
    finally:
        _ROUGH.reset(token)


def is_rough() -> bool:
    """Whether the caller only searches."""
    return _ROUGH.get()
