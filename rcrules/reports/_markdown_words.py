"""Texts as Markdown that shows them as they are; names come from strangers."""

import re
from typing import Final

from rcrules.reports._lines import safe

_SPECIAL: Final = re.compile(r"[\\`*_\[\]#|~$]|^[-+=]")
_NUMBERED: Final = re.compile(r"(\d+)([.)])")
"""At the start of a text, where it would begin a list."""
_ENTITIES: Final = {"&": "&amp;", "<": "&lt;", ">": "&gt;", "@": "&#64;", ":": "&#58;", ".": "&#46;"}
_ENTITY: Final = re.compile(r"[&<>@]|:(?=\S)|(?<=www)\.", re.IGNORECASE)


def plain(text: str) -> str:
    """The text as it is, whatever Markdown or HTML would make of it."""
    escaped = _SPECIAL.sub(lambda found: "\\" + found[0], safe(text))
    if found := _NUMBERED.match(escaped):
        escaped = f"{found[1]}\\{escaped[found.start(2) :]}"
    return _ENTITY.sub(lambda found: _ENTITIES[found[0]], escaped)


def code(text: str) -> str:
    """A span of code, fenced by more backquotes than it holds."""
    own = safe(text)
    fence = "`" * (max((len(run) for run in re.findall("`+", own)), default=0) + 1)
    pad = " " if own.startswith("`") or own.endswith("`") else ""
    return f"{fence}{pad}{own}{pad}{fence}"
