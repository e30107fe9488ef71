"""What every reader gives: the parts, pins and nets of one file, as written, each with its place."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from typing import Literal

from rcrules.errors import Place
from rcrules.readers._bounds import USUAL, Limits


@dataclass(frozen=True, slots=True, kw_only=True)
class Source:
    """One input, read once."""

    name: str
    """Path as given (relative), or '<stdin>'."""
    data: bytes
    limits: Limits = USUAL
    path: Path | None = None
    """Where the file lies; None for standard input."""
    folder: Path | None = None
    """Folder of the project: files that this one names are read where they lie in it; None = none are."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Cell:
    """A text of an export and where it stands."""

    text: str
    place: Place


@dataclass(frozen=True, slots=True, kw_only=True)
class Variant:
    """How one variant of the board departs from the base at a part."""

    place: Place
    fitted: bool | None = None
    """None = as in the base."""
    value: Cell | None = None
    """None = that of the base."""
    fields: Mapping[str, Cell] = field(default_factory=dict)
    """Fields that stand in the place of those of the base."""


@dataclass(frozen=True, slots=True, kw_only=True)
class ExportPart:
    """One reference of the export."""

    ref: str
    place: Place
    value: Cell | None = None
    """The value text, None when absent or a placeholder of the format (``~``)."""
    footprint: str = ""
    symbol: str = ""
    """Name of the library part (``Device:R``, ``LM358``)."""
    description: str = ""
    sheet: str = ""
    fields: Mapping[str, Cell] = field(default_factory=dict)
    """All further fields by the name the export gives them, stripped; BOM columns too."""
    fitted: bool | None = None
    """False where the export says by flag, column or text that the part is not fitted; None = not said."""
    fitted_why: str = ""
    variants: Mapping[str, Variant] = field(default_factory=dict)
    """By the name of the variant."""


@dataclass(frozen=True, slots=True, kw_only=True)
class ExportPin:
    """One connection of a part to a net."""

    ref: str
    number: str
    name: str = ""
    type: str = ""
    """One of vocabulary.PIN_TYPES."""
    net: str
    """Key of the net: its name, or ``#code`` for a net without a name; '' for a pin in ``Export.open_pins``."""
    place: Place


@dataclass(frozen=True, slots=True, kw_only=True)
class Remark:
    """Something odd in an input that does not stop the run; shown in the report."""

    place: Place
    text: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Primitive:
    """What a library says of every part that is made from one of its entries."""

    value: Cell | None = None
    symbol: str = ""
    footprint: str = ""
    fields: Mapping[str, Cell] = field(default_factory=dict)
    pins: Mapping[str, tuple[str, str]] = field(default_factory=dict)
    """Pin number -> name and type of the pin."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Export:
    """Everything read from one file."""

    reader: str
    source: str
    sha256: str
    kind: Literal["netlist", "bom"]
    parts: tuple[ExportPart, ...]
    pins: tuple[ExportPin, ...] = ()
    open_pins: tuple[ExportPin, ...] = ()
    """Pins that the export lists as on no net."""
    nets: tuple[tuple[str, Place], ...] = ()
    """Every net of the file, also those with one pin or none, in file order, by key."""
    remarks: tuple[Remark, ...] = ()
    title: str = ""
    by_primitive: bool = False
    """Whether ``symbol`` of its parts names entries of a library that may be another export's."""
    library: Mapping[str, Primitive] = field(default_factory=dict)
    """Entries by name."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Reader:
    """One format: how to tell it by content, how to read it."""

    name: str
    """``xml-netlist``, ``sexpr-netlist``, ``pin-list``, ``bom``."""
    order: int
    """Readers are asked in rising order; the first that claims the source reads it."""
    claims: Callable[[Source, Mapping[str, str]], bool]
    """Whether the content is of this format, given the project's [columns] table."""
    read: Callable[[Source, Mapping[str, str]], Export]
    """Source and the project's [columns] table to an Export. Raises UserMistake."""
