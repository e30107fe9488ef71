"""What is found to hold a joint, before it is told net by net."""

from collections.abc import Iterable
from dataclasses import dataclass, replace
from typing import Final

from rcrules.design import Pin
from rcrules.quantities import Spread

_SHOWN: Final = 3


@dataclass(frozen=True, slots=True, kw_only=True)
class Verdict:
    """What holds a joint and why."""

    kind: str
    evidence: tuple[str, ...]
    volts: float | None = None
    """[V], read from names, values or pins."""
    spread: Spread | None = None
    """[V], where more than one number is known; wins over ``volts``."""
    given: bool = False
    """Whether the voltage is the project's."""
    sure: bool = True
    within: tuple[str, str] | None = None
    """Joints of the lower and the upper rail between which an output stays."""
    through_diode: bool = False
    """Whether the voltage was passed on by a diode: the highest source wins."""

    @property
    def voltage(self) -> Spread | None:
        """[V], as a spread."""
        if self.spread is not None or self.volts is None:
            return self.spread
        return Spread(low=self.volts, nominal=self.volts, high=self.volts, unit="V")

    def passed(
        self, why: str, *, drop: tuple[float, float, float] = (0.0, 0.0, 0.0), sure: bool | None = None
    ) -> "Verdict":
        """The same supply behind a part that drops a voltage (least, nominal, most) [V]."""
        here = self.voltage
        if here is not None:
            here = replace(here, low=here.low - drop[2], nominal=here.nominal - drop[1], high=here.high - drop[0])
        kept = self.sure if sure is None else sure
        diode = any(drop)
        return replace(
            self,
            evidence=(why,),
            spread=here,
            volts=None,
            sure=kept,
            given=self.given and not diode,
            through_diode=diode,
        )


Verdicts = dict[str, Verdict]
"""Joint -> what holds it."""


def keys(pins: Iterable[Pin]) -> tuple[str, ...]:
    """The first few pins as evidence: ``pin U1.VDD``, and how many more there are."""
    names = list(dict.fromkeys(f"pin {pin.key}" for pin in pins))
    rest = len(names) - _SHOWN
    more = (f"{rest} more {'pin' if rest == 1 else 'pins'}",) if rest > 0 else ()
    return (*names[:_SHOWN], *more)
