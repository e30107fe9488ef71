"""The level that an edge of a pin's undefined band stands for, in the words of the project file."""

from collections.abc import Iterable
from fnmatch import fnmatchcase

from rcrules.checks._resolve import Case
from rcrules.levels import Level
from rcrules.problems import Problem
from rcrules.project import PinFacts, Project
from rcrules.quantities import Spread, show

_EDGES = ("low", "high", "rising", "falling")


def level_text(problem: Problem, case: Case, project: Project) -> str:
    """``30 % of +3V3`` where the rule says ``may switch``; '' where no single pin fact is in play."""
    if not any(isinstance(value, Level) and value.edge for value in case.options.values()):
        return ""
    texts = {_words(fact) for fact in _facts(problem, case.subject.feeds, project)}
    return texts.pop() if len(texts) == 1 else ""


def _facts(problem: Problem, feeds: Iterable[str], project: Project) -> list[Level | Spread]:
    """The pin facts whose columns the problem holds."""
    columns = {item.name for item in problem.parameters}
    return [
        fact
        for pin in feeds
        for edge in _EDGES
        if f"{pin} {edge}" in columns
        for facts in _tables(pin, project)
        if (fact := getattr(facts, edge)) is not None
    ]


def _tables(pin: str, project: Project) -> list[PinFacts]:
    return [facts for pattern, facts in project.pins.items() if fnmatchcase(pin, pattern)]


def _words(fact: Level | Spread) -> str:
    if isinstance(fact, Level):
        return fact.text
    low, high = show(fact.low, fact.unit), show(fact.high, fact.unit)
    return low if low == high else f"{low} .. {high}"
