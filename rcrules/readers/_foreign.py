"""Names what a source is when it is none of ours, and says what to export instead."""

import re
from typing import Final

from rcrules.errors import UserMistake
from rcrules.readers import bracket_list, dollar_list, parenthesised_list, star_list
from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._text import head
from rcrules.readers._workbooks import is_workbook
from rcrules.readers._xml import root_name

FOREIGN: Final = "the content is of no kind that can be read"
_INSTEAD: Final = "export the netlist from the schematic editor as XML, or the BOM as CSV"
_AS_CSV: Final = "save the sheet that holds the BOM as CSV, UTF-8"
_SIGNATURES: Final = (
    (b"PK\x03\x04", "a ZIP archive or a workbook", _AS_CSV),
    (b"PK\x05\x06", "an empty ZIP archive", _INSTEAD),
    (b"\xd0\xcf\x11\xe0", "an old workbook (OLE2), or a workbook with a password", _AS_CSV),
    (b"\x1f\x8b", "a gzip archive", "unpack it first"),
    (b"BZh", "a bzip2 archive", "unpack it first"),
    (b"\xfd7zXZ", "an xz archive", "unpack it first"),
    (b"7z\xbc\xaf", "a 7z archive", "unpack it first"),
    (b"%PDF", "a PDF document", _INSTEAD),
    (b"\x89PNG", "a picture", _INSTEAD),
    (b"\xff\xd8\xff", "a picture", _INSTEAD),
)
_TEXTS: Final = tuple(
    (re.compile(pattern, re.IGNORECASE | re.MULTILINE), name)
    for pattern, name in (
        (r"\A\s*\(\s*\w+_(?:sch|pcb)\b", "a schematic or board file, not a netlist"),
        (r"\A\s*\(", "a parenthesised text, but no netlist known here"),
        (r"\A\s*[{\[]\s*[\"{\[\]}]", "a JSON text"),
    )
)
_OURS: Final = (
    re.compile(r"\A\s*\(\s*(?:\"?export[\s()\"]|edif\s)", re.IGNORECASE),
    star_list.CLAIM,
    dollar_list.CLAIM,
    bracket_list.CLAIM,
    parenthesised_list.CLAIM,
)
_ROOTS: Final = {"html": "an HTML page", "svg": "a picture"}


def refuse_foreign(source: Source) -> None:
    """Raise UserMistake where the content is recognised as something else, or is empty or binary."""
    if not source.data.strip():
        raise refusal(source.name, "the file is empty", do=_INSTEAD)
    if is_workbook(source.data):
        return
    for signature, name, instead in _SIGNATURES:
        if source.data.startswith(signature):
            raise _foreign(source, name, instead)
    root = root_name(source)
    if root is not None and root.lower() in _ROOTS:
        raise _foreign(source, _ROOTS[root.lower()], _INSTEAD)
    text = _text_format(head(source)) if root is None else None
    if text is not None:
        raise _foreign(source, text, _INSTEAD)


def unknown(source: Source) -> UserMistake:
    """The mistake of a source that no reader claims and that is nothing known."""
    first = next((line for line in head(source).splitlines() if line.strip()), "")
    broken = sum(not (character.isprintable() or character in "\t\r\n") for character in head(source))
    root = root_name(source)
    if root is not None:
        return _foreign(source, f"XML with the root <{shorten(root)}>", _INSTEAD)
    what = "binary data" if broken > 3 else f"text that starts with {shorten(first)!r}"
    return _foreign(source, what, _INSTEAD)


def _text_format(text: str) -> str | None:
    if any(claim.search(text) for claim in _OURS):
        return None
    return next((name for pattern, name in _TEXTS if pattern.search(text)), None)


def _foreign(source: Source, found: str, instead: str) -> UserMistake:
    return refusal(source.name, FOREIGN, line=1, found=found, do=instead)
