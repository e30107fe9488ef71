"""The netlist in bracket lists: a part between ``[`` and ``]``, a net between ``(`` and ``)``, a field on each line."""

import re
from collections.abc import Mapping
from itertools import pairwise
from typing import Final

from rcrules.readers import _bounds
from rcrules.readers._component import Component
from rcrules.readers._export import Export, Reader, Remark, Source
from rcrules.readers._joints import joint
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._netlist import Netlist
from rcrules.readers._text import decode, head, numbered

NAME: Final = "bracket-list"
MAX_LINES: Final = 1_000_000
CLAIM: Final = re.compile(r"^[\[(][ \t]*\r?\n[ \t]*[^\s\[\](){}\"'][^\r\n,]*\r?\n", re.MULTILINE)
_CLOSING: Final = {"[": "]", "(": ")", "{": "}"}
_WHAT: Final = {"[": "part", "(": "net", "{": "directive"}
_KEYWORDS: Final = {"DESIGNATOR": "ref", "FOOTPRINT": "footprint", "PARTTYPE": "value", "DESCRIPTION": "description"}
_BARE: Final = ("ref", "footprint", "type", "value")
Line = tuple[int, str]


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True where a line is an opening bracket alone and the next one holds a name."""
    return CLAIM.search(head(source)) is not None


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read parts, nets and their pins. Raises UserMistake, also where a bracket is not closed."""
    del columns  # a list in brackets has none
    text, assumed = decode(source)
    lists = _Lists(source, assumed)
    opened: Line | None = None
    held: list[Line] = []
    for line, said in numbered(text):
        _bounds.bound(source.name, line, "lines", line, MAX_LINES)
        plain = said.strip()
        if opened is None:
            opened, held = ((line, plain), []) if plain in _CLOSING else (None, held)
        elif plain == _CLOSING[opened[1]]:
            lists.take(opened, held)
            opened = None
        elif plain in _CLOSING:
            break
        else:
            held.append((line, plain))
    if opened is not None:
        raise _not_closed(source, opened)
    return lists.export()


class _Lists:
    """Takes in bracket by bracket what the lists say."""

    def __init__(self, source: Source, assumed: tuple[Remark, ...]) -> None:
        self._source = source
        self._netlist = Netlist(source, NAME, assumed)
        self._listed: set[str] = set()
        self._refs: dict[str, int] = {}

    def take(self, opened: Line, held: list[Line]) -> None:
        """Take in the lines of one bracket; layout directives are skipped."""
        line, bracket = opened
        if bracket == "{":
            return
        if not held or not held[0][1]:
            what = _WHAT[bracket]
            raise refusal(self._source.name, f"a {what} without a name", line=line, expected="a name on the next line")
        if bracket == "[":
            self._part(line, held)
        else:
            self._net(line, held)

    def _part(self, line: int, held: list[Line]) -> None:
        said = _by_keyword(held) if held[0][1].upper() in _KEYWORDS else _by_place(held)
        part = Component(
            ref=said.get("ref", ""),
            line=line,
            value=said.get("value") or said.get("type", ""),
            symbol=said.get("type", ""),
            footprint=said.get("footprint", ""),
            description=said.get("description", ""),
        )
        self._listed.add(part.ref)
        self._netlist.add_component(part)

    def _net(self, line: int, held: list[Line]) -> None:
        for at, said in held[1:]:
            if not said:
                continue
            word = said.split()[0]
            ref, pin = joint(self._source, at, word, max("-,", key=word.rfind))
            self._refs.setdefault(ref, at)
            self._netlist.add_node((ref, pin, "", "", at))
        self._netlist.add_net(held[0][1], "", line)

    def export(self) -> Export:
        """Everything as an export; parts that only the nets name are among them."""
        for ref, line in self._refs.items():
            if ref not in self._listed:
                self._netlist.add_component(Component(ref=ref, line=line))
        return self._netlist.export()


def _by_place(held: list[Line]) -> dict[str, str]:
    return dict(zip(_BARE, (said for _, said in held), strict=False))


def _by_keyword(held: list[Line]) -> dict[str, str]:
    """Each keyword's line and the next one, which holds what it says."""
    following = pairwise(held)
    return {_KEYWORDS[word.upper()]: said for (_, word), (_, said) in following if word.upper() in _KEYWORDS}


def _not_closed(source: Source, opened: Line) -> Exception:
    line, bracket = opened
    return refusal(
        source.name,
        f"a {_WHAT[bracket]} is not closed",
        line=line,
        found=shorten(bracket),
        expected=f"a line {_CLOSING[bracket]} before the next bracket",
        do="export the list again: the file may be cut off",
    )


READER = Reader(name=NAME, order=28, claims=claims, read=read)
