"""Where the exports of one board contradict each other."""

import re
from collections import defaultdict
from collections.abc import Container, Iterator, Mapping, Sequence
from typing import Final

from rcrules.design._merge import Said, word
from rcrules.design._model import Design, Difference, Part
from rcrules.design._order import natural
from rcrules.errors import Place
from rcrules.readers import Export, Remark

_SHOWN: Final = 12
_TOLD_APART: Final = 3
"""More contradictions between values share one remark."""
_FOLDED: Final = str.maketrans({"\u00b5": "u", "\u03bc": "u", "\u2126": "r", "\u03c9": "r", "\u043a": "k", ",": "."})
"""Micro and ohm signs (lower case) and the Cyrillic letter for kilo, as Latin letters; the decimal comma as a point."""
_SPLIT: Final = re.compile(r"[\s/;()_|]+|-(?=\D|$)")
_APART: Final = re.compile(r"((?<![^\W_])[\d.,]*\d)\s+(?=[^\W\d_]{1,4}\b)")
"""A number with a blank before its unit."""
_LETTER_AS_POINT: Final = re.compile(r"^(\d+)([a-z])(\d+)$")
_NUMBER: Final = re.compile(r"^(\d*\.?\d+)([a-z]?)(?:hms?|hm|f|r|h)?$")


def differences(
    parts: Mapping[str, Part], said: Mapping[str, Sequence[Said]], exports: Sequence[Export]
) -> Iterator[Difference]:
    """Value texts that contradict each other, parts that one kind of export lacks, parts fitted by one alone."""
    apart = _unlisted(said, exports)
    for ref, part in parts.items():
        if ref in apart:
            yield Difference(ref=ref, about="listing", text=apart[ref], places=(part.place,))
        if len(said[ref]) > 1:
            yield from _value(part)
            yield from _fitting(part, said[ref])


def _value(part: Part) -> Iterator[Difference]:
    for other in part.values[1:]:
        first = part.values[0]
        if _contradict(first.text, other.text):
            text = f"{first.origin} {first.text!r} ({first.place}), {other.origin} {other.text!r} ({other.place})"
            places = (first.place, other.place)
            yield Difference(ref=part.ref, about="value", text=text, places=places, said=(first, other))
            return


def _fitting(part: Part, said: Sequence[Said]) -> Iterator[Difference]:
    """Where one kind of export says that a part is left out, and the other lists it without a word of that."""
    out = next(((kind, item) for kind, item in said if item.fitted is False), None)
    kept = next(((kind, item) for kind, item in said if out and kind != out[0] and item.fitted is not False), None)
    if out is None or kept is None:
        return
    (without, left), (listing, listed_there) = out, kept
    why = f": {left.fitted_why}" if left.fitted_why else ""
    text = f"not fitted by the {without} ({left.place}{why}), but listed by the {listing} ({listed_there.place})"
    texts = [fact for fact in part.values if listed_there.value and fact.place == listed_there.value.place]
    places = (left.place, listed_there.place)
    yield Difference(ref=part.ref, about="fitting", text=text, places=places, said=tuple(texts))


def _unlisted(said: Mapping[str, Sequence[Said]], exports: Sequence[Export]) -> dict[str, str]:
    """References that stand in the BOMs alone or in the netlists alone, where others stand in both."""
    files = {kind: next((e.source for e in exports if word(e) == kind), None) for kind in ("BOM", "netlist")}
    kinds = {ref: {kind for kind, _ in entries} for ref, entries in said.items()}
    if None in files.values() or not any(len(found) == 2 for found in kinds.values()):
        return {}
    other = {"BOM": "netlist", "netlist": "BOM"}
    alone = {ref: next(iter(found)) for ref, found in kinds.items() if len(found) == 1}
    return {ref: f"in the {kind}, not in the {other[kind]} ({files[other[kind]]})" for ref, kind in alone.items()}


def told(design: Design, without: Container[str] = ()) -> list[Remark]:
    """A remark, with both places, for each kind of difference; the same one on many parts is told once.

    without: references whose values are judged by rules.
    """
    values = [item for item in design.differences if item.about == "value" and item.ref not in without]
    return [*_values(values), *_references(design)]


def _values(values: Sequence[Difference]) -> Iterator[Remark]:
    groups: dict[tuple[str, str], list[Difference]] = defaultdict(list)
    for item in values:
        groups[item.said[0].text, item.said[1].text].append(item)
    if len(groups) > _TOLD_APART:
        yield _many([member for members in groups.values() for member in members])
        return
    for (winner, loser), members in groups.items():
        refs = listed([item.ref for item in members])
        first, other = members[0].said
        text = f"{refs}: {first.origin} {winner!r}, {other.origin} {loser!r} ({other.place}); the first is taken"
        yield Remark(place=first.place, text=text)


def _many(members: Sequence[Difference]) -> Remark:
    """One remark for many contradictions, by reference."""
    ordered = sorted(members, key=lambda member: natural(member.ref))
    texts = [f"{item.ref} {item.said[0].text!r} not {item.said[1].text!r}" for item in ordered]
    first, other = ordered[0].said
    text = f"{len(texts)} parts: the {first.origin} is taken, not the {other.origin}: {', '.join(texts)}"
    return Remark(place=first.place, text=text)


def _references(design: Design) -> Iterator[Remark]:
    files = {kind: next((e.source for e in design.exports if word(e) == kind), None) for kind in ("BOM", "netlist")}
    bom, netlist = files["BOM"], files["netlist"]
    if bom is None or netlist is None:
        return
    lone = [item for item in design.differences if item.about == "listing"]
    if not lone and _strangers(design):
        text = f"no reference stands in both this BOM and {netlist}: are they of one board?"
        yield Remark(place=Place(file=bom), text=text)
    for kind, here, there in (("BOM", bom, netlist), ("netlist", netlist, bom)):
        refs = [item.ref for item in lone if item.text.startswith(f"in the {kind}, ")]
        if refs:
            other = "netlist" if kind == "BOM" else "BOM"
            text = f"in the {kind}, not in the {other} ({there}): {listed(refs)}"
            yield Remark(place=Place(file=here), text=text)


def _strangers(design: Design) -> bool:
    """Whether BOMs and netlists have no reference in common, and each has some."""
    refs: dict[str, set[str]] = {"BOM": set(), "netlist": set()}
    for export in design.exports:
        refs[word(export)].update(part.ref for part in export.parts)
        refs[word(export)].update(pin.ref for pin in export.pins)
    return bool(refs["BOM"] or refs["netlist"]) and not refs["BOM"] & refs["netlist"]


def listed(refs: Sequence[str]) -> str:
    """References in natural order, the first dozen of a long list."""
    ordered = sorted(refs, key=natural)
    more = f" and {len(ordered) - _SHOWN} more" if len(ordered) > _SHOWN else ""
    return ", ".join(ordered[:_SHOWN]) + more


def _contradict(first: str, second: str) -> bool:
    """True unless one text says no more than the other: ``100n`` and ``0603, 100 nF 16V`` agree."""
    one, other = _words(first), _words(second)
    return not (one <= other or other <= one)


def _words(text: str) -> frozenset[str]:
    glued = _APART.sub(r"\1", text.lower().replace(", ", " ; "))
    words = (_folded(word) for word in _SPLIT.split(glued.translate(_FOLDED)))
    return frozenset(word for word in words if word)


def _folded(word: str) -> str:
    """One spelling for ``4k7`` and ``4.7k``, ``100nf`` and ``100n``, ``10r`` and ``10``."""
    letter = _LETTER_AS_POINT.match(word)
    if letter is not None:
        word = f"{letter.group(1)}.{letter.group(3)}{letter.group(2)}"
    number = _NUMBER.match(word.replace("ohms", "r").replace("ohm", "r"))
    if number is None:
        return word
    digits, prefix = number.group(1), number.group(2)
    plain = digits.rstrip("0").rstrip(".") if "." in digits else digits
    return plain + ("" if prefix in ("r", "f") else prefix)
