"""Entries for the waivers file, written for whoever completes them."""

import argparse
import sys
from pathlib import Path
from typing import TYPE_CHECKING, Final

if TYPE_CHECKING:
    from rcrules.findings import Document
    from rcrules.job import Job

_DEFAULT: Final = "waivers.toml"


def waive(documents: "list[Document]", chosen: argparse.Namespace) -> None:
    """Append an entry for each finding that counts to the waivers file of its board, and say so."""
    from rcrules.cli._run import counted_of, jobs_of

    for document, job in zip(documents, jobs_of(chosen, with_rules=True), strict=True):
        if findings := counted_of(document, chosen):
            from rcrules.waivers import entries_text, today

            _append(entries_text(document, findings, today()), len(findings), job)


def _append(text: str, number: int, job: "Job") -> None:
    from rcrules.errors import Mistake, Place, UserMistake
    from rcrules.job import project_of

    project = project_of(job)
    path = (Path(project.file).parent if project.file else Path()) / (project.waivers or _DEFAULT)
    try:
        with path.open("a", encoding="utf-8") as stream:
            stream.write(text)
    except OSError as error:
        mistake = Mistake(place=Place(file=str(path)), problem=f"cannot write waivers: {error.strerror}")
        raise UserMistake(mistake) from error
    entries = "1 waiver" if number == 1 else f"{number} waivers"
    print(f"{entries} written to {path}: complete reason and name, delete those to be mended", file=sys.stderr)
    if project.waivers is None:
        print(f'the project file must name it:  [board] waivers = "{_DEFAULT}"', file=sys.stderr)
