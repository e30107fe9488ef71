"""What a measure file offers."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Literal

from rcrules.problems import Array, Structure

Poses = Literal[
    "event",
    "network",
    "noise",
    "sample",
    "transfer",
    "states",
    "discharge",
    "level",
    "short",
    "supply",
    "dip",
    "string",
    "value",
]
"""A transient; the network at rest (for all its nodes, or at one with its temperature); a node with a converter's
sampling capacitor; a transfer; all DC states of a part or pin; supplies left open; the DC state in which an input is
lowest or highest; a pin or contact that shorts what is charged; a supply with its capacitors and load; a supply that
dips; capacitors in series; the value of a part."""

OptionKind = Literal["event", "level", "quantity", "choice", "names"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Option:
    """One option of a measure: what it may be and what it is when a rule does not say."""

    kind: OptionKind
    default: str | float | None
    """For events, levels and choices the text; for quantities the SI number; None = must be given."""
    unit: str = "1"
    choices: tuple[str, ...] = ()
    summary: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Theory:
    """What is proved about a measure on a structure: per column the sign of its slope, and whether vertices suffice."""

    signs: tuple[int | None, ...]
    """+1 rises with the column, -1 falls, 0 does not depend on it, None = not known."""
    vertices: bool = False
    """True: the extremes over the columns of unknown sign lie at vertices (linear-fractional in each, T1)."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Measure:
    """A quantity of a node, capacitor, resistor, pin, supply or network."""

    name: str
    subject: Literal["node", "capacitor", "resistor", "pin", "supply", "network"]
    unit: str
    summary: str
    """One plain sentence."""
    compute: Callable[[Structure, Array], Array]
    """cases (case, column) -> values (case,); inf = never or unlimited, nan = not defined (undecided)."""
    theory: Callable[[Structure, Array, Array], Theory]
    """Structure, lowest and highest of the columns -> what is proved."""
    also: tuple[str, ...] = ()
    """Further subjects that it is a quantity of; a rule names one of them in ``subject``."""
    options: Mapping[str, Option] = field(default_factory=dict)
    poses: Poses = "event"
    """What the structure is."""
    rating: Literal["voltage", "power"] | None = None
    """The rating of the part that it counts in; None = it counts in none."""
    incremental: bool = False
    """True: it follows the bias curve of a capacitor from 0 V on; else the curve's range makes up the capacitance."""
    lasting: bool = False
    """True: it is a time that should be long, and infinite is as good as it gets."""
    settles: Literal["", "by a band", "by a share"] = ""
    """What a dielectric absorbs comes late: no band, or no share of the step left, below that can be promised."""
    amplified: bool = False
    """True: it is worked out around an ideal amplifier too."""
    scale_free: bool = False
    """True: a single source of unknown voltage does not matter, because the measure counts in parts of its own step."""
