"""Lines of styled texts; names come from strangers, so what could steer the terminal is shown as an escape."""

import re
from collections.abc import Iterable
from typing import Final

Span = str | tuple[str, str]
"""A text, or a text and its style."""
Line = tuple[Span, ...]

_SGR: Final = {
    "fails error": "1;31",
    "fails warning": "1;33",
    "fails note": "1;36",
    "good": "32",
    "open": "35",
    "name": "1",
    "dim": "2",
}
_UNSAFE: Final = re.compile(
    "[\x00-\x1f\x7f-\x9f\u00ad\u061c\u180e\u200b-\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufff9-\ufffb\ufffe\uffff\ud800-\udfff\U000e0000-\U000e007f]"
)


def safe(text: str) -> str:
    """The text with control, bidirectional and invisible characters as ``\\x1b`` or ``\\u202e``."""
    return _UNSAFE.sub(lambda found: _escape(ord(found[0])), text)


def _escape(code: int) -> str:
    return f"\\x{code:02x}" if code < 0x100 else f"\\u{code:04x}" if code < 0x10000 else f"\\U{code:08x}"


def joined(lines: Iterable[Line], *, color: bool) -> str:
    """All lines as one text; the only place where spans become output."""
    return "".join("".join(_painted(span, color) for span in line).rstrip() + "\n" for line in lines)


def _painted(span: Span, color: bool) -> str:
    text, style = (span, "") if isinstance(span, str) else span
    return f"\x1b[{_SGR[style]}m{safe(text)}\x1b[0m" if color and style in _SGR else safe(text)
