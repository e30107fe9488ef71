"""Packs and rules as the document holds them, and rules that met nothing."""

from collections.abc import Collection, Mapping, Sequence
from pathlib import PurePath
from typing import Final

from rcrules.checks._conditions import compared, missing
from rcrules.findings import Json
from rcrules.inventory import place_json
from rcrules.project import Project
from rcrules.rulebook import Pack, Rule, sentence, strange_settings

_FILE_SUFFIX: Final = ".toml"


def packs(rules: Sequence[Rule], met: Mapping[str, int]) -> list[Json]:
    """One object per pack, by name, with its rules in words."""
    found = {rule.pack.name: rule.pack for rule in rules}
    return [
        _pack(pack, [rule for rule in rules if rule.pack.name == name], met) for name, pack in sorted(found.items())
    ]


def _pack(pack: Pack, rules: Sequence[Rule], met: Mapping[str, int]) -> Json:
    return {
        "name": pack.name,
        "title": pack.title,
        "file": PurePath(pack.file).name,
        "needs_facts": pack.needs_facts,
        "caution": pack.caution,
        "rules": [
            {
                "id": rule.id,
                "title": rule.title,
                "level": rule.level,
                "text": sentence(rule),
                "met": met.get(rule.id, 0),
                "source": rule.source,
            }
            for rule in rules
        ],
    }


def unclear(rules: Sequence[Rule], counts: Mapping[str, int]) -> list[Json]:
    """Rules that left subjects out because a fact is missing; rules of one pack that miss the same share a remark."""
    together: dict[tuple[str, str, int, tuple[str, ...]], list[Rule]] = {}
    for rule in rules:
        if counts.get(rule.id):
            key = (rule.pack.name, rule.measure.subject, counts[rule.id], compared(rule.selection))
            together.setdefault(key, []).append(rule)
    return [
        {"place": {}, "text": _left_out(members, subject, number, facts)}
        for (_, subject, number, facts), members in together.items()
    ]


def _left_out(rules: Sequence[Rule], subject: str, number: int, facts: tuple[str, ...]) -> str:
    """``voltage-within-rating leaves out 34 capacitors: their rated voltage is not known (…)``."""
    names, verb = " and ".join(rule.id for rule in rules), "leaves out" if len(rules) == 1 else "each leave out"
    known, sources = missing(facts)
    subjects = subject if number == 1 else f"{subject}s"
    return f"{names} {verb} {number} {subjects}: {known} not known ({sources} can tell)"


def unmet(rules: Sequence[Rule], met: Mapping[str, int], own: Collection[str]) -> list[Json]:
    """Rules that met fewer subjects than they must; of the team's own files also those that met nothing.

    own: packs and files as named by the team; a name that ends in .toml is a file of theirs.
    """
    files = {PurePath(name).name for name in own if name.endswith(_FILE_SUFFIX)}
    problems = []
    for rule in rules:
        least = max(rule.must_meet, int(PurePath(rule.pack.file).name in files))
        if met.get(rule.id, 0) < least:
            problems.append({"place": place_json(rule.place), "text": _text(rule, met.get(rule.id, 0))})
    return problems


def astray(project: Project, rules: Sequence[Rule]) -> list[Json]:
    """Settings of the project file for rules that are not applied."""
    return [{"place": place_json(item.place), "text": item.text} for item in strange_settings(project, rules)]


def _text(rule: Rule, met: int) -> str:
    found = "nothing" if not met else f"{met} of at least {rule.must_meet}"
    return f"rule {rule.id} met {found} on this board"
