"""Verdicts on facts that are words: each must be one of some."""

from rcrules.checks._agreement import AGREED, agreement
from rcrules.checks._resolve import Case
from rcrules.checks._verdict import Verdict
from rcrules.networks import Board, Node
from rcrules.parts import RatedPart
from rcrules.vocabulary import AGREEMENT


def worded(case: Case, board: Board) -> Verdict:
    """Holds where every word of the subject is one of those asked for; undecided where one is not known."""
    rule, subject = case.rule, case.subject
    found = _words(rule.fact, subject.target, [board.parts[ref] for ref in subject.refs if ref in board.parts])
    unknown = [ref for ref, word in found if not word]
    if rule.fact.startswith(AGREEMENT):
        apart = [text for _, text in found if text != AGREED]
        return Verdict(outcome="fails" if apart else "holds", solution=None, reason="; ".join(apart) or None)
    wrong = [f"{ref} is {word}" for ref, word in found if word and not _is_one(word, rule.one_of)]
    if wrong:
        return Verdict(outcome="fails", solution=None, reason=f"{', '.join(wrong)}; must be {' or '.join(rule.one_of)}")
    if unknown or not found:
        named = ", ".join(unknown) or "this"
        asks = tuple(f'[part."{ref}"] {rule.fact} = "…"' for ref in unknown if rule.fact == "dielectric")
        return Verdict(outcome="undecided", solution=None, reason=f"{rule.fact} of {named} is not known", ask=asks)
    return Verdict(outcome="holds", solution=None)


def _words(fact: str, target: object, parts: list[RatedPart]) -> list[tuple[str, str]]:
    """Reference or net, and its word; '' = not known."""
    if fact in ("role", "certainty"):
        return [(target.net, getattr(target, fact))] if isinstance(target, Node) else []
    if fact.startswith(AGREEMENT):
        return [(part.ref, agreement(fact, part)) for part in parts]
    return [(part.ref, str(getattr(part, fact) or "")) for part in parts]


def _is_one(word: str, wanted: tuple[str, ...]) -> bool:
    """``PP film`` is a ``film``."""
    return any(word == item or word.endswith(f" {item}") for item in wanted)
