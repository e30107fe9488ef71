"""What may stand on the command line. Imports nothing but argparse, so that help is instant."""

import argparse
from typing import Final

from rcrules import __version__
from rcrules.cli import _compare, _derive, _run, _start
from rcrules.vocabulary import LIMITS

_DESCRIPTION: Final = (
    "Finds the RC networks of a board, works out what each does in the worst case, and holds it against rules."
)
_EXIT: Final = (
    "exit code: 0 nothing at or above the fail level, 1 findings, 2 inputs, rules or usage wrong, 3 a bug of rcrules, "
    "130 interrupted"
)
_MOST_SAMPLES: Final = 1_000_000
_SUMMARIES: Final = {
    "check": "hold every RC network of a board against the rules, and report what fails",
    "networks": "show what was found on a board: held nets, RC networks, roles, time constants; no rules",
    "propose": "check, and find standard values that would make what fails hold",
    "derive": "how the numbers at a net, part or pin come about, checkable by hand",
    "compare": "two saved findings documents: what broke, what mended, what moved and why",
    "start": "write a first rcrules.toml for a board, with what was found and what to ask",
    "render": "show a saved findings document again, as any report; needs no board",
    "rules": "list packs and rules, check rule files for mistakes, try rules on examples or a board",
    "demo": "copy the demo board to a folder, check it, show the report",
}


def parser() -> argparse.ArgumentParser:
    """The whole command line; every command sets ``run``."""
    whole = argparse.ArgumentParser(prog="rcrules", description=_DESCRIPTION, epilog=_EXIT, allow_abbrev=False)
    whole.add_argument("--version", action="version", version=f"rcrules {__version__}")
    commands = whole.add_subparsers(title="commands", required=True, metavar="COMMAND")
    _check(_command(commands, "check", _run.check))
    _networks(_command(commands, "networks", _run.networks))
    _check(_command(commands, "propose", _run.check))
    _derive_options(_command(commands, "derive", _derive.derive))
    _compare_documents(_command(commands, "compare", _compare.compare))
    _start_options(_command(commands, "start", _start.start))
    _render(_command(commands, "render", _run.render))
    _rules(_command(commands, "rules", _run.rules))
    _demo(_command(commands, "demo", _run.demo))
    return whole


def _command(
    commands: "argparse._SubParsersAction[argparse.ArgumentParser]", name: str, run: object
) -> argparse.ArgumentParser:
    summary = _SUMMARIES[name]
    made = commands.add_parser(
        name, help=summary, description=f"{summary[0].upper()}{summary[1:]}.", epilog=_EXIT, allow_abbrev=False
    )
    made.set_defaults(run=run, command=name)
    return made


def _check(command: argparse.ArgumentParser) -> None:
    """Of check and of propose, which does the same and more."""
    _board_options(command)
    _rules_option(command)
    _fail_options(command)
    command.add_argument(
        "--against",
        metavar="SAVED",
        help="compare with a document saved before (--report json=SAVED): only what is new counts for the exit code; "
        "{board} in it: the board's name",
    )
    _moved(command)
    _statistics(command)
    command.add_argument(
        "--waive",
        action="store_true",
        help="write an entry for each finding that counts to the waivers file, to be completed with reason and name",
    )
    _output_options(command)


def _statistics(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "--samples",
        type=_samples,
        default=0,
        metavar="N",
        help="also draw N random cases of each finding: the share that fails, with its confidence interval",
    )
    again = "of the random cases; the same gives the same (default: 0)"
    command.add_argument("--seed", type=_natural, default=0, metavar="S", help=again)


def _networks(command: argparse.ArgumentParser) -> None:
    _board_options(command)
    _output_options(command)


def _derive_options(command: argparse.ArgumentParser) -> None:
    _board_options(command)
    command.add_argument(
        "--at", required=True, metavar="NET|REF", help="a net, a part such as C7, or a pin such as U3.NRST"
    )
    command.add_argument("--rule", metavar="ID", help="only the number that this rule asks for")
    _rules_option(command)
    _statistics(command)
    command.add_argument(
        "--report", action="append", default=[], metavar="FORMAT[=PATH]", help="text (default) or json (repeatable)"
    )
    command.set_defaults(quiet=False, verbose=False)
    _color(command)


def _compare_documents(command: argparse.ArgumentParser) -> None:
    command.add_argument("old", metavar="OLD", help="what check wrote with --report json=OLD")
    command.add_argument("new", metavar="NEW", help="the same of the newer board; - reads standard input")
    _fail_options(command)
    _moved(command)
    _output_options(command)


def _start_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("inputs", nargs="+", metavar="INPUT", help="netlists and BOMs of the board")
    where = "where to write it, never over a file (default: rcrules.toml beside the first input)"
    command.add_argument("--to", metavar="FILE", help=where)


def _rules_option(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "--rules",
        action="append",
        default=[],
        metavar="PACK|FILE",
        help="rules to apply (repeatable; else the project's; else the packs that need no project facts, as warnings)",
    )


def _fail_options(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "--fail-on",
        choices=("error", "warning", "note", "never"),
        default="error",
        help="the lowest level of a failing finding that makes the exit code 1 (default: error)",
    )
    command.add_argument(
        "--fail-on-undecided", action="store_true", help="undecided findings of that level count as well"
    )


def _moved(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "--moved",
        default="5 %",
        metavar="SHARE",
        help="numbers that moved by more than this share are told (default: 5 %%)",
    )


def _render(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "saved", metavar="SAVED", help="what check or networks wrote with --report json=SAVED; - reads standard input"
    )
    _output_options(command)


def _board_options(command: argparse.ArgumentParser) -> None:
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


def _output_options(command: argparse.ArgumentParser) -> None:
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
    _color(command)


def _rules(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "packs", nargs="*", metavar="PACK|FILE", help="packs or files to list (default: all shipped packs)"
    )
    command.add_argument(
        "--measures", action="store_true", help="list the measures that rules may use, with their options"
    )
    command.add_argument("--try", action="store_true", dest="tried", help="hold rules against their own examples")
    command.add_argument(
        "--on",
        nargs="+",
        default=[],
        metavar="INPUT",
        help="show what each rule meets on a board, what it nearly meets, and at which limit its verdict turns",
    )
    command.add_argument(
        "--schema", action="store_true", help="print the JSON schema of rule files, for completion in editors"
    )
    command.add_argument("--project", metavar="FILE", help="project file of that board (default: found as check does)")
    _color(command)


def _demo(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "folder", nargs="?", metavar="FOLDER", help="where to copy it (default: a new temporary folder)"
    )
    _color(command)


def _color(command: argparse.ArgumentParser) -> None:
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
