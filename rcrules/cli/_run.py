"""The commands themselves. Each imports what it needs when it runs."""

import argparse
import sys
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from rcrules.cli._output import Target
    from rcrules.findings import Document, Finding
    from rcrules.pipeline import Job


def check(chosen: argparse.Namespace) -> int:
    """Findings of every board; 1 when one counts."""
    asked = targets_of(chosen.report, quiet=chosen.quiet, boards=len(chosen.project))
    derived = any(target.report.derived for target in asked)
    documents = _against(_documents(chosen, with_rules=True, derived=derived), chosen)
    write_all(documents, asked, chosen)
    if chosen.waive:
        from rcrules.cli._waive import waive

        waive(documents, chosen)
    return exit_code(documents, chosen)


def exit_code(documents: "list[Document]", chosen: argparse.Namespace) -> int:
    """1 when a finding counts, with a word on why."""
    counted = sum(len(counted_of(document, chosen)) for document in documents)
    if counted and not chosen.quiet:
        print(_exit_hint(counted, chosen), file=sys.stderr)
    return int(counted > 0)


def _against(documents: "list[Document]", chosen: argparse.Namespace) -> "list[Document]":
    """Each document compared with the one saved of its board, where asked."""
    if chosen.against is None:
        return documents
    from rcrules.cli._compare import share
    from rcrules.cli._output import board_path, saved
    from rcrules.comparison import compared

    moved = share(chosen.moved)
    if len(documents) > 1 and "{board}" not in chosen.against:
        raise _usage("several boards, one saved document", do="name it by board: --against 'saved/{board}.json'")
    return [compared(saved(str(board_path(chosen.against, item))), item, moved) for item in documents]


def networks(chosen: argparse.Namespace) -> int:
    """What was found on every board."""
    asked = targets_of(chosen.report, quiet=chosen.quiet, boards=len(chosen.project))
    write_all(_documents(chosen, with_rules=False), asked, chosen)
    return 0


def render(chosen: argparse.Namespace) -> int:
    """A saved document as any report; what it tells of is no failure of the command."""
    from rcrules.cli._output import saved

    asked = targets_of(chosen.report, quiet=chosen.quiet, boards=1)
    write_all([saved(chosen.saved)], asked, chosen)
    return 0


def rules(chosen: argparse.Namespace) -> int:
    """Packs and rules, measures, or rules tried, in words; 1 when an example does not come out as its rule says."""
    from rcrules.cli._output import terminal_width, to_stdout, wants_color
    from rcrules.reports import laid_out

    if chosen.schema:
        import json

        from rcrules.measures import registry
        from rcrules.rulebook import schema

        to_stdout(json.dumps(schema(registry()), indent=2, ensure_ascii=False) + "\n")
        return 0
    wrong = False
    if chosen.tried:
        from rcrules.cli._tried import tried_lines

        lines, wrong = tried_lines(tuple(chosen.packs))
    elif chosen.on:
        from rcrules.cli._on import on_lines

        lines = on_lines(tuple(chosen.packs), tuple(chosen.on), chosen.project)
    elif chosen.measures:
        from rcrules.cli._measures import measures_lines

        lines = measures_lines()
    else:
        from rcrules.cli._rules import rules_lines

        lines = rules_lines(tuple(chosen.packs))
    to_stdout(laid_out(lines, color=wants_color(chosen.color), width=terminal_width()))
    return int(wrong)


def demo(chosen: argparse.Namespace) -> int:
    """Copy the demo board, check it, show the report; its planted faults are no failure of the command."""
    from pathlib import Path

    from rcrules.cli._demo import copy_demo
    from rcrules.cli._output import terminal_width, to_stdout, wants_color
    from rcrules.pipeline import Job, run
    from rcrules.reports import reports

    folder = copy_demo(Path(chosen.folder) if chosen.folder else None)
    print(f"demo board in {folder}", file=sys.stderr)
    document = run(Job(project=str(folder / "rcrules.toml")))
    to_stdout(reports()["text"].render(document, color=wants_color(chosen.color), width=terminal_width()))
    return 0


def _documents(chosen: argparse.Namespace, *, with_rules: bool, derived: bool = False) -> "list[Document]":
    """One document per board, in the order given."""
    from rcrules.cli._progress import progress
    from rcrules.pipeline import run_all

    jobs = jobs_of(chosen, with_rules=with_rules, derived=derived)
    boards = "1 board" if len(jobs) == 1 else f"{len(jobs)} boards"
    with progress(f"working on {boards}", quiet=chosen.quiet, total=len(jobs)) as done:
        return run_all(jobs, processes=chosen.jobs, done=done)


def jobs_of(chosen: argparse.Namespace, *, with_rules: bool, derived: bool = False) -> "list[Job]":
    """One job per board. Raises UserMistake where inputs and boards do not go together."""
    from rcrules.pipeline import Job

    rules = tuple(chosen.rules) if with_rules else ()
    projects = chosen.project or [None]
    if len(projects) > 1 and chosen.inputs:
        raise _usage("inputs and several --project", do="give each board its inputs in its project file")
    if len(set(projects)) < len(projects):
        raise _usage("one project file is named twice", do="name each --project once")
    if chosen.inputs.count("-") > 1:
        raise _usage("standard input is named twice", do="name - once; give the other inputs as files")
    return [
        Job(
            inputs=tuple(chosen.inputs),
            project=project,
            rules=rules,
            with_rules=with_rules,
            proposals=chosen.command == "propose",
            derived=derived,
            samples=getattr(chosen, "samples", 0),
            seed=getattr(chosen, "seed", 0),
            variant=chosen.variant,
            limits=tuple(chosen.limit),
        )
        for project in projects
    ]


def targets_of(reports: list[str], *, quiet: bool, boards: int) -> "list[Target]":
    """Reports asked for, checked before any work is done; text on standard output when none is."""
    from rcrules.cli._output import targets

    return targets(reports or ([] if quiet else ["text"]), boards=boards)


def write_all(documents: "list[Document]", asked: "list[Target]", chosen: argparse.Namespace) -> None:
    from rcrules.cli._output import check_paths, wants_color, write

    named = vars(chosen)
    check_paths(documents, asked, [name for key in ("inputs", "project", "rules") for name in named.get(key, ())])
    for document in documents:
        for target in asked:
            write(document, target, verbose=chosen.verbose, color=wants_color(chosen.color))
    if len(documents) > 1 and any(target.path is None and target.report.name == "text" for target in asked):
        from rcrules.cli._output import terminal_width, to_stdout
        from rcrules.reports import boards_lines, laid_out

        to_stdout(laid_out(boards_lines(documents), color=wants_color(chosen.color), width=terminal_width()))


def counted_of(document: "Document", chosen: argparse.Namespace) -> "list[Finding]":
    """Findings at or above the level that fail (or are undecided, where that counts); of a comparison only new ones."""
    from rcrules.vocabulary import SEVERITIES

    if chosen.fail_on == "never":
        return []
    levels = SEVERITIES[: SEVERITIES.index(chosen.fail_on) + 1]
    outcomes = ("fails", "undecided") if chosen.fail_on_undecided else ("fails",)
    return [
        item
        for item in document.findings
        if item.outcome in outcomes and item.level in levels and item.baseline in (None, "new")
    ]


def _exit_hint(counted: int, chosen: argparse.Namespace) -> str:
    """Why the exit code is 1."""
    new = "new " if getattr(chosen, "against", None) or hasattr(chosen, "old") else ""
    findings = f"1 {new}finding" if counted == 1 else f"{counted} {new}findings"
    options = f"--fail-on {chosen.fail_on}" + (" --fail-on-undecided" if chosen.fail_on_undecided else "")
    return f"exit code 1: {findings} at or above the fail level ({options})"


def _usage(problem: str, do: str) -> Exception:
    from rcrules.errors import Mistake, Place, UserMistake

    return UserMistake(Mistake(place=Place(file="command line"), problem=problem, do=do))
