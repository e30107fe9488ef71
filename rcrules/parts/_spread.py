"""The spread of a part from what is known about it, and narrowed to the voltage across it."""

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import lru_cache

from rcrules.parts._dielectrics import class_two
from rcrules.parts._model import Known, RatedPart, Share
from rcrules.parts._shares import (
    Conditions,
    age,
    bias,
    capacitor_drift,
    curve_share,
    drift,
    load_life,
    resistor_drift,
    tolerance,
)
from rcrules.parts._texts import ValueKind


@dataclass(frozen=True, slots=True, kw_only=True)
class Written:
    """What the spread of a part depends on; parts written alike share it."""

    kind: ValueKind
    value: float
    """[Ω] or [F]; 0 for none: no spread."""
    tolerance: tuple[float, float, str] | None
    """Relative low and high, origin."""
    coefficient: tuple[float, str] | None
    """[1/K] both ways, origin."""
    load_life: tuple[float, str] | None
    """Drift of a resistor over its life, both ways [1], origin."""
    dielectric: str | None
    polarised: bool
    curve: tuple[tuple[float, float], ...]
    """Points of [V] and remaining fraction."""
    curve_from: str
    ask: str
    """Head of the project line that would give what is missing."""


@lru_cache(maxsize=16384)
def spread(part: Written, around: Conditions) -> tuple[Share, ...]:
    """Tolerance, temperature, load life of resistors; of capacitors bias and ageing where they have them."""
    if part.value == 0:
        return ()
    given = part.tolerance
    first = tolerance(part.kind, given[:2] if given else None, given[2] if given else "", part.ask)
    if part.kind == "resistor":
        coefficient, origin = part.coefficient or (None, "")
        drifted = load_life(part.load_life, around, part.ask)
        return first, resistor_drift(part.value, coefficient, origin, around, part.ask), *drifted
    return (first, *_of_capacitor(part, around))


def _of_capacitor(part: Written, around: Conditions) -> Iterator[Share]:
    if part.coefficient is not None:
        coefficient, origin = part.coefficient
        yield drift(-coefficient, coefficient, f"tcr from {origin}", around, given=True, ask="")
    else:
        yield capacitor_drift(part.dielectric, around, part.ask, electrolytic=part.polarised)
    ceramic = class_two(part.dielectric or "") is not None or (part.dielectric is None and not part.polarised)
    if part.curve or ceramic:
        yield bias(part.value, part.curve, part.curve_from, part.ask)
    if ceramic:
        yield age(part.dielectric, around, part.ask)


def at_bias(part: RatedPart, volts: float) -> RatedPart:
    """The part with its bias share narrowed to what happens between 0 V and ``volts`` across it.

    A given curve is taken from 0 V to ``volts``. The assumed envelope holds at rated voltage and is scaled down in
    proportion below it where the rating is known.
    """
    return replace(part, shares=tuple(_narrowed(part, share, abs(volts)) for share in part.shares))


def _narrowed(part: RatedPart, share: Share, volts: float) -> Share:
    if share.name != "bias":
        return share
    if part.bias_curve:
        named = share.origin.partition("bias curve from ")[2].partition(", 0 V")[0]
        return curve_share(part.bias_curve, named, volts)
    if not isinstance(part.rated_voltage, Known) or part.rated_voltage.si <= 0:
        return share
    ratio = min(1.0, volts / part.rated_voltage.si)
    return replace(share, low=share.low * ratio, origin=f"{share.origin}, taken in proportion to the voltage")
