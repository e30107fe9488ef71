"""The netlist in star sections: ``*PART*``, ``*NET*`` with ``*SIGNAL*`` lines, ``*END*``."""

import re
from collections.abc import Mapping
from typing import Final

from rcrules.readers import _bounds
from rcrules.readers._component import Component
from rcrules.readers._export import Export, Reader, Remark, Source
from rcrules.readers._joints import joint
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._netlist import Netlist
from rcrules.readers._text import decode, head, numbered

NAME: Final = "star-list"
MAX_LINES: Final = 1_000_000
_SECTION: Final = re.compile(r"\*\s*(\w+)\s*(?:\*|(?=\s)|\Z)(.*)", re.ASCII)
CLAIM: Final = re.compile(r"^\*(?:PART|NET|SIGNAL)(?:\*|[ \t]*$)", re.IGNORECASE | re.MULTILINE)
_LAYOUT: Final = re.compile(r"\A\s*![^\r\n]*!.*\bdatabase\b", re.IGNORECASE)
_WORDS: Final = frozenset({"PART", "NET", "SIGNAL", "END"})
_PART: Final = re.compile(r"(\S+)(?:[ \t]+(.*))?")
_SIGNAL: Final = re.compile(r"\s*(\S+)")


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True where a line starts a section of parts, nets or a signal."""
    return CLAIM.search(head(source)) is not None


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read parts, nets and their pins. Raises UserMistake, also where ``*END*`` is missing."""
    del columns  # a list in sections has none
    text, assumed = decode(source)
    if _LAYOUT.match(text):
        raise refusal(
            source.name,
            "this is a layout in star sections, with coordinates and tracks",
            line=1,
            expected="a list with *PART*, *NET* and *SIGNAL*",
            do="export the netlist from the schematic editor",
        )
    sections = _Sections(source, assumed)
    for line, said in numbered(text):
        _bounds.bound(source.name, line, "lines", line, MAX_LINES)
        if said.strip() and not sections.take(line, said.strip()):
            return sections.export()
    raise refusal(
        source.name,
        "the list has no end",
        line=text.rstrip().count("\n") + 1,
        expected="a last line *END*",
        do="export it again; if it is whole, add a line *END* at its end",
    )


class _Sections:
    """Takes in line by line what the sections say."""

    def __init__(self, source: Source, assumed: tuple[Remark, ...]) -> None:
        self._source = source
        self._netlist = Netlist(source, NAME, assumed)
        self._section = ""
        self._signal: tuple[str, int] | None = None
        self._refs: dict[str, int] = {}
        self._listed: set[str] = set()

    def take(self, line: int, said: str) -> bool:
        """Take in one line; False at the end of the list."""
        if said.startswith("*"):
            return self._begin(line, said)
        if self._section == "PART":
            self._part(line, said)
        elif self._section == "SIGNAL":
            self._pins(line, said)
        elif self._section == "NET":
            raise refusal(
                self._source.name,
                "a line of nets before the first signal",
                line=line,
                found=shorten(said),
                expected="*SIGNAL* NAME, then lines of ends such as R1.2",
                do="export the list with a *SIGNAL* line for each net",
            )
        return True

    def _begin(self, line: int, said: str) -> bool:
        found = _SECTION.match(said)
        word = found[1].upper() if found else ""
        if word == "REMARK":
            return True
        self._finish()
        self._section = word if word in _WORDS else ""
        name = _SIGNAL.match(found[2]) if found and word == "SIGNAL" else None
        if word == "SIGNAL" and name is None:
            raise refusal(self._source.name, "a signal without a name", line=line, expected="*SIGNAL* NAME")
        self._signal = (name[1], line) if name else None
        return word != "END"

    def _part(self, line: int, said: str) -> None:
        found = _PART.match(said)
        ref, kind = (found[1], (found[2] or "").strip()) if found else ("", "")
        value, at, footprint = kind.rpartition("@")
        self._listed.add(ref)
        self._netlist.add_component(
            Component(ref=ref, line=line, value=value if at else kind, footprint=footprint if at else "")
        )

    def _pins(self, line: int, said: str) -> None:
        for word in said.partition(";")[0].split():
            ref, pin = joint(self._source, line, word, ".")
            self._refs.setdefault(ref, line)
            self._netlist.add_node((ref, pin, "", "", line))

    def _finish(self) -> None:
        if self._signal is not None:
            self._netlist.add_net(self._signal[0], "", self._signal[1])
            self._signal = None

    def export(self) -> Export:
        """Everything as an export; parts that only the nets name are among them."""
        for ref, line in self._refs.items():
            if ref not in self._listed:
                self._netlist.add_component(Component(ref=ref, line=line))
        return self._netlist.export()


READER = Reader(name=NAME, order=26, claims=claims, read=read)
