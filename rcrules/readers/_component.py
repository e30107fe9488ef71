"""Components, library parts and connections as the netlists write them."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from rcrules.readers import _bounds

Entry = tuple[str, str | None, int]
"""Name, text (None = a flag without text) and line of a field or property."""
Node = tuple[str, str, str, str, int]
"""Reference, pin number, pin name, pin type and line of one connection, '' where not given."""


@dataclass(slots=True, kw_only=True)
class Departure:
    """What a variant of the board has otherwise at a component."""

    name: str
    line: int
    properties: list[Entry] = field(default_factory=list)
    fields: list[Entry] = field(default_factory=list)


@dataclass(slots=True, kw_only=True)
class Component:
    """A component as written."""

    ref: str
    line: int
    value: str = ""
    value_line: int = 0
    footprint: str = ""
    description: str = ""
    datasheet: str = ""
    library: str = ""
    symbol: str = ""
    sheet: str = ""
    fields: list[Entry] = field(default_factory=list)
    properties: list[Entry] = field(default_factory=list)
    """The same fields once more in some versions, then fields of the sheet, then flags."""
    variants: list[Departure] = field(default_factory=list)
    omitted: str = ""
    """Why the part is not fitted, where the format has its own way to say so."""


@dataclass(slots=True, kw_only=True)
class LibraryPart:
    """A symbol of the library: the names and types of its pins by number."""

    pins: Mapping[str, tuple[str, str]]
    description: str = ""


def refuse_long(file: str, component: Component) -> None:
    """Raise UserMistake where the component has longer texts, or more of them, than any."""
    _bounds.named(file, component.line, "a reference", component.ref)
    entries = component.fields + component.properties
    _bounds.bound(file, component.line, "fields of one part", len(entries), _bounds.MAX_FIELDS)
    texts = [component.value, component.footprint, component.description, component.symbol, component.sheet]
    departures = [entry for variant in component.variants for entry in (*variant.properties, *variant.fields)]
    _bounds.bound(file, component.line, "variants of one part", len(component.variants), _bounds.MAX_FIELDS)
    _bounds.bound(file, component.line, "fields of the variants of one part", len(departures), _bounds.MAX_FIELDS)
    texts += (variant.name for variant in component.variants)
    for name, said, _ in (*entries, *departures):
        texts += name, said or ""
    if len("".join(texts)) > _bounds.MAX_TEXT:  # else no single one is
        _bounds.named(file, component.line, "a text", max(texts, key=len), _bounds.MAX_TEXT)
