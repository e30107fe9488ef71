"""Rules that extend or override a rule of another pack: ``extends = "reset-lifts-late-enough"``.

The keys of the other rule count where this one has none of its own; ``with`` and ``given`` are joined name by name.
Without an ``id``, or with the same one, it stands in the other rule's place; ``level = "off"`` takes that away.
Examples belong to the rule that brings them, and a source to the limit that it was given for.
"""

import re
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import replace
from typing import Any, Final

from rcrules.errors import Mistake
from rcrules.tomlfile import Table, cut, guess

KEY: Final = "extends"
OFF: Final = "off"
_LONGEST: Final = 8
"""Rules that extend one another."""
_JOINED: Final = ("with", "given")
_LIMITS: Final = ("at-least", "at-most", "equals", "one-of")
_SINGLE: Final = ("equals", "one-of")
_JUDGED: Final = ("measure", "every")
_OWN: Final = ("id", "example", KEY)

Find = Callable[[str], Table | None]


class Bases:
    """The rules that others may extend: those of the files of this run, then those of the shipped packs."""

    def __init__(self, tops: Iterable[Table], shipped: Callable[[], Iterable[Table]]) -> None:
        """tops: the files of this run. shipped: the packs that ship, read when none of the files has the rule."""
        self._found = _by_id(tops)
        self._shipped, self._read = shipped, False

    def find(self, name: str) -> Table | None:
        """The rule that is called so, as it is written."""
        if name not in self._found and not self._read:
            self._read = True
            self._found = {**_by_id(self._shipped()), **self._found}
        return self._found.get(name)

    def names(self) -> list[str]:
        """All that may be extended."""
        self.find("")
        return list(self._found)


def _by_id(tops: Iterable[Table]) -> dict[str, Table]:
    found: dict[str, Table] = {}
    for top in tops:
        for table in top.tables("rule") if isinstance(top.data.get("rule"), list) else ():
            name = table.data.get("id")
            if isinstance(name, str) and table.data.get(KEY) != name:
                found.setdefault(name, table)
    return found


def replaced(table: Table) -> str | None:
    """The id of the rule in whose place this one stands."""
    base, own = table.data.get(KEY), table.data.get("id")
    return base if isinstance(base, str) and own in (None, base) else None


def extended(table: Table, bases: Bases) -> Table | None:
    """The table with the keys of the rules that it extends; None with the mistake noted."""
    chain: list[Table] = [table]
    while KEY in chain[-1].data:
        name = chain[-1].data[KEY] if len(chain) > 1 else table.text(KEY)
        base = bases.find(name) if isinstance(name, str) else None
        if base is None and isinstance(name, str):
            names = bases.names()
            problem = f"no rule is called '{cut(name)}'{guess(name, names)}"
            expected = "the id of a rule of these files, or of a shipped pack (rcrules rules lists them)"
            table.wrong(KEY, problem, at=0, length=len(name), expected=expected)
        if base is None:
            return None
        if len(chain) > _LONGEST or any(base.data is item.data for item in chain):
            way = " extends ".join(cut(str(item.data.get("id"))) for item in chain)
            table.wrong(KEY, "rules extend one another in a ring, or too far", found=way)
            return None
        chain.append(base)
    merged: Mapping[str, Any] = chain[-1].data
    for item in reversed(chain[:-1]):
        merged = _merged(item.data, merged)
    return _placed(table, merged) if len(chain) > 1 else table


def _merged(own: Mapping[str, Any], base: Mapping[str, Any]) -> dict[str, Any]:
    dropped = set(_OWN)
    if any(key in own for key in _JUDGED) or ("value" in own and "measure" not in base and "every" not in base):
        dropped |= {*_JUDGED, "with", "value", "subject"} - set(own)
    if any(key in own for key in _SINGLE):
        dropped |= set(_LIMITS)
    elif any(key in own for key in _LIMITS):
        dropped |= set(_SINGLE)
    if any(key in own for key in (*_LIMITS, *_JUDGED)):
        dropped.add("source")
    found = {key: value for key, value in base.items() if key not in dropped}
    for key, value in own.items():
        both = key in _JOINED and isinstance(value, Mapping) and isinstance(found.get(key), Mapping)
        found[key] = {**found[key], **value} if both else value
    if isinstance(base.get("given"), Mapping) and isinstance(found.get("given"), Mapping):
        kept = {
            name: value for name, value in found["given"].items() if name in own.get("given", ()) or _used(name, found)
        }
        found["given"] = kept
    if "id" not in found and isinstance(own.get(KEY), str):
        found["id"] = own[KEY]
    return found


def _used(name: str, rule: Mapping[str, Any]) -> bool:
    """Whether a text of the rule, other than in ``given``, names a number."""
    texts = [value for key, value in rule.items() if key != "given"]
    return any(re.search(rf"\b{re.escape(name)}\b", text) for text in _texts(texts))


def _texts(values: Iterable[Any]) -> Iterator[str]:
    """Texts, also those in lists and tables."""
    for value in values:
        if isinstance(value, str):
            yield value
        elif isinstance(value, Mapping):
            yield from _texts(value.values())
        elif isinstance(value, list):
            yield from _texts(value)


def _placed(table: Table, merged: Mapping[str, Any]) -> Table:
    """What is inherited stands, for messages, where ``extends`` does."""
    file, here = table.file, table.file.key_spans.get((*table.path, KEY))
    if here is None:
        return table
    inherited = {(*table.path, key): here for key in merged if key not in table.data}
    return replace(table, file=replace(file, spans={**file.spans, **inherited}), data=merged)


def explained(mistake: Mistake, table: Table) -> Mistake:
    """A mistake in what is inherited, with where that comes from."""
    base = table.data.get(KEY)
    here = table.file.keys.get((*table.path, KEY))
    if base is None or here is None or mistake.place != here or mistake.do is not None or "extends" in mistake.problem:
        return mistake
    return replace(mistake, do=f"it comes from the rule '{cut(str(base))}'; say it anew here")
