"""What is safe to know of an XML source before a parser sees it."""

import re
from typing import IO, Final

from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal
from rcrules.readers._text import head, spot

MAX_MARKS: Final = 1_500_000
_PROLOG: Final = 65_536
"""Bytes within which the root element must start."""
_SKIPPED: Final = re.compile(r"(?:\s++|<\?.*?\?>|<!--.*?-->)*+", re.DOTALL)
_ROOT: Final = re.compile(r"<(?:[\w.-]+:)?([\w.-]+)")
_DOCTYPE: Final = re.compile(r"<!DOCTYPE", re.IGNORECASE)


class BoundedStream:
    """XML that is refused where too much stands between two elements of interest: a parser keeps all of that."""

    def __init__(self, source: Source, stream: IO[bytes], line: int = 1) -> None:
        self._source, self._stream, self._line = source, stream, line
        self.marks = 0
        """Elements and attributes read since the last element of interest; whoever has let that go sets it to 0."""

    def read(self, size: int = -1) -> bytes:
        """The next bytes. Raises UserMistake."""
        data = self._stream.read(size)
        self._line += data.count(b"\n")
        self.marks += data.count(b"<") + data.count(b"=")
        if self.marks > MAX_MARKS:
            raise refusal(
                self._source.name,
                "too much inside one component, net or row, or outside of any",
                line=self._line,
                found=f"more than {MAX_MARKS} elements and attributes",
                expected="the export of one board",
                do="check that this is the file you mean; export it again",
            )
        return data


def root_name(source: Source) -> str | None:
    """Local name of the root element, ``!DOCTYPE`` where one stands before it, None for no XML."""
    text = head(source, _PROLOG)
    if not text.lstrip().startswith("<"):
        return None
    start = _SKIPPED.match(text)
    at = start.end() if start else 0
    if _DOCTYPE.match(text, at):
        after = re.search(r"<!DOCTYPE\s+(?:[\w.-]+:)?([\w.-]+)", text[at:], re.IGNORECASE)
        return after.group(1) if after else "!DOCTYPE"
    found = _ROOT.match(text, at)
    return found.group(1) if found else None


def refuse_doctype(source: Source) -> None:
    """Raise UserMistake where a document type stands before the root: none of our formats needs one."""
    text = head(source, _PROLOG)
    start = _SKIPPED.match(text)
    at = start.end() if start else 0
    if _DOCTYPE.match(text, at):
        raise doctype_refusal(source, spot(text, at)[0])


def doctype_refusal(source: Source, line: int | None) -> Exception:
    """The mistake of a file that declares a document type."""
    return refusal(
        source.name,
        "the XML declares a document type (DOCTYPE), which is refused for safety",
        line=line,
        expected="a netlist without DOCTYPE and entities",
        do="remove the DOCTYPE, or export the netlist again",
    )
