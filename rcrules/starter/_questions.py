"""What to ask the team first: the facts that decide most findings."""

import re
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from rcrules.findings import Finding

MOST_QUESTIONS: Final = 10
_LINE: Final = re.compile(r"(?P<header>\[.+?\]) (?P<key>[\w-]+) = (?P<value>.*)")
_TABLE: Final = re.compile(r"\[(\w+)")
_ABOUT: Final = {
    ("supply", "voltage"): "the voltage of supplies",
    ("supply", "valid"): "from which voltage a supply counts as up",
    ("supply", "rise"): "how fast a supply rises",
    ("supply", "fall"): "how fast a supply falls",
    ("net", "swing"): "between which voltages a net is driven",
    ("net", "source-resistance"): "the resistance of what drives a net",
    ("pin", "low"): "the low level of an input (V_IL of the data sheet)",
    ("pin", "high"): "the high level of an input (V_IH of the data sheet)",
    ("pin", "leakage"): "the leakage of a pin",
    ("part", "voltage-across"): "what lies across a capacitor whose surroundings cannot be solved",
    ("part", "rated-voltage"): "the rated voltage of parts",
    ("part", "dielectric"): "the dielectric of capacitors",
    ("part", "tolerance"): "the tolerance of parts",
    ("part", "bias-curve"): "what is left of a capacitor under DC voltage",
    ("conditions", "temperature"): "the temperatures at which the board works",
    ("conditions", "life"): "how long the board is to work",
}


@dataclass(frozen=True, slots=True, kw_only=True)
class Question:
    """One fact to ask for, of one thing or of several."""

    about: str
    """In words."""
    lines: tuple[tuple[str, str, int], ...]
    """Table header, line with a gap to fill, findings that it decides; most useful first."""
    decides: int
    """Findings, all lines together."""


def questions(findings: Sequence[Finding]) -> list[Question]:
    """At most ten, the one that decides most first; of settings each is a question of its own."""
    counts = Counter(item.ask[0] for item in findings if item.outcome == "undecided" and item.ask)
    found: dict[tuple[str, ...], list[tuple[str, str, int]]] = {}
    for ask, number in sorted(counts.items(), key=lambda item: (-item[1], item[0])):
        if (line := _LINE.fullmatch(ask)) is not None:
            found.setdefault(_fact(line), []).append((line["header"], ask.removeprefix(f"{line['header']} "), number))
    asked = [
        Question(about=_about(fact), lines=tuple(lines), decides=sum(number for *_, number in lines))
        for fact, lines in found.items()
    ]
    return sorted(asked, key=lambda item: (-item.decides, item.about))[:MOST_QUESTIONS]


def _fact(line: re.Match[str]) -> tuple[str, ...]:
    table = _TABLE.match(line["header"])
    name = table[1] if table else ""
    return (name, line["key"], line["header"]) if name == "settings" else (name, line["key"])


def _about(fact: tuple[str, ...]) -> str:
    if len(fact) == 3:
        return f"{fact[1].replace('_', ' ')} of the rule {fact[2].partition('.')[2].strip(chr(34) + ']')}"
    return _ABOUT.get((fact[0], fact[1]), f"{fact[1].replace('-', ' ')} of a {fact[0]}")
