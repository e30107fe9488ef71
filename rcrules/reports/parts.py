"""What was read about each resistor and capacitor, and from where: one line for parts that were written alike."""

from collections.abc import Iterable, Iterator, Mapping
from typing import Final

from rcrules.findings import Document, Json
from rcrules.reports._columns import aligned
from rcrules.reports._lines import Line, Span
from rcrules.reports._report import Report
from rcrules.reports._words import count, names_text, number
from rcrules.reports._wrap import laid_out

_SHOWN: Final = 4
_ASKED: Final = 12
"""References in the name of one table."""
_FACTS: Final = ("value", "tolerance", "rated_voltage", "rated_power", "dielectric")


def render(document: Document, *, verbose: bool = False, color: bool = False, width: int | None = None) -> str:
    """Unread values first, then resistors, then capacitors; with verbose every reference and the place of each fact."""
    groups = _groups(document.parts)
    heading: Line = ((str(document.board["name"]), "name"), f"   {_heading(document, groups)}")
    lines: list[Line] = [heading, ()]
    lines += aligned(_cells(rows, verbose=verbose) for rows in groups)
    lines += [()] if document.problems else []
    lines += [(("remark", "open"), f"   {row['text']}") for row in document.problems]
    return laid_out(lines, color=color, width=width)


def _heading(document: Document, groups: list[list[Json]]) -> str:
    unread = sum(len(rows) for rows in groups if rows[0]["value"] is None)
    told = f"{count(len(document.parts), 'part')} in {count(len(groups), 'line')}"
    return f"{told}, value not understood: {unread}" if unread else told


def _groups(parts: Iterable[Json]) -> list[list[Json]]:
    """Parts of which the same was read from the same sources."""
    together: dict[str, list[Json]] = {}
    for row in parts:
        sources = {name: origin["from"] for name, origin in row["origins"].items()}
        key = repr([row[name] for name in ("kind", "text", "value", "fitted", "why_unknown", *_FACTS[2:])] + [sources])
        together.setdefault(f"{key}{_tolerance(row)}", []).append(row)
    return sorted(together.values(), key=lambda rows: (rows[0]["value"] is not None, rows[0]["kind"], _order(rows[0])))


def _order(row: Json) -> float:
    return float(row["value"]) if row["value"] is not None else 0.0


def _cells(rows: list[Json], *, verbose: bool) -> list[Span]:
    """References, the text, the facts, and where they come from."""
    row = rows[0]
    refs = [str(item["ref"]) for item in rows]
    value: Span = number(row["value"], row["unit"]) if row["value"] is not None else ("not understood", "open")
    return [
        (names_text(refs, limit=len(refs) if verbose else _SHOWN), "name"),
        f"'{row['text']}'" if row["text"] else "no text",
        value,
        _tolerance(row),
        "" if row["rated_voltage"] is None else number(row["rated_voltage"], "V"),
        "" if row["rated_power"] is None else number(row["rated_power"], "W"),
        row["dielectric"] or "",
        "" if row["fitted"] else "not fitted",
        (_unread(row, refs) or "; ".join(_sources(row["origins"], verbose=verbose)), "dim"),
    ]


def _unread(row: Json, refs: list[str]) -> str:
    """Why there is no value, with the line of the project file that gives it; '' where there is one."""
    why, named = row["why_unknown"], ", ".join(refs[:_ASKED])
    asks = bool(why) and row["fitted"] and row["unit"] is not None
    return f'{why}   [part."{named}"] value = "…"' if asks else str(why or "")


def _tolerance(row: Json) -> str:
    """The tolerance that an input gave; '' for one that is assumed."""
    share = next((item for item in row["shares"] if item["name"] == "tolerance" and item["given"]), None)
    if share is None:
        return ""
    low, high = (number(share[end], "1", percent=True) for end in ("low", "high"))
    return f"±{high}" if share["low"] == -share["high"] else f"{low} / +{high}"


def _sources(origins: Mapping[str, Json], *, verbose: bool) -> Iterator[str]:
    """``value, tolerance: BOM value``; with verbose each with file and line."""
    by_source: dict[str, list[str]] = {}
    for name in _FACTS:
        if name in origins:
            origin = origins[name]
            place = f" ({origin['file']}:{origin['line']})" if verbose and origin["file"] else ""
            by_source.setdefault(f"{origin['from']}{place}", []).append(name.replace("_", " "))
    yield from (f"{', '.join(names)}: {source}" for source, names in by_source.items())


REPORT = Report(
    name="parts", suffix=".parts.txt", summary="What was read about each resistor and capacitor.", render=render
)
