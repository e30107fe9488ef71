"""Holds the numbers of the project file against the rules that look them up."""

from collections.abc import Iterable, Iterator
from dataclasses import replace

from rcrules.errors import Mistake
from rcrules.project import Notice, Project
from rcrules.quantities import Spread
from rcrules.rulebook._model import Rule
from rcrules.rulebook._numbers import WORD
from rcrules.tomlfile import cut, guess, listed, quantity_name


def check_settings(project: Project, rules: Iterable[Rule]) -> list[Mistake]:
    """Settings that a rule does not know, and numbers of the wrong dimension under names that a rule looks up."""
    known = list(rules)
    return [*_of_rules(project, known), *_of_tables(project, known)]


def strange_settings(project: Project, rules: Iterable[Rule]) -> list[Notice]:
    """Settings of rules that are not applied, such as a mistyped id; each with the nearest rule."""
    known = [rule.id for rule in rules]
    return [
        Notice(place=places[""].place, text=f'[settings."{cut(rule)}"] is of no rule applied here{guess(rule, known)}')
        for rule, places in project.setting_places.items()
        if rule not in known
    ]


def _of_rules(project: Project, rules: list[Rule]) -> Iterator[Mistake]:
    for rule in rules:
        for name in project.settings.get(rule.id, {}):
            at, units = project.setting_places[rule.id][name], rule.given_units
            key = name.replace("-", "_")
            if key not in units:
                problem = f"rule '{rule.id}' has no setting '{name}'{guess(name, units)}"
                yield replace(at, problem=problem, expected=listed(sorted(units)) or "none")
            else:
                wrong = _wrong(name, units[key], project.setting_spreads[rule.id].get(name))
                if wrong is not None:
                    yield replace(at, problem=wrong, expected=_expected(units[key]))


def _of_tables(project: Project, rules: list[Rule]) -> Iterator[Mistake]:
    """``[pin]``, ``[net]`` and ``[part]``: their free numbers."""
    units = {name: unit for rule in rules for name, unit in rule.given_units.items()}
    for table, facts in (("net", project.nets), ("pin", project.pins), ("part", project.parts)):
        for pattern, item in facts.items():
            for name in item.set:
                unit = units.get(name.replace("-", "_"))
                problem = None if unit is None else _wrong(name, unit, item.spreads.get(name))
                if problem is not None and unit is not None:
                    told = f'[{table}."{pattern}"] {problem}'
                    yield Mistake(place=item.place, problem=told, expected=_expected(unit))


def _wrong(name: str, unit: str, spread: Spread | None) -> str | None:
    """What is wrong with the kind of a number or word."""
    if unit == WORD:
        return f"'{name}' must be a word" if spread is not None else None
    if spread is None:
        return f"'{name}' is {quantity_name(unit)}, found a word"
    return None if spread.unit == unit else f"'{name}' is {quantity_name(unit)}, found {quantity_name(spread.unit)}"


def _expected(unit: str) -> str:
    return "a word" if unit == WORD else f"{quantity_name(unit)} in quotes"
