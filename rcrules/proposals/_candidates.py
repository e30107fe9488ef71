"""Which changes of a part are worth trying, in the order of preference: cheapest for the team first.

Preferred values are those of IEC 60063; rated voltages those that capacitors are commonly made for (common practice); a
tolerance class goes with the series that it fills: 20 % E6, 10 % E12, 5 % E24, 1 % E96.
"""

from collections.abc import Iterator, Mapping, Sequence
from math import floor, log, log10
from typing import Final

from rcrules.design import natural
from rcrules.parts import Known, RatedPart, series
from rcrules.proposals._change import Change, value_change
from rcrules.quantities import show

REACH: Final = 30.0
"""A value is tried up to so many times, and down to one part in so many, of the present one."""
_PAIR_REACH: Final = 10.0
"""The same where two parts are changed at once."""
_NARROW: Final = 4.0
"""The same for E96."""
VOLTAGES: Final = (4.0, 6.3, 10.0, 16.0, 25.0, 35.0, 50.0, 63.0, 100.0, 160.0, 200.0, 250.0, 400.0, 450.0, 630.0, 1e3)
POWERS: Final = (0.063, 0.1, 0.125, 0.25, 0.5, 0.75, 1.0, 2.0, 3.0, 5.0)
TOLERANCES: Final = {"resistor": (0.05, 0.01, 0.005, 0.001), "capacitor": (0.1, 0.05, 0.02, 0.01)}
DIELECTRICS: Final = ("X7R", "C0G")
_SERIES: Final = ((6, 0.25), (12, 0.12), (24, 0.06), (96, 0.011))
"""Values a decade, and the widest tolerance with which the series is made."""


def values_on_bom(part: RatedPart, parts: Mapping[str, RatedPart]) -> list[Change]:
    """Values that fitted parts of the same kind and make have, the nearest first."""
    own = _value(part)
    if own is None:
        return []
    refs: dict[float, str] = {}
    for other in sorted(parts.values(), key=lambda item: natural(item.ref)):
        value = _value(other) if _alike(other, part) else None
        if value is not None and _near(value, own, REACH):
            refs.setdefault(float(f"{value:.6g}"), other.ref)
    found = [value_change(part, own, value, f"on the BOM as {ref}", _far(value, own)) for value, ref in refs.items()]
    return sorted(found, key=lambda change: change.distance)


def values_of_series(part: RatedPart) -> Iterator[list[Change]]:
    """Preferred values, series by series as far as the part's tolerance goes, each the nearest first."""
    own = _value(part)
    if own is None:
        return
    tolerance = next((share.high for share in part.shares if share.name == "tolerance"), 0.2)
    for count, widest in _SERIES:
        if tolerance <= widest:
            reach = _NARROW if count > len(DECADE) else REACH
            near = [value for value in _around(own, count) if _near(value, own, reach)]
            found = [value_change(part, own, value, f"E{count}", _far(value, own)) for value in near]
            yield sorted(found, key=lambda change: change.distance)


def coarse_values(part: RatedPart) -> list[Change]:
    """Values of E3 up to ten times and down to a tenth of the present one, and that itself left out."""
    own = _value(part)
    near = [] if own is None else [value for value in _around(own, 3) if _near(value, own, _PAIR_REACH)]
    return [value_change(part, own, value, "E3", _far(value, own)) for value in near if own is not None]


DECADE: Final = series(24)


def _around(value: float, count: int) -> Iterator[float]:
    """Values of the series from two decades below to two above."""
    digits = 1 if count <= len(DECADE) else 2
    decade = floor(log10(value))
    for power in range(decade - 2, decade + 3):
        yield from (float(f"{step}e{power - digits}") for step in series(count))


def ratings(part: RatedPart) -> list[Change]:
    """Higher rated voltages of a capacitor, higher rated powers of a resistor, the lowest first."""
    what, unit, steps, rated = (
        ("rated voltage", "V", VOLTAGES, part.rated_voltage)
        if part.kind == "capacitor"
        else ("rated power", "W", POWERS, part.rated_power)
    )
    own = rated.si if isinstance(rated, Known) else 0.0
    was = show(own, unit) if own else "not known"
    return [
        Change(
            ref=part.ref, what=what, was=was, now=show(step, unit), number=step, source="preferred rating",
            distance=log(step / own) if own else 0.0,
        )
        for step in steps
        if step > own * 1.001
    ]  # fmt: skip


def tighter(part: RatedPart) -> list[Change]:
    """Closer tolerances and steadier dielectrics, the mildest first."""
    share = next((share for share in part.shares if share.name == "tolerance"), None)
    was = "not known" if share is None else f"±{show(share.high, '%')}"
    steps = [step for step in TOLERANCES.get(part.kind, ()) if share is None or step < share.high * 0.999]
    found = [
        Change(
            ref=part.ref, what="tolerance", was=was, now=f"±{show(step, '%')}", number=step,
            source="closer tolerance", distance=0.0,
        )
        for step in steps
    ]  # fmt: skip
    return found + [change for change in _dielectrics(part) if part.kind == "capacitor"]


def _dielectrics(part: RatedPart) -> Sequence[Change]:
    """Ceramics that move less with temperature, bias and age; other technologies stay what they are."""
    if part.polarised or part.dielectric in ("C0G", "film"):
        return []
    better = DIELECTRICS[DIELECTRICS.index(part.dielectric) + 1 :] if part.dielectric in DIELECTRICS else DIELECTRICS
    return [
        Change(
            ref=part.ref, what="dielectric", was=part.dielectric or "not known", now=name, number=None,
            source="steadier dielectric", distance=0.0,
        )
        for name in better
    ]  # fmt: skip


def _alike(other: RatedPart, part: RatedPart) -> bool:
    """Whether one could stand in the place of the other but for its value."""
    return other.fitted and (other.kind, other.dielectric, other.polarised) == (
        part.kind,
        part.dielectric,
        part.polarised,
    )


def _value(part: RatedPart) -> float | None:
    return part.value.si if isinstance(part.value, Known) and part.value.si > 0 else None


def _far(value: float, own: float) -> float:
    return abs(log(value / own))


def _near(value: float, own: float, reach: float) -> bool:
    """Within reach, and another value than the present one."""
    return 1e-6 < _far(value, own) <= log(reach) * (1 + 1e-9)
