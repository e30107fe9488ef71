"""The newer document with the comparison in it."""

import math
from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import Final

from rcrules.comparison._changes import changes
from rcrules.comparison._circumstances import around, limit
from rcrules.comparison._match import Pair, pairs
from rcrules.findings import Document, Finding, Json, Quantity, settled
from rcrules.vocabulary import SEVERITIES

MOVED: Final = 0.05
"""A number that moved by less than this share is not told."""
_RANKS: Final = {"holds": 0, "waived": 0, "undecided": 1, "fails": 2}
_NAMED: Final = frozenset(("spread", "rated voltage", "rated power", "dielectric"))
"""Changes that do not say by themselves what changed."""
_ORDER: Final = ("broke", "still failing", "mended", "moved")


def compared(old: Document, new: Document, share: float = MOVED) -> Document:
    """The newer document; every finding says its ``baseline``, ``comparison`` says the rest.

    ``share`` is the part of its old value by which a number must move to be told.
    """
    found = pairs(old.findings, new.findings)
    states = {id(now): _baseline(was, now, share) for was, now in found if now is not None}
    about = changes(old, new)
    comparison = {
        "board": old.board["name"],
        "tool": old.tool,
        "share": share,
        "findings": _findings(found, old, new, about, share),
        "networks": _networks(old, new),
        "changes": about,
    }
    marked = [replace(item, baseline=states[id(item)]) for item in new.findings]
    return settled(replace(new, findings=marked, comparison=comparison))


def _baseline(was: Finding | None, now: Finding, share: float) -> str:
    """``new``: not there before, or worse than before, or as bad at a graver level."""
    if was is None or _RANKS[now.outcome] > _RANKS[was.outcome] or (_RANKS[now.outcome] and _graver(was, now)):
        return "new"
    return "moved" if was.outcome != now.outcome or _moved(was.measured, now.measured, share) else "unchanged"


def _graver(was: Finding, now: Finding) -> bool:
    return SEVERITIES.index(now.level) < SEVERITIES.index(was.level)


def _change(was: Finding | None, now: Finding | None, share: float) -> str | None:
    """What is told of a pair; None = nothing."""
    failed, fails = _fails(was), _fails(now)
    if now is not None and fails:
        return "still failing" if was is not None and failed and not _graver(was, now) else "broke"
    if failed:
        return "mended"
    if was is None or now is None:
        return None
    return "moved" if was.outcome != now.outcome or _moved(was.measured, now.measured, share) else None


def _fails(item: Finding | None) -> bool:
    return item is not None and item.outcome == "fails"


def _moved(was: Quantity | None, now: Quantity | None, share: float) -> bool:
    """Whether an end or the nominal number moved by more than the share of what it was."""
    if was is None or now is None:
        return (was is None) != (now is None)
    ends = ((was.low, now.low), (was.nominal, now.nominal), (was.high, now.high))
    return any(_apart(before, after, share) for before, after in ends)


def _apart(was: float, now: float, share: float) -> bool:
    if math.isfinite(was) and math.isfinite(now):
        return abs(now - was) > share * abs(was)
    return was != now and not (math.isnan(was) and math.isnan(now))


def _findings(found: Sequence[Pair], old: Document, new: Document, about: list[Json], share: float) -> list[Json]:
    """Every pair of which something is told; what broke first."""
    number = {id(item): index for index, item in enumerate(new.findings)}
    rows = [
        _row(change, was, now, number, old, new, about)
        for was, now in found
        if (change := _change(was, now, share)) is not None
    ]
    return sorted(rows, key=lambda row: _ORDER.index(row["change"]))


def _row(
    change: str,
    was: Finding | None,
    now: Finding | None,
    number: dict[int, int],
    old: Document,
    new: Document,
    about: list[Json],
) -> Json:
    first = now if now is not None else was
    assert first is not None  # a pair has at least one
    return {
        "change": change,
        "rule": first.rule,
        "net": first.net,
        "parts": first.parts,
        "was": _verdict(was),
        "now": _verdict(now),
        "causes": list(_causes(was, now, old, new, about)),
        "finding": None if now is None else number[id(now)],
    }


def _verdict(item: Finding | None) -> Json | None:
    if item is None:
        return None
    measured = item.measured
    quantity = None if measured is None else {name: getattr(measured, name) for name in _QUANTITY}
    return {"outcome": item.outcome, "level": item.level, "measured": quantity, "limit": item.limit}


_QUANTITY: Final = ("low", "nominal", "high", "unit", "low_case", "high_case", "method")


def _causes(was: Finding | None, now: Finding | None, old: Document, new: Document, about: list[Json]) -> Iterator[str]:
    """``C7 10 µF → 4.7 µF``: what changed of the rule, of the network's parts and sources, of the conditions."""
    if was is not None and now is not None:
        yield from _rule(was, now)
    names = {*around(was, old), *around(now, new)}
    yield from (cause(row) for row in about if row["what"] == "condition" or row["about"] in names)
    if was is not None and old.tool != new.tool:
        yield f"rcrules {old.tool} → {new.tool}"


def cause(row: Json) -> str:
    """A change in words: ``C7 10 µF → 4.7 µF``, ``C7 added (10 µF)``."""
    what = f" {row['what']}" if row["what"] in _NAMED else ""
    if row["was"] is None:
        return f"{row['about']}{what} added ({row['now']})"
    if row["now"] is None:
        return f"{row['about']}{what} removed ({row['was']})"
    return f"{row['about']}{what} {row['was']} → {row['now']}"


def _rule(was: Finding, now: Finding) -> Iterator[str]:
    if was.level != now.level:
        yield f"level {was.level} → {now.level}"
    before, after = limit(was), limit(now)
    if before != after:
        yield f"limit {before} → {after}"
    if was.options != now.options:
        yield "options of the measure"


def _networks(old: Document, new: Document) -> Json:
    """Networks of which no part and no net is in the other document, by id."""
    before, after = (Counter(name for network in doc.networks for name in _names(network)) for doc in (old, new))
    return {
        "added": [network["id"] for network in new.networks if not any(name in before for name in _names(network))],
        "removed": [network["id"] for network in old.networks if not any(name in after for name in _names(network))],
    }


def _names(network: Json) -> list[str]:
    return [branch["part"] for branch in network["branches"]]
