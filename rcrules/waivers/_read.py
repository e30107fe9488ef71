"""Reads a file of waivers: every mistake of the file in one run."""

import datetime
from pathlib import Path

from rcrules.errors import Problems
from rcrules.tomlfile import Table, root
from rcrules.tomlfile import read as read_toml
from rcrules.waivers._model import PINNED, Waiver

_KEYS = ("rule", "net", "part", "reason", "who", "date", "expires", "circuit", *PINNED)
_WRITTEN = "let 'rcrules check --waive' write the entry"


def read(path: Path, name: str) -> list[Waiver]:
    """The waivers of a file, called ``name`` in messages. Raises UserMistake with all mistakes."""
    top = root(read_toml(path, name), Problems())
    top.only(("waiver",))
    found = [_waiver(table) for table in top.tables("waiver")]
    top.stop_if_wrong()
    return [waiver for waiver in found if waiver is not None]


def _waiver(table: Table) -> Waiver | None:
    """One entry; None where something is missing, which is noted."""
    table.only(_KEYS)
    rule, net, part, circuit = (table.text(key) for key in ("rule", "net", "part", "circuit"))
    reason, who, day = _said(table, "reason"), _said(table, "who"), _day(table, "date")
    expires = _day(table, "expires") if "expires" in table.data else None
    pinned = {key: _pinned(table, key) for key in PINNED}
    table.needs("rule")
    if "circuit" not in table.data:
        table.problems.mistakes.append(table.file.mistake(table.path, "'circuit' is missing", do=_WRITTEN))
    if rule is None or circuit is None or day is None:
        return None
    return Waiver(
        place=table.place, rule=rule, net=net, part=part, reason=reason, who=who, date=day, expires=expires,
        circuit=circuit, pinned=pinned,
    )  # fmt: skip


def _said(table: Table, key: str) -> str:
    """A text that must say something; an entry that nobody completed waives nothing."""
    text = table.text(key)
    if key not in table.data:
        table.needs(key)
    elif text is not None and not text.strip():
        do = "complete the entry, or delete it"
        table.wrong(key, f"the waiver has no {'name' if key == 'who' else key}", found='""', do=do)
    return (text or "").strip()


def _day(table: Table, key: str) -> datetime.date | None:
    value = table.data.get(key)
    if value is None:
        table.needs(key)
    elif type(value) is not datetime.date:
        expected = "a day such as 2027-06-30, without quotes"
        table.wrong(key, f"'{key}' must be a date", found=table.found(key), expected=expected)
    return value if type(value) is datetime.date else None


def _pinned(table: Table, key: str) -> dict[str, str]:
    inner = table.table(key)
    if inner is None:
        return {}
    return {name: text for name in inner.data if (text := inner.text(name)) is not None}
