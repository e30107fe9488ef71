"""The netlist in dollar sections: ``$PACKAGES``, ``$A_PROPERTIES``, ``$NETS``, ``$END``."""

import re
from collections.abc import Iterator, Mapping
from typing import Final

from rcrules.readers import _bounds
from rcrules.readers._component import Component
from rcrules.readers._export import Export, Reader, Remark, Source
from rcrules.readers._joints import joint
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._netlist import Netlist
from rcrules.readers._text import decode, head, numbered

NAME: Final = "dollar-list"
MAX_LINES: Final = 1_000_000
CLAIM: Final = re.compile(r"\A\s*\(NETLIST\)|^\$PACKAGES\b", re.IGNORECASE | re.MULTILINE)
_WORD: Final = re.compile(r"'([^']*)'|([^\s,']+)")
_BEFORE: Final = re.compile(r"([^;']*+(?:'[^']*+'[^;']*+)*+);")
_FIELDS: Final = ("footprint", "device", "value", "tolerance")


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for a text that starts with ``(NETLIST)`` or has a section of packages."""
    return CLAIM.search(head(source)) is not None


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read parts, properties, nets and their pins. Raises UserMistake, also where ``$END`` is missing."""
    del columns  # a list in sections has none
    text, assumed = decode(source)
    sections = _Sections(source, assumed)
    for line, said in _joined(source, text):
        if said[:5].upper().split()[0] == "$END":
            return sections.export()
        sections.take(line, said)
    raise refusal(
        source.name,
        "the list has no end",
        line=text.rstrip().count("\n") + 1,
        expected="a last line $END",
        do="export it again; if it is whole, add a line $END at its end",
    )


def _joined(source: Source, text: str) -> Iterator[tuple[int, str]]:
    """Lines with those that continue them, by the number of the first; comments in parentheses are left out."""
    start, held = 0, list[str]()
    for line, said in numbered(text):
        _bounds.bound(source.name, line, "lines", line, MAX_LINES)
        plain = said.strip()
        if not plain or (not held and plain.startswith("(")):
            continue
        if plain.startswith("$") and held:
            yield start, " ".join(held)
            held = []
        start = start if held else line
        held.append(plain)
        if not plain.endswith(","):
            yield start, " ".join(held)
            held = []
    if held:
        yield start, " ".join(held)


class _Sections:
    """Takes in line by line what the sections say."""

    def __init__(self, source: Source, assumed: tuple[Remark, ...]) -> None:
        self._source = source
        self._netlist = Netlist(source, NAME, assumed)
        self._section = self._about = ""
        self._parts: dict[str, Component] = {}

    def take(self, line: int, said: str) -> None:
        """Take in one line, or one with its continuations."""
        if said.startswith("$"):
            self._section = "".join(said[1:].split(None, 1)[:1]).upper()
            self._about = self._section if self._section in {"PACKAGES", "NETS"} else self._about
            return
        before, mark, after = _at_semicolon(said)
        if self._section in {"PACKAGES", "NETS", "A_PROPERTIES"} and not mark:
            raise refusal(self._source.name, "a line without ';'", line=line, found=shorten(said), expected="… ; …")
        if self._section == "PACKAGES":
            self._packages(line, before, _words(after))
        elif self._section == "NETS":
            self._net(line, before, _words(after))
        elif self._section == "A_PROPERTIES" and self._about == "PACKAGES":
            self._property(line, before, _words(after))

    def _packages(self, line: int, before: str, refs: list[str]) -> None:
        said = dict(zip(_FIELDS, (" ".join(_words(text)) for text in before.split("!")), strict=False))
        value, tolerance = said.get("value", ""), said.get("tolerance", "")
        for ref in refs:
            part = Component(
                ref=ref,
                line=line,
                value=value or said.get("device", ""),
                footprint=said.get("footprint", ""),
                symbol=said.get("device", ""),
                fields=[("Tolerance", tolerance, line)] if tolerance else [],
            )
            self._parts.setdefault(ref, part)
            self._netlist.add_component(part)

    def _property(self, line: int, before: str, refs: list[str]) -> None:
        name, *rest = _words(before) or [""]
        for ref in refs:
            if name and ref in self._parts:
                self._parts[ref].fields.append((name, " ".join(rest), line))

    def _net(self, line: int, before: str, ends: list[str]) -> None:
        for word in ends:
            ref, pin = joint(self._source, line, word, ".")
            if ref not in self._parts:
                self._parts[ref] = Component(ref=ref, line=line)
                self._netlist.add_component(self._parts[ref])
            self._netlist.add_node((ref, pin, "", "", line))
        self._netlist.add_net(" ".join(_words(before)), "", line)

    def export(self) -> Export:
        """Everything as an export."""
        return self._netlist.export()


def _at_semicolon(said: str) -> tuple[str, str, str]:
    """The line split at its first semicolon that is not within quotes."""
    found = _BEFORE.match(said)
    return (found[1], ";", said[found.end() :]) if found else (said, "", "")


def _words(text: str) -> list[str]:
    """Words between blanks and commas; what stands in quotes is one."""
    return [found[1] if found[1] is not None else found[2] for found in _WORD.finditer(text)]


READER = Reader(name=NAME, order=27, claims=claims, read=read)
