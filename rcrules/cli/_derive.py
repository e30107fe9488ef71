"""How the numbers at one place of a board come about."""

import argparse
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from rcrules.findings import Derived


def derive(chosen: argparse.Namespace) -> int:
    """Formula, numbers put in and result of every number at a net, part or pin."""
    from rcrules.cli._output import targets, terminal_width, text_to, wants_color
    from rcrules.cli._run import jobs_of
    from rcrules.findings import derived_text
    from rcrules.pipeline import derive as numbers_at
    from rcrules.reports import derivation_lines, laid_out

    asked = targets(chosen.report or ["text"], boards=1)
    _only_text_and_json([target.report.name for target in asked])
    (job,) = jobs_of(chosen, with_rules=True)
    document, found = numbers_at(job, chosen.at)
    shown = _chosen(found, chosen.rule)
    for target in asked:
        if target.report.name == "json":
            text_to(target.path, derived_text(shown), for_programs=True)
            continue
        on_screen = target.path is None
        lines = derivation_lines(document, shown)
        color = on_screen and wants_color(chosen.color)
        text = laid_out(lines, color=color, width=terminal_width() if on_screen else None)
        text_to(target.path, text, for_programs=False)
    return 0


def _chosen(found: "list[Derived]", rule: str | None) -> "list[Derived]":
    """Those that one rule asks for; all where none is named. Raises UserMistake where the rule asks for nothing."""
    if rule is None:
        return found
    shown = [item for item in found if item.finding is not None and item.finding.rule == rule]
    if not shown:
        rules = dict.fromkeys(item.finding.rule for item in found if item.finding is not None)
        raise _mistake("--rule", "asks for no number there", rule, ", ".join(rules) or "no rule asks for any")
    return shown


def _only_text_and_json(names: list[str]) -> None:
    wrong = next((name for name in names if name not in ("text", "json")), None)
    if wrong is not None:
        expected = "text, json; check --report html has them too"
        raise _mistake("--report", "derivations are told as text or JSON", wrong, expected)


def _mistake(place: str, problem: str, found: str, expected: str) -> Exception:
    from rcrules.errors import Mistake, Place, UserMistake

    return UserMistake(Mistake(place=Place(file=place), problem=problem, found=found, expected=expected))
