"""Packs and rules in words."""

from collections.abc import Iterable
from itertools import groupby

from rcrules.reports import safe
from rcrules.rulebook import Rule, load, sentence, shipped

_INDENT = "  "


def rules_text(names: tuple[str, ...]) -> str:
    """Every rule of the named packs and files, else of all shipped packs. Raises UserMistake with all mistakes."""
    rules = load(names or shipped())
    packs = groupby(rules, key=lambda rule: rule.pack)
    return "\n".join(line for pack, own in packs for line in _pack(list(own), pack.title, pack.needs_facts)) + "\n"


def _pack(rules: list[Rule], title: str, needs_facts: bool) -> Iterable[str]:
    pack = rules[0].pack
    yield safe(f"{pack.name}   {title}" + ("" if needs_facts else "   (used without a project file, as warnings)"))
    if pack.caution:
        yield safe(f"{_INDENT}caution  {pack.caution}")
    for rule in rules:
        yield safe(f"{_INDENT}{rule.level:<8}{rule.id}   {rule.title}")
        yield safe(f"{_INDENT * 5}{sentence(rule)}")
        if rule.source:
            yield safe(f"{_INDENT * 5}source: {rule.source}")
    yield ""
