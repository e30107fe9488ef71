"""Parts with what is known about them in numbers, every fact with its origin."""

from collections.abc import Mapping
from dataclasses import dataclass

from rcrules.design import Part
from rcrules.errors import Place
from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class Known:
    """A number, SI."""

    si: float
    origin: str
    """``BOM value``, ``netlist field 'Tol'``, ``project [part."C7"]``, ``assumed``."""
    place: Place | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Unknown:
    """No number, and why."""

    why: str
    ask: str = ""
    """The project line that would give it: ``[defaults.capacitor] rated-voltage = "…"``; '' = that of the part."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Share:
    """One contribution to a part's spread: value = nominal * product(1 + share)."""

    name: str
    """``tolerance``, ``temperature``, ``bias``, ``ageing``."""
    low: float
    """Lowest relative change, e.g. -0.2."""
    high: float
    given: bool
    """False = an assumption, listed as such."""
    origin: str
    """``1 % from BOM field 'Tol'``, ``X7R letter code``, ``assumed: no tolerance given, 5 %``."""
    ask: str = ""
    """The project line that would replace an assumption: ``[part."C7"] tolerance = "…"``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Insulation:
    """What a capacitor's dielectric leaks: a resistance that may be anything from a least value on, never a proof."""

    least: float
    """[Ω]"""
    given: bool
    """False = an assumption, listed as such."""
    origin: str
    """``at most 3 µA at 16 V from project [part."C7"]``."""
    ask: str = ""
    """The project line that would replace an assumption."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Absorption:
    """Dielectric absorption of a capacitor: from 0 to a share of its voltage that moves late."""

    share: float
    """Greatest [1]"""
    given: bool
    """False = an assumption, listed as such."""
    origin: str
    """``X7R, whose dielectric absorbs up to 2.5 %``."""
    ask: str = ""
    """The project line that would replace an assumption."""


@dataclass(frozen=True, slots=True, kw_only=True)
class RatedPart:
    """A part with kind, value, spread and ratings."""

    part: Part
    kind: str
    """One of vocabulary.PART_KINDS."""
    kind_why: str
    text: str
    """The value text that was read (the winner), '' when there is none."""
    value: Known | Unknown
    """Resistance [Ω] or capacitance [F]; Unknown('not a resistor or capacitor') for other kinds."""
    shares: tuple[Share, ...] = ()
    across: Spread | None = None
    """All that ever lies across it, first pin or + to the other [V], where the project file says it."""
    rated_voltage: Known | Unknown = Unknown(why="not given")
    """[V]"""
    rated_power: Known | Unknown = Unknown(why="not given")
    """[W]"""
    dielectric: str | None = None
    """``X7R``, ``C0G``, ``tantalum``, ``aluminium``, ``film`` …; None = not given."""
    bias_curve: tuple[tuple[float, float], ...] = ()
    """Points of voltage [V] and remaining fraction of capacitance, from the project file; () = none given."""
    insulation: Insulation | Unknown | None = None
    """Of a capacitor; None = nothing is said, Unknown = something is, but another fact is missing to use it."""
    absorption: Absorption | None = None
    """Of a resistor or capacitor with a value; it says nothing about a resistor."""
    polarised: bool = False
    size: str = ""
    """EIA size code such as ``0603``, '' = not known."""
    elements: tuple[tuple[str, str], ...] = ()
    """Pin numbers of each element of an array."""
    fitted: bool = True
    fitted_why: str = ""
    origins: Mapping[str, tuple[str, Place | None]] | None = None
    """Fact name (``value``, ``tolerance``, ``rated_voltage``, ``dielectric``) -> origin and place."""
    disagreements: tuple[str, ...] = ()
    """Facts that lost against another source, in words."""

    @property
    def ref(self) -> str:
        """Reference designator."""
        return self.part.ref

    def bounds(self, *, given_only: bool = False) -> tuple[float, float, float]:
        """Lowest, nominal, highest value; with ``given_only`` the assumed shares are left out."""
        if not isinstance(self.value, Known):
            raise ValueError(f"{self.ref} has no value: {self.value.why}")
        low = high = nominal = self.value.si
        for share in self.shares:
            if share.given or not given_only:
                low, high = low * (1 + share.low), high * (1 + share.high)
        return low, nominal, high
