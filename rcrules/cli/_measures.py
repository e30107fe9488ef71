"""Measures in words."""

from collections.abc import Iterable
from itertools import groupby

from rcrules.measures import Measure, Option, registry
from rcrules.quantities import show

_INDENT = "  "


def measures_text() -> str:
    """Every measure by subject, with its unit and options."""
    listed = [(subject, item) for item in registry().values() for subject in (item.subject, *item.also)]
    ordered = sorted(listed, key=lambda pair: (pair[0], pair[1].name))
    lines = [
        line
        for subject, own in groupby(ordered, key=lambda pair: pair[0])
        for line in _subject(subject, [item for _, item in own])
    ]
    return "\n".join(lines) + "\n"


def _subject(subject: str, measures: Iterable[Measure]) -> Iterable[str]:
    yield f"of a {subject}"
    for measure in measures:
        unit = f" [{measure.unit}]" if measure.unit != "1" else ""
        yield f"{_INDENT}{measure.name}{unit}   {measure.summary}"
        if subject in measure.also:
            yield f'{_INDENT * 5}with subject = "{subject}" in the rule'
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
