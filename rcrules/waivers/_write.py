"""Entries for findings, to be completed by whoever accepts them."""

import json
import re
from collections.abc import Iterable, Iterator
from datetime import date

from rcrules.comparison import circumstances
from rcrules.findings import Document, Finding

_BARE = re.compile(r"[A-Za-z0-9_-]+")


def entries_text(document: Document, findings: Iterable[Finding], today: date) -> str:
    """TOML: one ``[[waiver]]`` a finding, its reason and name left empty."""
    return "\n".join(line for item in findings for line in _entry(item, document, today)) + "\n"


def _entry(item: Finding, document: Document, today: date) -> Iterator[str]:
    yield from ("", "[[waiver]]", f"rule    = {_text(item.rule)}")
    if item.net is not None:
        yield f"net     = {_text(item.net)}"
    elif len(item.parts) == 1:
        yield f"part    = {_text(item.parts[0])}"
    yield 'reason  = ""                # why it is acceptable; must be completed'
    yield 'who     = ""                # the name of whoever accepts it; must be completed'
    yield f"date    = {today.isoformat()}"
    yield f"# expires = {today.replace(year=today.year + 1, day=min(today.day, 28))}  # optional: its last day"
    yield f"circuit = {_text(item.fingerprint)}"
    for key, texts in circumstances(item, document).items():
        yield f"[waiver.{key}]"
        yield from (f"{_key(name)} = {_text(text)}" for name, text in sorted(texts.items()))


def _key(name: str) -> str:
    return name if _BARE.fullmatch(name) else _text(name)


def _text(text: str) -> str:
    """A basic string; JSON's escapes are also TOML's, which allows neither DEL nor half of a character."""
    whole = text.encode("utf-8", "replace").decode("utf-8")
    return json.dumps(whole, ensure_ascii=False).replace("\x7f", "\\u007f")
