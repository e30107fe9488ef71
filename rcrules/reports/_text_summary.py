"""The first and the last lines of the text report: what was judged, what was left, and why."""

from collections import Counter
from typing import Final

from rcrules.findings import Document, Json
from rcrules.reports._lines import Line
from rcrules.reports._text_whereabouts import CLASSES, counts_as, whereabouts
from rcrules.reports._words import count, number
from rcrules.vocabulary import SEVERITIES

_SHOWN_UNREADABLE: Final = 5


def header_lines(document: Document, *, verbose: bool) -> list[Line]:
    """Board, counts, share decided; on request under what conditions."""
    first: Line = ((str(document.board["name"]), "name"), f"   {found_text(document)}{share_text(document)}")
    return [first, *([_conditions(document)] if verbose else [])]


def _conditions(document: Document) -> Line:
    """``conditions   temperature -20 °C .. 60 °C, life 10 year``."""
    given = {name: row for name, row in document.conditions.items() if row["low"] is not None}
    texts = [f"{name} {_range(row)}" for name, row in given.items()]
    missing = [name for name in document.conditions if name not in given]
    texts += [f"no {' or '.join(missing)} given"] if missing else []
    return (("conditions", "name"), f"   {', '.join(texts)}")


def _range(row: Json) -> str:
    """From lowest to highest; a time that starts at once by its end alone."""
    ends = (row["high"], row["high"]) if row["low"] == 0 and row["unit"] == "s" else (row["low"], row["high"])
    return " .. ".join(dict.fromkeys(number(end, row["unit"]) for end in ends))


def found_text(document: Document) -> str:
    """``214 parts, 131 nets, 41 RC networks``."""
    board, nodes = document.board, sum(len(network["nodes"]) for network in document.networks)
    found = count(len(document.networks), "RC network")
    found += f" with {count(nodes, 'node')}" if nodes != len(document.networks) else ""
    return f"{count(board['parts'], 'part')}, {count(board['nets'], 'net')}, {found}"


def share_text(document: Document) -> str:
    """``31 of 39 findings decided (79 %)``."""
    if not document.packs:
        return ""
    if not document.board["pins"]:
        return "   no netlist, so nothing to judge"
    total = len(document.findings)
    if not total:
        return "   no rule applies to anything on it"
    decided = sum(item.outcome != "undecided" for item in document.findings)
    return f"   {decided} of {count(total, 'finding')} decided ({100 * decided // total} %)"


def summary_lines(document: Document, *, verbose: bool) -> list[Line]:
    """Remarks, assumptions on request, counts of findings, coverage of parts."""
    lines: list[Line] = [*_problems(document, verbose=verbose)]
    if verbose and document.assumptions:
        lines += [(), (("assumptions", "name"), f"   {len(document.assumptions)}"), *_assumptions(document.assumptions)]
    lines.append(())
    if not document.packs:
        return lines + whereabouts(document, verbose=verbose)
    return [*lines, (totals(document, verbose=verbose),), *((text,) for text in coverage_texts(document))]


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


def _assumptions(rows: list[Json]) -> list[Line]:
    """One line for all that assume the same and would be settled by the same line."""
    alike: dict[tuple[str, str], list[str]] = {}
    for row in rows:
        alike.setdefault((row["text"].removeprefix("assumed: "), row["ask"]), []).append(row["about"])
    return [
        ("  ", f"{', '.join(names)}: {text}", *(("   ", (ask, "name")) if ask else ()))
        for (text, ask), names in alike.items()
    ]


def totals(document: Document, *, verbose: bool) -> str:
    """``1 error, 1 warning, 29 hold, 8 undecided, 12 assumptions (--verbose lists them)``."""
    failing = Counter(item.level for item in document.findings if item.outcome == "fails")
    outcomes = Counter(item.outcome for item in document.findings)
    words = [count(failing[level], level) for level in SEVERITIES if failing[level]]
    words = words or ["nothing fails" if document.findings else "nothing judged"]
    words += [f"{outcomes['holds']} hold"] if document.findings else []
    words += [f"{outcomes[outcome]} {outcome}" for outcome in ("undecided", "waived") if outcomes[outcome]]
    assumptions = count(len(document.assumptions), "assumption")
    return ", ".join([*words, assumptions]) + (
        " (--verbose lists them)" if document.assumptions and not verbose else ""
    )


def coverage_texts(document: Document) -> list[str]:
    """A line for the capacitors, a line for the resistors."""
    return [text for kind in ("capacitor", "resistor") if (text := _coverage(document, kind))]


def _coverage(document: Document, kind: str) -> str:
    """``capacitors 74: 31 judged, 2 undecided, 40 decoupling, 1 value not understood (C44 "DNP?")``."""
    rows = [row for row in document.parts if counts_as(row) == kind]
    if not rows:
        return ""
    classes = Counter(row["coverage"] for row in rows)
    texts = [f"{classes[name]} {word}" for name, word in CLASSES.items() if classes[name]]
    unreadable = [f'{row["ref"]} "{row["text"]}"' for row in rows if row["coverage"] == "unreadable"]
    shown = ", ".join(unreadable[:_SHOWN_UNREADABLE]) + (" …" if len(unreadable) > _SHOWN_UNREADABLE else "")
    return f"{kind}s {len(rows)}: {', '.join(texts)}" + (f" ({shown})" if unreadable else "")
