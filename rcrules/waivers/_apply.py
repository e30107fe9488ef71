"""A document with its waivers: what counts is waived, what lapsed, expired or met nothing is told."""

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import replace
from datetime import date

from rcrules.comparison import circumstances
from rcrules.findings import Document, Finding, Json, settled
from rcrules.waivers._model import PINNED, Waiver


def waived(document: Document, waivers: Sequence[Waiver], today: date) -> Document:
    """The document; a finding that a waiver covers has the outcome ``waived`` and the waiver's index.

    A waiver covers a finding that fails or is undecided, of its rule and circuit, as long as values, connections,
    sources, limit, conditions and numbers read as they did when it was written, up to its last day.
    """
    findings = list(document.findings)
    rows = []
    for index, waiver in enumerate(waivers):
        found = _found(waiver, findings)
        state, told = _state(waiver, None if found is None else findings[found], document, today)
        rows.append(_row(waiver, state, told))
        if found is not None and state == "used":
            findings[found] = replace(findings[found], outcome="waived", waiver=index)
    return settled(replace(document, findings=findings, waivers=rows))


def _found(waiver: Waiver, findings: Sequence[Finding]) -> int | None:
    """The finding meant: by references and pins, else by net or part, else by a topology that only one has."""
    own = [index for index, item in enumerate(findings) if item.rule == waiver.rule and item.waiver is None]
    refs, _, topology = waiver.circuit.partition(".")
    choices = (
        [index for index in own if findings[index].fingerprint.partition(".")[0] == refs],
        [index for index in own if _names(waiver, findings[index])],
        [index for index in own if findings[index].fingerprint.partition(".")[2] == topology],
    )
    return next((choice[0] for choice in choices if len(choice) == 1), None)


def _names(waiver: Waiver, item: Finding) -> bool:
    if waiver.net is not None:
        return item.net == waiver.net
    return item.net is None and item.parts == [waiver.part]


def _state(waiver: Waiver, item: Finding | None, document: Document, today: date) -> tuple[str, list[str]]:
    """What became of it, and why in words."""
    if item is None:
        run = any(rule["id"] == waiver.rule for pack in document.packs for rule in pack["rules"])
        return "unused", ["no finding of this rule there" if run else "its rule is not applied in this run"]
    if item.outcome == "holds":
        return "unused", ["the finding holds without it"]
    if waiver.expires is not None and waiver.expires < today:
        return "expired", [f"since {waiver.expires.isoformat()}"]
    told = list(_lapsed(waiver, circumstances(item, document), renumbered=_renumbered(waiver, item)))
    return ("lapsed", told) if told else ("used", [])


def _renumbered(waiver: Waiver, item: Finding) -> bool:
    return waiver.circuit.partition(".")[0] != item.fingerprint.partition(".")[0]


def _lapsed(waiver: Waiver, now: Mapping[str, Mapping[str, str]], *, renumbered: bool) -> Iterator[str]:
    """``C7 was 10 µF …, is 4.7 µF …``; parts that only got other references are the same parts."""
    for key in PINNED:
        then, is_now = waiver.pinned[key], now[key]
        if not (key == "parts" and renumbered and sorted(then.values()) == sorted(is_now.values())):
            yield from _differences(then, is_now)


def _differences(then: Mapping[str, str], now: Mapping[str, str]) -> Iterable[str]:
    for name in sorted({*then, *now}):
        if name not in now:
            yield f"{name} is gone (was {then[name]})"
        elif name not in then:
            yield f"{name} is new ({now[name]})"
        elif then[name] != now[name]:
            yield f"{name} was {then[name]}, is {now[name]}"


def _row(waiver: Waiver, state: str, told: list[str]) -> Json:
    return {
        "rule": waiver.rule,
        "net": waiver.net,
        "part": waiver.part,
        "reason": waiver.reason,
        "who": waiver.who,
        "date": waiver.date.isoformat(),
        "expires": waiver.expires.isoformat() if waiver.expires else None,
        "state": state,
        "told": told,
        "place": {"file": waiver.place.file, "line": waiver.place.line or 1},
    }
