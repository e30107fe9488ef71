"""Options that several commands share. Imports nothing but argparse, so that help is instant."""

import argparse
from typing import Final

from rcrules.vocabulary import LIMITS

_MOST_SAMPLES: Final = 1_000_000


def statistics(command: argparse.ArgumentParser) -> None:
    """Random cases of each finding."""
    command.add_argument(
        "--samples",
        type=_samples,
        default=0,
        metavar="N",
        help="also draw N random cases of each finding: the share that fails, with its confidence interval",
    )
    again = "of the random cases; the same gives the same (default: 0)"
    command.add_argument("--seed", type=_natural, default=0, metavar="S", help=again)


def rules(command: argparse.ArgumentParser) -> None:
    """Which rules."""
    command.add_argument(
        "--rules",
        action="append",
        default=[],
        metavar="PACK|FILE",
        help="rules to apply (repeatable; else the project's; else the packs that need no project facts, as warnings)",
    )


def fail(command: argparse.ArgumentParser) -> None:
    """What makes the exit code 1."""
    command.add_argument(
        "--fail-on",
        choices=("error", "warning", "note", "never"),
        default="error",
        help="the lowest level of a failing finding that makes the exit code 1 (default: error)",
    )
    command.add_argument(
        "--fail-on-undecided", action="store_true", help="undecided findings of that level count as well"
    )


def moved(command: argparse.ArgumentParser) -> None:
    """Which numbers are told to have moved."""
    command.add_argument(
        "--moved",
        default="5 %",
        metavar="SHARE",
        help="numbers that moved by more than this share are told (default: 5 %%)",
    )


def board(command: argparse.ArgumentParser) -> None:
    """Inputs, project, variant and limits of a board."""
    command.add_argument(
        "inputs",
        nargs="*",
        metavar="INPUT",
        help="netlists and BOMs of one board, told apart by content; - reads standard input (default: those of the "
        "project file)",
    )
    command.add_argument(
        "--project",
        action="append",
        default=[],
        metavar="FILE",
        help="project file (default: rcrules.toml in the first input's folder or above); repeated: one board each",
    )
    command.add_argument(
        "--variant",
        default="",
        metavar="NAME",
        help="variant of the board, as the netlist or a column of the BOM names it (default: [board] variant, else the "
        "base)",
    )
    command.add_argument(
        "--jobs", type=_positive, default=1, metavar="N", help="boards worked on at a time (default: 1)"
    )
    command.add_argument(
        "--limit",
        action="append",
        type=_limit,
        default=[],
        metavar="NAME=N",
        help=f"how much one input may hold, of {', '.join(LIMITS)} (file-size in MiB); repeatable; before [limits]",
    )


def output(command: argparse.ArgumentParser) -> None:
    """Reports, and how much they tell."""
    command.add_argument(
        "--report",
        action="append",
        default=[],
        metavar="FORMAT[=PATH]",
        help="text (default), html, json, junit, markdown, parts or sarif, on standard output or to a file "
        "(repeatable); {board} in PATH: the board's name",
    )
    command.add_argument("--verbose", action="store_true", help="also list assumptions, evidence and what holds")
    command.add_argument("--quiet", action="store_true", help="no report but those asked for by --report")
    color(command)


def color(command: argparse.ArgumentParser) -> None:
    """Colours of the terminal."""
    command.add_argument(
        "--color", choices=("auto", "always", "never"), default="auto", help="colours (default: on a terminal)"
    )


def _samples(text: str) -> int:
    if not text.isdecimal() or len(text) > 9 or not 1 <= int(text) <= _MOST_SAMPLES:
        raise argparse.ArgumentTypeError(f"expected a whole number from 1 to {_MOST_SAMPLES}, found {text!r}")
    return int(text)


def _natural(text: str) -> int:
    if not text.isdecimal() or len(text) > 9:
        raise argparse.ArgumentTypeError(f"expected a whole number of 0 or more, found {text!r}")
    return int(text)


def _limit(text: str) -> tuple[str, int]:
    name, _, number = text.partition("=")
    if name not in LIMITS:
        raise argparse.ArgumentTypeError(f"expected one of {', '.join(LIMITS)}, then = and a number, found {text!r}")
    return name, _positive(number)


def _positive(text: str) -> int:
    if not text.isdecimal() or len(text) > 9 or int(text) < 1:
        raise argparse.ArgumentTypeError(f"expected a whole number of 1 or more, found {text!r}")
    return int(text)
