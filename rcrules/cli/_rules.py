"""Packs and rules in words."""

from collections.abc import Iterable, Iterator
from itertools import groupby
from typing import Final

from rcrules.reports import Line
from rcrules.rulebook import Rule, load, sentence, shipped

_INDENT: Final = "  "


def rules_lines(names: tuple[str, ...]) -> list[Line]:
    """Every rule of the named packs and files, else of all shipped packs. Raises UserMistake with all mistakes."""
    rules = load(names or shipped())
    packs = groupby(rules, key=lambda rule: rule.pack)
    lines = [line for pack, own in packs for line in _pack(list(own), pack.title, pack.needs_facts)]
    return lines[:-1]


def _pack(rules: list[Rule], title: str, needs_facts: bool) -> Iterable[Line]:
    pack = rules[0].pack
    use = "" if needs_facts else "   (used without a project file, as warnings)"
    yield ((pack.name, "name"), f"   {title}", (use, "dim"))
    if pack.caution:
        yield (_INDENT, "caution  ", pack.caution)
    for rule in rules:
        yield from _rule(rule)
    yield ()


def _rule(rule: Rule) -> Iterator[Line]:
    """Level, id and title; what it says; where that comes from."""
    yield (_INDENT, (f"{rule.level:<8}", f"fails {rule.level}"), (rule.id, "name"), f"   {rule.title}")
    yield (_INDENT * 5, sentence(rule))
    if rule.source:
        yield (_INDENT * 5, (f"source  {rule.source}", "dim"))
