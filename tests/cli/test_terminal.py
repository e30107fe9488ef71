"""What differs on a terminal."""

import os
import pty
import subprocess
import sys
from collections.abc import Callable
from fcntl import ioctl
from pathlib import Path
from struct import pack
from termios import TIOCSWINSZ

import pytest

Run = Callable[..., str]


@pytest.fixture
def terminal(board: Path) -> Run:
    """A function: arguments and environment to what a terminal of 60 columns shows."""

    def run(*arguments: str, **environment: str) -> str:
        ours, theirs = pty.openpty()
        ioctl(theirs, TIOCSWINSZ, pack("HHHH", 24, 60, 0, 0))
        command = [sys.executable, "-m", "rcrules", *arguments]
        env = {"PATH": "", "TERM": "xterm", "PYTHONIOENCODING": "utf-8", **environment}
        with subprocess.Popen(command, cwd=board, env=env, stdout=theirs, stderr=subprocess.DEVNULL):
            os.close(theirs)
            shown = _all(ours)
        os.close(ours)
        return shown.decode().replace("\r\n", "\n")

    return run


def _all(descriptor: int) -> bytes:
    """Everything until the terminal is closed at the other end."""
    found = b""
    while True:
        try:
            part = os.read(descriptor, 4096)
        except OSError:
            return found
        if not part:
            return found
        found += part


def test_lines_fit_the_terminal(terminal: Run) -> None:
    shown = terminal("networks", NO_COLOR="1")
    assert max(len(line) for line in shown.splitlines()) <= 60
    assert "time constant" in " ".join(shown.split())


def test_a_terminal_has_colours(terminal: Run) -> None:
    assert "\x1b[1msmall board\x1b[0m" in terminal("networks")


@pytest.mark.parametrize("environment", [{"NO_COLOR": "1"}, {"TERM": "dumb"}])
def test_a_terminal_that_wants_none_has_none(environment: dict[str, str], terminal: Run) -> None:
    assert "\x1b" not in terminal("networks", **environment)


def test_colours_can_be_asked_for_and_refused(terminal: Run) -> None:
    assert "\x1b" not in terminal("networks", "--color", "never")
    assert "\x1b" in terminal("networks", "--color", "always", NO_COLOR="1")


def test_the_json_of_a_terminal_is_that_of_a_pipe(terminal: Run, capsys: pytest.CaptureFixture[str]) -> None:
    from rcrules.cli import main

    assert main(["networks", "--report", "json"]) == 0
    assert terminal("networks", "--report", "json") == capsys.readouterr().out
