"""Rules held against their own examples, in words."""

from collections.abc import Iterator
from typing import Final

from rcrules.errors import Problems
from rcrules.examples import Tried, tried
from rcrules.findings import Finding
from rcrules.reports import Line
from rcrules.rulebook import Rule, load, shipped

_INDENT: Final = "  "


def tried_lines(names: tuple[str, ...]) -> tuple[list[Line], bool]:
    """Every rule of the named packs and files, else of all shipped ones, and whether an example came out wrong.

    Raises UserMistake with the mistakes of all files and circuits.
    """
    found: list[tuple[Rule, list[Tried]]] = []
    problems = Problems()
    for rule in load(names or shipped()):
        with problems.collecting():
            found.append((rule, tried(rule)))
    problems.stop_if_any()
    lines = [line for rule, examples in found for line in _rule(rule, examples)]
    wrong = sum(not item.right for _, examples in found for item in examples)
    return [*lines, (), _summary(found, wrong)], wrong > 0


def _rule(rule: Rule, examples: list[Tried]) -> Iterator[Line]:
    right = all(item.right for item in examples)
    word = ("no example", "dim") if not examples else ("right     ", "good") if right else ("wrong     ", "fails error")
    yield (word, _INDENT, (rule.id, "name"), f"   {_outcomes(examples)}" if right and examples else "")
    for item in examples:
        if not item.right:
            yield from _wrong(item)


def _outcomes(examples: list[Tried]) -> str:
    """``2 examples: holds, fails``."""
    words = ", ".join(dict.fromkeys(item.example.outcome for item in examples))
    return f"{len(examples)} example{'' if len(examples) == 1 else 's'}: {words}"


def _wrong(item: Tried) -> Iterator[Line]:
    expected = f"{item.example.place}   expected {item.example.outcome}"
    if not item.findings:
        yield (_INDENT * 5, expected, ", and the rule meets nothing in this circuit")
        return
    for finding in item.findings:
        if finding.outcome != item.example.outcome:
            yield (_INDENT * 5, expected, f", found {finding.outcome}: {_told(finding)}")


def _told(finding: Finding) -> str:
    """Where, and the reason or the numbers."""
    from rcrules.cli._on import numbers

    return f"{finding.net or ', '.join(finding.parts)}   {finding.reason or numbers(finding)}"


def _summary(found: list[tuple[Rule, list[Tried]]], wrong: int) -> Line:
    count = sum(len(examples) for _, examples in found)
    bare = sum(not examples for _, examples in found)
    return (f"rules {len(found)}, examples {count}, wrong {wrong}, rules without an example {bare}",)
