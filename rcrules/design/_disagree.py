"""Where the exports of one board contradict each other."""

import re
from collections import defaultdict
from collections.abc import Iterator, Mapping, Sequence
from typing import Final

from rcrules.design._merge import Said
from rcrules.design._model import Fact, Part, Pin
from rcrules.design._order import natural
from rcrules.errors import Mistake, Place, UserMistake
from rcrules.readers import Export, Remark

_SHOWN: Final = 12
_MOVED: Final = 4
"""Pins on different nets from which on two netlists may be of different boards."""
_TOLD_APART: Final = 3
"""More contradictions between values share one remark."""
_FOLDED: Final = str.maketrans({"\u00b5": "u", "\u03bc": "u", "\u2126": "r", "\u03c9": "r", "\u043a": "k", ",": "."})
"""Micro and ohm signs (lower case) and the Cyrillic letter for kilo, as Latin letters; the decimal comma as a point."""
_SPLIT: Final = re.compile(r"[\s/;()_|]+|-(?=\D|$)")
_APART: Final = re.compile(r"((?<![^\W_])[\d.,]*\d)\s+(?=[^\W\d_]{1,4}\b)")
"""A number with a blank before its unit."""
_LETTER_AS_POINT: Final = re.compile(r"^(\d+)([a-z])(\d+)$")
_NUMBER: Final = re.compile(r"^(\d*\.?\d+)([a-z]?)(?:hms?|hm|f|r|h)?$")


def disagreements(
    parts: Mapping[str, Part], said: Mapping[str, Sequence[Said]], exports: Sequence[Export]
) -> list[Remark]:
    """A remark, with both places, for each kind of contradiction; the same one on many parts is told once."""
    return [*_values(parts, said), *_references(said, exports)]


def _values(parts: Mapping[str, Part], said: Mapping[str, Sequence[Said]]) -> Iterator[Remark]:
    groups: dict[tuple[str, str], list[tuple[str, Fact, Fact]]] = defaultdict(list)
    for ref, part in parts.items():
        if len(said[ref]) < 2 or not part.values:
            continue
        first = part.values[0]
        for other in part.values[1:]:
            if _contradict(first.text, other.text):
                groups[first.text, other.text].append((ref, first, other))
                break
    if len(groups) > _TOLD_APART:
        yield _many([member for members in groups.values() for member in members])
        return
    for (winner, loser), members in groups.items():
        refs = listed([ref for ref, _, _ in members])
        _, first, other = members[0]
        text = f"{refs}: {first.origin} {winner!r}, {other.origin} {loser!r} ({other.place}); the first is taken"
        yield Remark(place=first.place, text=text)


def _many(members: Sequence[tuple[str, Fact, Fact]]) -> Remark:
    """One remark for many contradictions, by reference."""
    ordered = sorted(members, key=lambda member: natural(member[0]))
    told = [f"{ref} {first.text!r} not {other.text!r}" for ref, first, other in ordered]
    _, first, other = ordered[0]
    text = f"{len(told)} parts: the {first.origin} is taken, not the {other.origin}: {', '.join(told)}"
    return Remark(place=first.place, text=text)


def _references(said: Mapping[str, Sequence[Said]], exports: Sequence[Export]) -> Iterator[Remark]:
    boms = [export for export in exports if export.kind == "bom"]
    netlists = [export for export in exports if export.kind == "netlist"]
    if not boms or not netlists:
        return
    kinds = {ref: {kind for kind, _ in entries} for ref, entries in said.items()}
    only = {kind: [ref for ref, found in kinds.items() if found == {kind}] for kind in ("BOM", "netlist")}
    bom, netlist = Place(file=boms[0].source), Place(file=netlists[0].source)
    if kinds and len(only["BOM"]) + len(only["netlist"]) == len(kinds):
        yield Remark(place=bom, text=f"no reference stands in both this BOM and {netlist}: are they of one board?")
        return
    if only["BOM"]:
        yield Remark(place=bom, text=f"in the BOM, not in the netlist ({netlist}): {listed(only['BOM'])}")
    if only["netlist"]:
        yield Remark(place=netlist, text=f"in the netlist, not in the BOM ({bom}): {listed(only['netlist'])}")


def refuse_other_board(export: Export, known: Mapping[tuple[str, str], Pin]) -> None:
    """Raise UserMistake where most pins that an earlier netlist connects too are on other nets here."""
    common = [(pin, known[pin.ref, pin.number]) for pin in export.pins if (pin.ref, pin.number) in known]
    moved = [(pin, other) for pin, other in common if pin.net != other.net]
    if len(moved) < _MOVED or 2 * len(moved) < len(common):
        return
    pin, other = moved[0]
    raise UserMistake(
        Mistake(
            place=pin.place,
            problem=f"this netlist and {other.place.file} are not of one board",
            found=f"{len(moved)} of {len(common)} common pins on other nets: {pin.ref}.{pin.number} "
            f"on {pin.net!r} and on {other.net!r}",
            expected="netlists that connect different parts, or the same pins alike",
            do="name the netlist of one board; several boards need a --project each",
        )
    )


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
