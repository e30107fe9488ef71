"""The first and the last lines of the text report: what was judged, what was left, and why."""

from collections import Counter
from typing import Final

from rcrules.findings import Document, Json
from rcrules.reports._lines import Line
from rcrules.reports._words import count
from rcrules.vocabulary import SEVERITIES

_CLASSES: Final = {
    "judged": "judged",
    "undecided": "undecided",
    "unruled": "met no rule",
    "decoupling": "decoupling",
    "elsewhere": "elsewhere",
    "not_fitted": "not fitted",
    "unreadable": "value not understood",
}
_SHOWN_UNREADABLE: Final = 5


def header_lines(document: Document) -> list[Line]:
    """Board, counts, share decided."""
    board = document.board
    nodes = sum(len(network["nodes"]) for network in document.networks)
    counts = f"   {count(board['parts'], 'part')}, {count(board['nets'], 'net')}, {count(nodes, 'RC node')}"
    return [((str(board["name"]), "name"), counts + _share(document))]


def _share(document: Document) -> str:
    """``31 of 39 findings decided (79 %)``."""
    if not document.packs:
        return ""
    total = len(document.findings)
    decided = sum(item.outcome != "undecided" for item in document.findings)
    return f"   {decided} of {count(total, 'finding')} decided" + (f" ({100 * decided // total} %)" if total else "")


def summary_lines(document: Document, *, verbose: bool) -> list[Line]:
    """Remarks, assumptions on request, counts of findings, coverage of parts."""
    lines: list[Line] = [*_problems(document, verbose=verbose)]
    if verbose and document.assumptions:
        lines += [(), ("assumptions",), *(_assumption(index, row) for index, row in enumerate(document.assumptions, 1))]
    lines.append(())
    if document.packs:
        lines.append((_totals(document, verbose=verbose),))
    return lines + [(text,) for text in (_coverage(document, "capacitor"), _coverage(document, "resistor")) if text]


def _problems(document: Document, *, verbose: bool) -> list[Line]:
    """Remarks about inputs; only counted when there are many."""
    if not document.problems:
        return []
    shown = document.problems if verbose else document.problems[:5]
    lines: list[Line] = [(), *((("remark", "open"), f"  {_at(row['place'])}{row['text']}") for row in shown)]
    rest = len(document.problems) - len(shown)
    return [*lines, (f"{count(rest, 'further remark')} (--verbose lists them)",)] if rest else lines


def _at(place: Json | None) -> str:
    if not place:
        return ""
    return ":".join(str(place[key]) for key in ("file", "line", "column") if place.get(key) is not None) + ": "


def _assumption(index: int, row: Json) -> Line:
    return (f"{index:>3}  {row['about']}: {row['text']}", (f"   {row['ask']}" if row["ask"] else "", "dim"))


def _totals(document: Document, *, verbose: bool) -> str:
    """``1 error, 1 warning, 29 hold, 8 undecided, 12 assumptions (--verbose lists them)``."""
    failing = Counter(item.level for item in document.findings if item.outcome == "fails")
    outcomes = Counter(item.outcome for item in document.findings)
    words = [count(failing[level], level) for level in SEVERITIES if failing[level]] or ["nothing fails"]
    words.append(f"{outcomes['holds']} hold")
    words += [f"{outcomes[outcome]} {outcome}" for outcome in ("undecided", "waived") if outcomes[outcome]]
    assumptions = count(len(document.assumptions), "assumption")
    return ", ".join([*words, assumptions]) + (
        " (--verbose lists them)" if document.assumptions and not verbose else ""
    )


def _coverage(document: Document, kind: str) -> str:
    """``capacitors 74: 31 judged, 2 undecided, 40 decoupling, 1 value not understood (C44 "DNP?")``."""
    rows = [row for row in document.parts if _counts_as(row) == kind]
    if not rows:
        return ""
    classes = Counter(row["coverage"] for row in rows)
    words = dict(_CLASSES) | ({} if document.packs else {"unruled": "in networks"})
    texts = [f"{classes[name]} {word}" for name, word in words.items() if classes[name]]
    unreadable = [f'{row["ref"]} "{row["text"]}"' for row in rows if row["coverage"] == "unreadable"]
    shown = ", ".join(unreadable[:_SHOWN_UNREADABLE]) + (" …" if len(unreadable) > _SHOWN_UNREADABLE else "")
    return f"{kind}s {len(rows)}: {', '.join(texts)}" + (f" ({shown})" if unreadable else "")


def _counts_as(row: Json) -> str:
    """Capacitor or resistor; a part of another kind by its reference."""
    kind = str(row["kind"])
    if kind.startswith(("resistor", "capacitor")):
        return kind.removesuffix("-array")
    return "capacitor" if str(row["ref"]).startswith("C") else "resistor"
