"""What is safe to know of an XML source before a parser sees it."""

import re
from typing import Final

from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal
from rcrules.readers._text import Lines, head

_PROLOG: Final = 65_536
"""Bytes within which the root element must start."""
_SKIPPED: Final = re.compile(r"(?:\s++|<\?.*?\?>|<!--.*?-->)*+", re.DOTALL)
_ROOT: Final = re.compile(r"<(?:[\w.-]+:)?([\w.-]+)")
_DOCTYPE: Final = re.compile(r"<!DOCTYPE", re.IGNORECASE)


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
        raise doctype_refusal(source, Lines(text[: at + 1]).line(at))


def doctype_refusal(source: Source, line: int | None) -> Exception:
    """The mistake of a file that declares a document type."""
    return refusal(
        source.name,
        "the XML declares a document type (DOCTYPE), which is refused for safety",
        line=line,
        expected="a netlist without DOCTYPE and entities",
        do="remove the DOCTYPE, or export the netlist again",
    )
