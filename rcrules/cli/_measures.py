"""Measures in words."""

from collections.abc import Iterable
from itertools import groupby

from rcrules.measures import Measure, Option, registry
from rcrules.quantities import show

_INDENT = "  "


def measures_text() -> str:
    """Every measure by subject, with its unit and options."""
    ordered = sorted(registry().values(), key=lambda measure: (measure.subject, measure.name))
    lines = [
        line for subject, own in groupby(ordered, key=lambda item: item.subject) for line in _subject(subject, own)
    ]
    return "\n".join(lines) + "\n"


def _subject(subject: str, measures: Iterable[Measure]) -> Iterable[str]:
    yield f"of a {subject}"
    for measure in measures:
        unit = f" [{measure.unit}]" if measure.unit != "1" else ""
        yield f"{_INDENT}{measure.name}{unit}   {measure.summary}"
        for name, option in measure.options.items():
            yield f"{_INDENT * 5}{name} = {_option(option)}" + (f"   {option.summary}" if option.summary else "")
    yield ""


def _option(option: Option) -> str:
    """What an option may be, and what it is when a rule does not say."""
    kind = " | ".join(f'"{choice}"' for choice in option.choices) or option.kind
    if option.default is None:
        return f"{kind} (must be given)"
    default = option.default if isinstance(option.default, str) else show(option.default, option.unit)
    return f"{kind} (default {default})"
