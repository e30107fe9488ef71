"""Reports to standard output or to files."""

import os
import re
import shutil
import sys
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from rcrules.errors import Mistake, Place, UserMistake
from rcrules.findings import Document
from rcrules.reports import Report, reports


@dataclass(frozen=True, slots=True, kw_only=True)
class Target:
    """One ``--report``: a format and where it goes."""

    report: Report
    path: str | None
    """None = standard output; ``{board}`` stands for the board's name."""


def targets(asked: list[str], *, boards: int) -> list[Target]:
    """The values of ``--report`` understood. Raises UserMistake with all that is wrong with them."""
    found = [_target(text) for text in asked]
    bare = [target for target in found if target.path is None]
    if len(bare) > 1:
        raise _mistake(
            "more than one report on standard output", do="give all but one a file: --report json=findings.json"
        )
    if boards > 1 and any(target.path is not None and "{board}" not in target.path for target in found):
        raise _mistake("several boards, one report file", do="name the file by board: --report 'json={board}.json'")
    if boards > 1 and any(target.report.for_programs for target in bare):
        do = "name files by board: --report 'json={board}.json'"
        raise _mistake("several boards, one report for programs on standard output", do=do)
    return found


def _target(text: str) -> Target:
    name, equals, path = text.partition("=")
    report = reports().get(name)
    if report is None:
        raise _mistake("unknown report format", found=name, expected=", ".join(sorted(reports())))
    if equals and not path:
        raise _mistake("no file after '='", found=text, expected=f"{name}=findings{report.suffix}")
    return Target(report=report, path=path or None)


def write(document: Document, target: Target, *, verbose: bool, color: bool) -> None:
    """Render one report and put it where it goes; files are UTF-8, never coloured."""
    shown = target.path is None
    text = target.report.render(
        document, verbose=verbose, color=color and shown, width=terminal_width() if shown else None
    )
    path = _path(document, target)
    text_to(None if path is None else str(path), text, for_programs=target.report.for_programs)


def text_to(path: str | None, text: str, *, for_programs: bool) -> None:
    """A text to a file, or to standard output. Raises UserMistake."""
    if path is None:
        to_stdout(text, as_is=for_programs)
        return
    try:
        Path(path).write_bytes(text.encode("utf-8", "backslashreplace"))
    except OSError as error:
        do = "name a file in a folder that is there and may be written"
        raise _mistake(f"cannot write the report: {error.strerror}", place=path, do=do) from error


def check_paths(documents: Sequence[Document], asked: Sequence[Target], inputs: Sequence[str]) -> None:
    """Raise UserMistake where a report would overwrite another one or an input."""
    taken = {Path(name).resolve(): "is an input" for name in inputs}
    for path in (path for item in documents for target in asked if (path := _path(item, target)) is not None):
        if path.resolve() in taken:
            do = "give each report a file of its own; {board} in it stands for the board's name"
            raise _mistake(f"the file {taken[path.resolve()]}", place=str(path), do=do)
        taken[path.resolve()] = "would hold two reports"


def _path(document: Document, target: Target) -> Path | None:
    """Where a report goes; None for standard output."""
    if target.path is None:
        return None
    return board_path(target.path, document)


def board_path(path: str, document: Document) -> Path:
    """The path with the board's name in place of ``{board}``."""
    return Path(path.replace("{board}", _file_name(str(document.board["name"]))))


def saved(name: str) -> Document:
    """The document in a file, ``-`` for standard input. Raises UserMistake where there is none."""
    from rcrules.findings import loads

    try:
        data = sys.stdin.buffer.read() if name == "-" else Path(name).read_bytes()
        return loads(data.decode("utf-8"), "standard input" if name == "-" else name)
    except OSError as error:
        raise _mistake(f"cannot read it: {error.strerror}", place=name, do="check the path") from error
    except UnicodeDecodeError as error:
        expected = "a file saved with --report json=FILE"
        raise _mistake(
            "not a findings document", place=name, found="other bytes than UTF-8", expected=expected
        ) from error


def to_stdout(text: str, *, as_is: bool = False) -> None:
    """Write a text; a reader that has gone away is no mistake.

    What the terminal cannot show is escaped; ``as_is`` = UTF-8, whatever the terminal shows.
    """
    encoding = sys.stdout.encoding or "utf-8"
    try:
        if as_is:
            sys.stdout.flush()
            sys.stdout.buffer.write(text.encode("utf-8", "backslashreplace"))
        else:
            sys.stdout.write(text.encode(encoding, "backslashreplace").decode(encoding))
        sys.stdout.flush()
    except BrokenPipeError:
        _silence()
    except OSError as error:
        _silence()
        raise _mistake(f"cannot write the report: {error.strerror}", place="standard output") from error


def _silence() -> None:
    """Let what is still buffered go nowhere, or it would fail once more at the end."""
    os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def terminal_width() -> int | None:
    """Columns of the terminal on standard output; None in a pipe or file, where every line stays whole."""
    return shutil.get_terminal_size().columns if sys.stdout.isatty() else None


def wants_color(choice: str) -> bool:
    """``always``, ``never``, or on a terminal that has not asked for none."""
    if choice != "auto":
        return choice == "always"
    return sys.stdout.isatty() and not os.environ.get("NO_COLOR") and os.environ.get("TERM") != "dumb"


def _file_name(name: str) -> str:
    return re.sub(r"[^\w.-]+", "-", name).strip("-.") or "board"


def _mistake(
    problem: str,
    *,
    place: str = "--report",
    found: str | None = None,
    expected: str | None = None,
    do: str | None = None,
) -> UserMistake:
    return UserMistake(Mistake(place=Place(file=place), problem=problem, found=found, expected=expected, do=do))
