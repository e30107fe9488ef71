"""The key ``when``: comparisons of facts with quantities and words, joined by ``and`` and ``or``, turned by ``not``.

condition  = both { "or" both }          both = term { "and" term }
term       = "not" term | "(" condition ")" | operand sign operand | name of a fact ("=" | "!=") text in quotes
sign       = ">=" | "<=" | ">" | "<"     operand = name of a fact | quantity
"""

import re
from collections.abc import Iterator, Mapping
from dataclasses import replace
from fnmatch import fnmatchcase
from types import MappingProxyType
from typing import Final, Literal

from rcrules.quantities import QuantityError, parse_quantity
from rcrules.rulebook._facts import FACTS, WORDS
from rcrules.rulebook._model import Comparison, Condition, Junction, Worded
from rcrules.tomlfile import cut, guess, listed, quantity_name

_ALL: Final = (*FACTS, *WORDS)
_LONGEST: Final = 400
_DEEPEST: Final = 8
_MARK: Final = re.compile(r"\"[^\"\n]*\"|'[^'\n]*'|\band\b|\bor\b|\bnot\b|>=|<=|!=|=|>|<|\(|\)")
_TEXT: Final = re.compile(r"\"([^\"\n]*)\"|'([^'\n]*)'")
_NAME: Final = re.compile(r"[A-Za-z_][A-Za-z0-9_]*")


def parse_condition(text: str, mistakes: list[QuantityError]) -> Condition:
    """Read a condition. Adds every mistake with its offset; after one the reading goes on with the next term."""
    if len(text) > _LONGEST:
        expected = f"at most {_LONGEST} characters"
        mistakes.append(QuantityError("too long for a condition", at=_LONGEST, expected=expected))
        return _WRONG
    reader = _Reader(text, mistakes)
    found = reader.condition(0)
    if reader.mark is not None and not mistakes:
        length = len(reader.mark)
        reader.note(QuantityError(f"'{reader.mark}' not understood", at=reader.at, length=length, expected="the end"))
    return found


def holds(
    condition: Condition, facts: Mapping[str, float], words: Mapping[str, frozenset[str]] = MappingProxyType({})
) -> bool | None:
    """Whether a condition holds; None when that hangs on a fact that is not known.

    words: of each fact that is a word those that the subject has; '' among them = one that is not known.
    """
    if isinstance(condition, Comparison):
        return _compare(condition, facts)
    if isinstance(condition, Worded):
        return _is_word(condition, words.get(condition.fact, frozenset({""})))
    found = [holds(term, facts, words) for term in condition.terms]
    decisive = condition.word == "or"
    if decisive in found:
        return decisive
    return None if None in found else not decisive


def facts_of(condition: Condition) -> Iterator[str]:
    """Names of the facts that a condition compares."""
    if isinstance(condition, Comparison):
        yield from (side for side in (condition.left, condition.right) if isinstance(side, str))
    elif isinstance(condition, Worded):
        yield condition.fact
    else:
        for term in condition.terms:
            yield from facts_of(term)


def _compare(condition: Comparison, facts: Mapping[str, float]) -> bool | None:
    left = facts.get(condition.left) if isinstance(condition.left, str) else condition.left
    right = facts.get(condition.right) if isinstance(condition.right, str) else condition.right
    if left is None or right is None:
        return None
    match condition.sign:
        case ">=":
            return left >= right
        case "<=":
            return left <= right
        case ">":
            return left > right
    return left < right


def _is_word(condition: Worded, words: frozenset[str]) -> bool | None:
    """``PP film`` is a ``film``."""
    is_one = any(
        word == condition.word or word.endswith(f" {condition.word}") or fnmatchcase(word, condition.word)
        for word in words
        if word
    )
    return None if not is_one and "" in words else is_one is condition.equal


_OPPOSITES: Final[Mapping[str, Literal["<", "<=", ">", ">="]]] = {">=": "<", "<": ">=", "<=": ">", ">": "<="}


def _turned(condition: Condition) -> Condition:
    """What holds where the condition does not; a fact that is not known leaves both open."""
    if isinstance(condition, Comparison):
        return replace(condition, sign=_OPPOSITES[condition.sign])
    if isinstance(condition, Worded):
        return replace(condition, equal=not condition.equal)
    word: Literal["and", "or"] = "or" if condition.word == "and" else "and"
    return Junction(word=word, terms=tuple(map(_turned, condition.terms)))


_WRONG: Final = Worded(fact="", word="")
"""Stands for what is not understood."""


class _Reader:
    """Splits the text at its marks and reads them one by one."""

    def __init__(self, text: str, mistakes: list[QuantityError]) -> None:
        self._pieces, self._mistakes = self._split(text), mistakes
        self.at, self.mark, self._words = 0, None, ""  # type: tuple[int, str | None, str]
        self._next()

    def _split(self, text: str) -> Iterator[tuple[int, str, str | None]]:
        """Offset of a mark, the words before it, the mark (None = the end)."""
        begin = 0
        for match in _MARK.finditer(text):
            if match[0][0] in "\"'":
                continue
            yield match.start(), text[begin : match.start()], match[0]
            begin = match.end()
        yield len(text), text[begin:], None

    def _next(self) -> None:
        self.at, self._words, self.mark = next(self._pieces)

    def condition(self, depth: int) -> Condition:
        """Terms joined by ``or``."""
        return self._joined("or", depth)

    def _joined(self, word: Literal["and", "or"], depth: int) -> Condition:
        terms = [self._inner(word, depth)]
        while self.mark == word:
            self._next()
            terms.append(self._inner(word, depth))
        return terms[0] if len(terms) == 1 else Junction(word=word, terms=tuple(terms))

    def _inner(self, word: str, depth: int) -> Condition:
        return self._joined("and", depth) if word == "or" else self._term(depth)

    def note(self, error: QuantityError) -> None:
        """A mistake, once at a place."""
        if all(other.at != error.at for other in self._mistakes):
            self._mistakes.append(error)

    def _term(self, depth: int) -> Condition:
        try:
            if self.mark in ("not", "(") and not self._words.strip():
                return self._inside(self.mark, depth)
            return self._comparison()
        except QuantityError as error:
            self.note(error)
        while self.mark not in ("and", "or", ")", None):
            self._next()
        return _WRONG

    def _inside(self, mark: str, depth: int) -> Condition:
        """After ``not`` or an opening bracket."""
        if depth >= _DEEPEST:
            what = "'not'" if mark == "not" else "brackets"
            raise QuantityError(f"too many {what}", at=self.at, expected=f"at most {_DEEPEST}")
        self._next()
        if mark == "not":
            return _turned(self._term(depth + 1))
        found = self.condition(depth + 1)
        if self.mark != ")":
            raise QuantityError("a bracket that does not close", at=self.at, expected="')'")
        self._next()
        if self._words.strip():
            start = self.at - len(self._words)
            raise QuantityError(f"'{cut(self._words.strip())}' not understood", at=start, expected="'and' or 'or'")
        return found

    def _comparison(self) -> Comparison | Worded:
        sign, start = self.mark, self.at - len(self._words.lstrip())
        name = self._words.strip()
        if name in WORDS or sign in ("=", "!="):
            return self._word(name)
        left, left_unit = self._operand()
        if sign not in (">=", "<=", ">", "<"):
            raise QuantityError("no comparison", at=self.at, expected="'>=', '<=', '>' or '<'")
        self._next()
        right, right_unit = self._operand()
        end = self.at - len(self._words) + len(self._words.rstrip())
        if isinstance(left, float) and isinstance(right, float):
            raise QuantityError("no fact to compare", at=start, length=end - start, expected=listed(FACTS))
        if left_unit != right_unit:
            problem = f"{quantity_name(left_unit)} is compared with {quantity_name(right_unit)}"
            raise QuantityError(problem, at=start, length=end - start)
        return Comparison(left=left, right=right, sign=sign)  # type: ignore[arg-type]  # tested above

    def _word(self, name: str) -> Worded:
        """A fact that is a word, its sign, and a text in quotes."""
        start, sign = self.at - len(self._words.lstrip()), self.mark
        if name not in WORDS:
            unknown = f"no fact is called '{cut(name)}'{guess(name, WORDS)}"
            told = f"'{cut(name)}' is a number" if name in FACTS else unknown
            expected = "'>=', '<=', '>' or '<'" if name in FACTS else listed(WORDS)
            raise QuantityError(told, at=start, length=max(len(name), 1), expected=expected)
        if sign not in ("=", "!="):
            problem, expected = f"'{name}' is a word", f"{name} = '…' or {name} != '…'"
            raise QuantityError(problem, at=start, length=len(name), expected=expected)
        self._next()
        words = self._words.strip()
        begin = self.at - len(self._words.lstrip())
        text, choices = _TEXT.fullmatch(words), WORDS[name]
        if text is None:
            problem = f"'{cut(words)}' is no text in quotes" if words else "a text is missing"
            raise QuantityError(problem, at=begin, length=max(len(words), 1), expected=f"{name} {sign} '…'")
        word = text[1] or text[2] or ""
        if not word or (choices and word not in choices):
            problem = f"'{cut(word)}' is not known as '{name}'{guess(word, choices)}"
            raise QuantityError(problem, at=begin + 1, length=max(len(word), 1), expected=listed(choices) or "a word")
        return Worded(fact=name, word=word, equal=sign == "=")

    def _operand(self) -> tuple[str | float, str]:
        """A fact or number, with its unit."""
        words = self._words.strip()
        start = self.at - len(self._words.lstrip())
        if words in FACTS:
            return words, FACTS[words]
        if not words or _NAME.fullmatch(words):
            problem = f"no fact is called '{cut(words)}'{guess(words, _ALL)}" if words else "a fact is missing"
            raise QuantityError(problem, at=start, length=max(len(words), 1), expected=listed(_ALL))
        try:
            spread = parse_quantity(words)
        except QuantityError as error:
            raise error.moved(start) from None
        if spread.low != spread.high:
            raise QuantityError("a range cannot be compared", at=start, length=len(words), expected="one quantity")
        return spread.nominal, spread.unit
