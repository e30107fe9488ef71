"""Facts of the project file about joints, each of which may be several nets."""

from collections.abc import Callable, Mapping
from typing import TypeVar

from rcrules.project import NetFacts, PartFacts, PinFacts, SupplyFacts, ranked

Facts = TypeVar("Facts", SupplyFacts, NetFacts, PinFacts, PartFacts)
Value = TypeVar("Value")


def fact(tables: Mapping[str, Facts], names: tuple[str, ...], value: Callable[[Facts], Value | None]) -> Value | None:
    """The value in the most specific table that gives one for any of the names; None where none does."""
    if not tables:
        return None
    found = (value(table) for _, table in ranked(tables, names))
    return next((item for item in found if item is not None), None)
