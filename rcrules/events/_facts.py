"""Facts of the project file by name; the names of its tables may be globs."""

from collections.abc import Callable, Iterable, Mapping
from fnmatch import fnmatchcase
from typing import TypeVar

Facts = TypeVar("Facts")
Value = TypeVar("Value")


def fact(tables: Mapping[str, Facts], names: Iterable[str], value: Callable[[Facts], Value | None]) -> Value | None:
    """The first value that any table gives for any of the names: exact names first, then globs in the file's order."""
    if not tables:
        return None
    names = tuple(names)
    exact = [tables[name] for name in names if name in tables]
    globs = [table for glob, table in tables.items() if any(fnmatchcase(name, glob) for name in names)]
    for table in (*exact, *globs):
        found = value(table)
        if found is not None:
            return found
    return None
