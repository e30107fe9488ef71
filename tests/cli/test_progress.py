"""A sign of life for long work, on terminals only."""

import io
import sys
import time

import pytest

from rcrules.cli._progress import progress


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


def watched(monkeypatch: pytest.MonkeyPatch) -> Terminal:
    """A terminal as standard error; made inside the test, for between set-up and test the test runner puts its own."""
    made = Terminal()
    monkeypatch.setattr(sys, "stderr", made)
    monkeypatch.setenv("TERM", "xterm")
    return made


def wait_for(stream: io.StringIO, text: str) -> bool:
    """Whether the text comes; waits for it, for the clock of a busy machine proves nothing."""
    deadline = time.monotonic() + 30
    while text not in stream.getvalue() and time.monotonic() < deadline:
        time.sleep(0.01)
    return text in stream.getvalue()


def test_long_work_shows_a_sign_of_life(monkeypatch: pytest.MonkeyPatch) -> None:
    terminal = watched(monkeypatch)
    with progress("working on 1 board", quiet=False, after_s=0.0):
        assert wait_for(terminal, "working on 1 board")


def test_of_several_boards_the_bar_counts_those_done(monkeypatch: pytest.MonkeyPatch) -> None:
    terminal = watched(monkeypatch)
    with progress("working on 3 boards", quiet=False, total=3, after_s=0.0) as done:
        assert wait_for(terminal, "0/3")
        done()
        done()
        assert wait_for(terminal, "2/3")


def test_short_work_shows_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    terminal = watched(monkeypatch)
    with progress("working on 1 board", quiet=False, after_s=3600.0):
        pass
    assert terminal.getvalue() == ""


def test_quiet_work_shows_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    terminal = watched(monkeypatch)
    with progress("working on 1 board", quiet=True, after_s=0.0):
        time.sleep(0.05)
    assert terminal.getvalue() == ""


def test_nothing_is_shown_where_nobody_watches(monkeypatch: pytest.MonkeyPatch) -> None:
    pipe = io.StringIO()
    monkeypatch.setattr(sys, "stderr", pipe)
    with progress("working on 1 board", quiet=False, after_s=0.0):
        time.sleep(0.05)
    assert pipe.getvalue() == ""
