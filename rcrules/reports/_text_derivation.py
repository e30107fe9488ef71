"""How numbers come about, in text: the network drawn, its sources, steps that arrive at the number, the spread."""

from collections.abc import Iterator, Sequence
from typing import Final

from rcrules.findings import Derived, Document, Json
from rcrules.reports._columns import aligned
from rcrules.reports._lines import Line, Span
from rcrules.reports._statistics import statistics_texts
from rcrules.reports._words import asked, bounds, in_percent, limit_text, margin_text, number, part_texts, parts_text

_INDENT: Final = " " * 4
_BY_TOOL: Final = "   (its last number is the tool's own: no closed formula gives it)"


def derivation_lines(document: Document, found: Sequence[Derived]) -> list[Line]:
    """A block for each number; what several share is drawn once."""
    lines: list[Line] = []
    drawn: list[object] = []
    for item in found:
        lines += [*([()] if lines else []), *_heading(item, document)]
        if item.derivation is None:
            lines += list(_missing(item))
            continue
        if (same := [item.derivation["picture"], item.derivation["sources"]]) != drawn:
            lines += [(), *_picture(item.derivation["picture"])]
            drawn = same
        lines += [*_circumstances(item.derivation), *_cases(item), *_spread(item), *_statistics(item)]
    return lines


def _heading(item: Derived, document: Document) -> Iterator[Line]:
    """What is measured, and what the rule says of it."""
    finding = item.finding
    if finding is None:
        event = f" at {item.options['event']}" if "event" in item.options else ""
        told = f"   {item.measure.replace('_', ' ')}{event}{_of(item)}" if item.measure else ""
        yield ((item.at, "name"), told)
        return
    texts = part_texts(document)
    fed = f" -> {', '.join(finding.feeds)}" if finding.feeds else ""
    yield ((item.at, "name"), f"   {asked(finding)}{_of(item)}   {parts_text(finding.parts, texts)}{fed}")
    words = [finding.outcome, limit_text(finding), margin_text(finding) if item.measured else ""]
    style = f"fails {finding.level}" if finding.outcome == "fails" else "good" if finding.outcome == "holds" else "open"
    yield (_INDENT, (finding.rule, "name"), "   ", (words[0], style), *(f"   {word}" for word in words[1:] if word))


def _of(item: Derived) -> str:
    """The node or part where it is another than what was asked for."""
    return f" of {item.of}" if item.of != item.at else ""


def _missing(item: Derived) -> Iterator[Line]:
    yield (_INDENT, item.reason or "there is no number, and nothing to show it by")
    yield from ((_INDENT, "add  ", (line, "name")) for line in item.ask)


def _picture(rows: list[Json]) -> Iterator[Line]:
    """Nodes from the source down; what leads on stands between two nodes, what hangs on one behind it."""
    for row in rows:
        mark = "   <- observed" if row["seen"] else ""
        yield (_INDENT, (row["node"], "name"), mark)
        own = [f"{_part(arm)} -- {arm['to']}" for arm in row["branches"]]
        own += [f"{name} is drawn here" for name in row["drawn"]]
        yield from ((_INDENT, f"  |-- {text}") for text in own)
        if row["down"]:
            yield (_INDENT, "  |")
            yield (_INDENT, f"  {' || '.join(_part(arm) for arm in row['down'])}")
            yield (_INDENT, "  |")


_WAYS: Final = {"diode from here": " forward, conducts from here", "diode to here": " forward, conducts to here"}


def _part(arm: Json) -> str:
    way = _WAYS.get(arm["kind"], "")
    return f"{arm['ref']} {number(arm['value'], arm['unit'])}{way}"


def _circumstances(derivation: Json) -> Iterator[Line]:
    """Sources, voltages at rest, time constants; after an empty line where there are any."""
    if any(derivation[key] for key in ("sources", "voltages", "modes")):
        yield ()
    for row in derivation["sources"]:
        text = bounds(row["low"], row["nominal"], row["high"], "V")
        yield (_INDENT, "source  ", (row["net"], "name"), f"   {text}{_way(row)}")
    for row in derivation["voltages"]:
        words = [f"{word} {number(row[key], 'V')}" for key, word in _WHEN.items()]
        yield (_INDENT, "node  ", (row["net"], "name"), f"   {', '.join(words)}")
    if derivation["modes"]:
        texts = [f"{number(row['tau'], 's')} ({100 * row['share']:.3g} %)" for row in derivation["modes"]]
        yield (_INDENT, f"time constants   {', '.join(texts)}   (in brackets the share in what the node does)")


_WHEN: Final = {"before": "before", "start": "just after", "final": "in the end"}


def _way(row: Json) -> str:
    """``, from 0 V, 3.3 V at 1.25 ms``: how a source that moves gets there at nominal."""
    way = row["way"]
    if all(volts == row["before"] for _, volts in way):
        return ""
    steps = [f"{number(volts, 'V')} at {number(time, 's')}" for time, volts in way]
    return f", from {number(row['before'], 'V')}: {', '.join(dict.fromkeys(steps))}"


def _cases(item: Derived) -> Iterator[Line]:
    """Nominal, lowest, highest, each with what is off nominal and the steps by hand."""
    derivation, unit = item.derivation or {}, item.measured.unit if item.measured else "1"
    percent = _in_percent(item)
    for case in derivation["cases"]:
        off = f"   with {', '.join(case['off'])}" if case["off"] else ""
        yield ()
        yield (_INDENT, (case["case"], "name"), f"   {number(case['value'], unit, percent=percent)}{off}")
        steps: list[list[Span]] = [[step["symbol"], *_step(step)] for step in case["steps"]]
        yield from aligned(steps, _INDENT * 2)
        if not case["by_hand"]:
            yield (_INDENT * 2, _BY_TOOL.strip())


def _step(step: Json) -> list[Span]:
    """``= R · C = 10 kΩ · 10 µF = 100 ms``; a formula that only names a number stands once."""
    words = [step["formula"], "" if step["put_in"] == step["text"] else step["put_in"], step["text"]]
    return ["= " + " = ".join(word for word in words if word), (step["note"], "dim")]


def _spread(item: Derived) -> Iterator[Line]:
    """Each parameter with its range, what it does alone, its share, and where its range comes from."""
    derivation, measured = item.derivation or {}, item.measured
    rows = [row for row in derivation["parameters"] if row["share"] != 0]
    if measured is None or not rows:
        return
    yield ()
    found = bounds(measured.low, measured.nominal, measured.high, measured.unit, percent=_in_percent(item))
    yield (_INDENT, ("spread", "name"), f"   {found}   {measured.method}   (each parameter alone at its worst ends)")
    yield from aligned((_parameter(row, measured.unit) for row in rows), _INDENT * 2)


def _in_percent(item: Derived) -> bool:
    return item.finding is not None and in_percent(item.finding)


def _statistics(item: Derived) -> Iterator[Line]:
    """How random cases do, where that was asked for."""
    texts = list(statistics_texts(item.finding)) if item.finding else []
    if texts:
        yield ()
    yield from ((_INDENT, ("statistics", "name"), "   ", text) for text in texts)


def _parameter(row: Json, unit: str) -> list[Span]:
    moves = " .. ".join(_signed(row[key], unit) for key in ("to_low", "to_high"))
    share = "" if row["share"] is None or row["share"] != row["share"] else f"{100 * row['share']:.3g} %"
    spread = bounds(row["low"], row["nominal"], row["high"], row["unit"])
    return [row["parameter"], spread, moves, share, (row["from"], "dim")]


def _signed(value: float | None, unit: str) -> str:
    text = number(value, unit)
    return f"+{text}" if value is not None and value > 0 else text
