"""A first project file for a strange board."""

import argparse
import os
import sys
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from pathlib import Path

    from rcrules.findings import Document


def start(chosen: argparse.Namespace) -> int:
    """Write rcrules.toml beside the first input, never over another one; tell what it decides and what to do next."""
    from pathlib import Path

    from rcrules.pipeline import Job, run
    from rcrules.starter import FIRST_PACKS, project_text, questions

    if "-" in chosen.inputs:
        raise _mistake("command line", "standard input cannot be named in a project file", "name the files")
    target = Path(chosen.to) if chosen.to else Path(chosen.inputs[0]).parent / "rcrules.toml"
    _free(target)
    _describe(chosen.inputs)
    document = run(Job(inputs=tuple(chosen.inputs), project=os.devnull, rules=FIRST_PACKS))
    folder = target.parent
    inputs = [(row["kind"], _relative(row["file"], folder)) for row in document.inputs]
    netlists, boms = ([name for kind, name in inputs if kind == wanted] for wanted in ("netlist", "bom"))
    text = project_text(document, Path(chosen.inputs[0]).stem, netlists, boms)
    _write(target, text)
    print(_told(document, target, len(questions(document.findings))), file=sys.stderr)
    return 0


def _describe(names: "list[str]") -> None:
    """Print a description of the first input that no reader knows, where there is one to make. Raises UserMistake."""
    from rcrules.errors import UserMistake
    from rcrules.readers import known, load, proposal

    for name in names:
        source = load(name)
        if known(source):
            continue
        try:
            described = proposal(source)
        except UserMistake:
            described = None  # what is wrong with the file is told when it is read
        if described is not None:
            print(described)
            do = "put the description above into rcrules.toml, name what has a '?', and run: rcrules networks"
            raise _mistake(name, "no format that is known here, but it can be described", do)


def _relative(name: str, folder: "Path") -> str:
    """The input as the project file names it, relative to its folder."""
    from pathlib import Path

    return Path(os.path.relpath(name, folder)).as_posix()


def _free(target: "Path") -> None:
    if target.exists():
        raise _mistake(str(target), "a project file stands here already", "edit it, or name another file: --to FILE")


def _write(target: "Path", text: str) -> None:
    try:
        target.write_bytes(text.encode("utf-8"))
    except OSError as error:
        do = "name a file in a folder that is there and may be written: --to FILE"
        raise _mistake(str(target), f"cannot write it: {error.strerror}", do) from error


def _mistake(place: str, problem: str, do: str) -> Exception:
    from rcrules.errors import Mistake, Place, UserMistake

    return UserMistake(Mistake(place=Place(file=place), problem=problem, do=do))


def _told(document: "Document", target: "Path", asked: int) -> str:
    total = len(document.findings)
    decided = sum(item.outcome != "undecided" for item in document.findings)
    questions = {0: "nothing to ask", 1: "1 question"}.get(asked, f"{asked} questions")
    return (
        f"wrote {target}: {questions}, the most useful first\n"
        f"without answers {decided} of {total} findings are decided; then run  rcrules check --project {target}"
    )
