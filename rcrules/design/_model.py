"""The design: parts and nets of one board, merged from its exports."""

from collections.abc import Mapping
from dataclasses import dataclass

from rcrules.errors import Place
from rcrules.readers import Export, Remark


@dataclass(frozen=True, slots=True, kw_only=True)
class Fact:
    """A text about a part, with where it comes from."""

    text: str
    origin: str
    """``netlist value``, ``netlist field 'Tol'``, ``BOM value``, ``BOM field 'Voltage'``."""
    place: Place


@dataclass(frozen=True, slots=True, kw_only=True)
class Pin:
    """A pin of a part on a net."""

    ref: str
    number: str
    name: str
    type: str
    """One of vocabulary.PIN_TYPES."""
    net: str
    """Key of the net, '' for a pin in ``Part.open_pins``."""
    place: Place

    @property
    def key(self) -> str:
        """``U3.NRST``, or ``U3.7`` where the pin has no name of its own."""
        return f"{self.ref}.{self.name or self.number}"


@dataclass(frozen=True, slots=True, kw_only=True)
class Difference:
    """What two exports of one board say differently about a part."""

    ref: str
    about: str
    """One of vocabulary.AGREEMENTS."""
    text: str
    """``BOM value '12k' (bom.csv:7:2), netlist value '10k' (board.xml:12)``."""
    places: tuple[Place, ...]
    said: tuple[Fact, ...] = ()
    """Value texts that contradict each other, the one that wins first; of a part fitted by one alone what it says."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Part:
    """A part of the schematic or the BOM."""

    ref: str
    place: Place
    values: tuple[Fact, ...]
    """Value texts, the one that wins first (BOM before netlist)."""
    fields: Mapping[str, tuple[Fact, ...]]
    """Further fields by lower-case name, BOM facts first."""
    footprint: str
    symbol: str
    description: str
    sheet: str
    fitted: bool
    fitted_why: str
    pins: tuple[Pin, ...]
    open_pins: tuple[Pin, ...] = ()
    """Pins that an export lists as on no net."""
    differences: tuple[Difference, ...] = ()
    """Where the exports contradict each other about it."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Net:
    """A net by its key, with its pins."""

    name: str
    pins: tuple[Pin, ...]
    place: Place


@dataclass(frozen=True, slots=True, kw_only=True)
class Design:
    """One board, as exported."""

    parts: Mapping[str, Part]
    nets: Mapping[str, Net]
    exports: tuple[Export, ...]
    remarks: tuple[Remark, ...]
    """Of all exports, and of pins that two netlists put on different nets."""

    @property
    def differences(self) -> tuple[Difference, ...]:
        """What exports say differently about parts, by reference."""
        return tuple(item for part in self.parts.values() for item in part.differences)
