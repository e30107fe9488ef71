"""The cards of a SPICE deck: lines joined, comments left out, included files put in their places."""

import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import Final

from rcrules.errors import Place
from rcrules.readers import _bounds
from rcrules.readers._export import Source
from rcrules.readers._included import included
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._remarks import Remarks
from rcrules.readers._text import decode, numbered

MAX_LINES: Final = 300_000
MAX_CARD: Final = 200_000
"""Characters of a card with its continuations."""
MAX_INCLUDES: Final = 200
MAX_DEPTH: Final = 16
"""Of files that include files."""
_WORD: Final = re.compile(r"\{([^{}]*)\}|'([^']*)'|\"([^\"]*)\"|(=)|([^\s,=(){}'\"]+)|([{}'\"])")
_EQUALS: Final = 3
_UNPAIRED: Final = 5
"""Groups of ``_WORD``, from 0."""
_COMMENT: Final = re.compile(r";|(?:(?<=[\s,])|^)\$")
_INCLUDES: Final = frozenset({".include", ".inc", ".lib"})
_ELEMENT: Final = re.compile(r"\s*[RCLVD]\w*\s+\S+\s+\S+\s+[\d.]", re.IGNORECASE)


@dataclass(frozen=True, slots=True, kw_only=True)
class Card:
    """One statement of a deck."""

    place: Place
    words: tuple[str, ...]
    """The bare ones in order; names of parameters are not among them."""
    named: tuple[tuple[str, str], ...] = ()
    """``name=value`` in order, names in lower case; a sum without its braces."""

    @property
    def head(self) -> str:
        """The first word in lower case."""
        return self.words[0].lower()


@dataclass(slots=True, kw_only=True)
class _Reading:
    source: Source
    remarks: Remarks
    open: list[str] = field(default_factory=list)
    """Files that are being read, the deck first."""
    files: int = 0
    size: int = 0
    lines: int = 0


def cards(source: Source, remarks: Remarks) -> Iterator[Card]:
    """Every card of the deck and of the files that it includes, in order, to ``.end``.

    Raises UserMistake: an include that is cyclic or leaves the folder, a card that is not understood. Remarks: files
    that are not there, and what simulators do not agree on.
    """
    reading = _Reading(source=source, remarks=remarks, open=[source.name])
    yield from _cards(reading, source, "")


def _cards(reading: _Reading, source: Source, section: str) -> Iterator[Card]:
    text, assumed = decode(source)
    for remark in assumed:
        reading.remarks.add(remark.place, remark.text)
    deck = len(reading.open) == 1
    within = not section
    for line, said in _joined(reading, source, text, title=deck):
        card = _card(source, line, said)
        if not card.words:
            continue
        if card.head == ".lib" and len(card.words) == 2 and not deck:
            within = within or card.words[1].lower() == section
            continue
        if card.head == ".endl":
            within = not section
        elif card.head == ".end" and deck:
            return
        elif card.head in _INCLUDES and within:
            yield from _included(reading, source, card)
        elif within and card.head != ".end":
            yield card
    if deck:
        last = Place(file=source.name, line=text.rstrip().count("\n") + 1)
        reading.remarks.add(last, "the deck has no .end; check that it was not cut")


def _joined(reading: _Reading, source: Source, text: str, *, title: bool) -> Iterator[tuple[int, str]]:
    """Statements with the number of their first line; what the title, comments and control blocks say is left out."""
    start, held, control = 0, "", False
    for line, said in numbered(text):
        reading.lines += 1
        _bounds.bound(source.name, line, "lines", reading.lines, MAX_LINES)
        plain = said.strip()
        if title and line == 1:
            _remark_title(reading, source, plain)
            continue
        if control or plain[:8].lower() == ".control":
            control = plain[:5].lower() != ".endc"
            continue
        comment = _COMMENT.search(plain)
        plain = plain[: comment.start()].rstrip() if comment else plain
        if not plain or plain.startswith("*"):
            continue
        if plain.startswith("+") and held:
            held = f"{held} {plain[1:]}"
            _bounds.named(source.name, line, "a card", held, MAX_CARD)
            continue
        if held:
            yield start, held
        start, held = line, plain
    if held:
        yield start, held


def _remark_title(reading: _Reading, source: Source, first: str) -> None:
    if _ELEMENT.match(first):
        text = f"the first line of a deck is its title: {shorten(first)!r} is no part"
        reading.remarks.add(Place(file=source.name, line=1), text)


def _card(source: Source, line: int, said: str) -> Card:
    _bounds.named(source.name, line, "a card", said, MAX_CARD)
    found = [
        next((kind, text) for kind, text in enumerate(match.groups()) if text is not None)
        for match in _WORD.finditer(said)
    ]
    words: list[str] = []
    named: list[tuple[str, str]] = []
    at = 0
    while at < len(found):
        kind, text = found[at]
        if kind in (_EQUALS, _UNPAIRED):
            problem = "'=' without a name before it" if kind == _EQUALS else f"{text} without its counterpart"
            raise refusal(source.name, problem, line=line, found=shorten(said), expected=None, do="correct the line")
        if found[at + 1 : at + 2] != [(_EQUALS, "=")]:
            words.append(text.strip())
            at += 1
            continue
        after = found[at + 2 : at + 3]
        if not after or after[0][0] in (_EQUALS, _UNPAIRED):
            problem = f"no value after {shorten(text)!r} ="
            raise refusal(source.name, problem, line=line, found=shorten(said), expected=None, do="correct the line")
        named.append((text.lower(), after[0][1].strip()))
        at += 3
    return Card(place=Place(file=source.name, line=line), words=tuple(words), named=tuple(named))


def _included(reading: _Reading, source: Source, card: Card) -> Iterator[Card]:
    """The cards of a file, or of one section of it."""
    line = card.place.line or 1
    section = card.words[2].lower() if card.head == ".lib" and len(card.words) > 2 else ""
    inner = included(source, line, card.words[1] if len(card.words) > 1 else "")
    if isinstance(inner, str):
        reading.remarks.add(card.place, inner)
        return
    opened = f"{inner.name} {section}".strip()
    if opened in reading.open:
        chain = " -> ".join((*reading.open[reading.open.index(opened) :], opened))
        raise refusal(source.name, "files that include each other", line=line, found=shorten(chain, 200), expected=None)
    reading.files += 1
    reading.size += len(inner.data)
    _bounds.bound(source.name, line, "included files", reading.files, MAX_INCLUDES)
    _bounds.bound(source.name, line, "MiB in included files", reading.size >> 20, source.limits.file_size)
    _bounds.bound(source.name, line, "files that include each other", len(reading.open), MAX_DEPTH)
    reading.open.append(opened)
    yield from _cards(reading, inner, section)
    reading.open.pop()
