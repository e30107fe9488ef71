"""What spreads a part's value: tolerance, temperature, bias, ageing; given or assumed, each with its origin."""

import math
from dataclasses import dataclass
from typing import Final

from rcrules.parts._dielectrics import COLD, COLD_LOSS, TYPICAL_TEMPERATURE, ageing, ageing_rate, class_one, class_two
from rcrules.parts._model import Share
from rcrules.project import Project
from rcrules.quantities import show

ROOM: Final = 25.0
"""[°C] at which marked values hold."""
ASSUMED_TEMPERATURE: Final = (0.0, 70.0)
"""[°C] where the project file gives none."""
_ASSUMED_LIFE: Final = 10 * 31557600.0
"""[s]"""
_ASSUMED_TOLERANCE: Final = {"resistor": 0.05, "capacitor": 0.20}
_OUTSIDE: Final = (-0.80, 0.30)
"""Change of a ceramic outside the temperatures of its letter code, where nothing is promised."""
_BIAS: Final = ((1e-6, -0.60), (1e-7, -0.30), (0.0, -0.10))
"""From which capacitance [F], the loss that DC voltage up to the rating may cause in a class 2 ceramic."""
_LOAD_LIFE: Final = ((1000.0, 0.01), (math.inf, 0.02))
"""Hours, and the drift of a resistor up to there."""
_CONDITIONS: Final = "[conditions] temperature = "


def tolerance(kind: str, given: tuple[float, float] | None, origin: str, ask: str) -> Share:
    """The tolerance given, or 5 % for a resistor and 20 % for a capacitor."""
    if given is not None:
        return Share(
            name="tolerance", low=given[0], high=given[1], given=True, origin=f"{_percent(*given)} from {origin}"
        )
    share = _ASSUMED_TOLERANCE[kind]
    why = f"assumed: no tolerance given, {show(share, '%')}"
    return Share(name="tolerance", low=-share, high=share, given=False, origin=why, ask=f'{ask} tolerance = "…"')


@dataclass(frozen=True, slots=True, kw_only=True)
class Conditions:
    """What the project file says about the surroundings, or what is assumed."""

    coldest: float
    """[°C]"""
    hottest: float
    temperature_given: bool
    life: float
    """[s]"""
    life_given: bool


def conditions(project: Project) -> Conditions:
    """The conditions of a project; 0 °C to 70 °C and ten years where it gives none."""
    temperature, life = project.temperature, project.life
    return Conditions(
        coldest=temperature.low if temperature is not None else ASSUMED_TEMPERATURE[0],
        hottest=temperature.high if temperature is not None else ASSUMED_TEMPERATURE[1],
        temperature_given=temperature is not None,
        life=life.high if life is not None else _ASSUMED_LIFE,
        life_given=life is not None,
    )


def drift(low: float, high: float, origin: str, around: Conditions, *, given: bool, ask: str) -> Share:
    """Temperature share from a coefficient between low and high [1/K]."""
    coldest, hottest, known = around.coldest, around.hottest, around.temperature_given
    corners = [slope * (end - ROOM) for slope in (low, high) for end in (coldest, hottest)]
    words = f"{origin} over {_celsius(coldest, hottest)}" + ("" if known else " (assumed range)")
    return Share(
        name="temperature",
        low=min(0.0, *corners),
        high=max(0.0, *corners),
        given=given and known,
        origin=words if given and known else f"assumed: {words}",
        ask="" if given and known else ask if not given else f'{_CONDITIONS}"…"',
    )


def resistor_drift(ohms: float, coefficient: float | None, origin: str, around: Conditions, ask: str) -> Share:
    """Temperature share of a resistor; thick-film chips have 100 ppm/K from 10 Ω to 1 MΩ, more beside."""
    if coefficient is not None:
        words = f"{show(coefficient, '1/K')} from {origin}"
        return drift(-coefficient, coefficient, words, around, given=True, ask="")
    usual = 400e-6 if ohms < 10 else 100e-6 if ohms <= 1e6 else 200e-6
    return drift(-usual, usual, show(usual, "1/K"), around, given=False, ask=f'{ask} tcr = "…"')


def load_life(said: tuple[float, str] | None, around: Conditions, ask: str) -> tuple[Share, ...]:
    """Drift of a resistor over its life: what is said; else, where a life is given, that of thick-film chips.

    1 % over 1000 h and 2 % over 8000 h at rated power and 70 °C are the limits of a thick-film data sheet.
    """
    if said is not None:
        share, origin = said
        return (_both_ways(share, f"load life {show(share, '%')} from {origin}", given=True, ask=""),)
    if not around.life_given:
        return ()
    share = next(share for hours, share in _LOAD_LIFE if around.life <= hours * 3600.0)
    words = f"assumed: load life of a thick-film chip, {show(share, '%')}"
    return (_both_ways(share, words, given=False, ask=f'{ask} load-life = "…"'),)


def _both_ways(share: float, origin: str, *, given: bool, ask: str) -> Share:
    return Share(name="ageing", low=-share, high=share, given=given, origin=origin, ask=ask)


def capacitor_drift(dielectric: str | None, around: Conditions, ask: str, *, electrolytic: bool) -> Share:
    """Temperature share of a capacitor, by the rule of its letter code or the typical figure of its technology."""
    letters = dielectric or ""
    if class_one(letters) is not None:
        low, high = class_one(letters) or (0.0, 0.0)
        return drift(low, high, f"{letters} letter code", around, given=True, ask="")
    if class_two(letters) is not None:
        return _letter_drift(letters, around)
    technology = dielectric if dielectric in TYPICAL_TEMPERATURE else "aluminium" if electrolytic else None
    if technology is not None:
        share = TYPICAL_TEMPERATURE[technology]
        words = f"assumed: typical of {technology}"
        loss = share
        if technology == "aluminium" and around.coldest < COLD:
            loss, words = COLD_LOSS, f"{words} below {show(COLD, 'degC')}"
        return Share(name="temperature", low=-loss, high=share, given=False, origin=words, ask=f'{ask} tcr = "…"')
    words = "assumed: no dielectric given, ±15 % as of a class 2 ceramic"
    return Share(name="temperature", low=-0.15, high=0.15, given=False, origin=words, ask=f'{ask} dielectric = "…"')


def _letter_drift(letters: str, around: Conditions) -> Share:
    lowest, highest, low, high = class_two(letters) or (0.0, 0.0, 0.0, 0.0)
    coldest, hottest, known = around.coldest, around.hottest, around.temperature_given
    if lowest <= coldest and hottest <= highest:
        return Share(name="temperature", low=low, high=high, given=True, origin=f"{letters} letter code")
    words = f"assumed: {letters} promises nothing outside {_celsius(lowest, highest)}"
    if not known:
        words += f", and {_celsius(coldest, hottest)} is assumed"
    return Share(
        name="temperature", low=_OUTSIDE[0], high=_OUTSIDE[1], given=False, origin=words, ask=f'{_CONDITIONS}"…"'
    )


def bias(farads: float, curve: tuple[tuple[float, float], ...], origin: str, ask: str) -> Share:
    """The loss by DC voltage: over the whole curve, or a wide assumed envelope for a class 2 ceramic."""
    if curve:
        return curve_share(curve, origin)
    loss = next(loss for least, loss in _BIAS if farads >= least)
    words = f"assumed: no bias curve, down to {show(loss, '%')} at rated voltage"
    ask = f'{ask} bias-curve = [["0 V", "100 %"], ["… V", "… %"]]'
    return Share(name="bias", low=loss, high=0.0, given=False, origin=words, ask=ask)


def curve_share(curve: tuple[tuple[float, float], ...], origin: str, volts: float | None = None) -> Share:
    """Lowest and highest of a bias curve, over all of it or from 0 V to ``volts``; linear between its points."""
    points = sorted(curve)
    last = points[-1][0] if volts is None else abs(volts)
    fractions = [fraction for at, fraction in points if at <= last] + [_at(points, 0.0), _at(points, last)]
    words = f"bias curve from {origin}, 0 V to {show(last, 'V')}"
    return Share(name="bias", low=min(fractions) - 1, high=max(fractions) - 1, given=True, origin=words)


def _at(points: list[tuple[float, float]], volts: float) -> float:
    """Fraction at a voltage: linear between points, constant outside them."""
    before = [point for point in points if point[0] <= volts]
    after = [point for point in points if point[0] > volts]
    if not before or not after:
        return (before[-1] if before else after[0])[1]
    (low, first), (high, second) = before[-1], after[0]
    return first + (second - first) * (volts - low) / (high - low)


def age(dielectric: str | None, around: Conditions, ask: str) -> Share:
    """Ageing of a class 2 ceramic around the value marked for 1000 h, from soldering to the end of its life."""
    rate = ageing_rate(dielectric) if dielectric else 0.025
    low, high = ageing(rate, around.life / 3600.0)
    words = f"{show(rate, '%')} per decade, 1 h to {show(around.life, 's')}"
    if dielectric is None:
        origin, ask = f"assumed: no dielectric given, {words}", f'{ask} dielectric = "…"'
    elif not around.life_given:
        origin, ask = f"assumed: no life given, {dielectric} {words}", '[conditions] life = "…"'
    else:
        return Share(name="ageing", low=low, high=high, given=True, origin=f"{dielectric} {words}")
    return Share(name="ageing", low=low, high=high, given=False, origin=origin, ask=ask)


def _celsius(low: float, high: float) -> str:
    return f"{show(low, 'degC')} to {show(high, 'degC')}"


def _percent(low: float, high: float) -> str:
    return f"±{show(high, '%')}" if low == -high else f"{show(low, '%')} / +{show(high, '%')}"
