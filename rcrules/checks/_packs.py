"""Packs and rules as the document holds them, and rules that met nothing."""

from collections.abc import Collection, Mapping, Sequence
from pathlib import PurePath
from typing import Final

from rcrules.findings import Json
from rcrules.inventory import place_json
from rcrules.rulebook import Pack, Rule, sentence

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
    """Rules that left subjects out because a fact is missing."""
    return [
        {
            "place": place_json(rule.place),
            "text": f"rule {rule.id} left out {counts[rule.id]} {rule.measure.subject}s: whether "
            f"{rule.selection.when_text or 'its condition'} is not known there; the project file can give the voltages",
        }
        for rule in rules
        if counts.get(rule.id)
    ]


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


def _text(rule: Rule, met: int) -> str:
    found = "nothing" if not met else f"{met} of at least {rule.must_meet}"
    return f"rule {rule.id} met {found} on this board"
