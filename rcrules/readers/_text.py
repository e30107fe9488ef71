"""Bytes to text, and places in it."""

import codecs
import re
from collections.abc import Iterator
from typing import Final

from rcrules.errors import Place
from rcrules.readers._export import Remark, Source
from rcrules.readers._mistakes import refusal

HEAD_SIZE: Final = 4096
"""Bytes by which a source is told apart."""
_MARKS: Final = (
    (codecs.BOM_UTF8, "utf-8"),
    (codecs.BOM_UTF32_LE, "utf-32-le"),
    (codecs.BOM_UTF32_BE, "utf-32-be"),
    (codecs.BOM_UTF16_LE, "utf-16-le"),
    (codecs.BOM_UTF16_BE, "utf-16-be"),
)
_LINE_END: Final = re.compile(r"\r\n|\n|\r")


def head(source: Source, size: int = HEAD_SIZE) -> str:
    """The first characters of a source, without its byte order mark; for telling formats apart only."""
    data = source.data[:size]
    encoding, mark = _declared(data)
    return data[mark:].decode(encoding or "utf-8", "replace")


def decode(source: Source) -> tuple[str, tuple[Remark, ...]]:
    """The text of a source, and a remark where its encoding had to be assumed.

    Tried in order: byte order mark, UTF-16 by its pattern of zeros, UTF-8; then, line by line, UTF-8 or Windows-1252
    (files joined from both occur). Raises UserMistake where the text is broken under its own mark or holds NUL
    characters.
    """
    encoding, mark = _declared(source.data[:HEAD_SIZE])
    remarks: tuple[Remark, ...] = ()
    try:
        text = source.data[mark:].decode(encoding or "utf-8")
    except UnicodeDecodeError as error:
        line = source.data.count(b"\n", 0, mark + error.start) + 1
        if encoding is not None:
            raise refusal(
                source.name,
                "the text breaks off or is damaged",
                line=line,
                found=f"bytes that are no {encoding.upper()}",
                expected=f"{encoding.upper()}, as the first bytes of the file announce",
                do="export the file again, as UTF-8",
            ) from error
        text = "".join(_line_text(line) for line in source.data.splitlines(keepends=True))
        said = "this line is not UTF-8; it and others like it are read as Windows-1252, check letters such as µ"
        remarks = (Remark(place=Place(file=source.name, line=line), text=said),)
    _refuse_nul(source, text)
    return text, remarks


def numbered(text: str) -> Iterator[tuple[int, str]]:
    """Every line without its end, with its number from 1; CR LF, LF and a lone CR end lines."""
    line, start = 1, 0
    for match in _LINE_END.finditer(text):
        yield line, text[start : match.start()]
        line, start = line + 1, match.end()
    yield line, text[start:]


def spot(text: str, offset: int) -> tuple[int, int]:
    """Line and column of an offset, both from 1; CR LF, LF and a lone CR end lines."""
    ends = text.count("\n", 0, offset) + text.count("\r", 0, offset) - text.count("\r\n", 0, offset)
    return ends + 1, offset - max(text.rfind("\n", 0, offset), text.rfind("\r", 0, offset))


def _line_text(line: bytes) -> str:
    try:
        return line.decode("utf-8")
    except UnicodeDecodeError:
        return line.decode("cp1252", "replace")


def _declared(data: bytes) -> tuple[str | None, int]:
    """Encoding by byte order mark or by its zeros, and the length of the mark."""
    for mark, encoding in _MARKS:
        if data.startswith(mark):
            return encoding, len(mark)
    even, odd = data[0:400:2], data[1:400:2]
    if len(odd) > 4 and odd.count(0) > 0.8 * len(odd) and even.count(0) < 0.2 * len(even):
        return "utf-16-le", 0
    if len(odd) > 4 and even.count(0) > 0.8 * len(even) and odd.count(0) < 0.2 * len(odd):
        return "utf-16-be", 0
    return None, 0


def _refuse_nul(source: Source, text: str) -> None:
    at = text.find("\0")
    if at >= 0:
        line, column = spot(text, at)
        raise refusal(
            source.name,
            "the file holds a NUL character, so it is no text",
            line=line,
            column=column,
            do="export the file again; check that it was not cut or padded on its way",
        )
