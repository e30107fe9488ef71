"""A sign of life on standard error for work over a second, on a terminal only."""

import sys
from collections.abc import Iterator
from contextlib import contextmanager
from threading import Timer
from typing import TYPE_CHECKING, Final

if TYPE_CHECKING:
    from rich.status import Status

PATIENCE_S: Final = 1.0
"""Time [s] after which a user wants to see that something happens."""


@contextmanager
def progress(what: str, *, quiet: bool, after_s: float = PATIENCE_S) -> Iterator[None]:
    """Show ``what`` with a moving mark while the block runs longer than ``after_s``; gone when it ends.

    what: our own words; names of strangers do not belong here, for they could hold markup.
    """
    if quiet or not sys.stderr.isatty():
        yield
        return
    shown: list[Status] = []
    timer = Timer(after_s, lambda: shown.append(_started(what)))
    timer.daemon = True
    timer.start()
    try:
        yield
    finally:
        timer.cancel()
        timer.join()
        for status in shown:
            status.stop()


def _started(what: str) -> "Status":
    from rich.console import Console

    status = Console(stderr=True).status(what)
    status.start()
    return status
