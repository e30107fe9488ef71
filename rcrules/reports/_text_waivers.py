"""Waivers in words: those that no longer count with the reason, the others on request."""

from typing import Final

from rcrules.findings import Document, Json
from rcrules.reports._lines import Line

_INDENT: Final = " " * 8
_SHOWN: Final = 6
"""Differences of one waiver; the rest is counted."""


def waiver_lines(document: Document, *, verbose: bool) -> list[Line]:
    """One entry each; in short those that count, or that belong to rules of another run, are not told."""
    rows = [row for row in document.waivers if verbose or _worth_telling(row, document)]
    return [(), *(line for row in rows for line in _row(row))] if rows else []


def _worth_telling(row: Json, document: Document) -> bool:
    run = {rule["id"] for pack in document.packs for rule in pack["rules"]}
    return row["state"] in ("lapsed", "expired") or (row["state"] == "unused" and row["rule"] in run)


def _row(row: Json) -> list[Line]:
    """``waiver lapsed  rule   NRST   waivers.toml:12``; below it what changed, or who accepted it why."""
    place = f"{row['place']['file']}:{row['place']['line']}"
    look = "good" if row["state"] == "used" else "open"
    head: Line = ((f"waiver {row['state']:<8}", look), (row["rule"], "name"), f"   {waiver_subject(row)}   {place}")
    said = f"accepted by {row['who']} on {row['date']}: {row['reason']}"
    return [head, *([(_INDENT, waiver_told(row))] if row["told"] else []), (_INDENT, said)]


def waiver_subject(row: Json) -> str:
    """Net or part it names."""
    return str(row["net"] or row["part"] or "the board")


def waiver_told(row: Json) -> str:
    """What changed, cut after a few."""
    rest = len(row["told"]) - _SHOWN
    return "; ".join([*row["told"][:_SHOWN], *([f"{rest} more"] if rest > 0 else [])])
