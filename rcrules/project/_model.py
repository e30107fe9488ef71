"""What the project file may say; everything optional."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from rcrules.errors import Mistake, Place
from rcrules.levels import Level
from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class SupplyFacts:
    """[supply."NET"]"""

    place: Place
    voltage: Spread | None = None
    valid: Spread | None = None
    rise: Spread | None = None
    after: str | None = None
    fall: Spread | str | None = None
    """Time from 100 % to 0 at power-down [s]; ``open`` = nothing feeds it any more; ``never`` = it stays up."""
    load: Spread | None = None
    """A constant current [A], or a constant power [W]."""


@dataclass(frozen=True, slots=True, kw_only=True)
class NetFacts:
    """[net."NAME"]"""

    place: Place
    swing: Spread | None = None
    source_resistance: Spread | None = None
    wiring_capacitance: Spread | None = None
    edge: Spread | None = None
    """Time that its driver takes from one level to the other [s]."""
    role: str | None = None
    held: str | None = None
    set: Mapping[str, str | float] = field(default_factory=dict)
    """Free words, and numbers (nominal, SI), that rules look up."""
    spreads: Mapping[str, Spread] = field(default_factory=dict)
    """The numbers of ``set`` with bounds and unit."""


@dataclass(frozen=True, slots=True, kw_only=True)
class PinFacts:
    """[pin."PART.PIN"]"""

    place: Place
    kind: str | None = None
    low: Level | None = None
    high: Level | None = None
    rising: Spread | None = None
    falling: Spread | None = None
    pull_up: tuple[Spread, str] | None = None
    """Resistance and the net it goes to."""
    pull_down: tuple[Spread, str] | None = None
    leakage: Spread | None = None
    """[A], positive out of the node into the pin."""
    capacitance: Spread | None = None
    max_voltage: Level | None = None
    drive: tuple[Spread, Spread] | None = None
    """Voltage that the pin still drives, and the current at which it does."""
    set: Mapping[str, str | float] = field(default_factory=dict)
    """Further numbers (sample-capacitance, acquisition-time, full-scale …) by key, nominal, SI, and free words."""
    spreads: Mapping[str, Spread] = field(default_factory=dict)
    """Every number of the table by its key, with bounds and unit."""


@dataclass(frozen=True, slots=True, kw_only=True)
class PartFacts:
    """[part."REF"] and [defaults.KIND]"""

    place: Place
    kind: str | None = None
    value: Spread | None = None
    voltage_across: Spread | None = None
    """All that ever lies across it, from its first pin, or its +, to the other [V]."""
    tolerance: tuple[float, float] | None = None
    """Relative low (negative) and high."""
    rated_voltage: Spread | None = None
    rated_power: Spread | None = None
    dielectric: str | None = None
    tcr: Spread | None = None
    load_life: Spread | None = None
    """How far a resistor may drift over its life, either way [1]."""
    bias_curve: tuple[tuple[float, float], ...] = ()
    """Points of [V] and remaining fraction."""
    distribution: str | None = None
    """How it spreads between its limits, for statistics: ``uniform`` or ``normal``."""
    absorption: Spread | None = None
    """Share of its voltage that a capacitor's dielectric gives back, or takes, late [1]."""
    leakage: Spread | None = None
    """Most that a capacitor leaks at its rated voltage [A]."""
    insulation_resistance: Spread | None = None
    """Least resistance of a capacitor's dielectric [Ω]."""
    fitted: bool | None = None
    elements: tuple[tuple[str, str], ...] = ()
    """Pin numbers of each element of an array."""
    contact: str | None = None
    """``normally open`` or ``normally closed``."""
    contact_resistance: Spread | None = None
    bounce: Spread | None = None
    forward: Spread | None = None
    """Forward drop of a diode [V]."""
    on_resistance: Spread | None = None
    """Resistance of a diode above its forward drop [Ω]."""
    breakdown: Spread | None = None
    """Reverse voltage at which a diode breaks down [V]."""
    set: Mapping[str, str | float] = field(default_factory=dict)
    """Every number of the table by its key, nominal, SI, and free words."""
    spreads: Mapping[str, Spread] = field(default_factory=dict)
    """The numbers of ``set`` with bounds and unit."""


@dataclass(frozen=True, slots=True, kw_only=True)
class NumberField:
    """One field of a part-number pattern."""

    what: str
    """``text`` that must stand there, ``skip``, or the fact it holds: ``value``, ``rated-voltage`` …"""
    text: str = ""
    """The text that must stand there."""
    width: int | None = None
    """Characters; None = up to ``until``."""
    until: str = ""
    """Separator that ends the field and is passed over; '' = the rest."""
    code: str = ""
    """The standard code it is written in, one of vocabulary.NUMBER_CODES."""
    codes: Mapping[str, object] | None = None
    """What each code means: SI number, relative (low, high), dielectric or size; None = the standard code holds."""


@dataclass(frozen=True, slots=True, kw_only=True)
class NumberPattern:
    """[[part-number]]"""

    name: str
    kind: str
    """``resistor`` or ``capacitor``."""
    columns: tuple[str, ...]
    """Fields to read, lower case; () = those that hold part numbers, and the value."""
    fields: tuple[NumberField, ...]
    place: Place


@dataclass(frozen=True, slots=True, kw_only=True)
class Notice:
    """Something about the project file that does not stop the run."""

    place: Place
    text: str


@dataclass(frozen=True, slots=True, kw_only=True)
class PathStep:
    """One step of a path in XML."""

    name: str
    """Local name of an element, ``*``, ``.``, ``..`` or ``@attribute``."""
    key: str
    """``@attribute`` or child that a condition asks for, '' without a condition."""
    value: str


@dataclass(frozen=True, slots=True, kw_only=True)
class XmlPath:
    """A path in XML."""

    steps: tuple[PathStep, ...]
    selects: bool
    """Whether it starts at the root or anywhere, else at an element."""
    anywhere: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Records:
    """Where the parts, or the pins, of a described file stand, and what stands where in each."""

    cells: Mapping[str, str] = field(default_factory=dict)
    """Cell (``reference``, ``net`` …) -> header of its column."""
    each: XmlPath | None = None
    paths: Mapping[str, XmlPath] = field(default_factory=dict)
    """Cell -> path from the element."""
    after: str = ""
    """What the line before the lines starts with."""
    title: str = ""
    """Cell that the rest of that line gives to all lines below it."""
    words: tuple[str, ...] = ()
    """Cells in the order of the words of a line; the last takes the rest."""
    separator: str = ""
    """Between words; '' = blanks."""
    between: str = "."
    """Between reference and pin in ``ends``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class FileFormat:
    """A team's own export, as ``[[format]]`` describes it."""

    name: str
    kind: str
    """``delimited``, ``xml`` or ``lines``."""
    has: str
    """A text near its start by which a file is known."""
    parts: Records | None
    pins: Records | None
    end: str
    """What the last line of ``lines`` starts with, '' = nothing marks the end."""
    place: Place


@dataclass(frozen=True, slots=True, kw_only=True)
class Project:
    """A project file; ``Project()`` is the empty one. Names of tables may be globs."""

    file: str | None = None
    name: str | None = None
    netlists: tuple[str, ...] = ()
    """Paths relative to the folder of the file."""
    boms: tuple[str, ...] = ()
    rules: tuple[str, ...] = ()
    """Names of shipped packs, and paths relative to the folder of the file."""
    variant: str | None = None
    """Of the board; None = the base."""
    variant_at: Place | None = None
    """Where it is named."""
    waivers: str | None = None
    temperature: Spread | None = None
    """[degC]"""
    life: Spread | None = None
    """[s]"""
    distribution: str | None = None
    """Of every number of which the tables of its part and its kind say none."""
    supplies: Mapping[str, SupplyFacts] = field(default_factory=dict)
    grounds: tuple[str, ...] = ()
    nets: Mapping[str, NetFacts] = field(default_factory=dict)
    pins: Mapping[str, PinFacts] = field(default_factory=dict)
    """By ``PART.PIN`` (pin name or number), globs allowed."""
    parts: Mapping[str, PartFacts] = field(default_factory=dict)
    defaults: Mapping[str, PartFacts] = field(default_factory=dict)
    columns: Mapping[str, str] = field(default_factory=dict)
    formats: tuple[FileFormat, ...] = ()
    """The first whose text a file has reads it, before any other reader."""
    limits: Mapping[str, int] = field(default_factory=dict)
    """What is read of one input, by names of vocabulary.LIMITS."""
    part_numbers: tuple[NumberPattern, ...] = ()
    """Of the file, then of the files that ``[board] part-numbers`` names; the first that fits a text is taken."""
    settings: Mapping[str, Mapping[str, str | float]] = field(default_factory=dict)
    """Rule id -> given numbers and words, SI."""
    setting_units: Mapping[str, Mapping[str, str]] = field(default_factory=dict)
    """Rule id -> name -> SI unit of the number."""
    setting_spreads: Mapping[str, Mapping[str, Spread]] = field(default_factory=dict)
    """Rule id -> name -> the number with its bounds."""
    setting_places: Mapping[str, Mapping[str, Mistake]] = field(default_factory=dict)
    """Rule id -> name (``""`` = the table) -> a mistake without a problem yet, that points at it."""
    places: Mapping[tuple[str, str], Place] = field(default_factory=dict)
    """(table, name) -> where the name stands: ``("net", "AIN*")``, ``("ground", "AGND")``."""
    notices: tuple[Notice, ...] = ()
