"""Measures in words."""

from collections.abc import Iterable, Iterator
from itertools import groupby
from typing import Final

from rcrules.measures import Measure, Option, registry
from rcrules.quantities import show
from rcrules.reports import Line, aligned
from rcrules.vocabulary import EVENTS

_INDENT: Final = "  "
_LEGEND: Final = (
    ("EVENT", " | ".join(f'"{name}"' for name in EVENTS if name != "sample")),
    ("LEVEL", '"1.2 V" | "30 % of +3V3" | "90 % of final" | "10 % of step" | "may switch" | "must have switched"'),
    ("QUANTITY", 'a number with its unit: "5 ms", "1 kHz", "0.1 %"'),
)


def measures_lines() -> list[Line]:
    """Every measure by subject, with its unit and options; then what the options may be."""
    listed = [(subject, item) for item in registry().values() for subject in (item.subject, *item.also)]
    ordered = sorted(listed, key=lambda pair: (pair[0], pair[1].name))
    lines: list[Line] = []
    for subject, own in groupby(ordered, key=lambda pair: pair[0]):
        lines += _subject(subject, [item for _, item in own])
    return lines + aligned([(word, "name"), meaning] for word, meaning in _LEGEND)


def _subject(subject: str, measures: Iterable[Measure]) -> Iterator[Line]:
    yield ((f"of a {subject}", "name"),)
    for measure in measures:
        unit = f" [{measure.unit}]" if measure.unit != "1" else ""
        yield (_INDENT, (measure.name, "name"), f"{unit}   {measure.summary}")
        if subject in measure.also:
            yield (_INDENT * 5, f'with subject = "{subject}" in the rule')
        rows = [[f"{name} = {_values(option)}", _default(option), option.summary] for name, option in _options(measure)]
        yield from aligned(rows, _INDENT * 5)
    yield ()


def _options(measure: Measure) -> list[tuple[str, Option]]:
    """Those that leave a choice."""
    return [(name, option) for name, option in measure.options.items() if len(option.choices) != 1]


def _values(option: Option) -> str:
    """What an option may be; what is many things is named in the legend."""
    if option.kind == "choice":
        return " | ".join(f'"{choice}"' for choice in option.choices)
    return option.kind.upper()


def _default(option: Option) -> str:
    """What it is when a rule does not say."""
    if option.default is None:
        return "(must be given)"
    unit = "%" if option.unit == "1" else option.unit
    return f"(default {option.default if isinstance(option.default, str) else show(option.default, unit)})"
