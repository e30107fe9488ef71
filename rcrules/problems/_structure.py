"""A question about one circuit in numbers: its structure is hashable, its numbers are columns of a parameter table.

Two problems of equal structure are the same function of their columns, so all of them are solved in one call.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from rcrules.engine import Shape

Array = NDArray[np.float64]

Form = tuple[tuple[float, tuple[int, ...]], ...]
"""Sum over terms of coefficient * product of columns; ``((1.0, (3,)),)`` is column 3, ``((2.0, ()),)`` the number 2."""


def column(index: int) -> Form:
    """The form that is one column."""
    return ((1.0, (index,)),)


def constant(value: float) -> Form:
    """The form that is one number."""
    return ((value, ()),)


def evaluate(form: Form, cases: Array) -> Array:
    """Value of a form in each case; cases (case, column) -> (case,)."""
    total = np.zeros(len(cases))
    for coefficient, columns in form:
        term = np.full(len(cases), coefficient)
        for index in columns:
            term = term * cases[:, index]
        total = total + term
    return total


@dataclass(frozen=True, slots=True, kw_only=True)
class Parameter:
    """One uncertain number: a column of the table, shared wherever it acts."""

    name: str
    """``R12``, ``+3V3``, ``+3V3 rise``, ``U3.NRST low``."""
    unit: str
    low: float
    """Over everything, given and assumed."""
    nominal: float
    high: float
    given_low: float
    """Over what the inputs give; assumed effects left out. low <= given_low <= nominal <= given_high <= high."""
    given_high: float
    origin: str
    """In words: ``1 % from BOM field 'Tol', X7R ±15 %``."""
    assumed: tuple[str, ...] = ()
    """What is assumed about it, in words; empty = all given."""
    ask: str = ""
    """The project line that would replace the assumption; of several the first."""
    asks: tuple[str, ...] = ()
    """Where there are several: the line that would replace each of ``assumed``, '' for none."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Waveform:
    """Voltage of a held terminal: ``before`` until 0, then linear between points; equal times are a jump."""

    before: Form
    points: tuple[tuple[Form, Form], ...]
    """(time [s], volts [V]); the first time is 0."""


@dataclass(frozen=True, slots=True, kw_only=True)
class LevelForm:
    """A level: ``offset + sum(fraction * terminal voltage)``, or ``fraction`` of the final value or the step."""

    kind: Literal["voltage", "final", "step"]
    offset: Form = ()
    """[V], for kind ``voltage``."""
    follows: tuple[tuple[int, Form], ...] = ()
    """(terminal, fraction): the momentary voltage of a held terminal."""
    fraction: Form = ()
    """For kinds ``final`` and ``step``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Junction:
    """A diode: open while its forward voltage is below its drop, the drop in series with a resistance above."""

    anode: int
    cathode: int
    drop: Form
    """[V]"""
    ohms: Form
    """[Ω], > 0"""
    breakdown: float | None = None
    """Reverse voltage [V] beyond which nothing can be said; None = it never gets there."""
    name: str = ""
    """For people, where there is a breakdown."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Swing:
    """A held terminal that may go from one level to the other while the others rest."""

    held: int
    """Number among the held terminals."""
    low: Form
    """[V]"""
    high: Form
    """[V]"""
    up: Form = ()
    """Time from the low level to the high one [s]."""
    down: Form = ()
    """And back [s]."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Structure:
    """Everything about a problem but the numbers in its columns."""

    shape: Shape
    """Topology after the event."""
    ohms: tuple[Form, ...]
    """[Ω] one per resistor of the shape; a contact that is closed is a resistor too."""
    farads: tuple[Form, ...]
    """[F] one per capacitor; parallel capacitors may be one branch with a sum."""
    waveforms: tuple[Waveform, ...]
    """One per held terminal, in terminal order."""
    amps: tuple[tuple[int, Form], ...] = ()
    """(free terminal, current drawn out of it [A])."""
    diodes: tuple[Junction, ...] = ()
    """Diodes that may conduct, each between a free terminal and any other."""
    amplifiers: tuple[tuple[int, int, int], ...] = ()
    """Ideal amplifiers: terminals of the input that does not invert, of the one that does, and of the output (free)."""
    leaks: tuple[int, ...] = ()
    """Resistors of the shape that are dielectrics of capacitors: they may conduct, but nothing may rely on it."""
    earlier: tuple[Shape, tuple[Form, ...]] | None = None
    """Shape and ohms in the steady state before the event, where a contact changes it; None = the same."""
    pinned: tuple[tuple[int, Form], ...] = ()
    """Free terminals, and the voltage [V] at which a source held each of them until the event."""
    charged: tuple[tuple[int, Form], ...] = ()
    """Capacitors that something else charged before the event, and the voltage across each [V], first minus second."""
    empty: bool = False
    """True: all capacitors start at 0 V; False: from DC steady state with the sources at ``before``."""
    at: int = 0
    """Observed terminal."""
    against: int | None = None
    """Reference terminal of a bridged pair or of a part; None = 0 V."""
    element: int | None = None
    """Index of the observed resistor or capacitor in the shape, for measures of parts."""
    rating: Form | None = None
    """Rated voltage [V] or power [W] of the observed part."""
    curves: tuple[tuple[int, tuple[tuple[float, float], ...]], ...] = ()
    """Capacitors whose farads hold at 0 V, and their bias curves: points of voltage [V] and remaining fraction."""
    absorbed: Form = ()
    """Share of the step that the dielectrics around the observed node take or give back late [1], where it counts."""
    load: Form = ()
    """What is drawn from the observed supply: a current [A], or a power [W] where option ``draws`` says so."""
    reference: tuple[int, LevelForm] | None = None
    """Where delays count from: None = the event; else the first time at which this held terminal reaches this level."""
    levels: tuple[tuple[str, LevelForm], ...] = ()
    """Levels by option name."""
    states: tuple[tuple[Form, ...], ...] = ()
    """DC source vectors, one form per held terminal, over supply subsets and driver states."""
    swings: tuple[Swing, ...] = ()
    """Sources that may switch by themselves in any of the states, where a transient may go beyond these."""
    rising: bool = True
    """Direction of the observed change."""
    options: tuple[tuple[str, float | str], ...] = ()
    """Plain options of the measure."""

    def level(self, name: str) -> LevelForm:
        """The level of an option. Raises KeyError."""
        return dict(self.levels)[name]

    def option(self, name: str) -> float | str:
        """A plain option. Raises KeyError."""
        return dict(self.options)[name]


@dataclass(frozen=True, slots=True, kw_only=True)
class Names:
    """What the terminals and branches of a structure are called, in its order; for people, never for numbers."""

    terminals: tuple[str, ...]
    """Joints; the free ones first."""
    resistors: tuple[str, ...]
    """References, ``U3.NRST pull-up``, closed contacts."""
    capacitors: tuple[str, ...]
    """References; parallel ones that are one branch joined by `` + ``."""
    earlier: tuple[str, ...] = ()
    """Resistors of the shape before the event, where the structure has one."""
    diodes: tuple[str, ...] = ()
    """References; of what a pin leaks the rails in words."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Problem:
    """A structure with its parameters; column i of the cases is parameters[i]."""

    structure: Structure
    parameters: tuple[Parameter, ...]
    names: Names | None = None
    """None where nobody asks how a number comes about."""
    doubt: str = ""
    """Why nothing can be promised although the numbers keep a limit, in words; '' = no doubt."""
    doubt_ask: str = ""
    """The project line that would remove the doubt."""

    def given_box(self) -> tuple[Array, Array, Array]:
        """The same over what the inputs give alone; assumed effects left out."""
        rows = [(item.given_low, item.nominal, item.given_high) for item in self.parameters]
        table = np.array(rows, dtype=float).reshape(-1, 3)
        return table[:, 0], table[:, 1], table[:, 2]

    def box(self) -> tuple[Array, Array, Array]:
        """Lowest, nominal, highest of every column, shape (column,) each."""
        rows = [(item.low, item.nominal, item.high) for item in self.parameters]
        table = np.array(rows, dtype=float).reshape(-1, 3)
        return table[:, 0], table[:, 1], table[:, 2]
