"""A table of a file, read key by key; every mistake is collected with its place, and the reading goes on."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from math import isfinite
from typing import Any, Final, TypeVar

from rcrules.errors import Place, Problems
from rcrules.quantities import QuantityError, Spread, parse_quantity, show
from rcrules.tomlfile._file import TomlFile
from rcrules.tomlfile._scanner import Path
from rcrules.tomlfile._told import cut, guess, listed, quantity_name

Read = TypeVar("Read")

MAX_TEXT: Final = 4000
"""Characters of one text."""
_SAMPLES: Final = {"V": "3.3 V", "s": "1.2 ms", "Ω": "10 kohm", "F": "100 nF", "A": "1 uA", "Hz": "1 kHz", "1": "5 %"}


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """One table; what is missing reads as None, what is wrong too, after the mistake is noted."""

    file: TomlFile
    path: Path
    data: Mapping[str, Any]
    problems: Problems

    @property
    def place(self) -> Place:
        """Where the table starts."""
        return self.file.values.get(self.path, Place(file=self.file.name, line=1))

    def place_of(self, key: str | int) -> Place:
        """Where a key stands."""
        path = (*self.path, key)
        return self.file.keys.get(path) or self.file.values.get(path) or self.place

    def wrong(self, key: str | int | Path, problem: str, **more: Any) -> None:
        """Note a mistake at a key of this table, or at a path below it; ``more`` as for TomlFile.mistake."""
        below = key if isinstance(key, tuple) else (key,)
        self.problems.mistakes.append(self.file.mistake((*self.path, *below), problem, **more))

    def stop_if_wrong(self) -> None:
        """Raise the mistakes noted so far, in the order of the file."""
        self.problems.mistakes.sort(key=lambda item: (item.place.file, item.place.line or 0, item.place.column or 0))
        self.problems.stop_if_any()

    def only(self, known: Sequence[str], do: str | None = None) -> None:
        """Refuse every key that is not among the known ones, with a guess."""
        for key in self.data:
            if key not in known:
                problem = f"unknown key '{cut(key)}'{guess(key, known)}"
                self.wrong(key, problem, on="key", expected=listed(known), do=do)

    def needs(self, *keys: str, known: Sequence[str] = (), do: Mapping[str, str] | None = None) -> None:
        """Note each key that must be there and is not.

        known: all keys of the table, where ``only`` tells of others: one that is misspelt is not missing too. do: a
        line that would give a key.
        """
        for key in keys:
            if key not in self.data and not self.misspelt((key,), known):
                line = (do or {}).get(key)
                self.problems.mistakes.append(self.file.mistake(self.path, f"'{key}' is missing", do=line))

    def misspelt(self, keys: Sequence[str], known: Sequence[str]) -> bool:
        """Whether a key that is not known is most likely one of some."""
        strange = (key for key in self.data if known and key not in known)
        return any(not set(get_close_matches(key, known, n=1)).isdisjoint(keys) for key in strange)

    def found(self, key: str | int | Path) -> str:
        """The value as the file writes it."""
        below = key if isinstance(key, tuple) else (key,)
        start, end = self.file.spans.get((*self.path, *below), (0, 0))
        return cut(" ".join(self.file.text[start : min(end, start + 200)].split()))

    def text(self, key: str, expected: str = 'a text in quotes, such as "…"') -> str | None:
        """A text."""
        value = self.data.get(key)
        return value if value is None or self._is_text((key,), value, expected) else None

    def texts(self, key: str, expected: str = "a text or a list of texts") -> tuple[str, ...]:
        """One text or a list of them."""
        value = self.data.get(key, [])
        if isinstance(value, str):
            return (value,) if self._is_text((key,), value, expected) else ()
        if not isinstance(value, list):
            self.wrong(key, f"'{key}' must be {expected}", found=self.found(key))
            return ()
        return tuple(item for number, item in enumerate(value) if self._is_text((key, number), item, expected))

    def _is_text(self, below: Path, value: Any, expected: str) -> bool:
        if isinstance(value, str) and len(value) <= MAX_TEXT:
            return True
        if isinstance(value, str):
            self.wrong(below, f"'{below[0]}' is too long", expected=f"at most {MAX_TEXT} characters")
        else:
            self.wrong(below, f"'{below[0]}' must be {expected}", found=self.found(below))
        return False

    def word(self, key: str, choices: Sequence[str]) -> str | None:
        """One word of a closed list."""
        value = self.text(key, f"one of {listed(choices)}")
        return value if value is None or self._is_known((key,), value, choices) else None

    def words(self, key: str, choices: Sequence[str]) -> tuple[str, ...]:
        """Words of a closed list."""
        value = self.texts(key)
        many = isinstance(self.data.get(key), list)
        return tuple(
            item
            for number, item in enumerate(value)
            if self._is_known((key, number) if many else (key,), item, choices)
        )

    def _is_known(self, below: Path, value: str, choices: Sequence[str]) -> bool:
        if value in choices:
            return True
        problem = f"'{cut(value)}' is not known as '{below[0]}'{guess(value, choices)}"
        self.wrong(below, problem, at=0, length=len(value), expected=listed(choices))
        return False

    def flag(self, key: str) -> bool | None:
        """``true`` or ``false``."""
        value = self.data.get(key)
        if value is None or isinstance(value, bool):
            return value
        self.wrong(key, f"'{key}' must be true or false", found=self.found(key))
        return None

    def count(self, key: str) -> int | None:
        """A whole number from 0 to 1 000 000."""
        value = self.data.get(key)
        if value is None or (isinstance(value, int) and not isinstance(value, bool) and 0 <= value <= 1_000_000):
            return value
        self.wrong(key, f"'{key}' must be a whole number from 0 to 1000000", found=self.found(key))
        return None

    def parsed(self, key: str | Path, parse: Callable[[str], Read], expected: str) -> Read | None:
        """What ``parse`` makes of a text; its QuantityError becomes a mistake at the character."""
        below = key if isinstance(key, tuple) else (key,)
        value = self._below(below)
        if value is None or not self._is_text(below, value, f"{expected} in quotes"):
            return None
        try:
            return parse(value)
        except QuantityError as error:
            joint = "" if isinstance(error, _DimensionError) else ":"
            problem, hint = f"'{below[0]}'{joint} {error.problem}", error.expected or expected
            self.wrong(below, problem, at=error.at, length=error.length, expected=hint)
            return None

    def quantity(
        self, key: str | Path, unit: str | None, *, least: float | None = None, most: float | None = None
    ) -> Spread | None:
        """A quantity of a unit (None = any), within bounds; a plain number where the unit is 1."""
        below = key if isinstance(key, tuple) else (key,)
        value = self._below(below)
        if isinstance(value, int | float) and not isinstance(value, bool) and unit in ("1", None):
            spread = self._number(below, value)
        else:
            sample = _SAMPLES.get(unit or "", "1.2 ms")
            what = f"{quantity_name(unit) if unit else 'a quantity'} such as '{sample}'"
            spread = self.parsed(below, lambda text: _with_unit(text, unit), what)
        if spread is not None and least is not None and spread.low < least:
            self.wrong(below, f"'{below[0]}' must not be below {show(least, spread.unit, 5)}", found=self.found(below))
            return None
        if spread is not None and most is not None and spread.high > most:
            self.wrong(below, f"'{below[0]}' must not be above {show(most, spread.unit, 5)}", found=self.found(below))
            return None
        return spread

    def _below(self, path: Path) -> Any:
        """What stands at a path; None where a key of it is missing."""
        value: Any = self.data
        for step in path:
            value = value.get(step) if isinstance(value, Mapping) else value[step]
        return value

    def _number(self, below: Path, value: float) -> Spread | None:
        if abs(value) < 1e300 and isfinite(value):
            return Spread(low=float(value), nominal=float(value), high=float(value), unit="1")
        self.wrong(below, f"'{below[0]}' must be a finite number", found=self.found(below))
        return None

    def table(self, key: str | int) -> "Table | None":
        """The table under a key."""
        value = self.data.get(str(key))
        if value is None:
            return None
        if not isinstance(value, Mapping):
            self.wrong(key, f"'{key}' must be a table", found=self.found(key))
            return None
        return Table(file=self.file, path=(*self.path, key), data=value, problems=self.problems)

    def tables(self, key: str) -> tuple["Table", ...]:
        """The tables of an array, such as ``[[rule]]``."""
        value = self.data.get(key, [])
        if not isinstance(value, list) or not all(isinstance(item, Mapping) for item in value):
            self.wrong(key, f"'{key}' must be a list of tables, each under [[{key}]]", found=self.found(key))
            return ()
        return tuple(
            Table(file=self.file, path=(*self.path, key, number), data=item, problems=self.problems)
            for number, item in enumerate(value)
        )

    def named(self, key: str) -> dict[str, "Table"]:
        """Tables by name, such as ``[supply."+3V3"]``."""
        outer = self.table(key)
        inner = {name: outer.table(name) for name in outer.data} if outer else {}
        return {name: table for name, table in inner.items() if table is not None}


def root(file: TomlFile, problems: Problems) -> Table:
    """The whole file as a table."""
    return Table(file=file, path=(), data=file.data, problems=problems)


class _DimensionError(QuantityError):
    """A quantity, but of another dimension: ``is a time, '3 V' is a voltage``."""


def _with_unit(text: str, unit: str | None) -> Spread:
    """As parse_quantity; a wrong dimension is told in the words of the trade."""
    try:
        return parse_quantity(text, unit)
    except QuantityError as error:
        try:
            other = parse_quantity(text)
        except QuantityError:
            raise error from None
        if unit is None or other.unit == "1":
            raise
        problem = f"is {quantity_name(unit)}, '{cut(text)}' is {quantity_name(other.unit)}"
        raise _DimensionError(problem, at=0, length=len(text), expected=error.expected) from None
