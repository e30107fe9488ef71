"""A progress bar on standard error for work over a second, on a terminal only."""

import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from threading import Lock, Timer
from typing import TYPE_CHECKING, Final

if TYPE_CHECKING:
    from rich.progress import Progress

PATIENCE_S: Final = 1.0
"""Time [s] after which a user wants to see that something happens."""


@contextmanager
def progress(what: str, *, quiet: bool, total: int = 1, after_s: float = PATIENCE_S) -> Iterator[Callable[[], None]]:
    """Show ``what`` with a bar while the block runs longer than ``after_s``; gone when it ends.

    what: our own words; names of strangers do not belong here, for they could hold markup.
    total: pieces of work; the block calls what it is given after each. Of one piece the bar only moves.
    """
    if quiet or not sys.stderr.isatty():
        yield _nothing
        return
    bar = _Bar(what, total)
    timer = Timer(after_s, bar.start)
    timer.daemon = True
    timer.start()
    try:
        yield bar.advance
    finally:
        timer.cancel()
        timer.join()
        bar.stop()


def _nothing() -> None:
    """Nobody watches."""


class _Bar:
    """Pieces done, whether shown yet or not; started by a timer's thread."""

    def __init__(self, what: str, total: int) -> None:
        self._what, self._total = what, total
        self._lock = Lock()
        self._done = 0
        self._shown: Progress | None = None

    def start(self) -> None:
        from rich.console import Console
        from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeElapsedColumn

        counted = [MofNCompleteColumn()] if self._total > 1 else []
        columns = [TextColumn("{task.description}"), BarColumn(), *counted, TimeElapsedColumn()]
        with self._lock:
            self._shown = Progress(*columns, console=Console(stderr=True), transient=True)
            self._shown.add_task(self._what, total=self._total if self._total > 1 else None, completed=self._done)
            self._shown.start()

    def advance(self) -> None:
        with self._lock:
            self._done += 1
            if self._shown is not None:
                self._shown.advance(self._shown.task_ids[0])

    def stop(self) -> None:
        if self._shown is not None:
            self._shown.stop()
