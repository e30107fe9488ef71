"""What may stand on the command line. Imports nothing but argparse, so that help is instant."""

import argparse
from typing import Final

from rcrules import __version__
from rcrules.cli import _compare, _derive, _options, _run, _start

_DESCRIPTION: Final = (
    "Finds the RC networks of a board, works out what each does in the worst case, and holds it against rules."
)
_EXIT: Final = (
    "exit code: 0 nothing at or above the fail level, 1 findings, 2 inputs, rules or usage wrong, 3 a bug of rcrules, "
    "130 interrupted"
)
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
    _options.board(command)
    _options.rules(command)
    _options.fail(command)
    command.add_argument(
        "--against",
        metavar="SAVED",
        help="compare with a document saved before (--report json=SAVED): only what is new counts for the exit code; "
        "{board} in it: the board's name",
    )
    _options.moved(command)
    _options.statistics(command)
    command.add_argument(
        "--waive",
        action="store_true",
        help="write an entry for each finding that counts to the waivers file, to be completed with reason and name",
    )
    _options.output(command)


def _networks(command: argparse.ArgumentParser) -> None:
    _options.board(command)
    _options.output(command)


def _derive_options(command: argparse.ArgumentParser) -> None:
    _options.board(command)
    command.add_argument(
        "--at", required=True, metavar="NET|REF", help="a net, a part such as C7, or a pin such as U3.NRST"
    )
    command.add_argument("--rule", metavar="ID", help="only the number that this rule asks for")
    _options.rules(command)
    _options.statistics(command)
    command.add_argument(
        "--report", action="append", default=[], metavar="FORMAT[=PATH]", help="text (default) or json (repeatable)"
    )
    command.set_defaults(quiet=False, verbose=False)
    _options.color(command)


def _compare_documents(command: argparse.ArgumentParser) -> None:
    command.add_argument("old", metavar="OLD", help="what check wrote with --report json=OLD")
    command.add_argument("new", metavar="NEW", help="the same of the newer board; - reads standard input")
    _options.fail(command)
    _options.moved(command)
    _options.output(command)


def _start_options(command: argparse.ArgumentParser) -> None:
    command.add_argument("inputs", nargs="+", metavar="INPUT", help="netlists and BOMs of the board")
    where = "where to write it, never over a file (default: rcrules.toml beside the first input)"
    command.add_argument("--to", metavar="FILE", help=where)


def _render(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "saved", metavar="SAVED", help="what check or networks wrote with --report json=SAVED; - reads standard input"
    )
    _options.output(command)


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
    _options.color(command)


def _demo(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "folder", nargs="?", metavar="FOLDER", help="where to copy it (default: a new temporary folder)"
    )
    _options.color(command)
