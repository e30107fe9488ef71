"""The parameter table while a problem is being posed: the only home of uncertainty."""

import math
from dataclasses import dataclass, field, replace

from rcrules.events._unmeasurable import Unmeasurable
from rcrules.parts import RatedPart, Unknown, at_bias
from rcrules.problems import Form, Parameter, column, constant
from rcrules.quantities import Spread

LEAST_OHMS = 1e-9
"""What stands for 0 Ω; its effect is below the precision of any answer."""


@dataclass(slots=True)
class Table:
    """Parameters by name, each once."""

    parameters: list[Parameter] = field(default_factory=list)
    forms: dict[str, Form] = field(default_factory=dict)

    def take(self, other: "Table") -> None:
        """Fill an empty table with the columns of another."""
        self.parameters, self.forms = list(other.parameters), dict(other.forms)

    def part(self, part: RatedPart, volts: float | None = None) -> Form:
        """The column of a resistor's or capacitor's value. Raises Unmeasurable where it is not known.

        volts: the most that a capacitor sees [V]; its bias loss is taken up to there, or at its worst if None.
        """
        if part.ref in self.forms:
            return self.forms[part.ref]
        if isinstance(part.value, Unknown):
            raise _unvalued(part, part.value)
        return self.add(_parameter(part if volts is None else at_bias(part, volts), part.value.origin))

    def without_bias(self, part: RatedPart) -> None:
        """Let the column of a capacitor hold at 0 V; what takes it up has its curve."""
        if isinstance(part.value, Unknown):
            raise _unvalued(part, part.value)
        bare = replace(part, shares=tuple(share for share in part.shares if share.name != "bias"))
        index = next(index for index, item in enumerate(self.parameters) if item.name == part.ref)
        self.parameters[index] = _parameter(bare, part.value.origin)

    def insulation(self, part: RatedPart) -> Form | None:
        """The column of what a capacitor's dielectric lets through, a resistance from its least to infinity.

        None where nothing is said of it. Raises Unmeasurable where what is said cannot be used.
        """
        said = part.insulation
        if said is None:
            return None
        if isinstance(said, Unknown):
            raise Unmeasurable(f"leakage of {part.ref}: {said.why}", f'[part."{part.ref}"] rated-voltage = "…"')
        name = f"{part.ref} insulation"
        if name in self.forms:
            return self.forms[name]
        return self.add(
            Parameter(
                name=name,
                unit="Ω",
                low=said.least,
                nominal=math.inf,
                high=math.inf,
                given_low=said.least if said.given else math.inf,
                given_high=math.inf,
                origin=said.origin,
                assumed=() if said.given else (said.origin,),
                ask=said.ask,
            )
        )

    def absorption(self, part: RatedPart) -> Form:
        """The column of the share of its voltage that a capacitor's dielectric takes late [1], from nothing on."""
        said, name = part.absorption, f"{part.ref} absorption"
        if said is None or said.share <= 0.0:
            return ()
        if name in self.forms:
            return self.forms[name]
        return self.add(
            Parameter(
                name=name,
                unit="1",
                low=0.0,
                nominal=0.0,
                high=said.share,
                given_low=0.0,
                given_high=said.share if said.given else 0.0,
                origin=said.origin,
                assumed=() if said.given else (said.origin,),
                ask=said.ask,
            )
        )

    def given(
        self, name: str, spread: Spread, origin: str, *, least: float | None = None, always: bool = False
    ) -> Form:
        """A number that an input gives; one without spread is a parameter only where it is ``always`` to be named."""
        if name in self.forms:
            return self.forms[name]
        low, nominal, high = (_at_least(value, least) for value in (spread.low, spread.nominal, spread.high))
        if low == high and not always:
            self.forms[name] = constant(nominal)
            return self.forms[name]
        return self.add(
            Parameter(
                name=name,
                unit=spread.unit,
                low=low,
                nominal=nominal,
                high=high,
                given_low=low,
                given_high=high,
                origin=origin,
            )
        )

    def assumed(self, name: str, spread: Spread, text: str, ask: str, *, given: Spread | None = None) -> Form:
        """A number of which the spread, or what goes beyond ``given``, is an assumption."""
        if name in self.forms:
            return self.forms[name]
        inner = given or Spread(low=spread.nominal, nominal=spread.nominal, high=spread.nominal, unit=spread.unit)
        return self.add(
            Parameter(
                name=name,
                unit=spread.unit,
                low=spread.low,
                nominal=spread.nominal,
                high=spread.high,
                given_low=inner.low,
                given_high=inner.high,
                origin=text,
                assumed=(text,),
                ask=ask,
            )
        )

    def add(self, parameter: Parameter) -> Form:
        """A new column."""
        self.forms[parameter.name] = column(len(self.parameters))
        self.parameters.append(parameter)
        return self.forms[parameter.name]


def part_parameter(part: RatedPart) -> Parameter:
    """A resistor or capacitor as a column of its own, its bias loss at its worst. Raises Unmeasurable."""
    table = Table()
    table.part(part)
    return table.parameters[0]


def _parameter(part: RatedPart, origin: str) -> Parameter:
    """The column of a part's value over all its shares."""
    (low, nominal, high), (given_low, _, given_high) = part.bounds(), part.bounds(given_only=True)
    least = LEAST_OHMS if part.kind == "resistor" else 0.0
    assumed = [share for share in part.shares if not share.given]
    return Parameter(
        name=part.ref,
        unit="Ω" if part.kind == "resistor" else "F",
        low=max(low, least),
        nominal=max(nominal, least),
        high=max(high, least),
        given_low=max(given_low, least),
        given_high=max(given_high, least),
        origin=", ".join(share.origin for share in part.shares) or origin,
        assumed=tuple(share.origin for share in assumed),
        ask=next((share.ask for share in assumed if share.ask), ""),
        asks=tuple(share.ask for share in assumed),
    )


def _at_least(value: float, least: float | None) -> float:
    return value if least is None else max(value, least)


def _unvalued(part: RatedPart, value: Unknown) -> Unmeasurable:
    """Why a part has no number to calculate with, and the line that would give one."""
    if part.kind in ("resistor", "capacitor"):
        return Unmeasurable(f"value of {part.ref}: {value.why}", f'[part."{part.ref}"] value = "…"')
    kind, what = ("potentiometer", "setting") if part.kind == "potentiometer" else ("thermistor", "resistance")
    reason = f"{part.ref} is a {kind}, and its {what} is not known"
    ends = {pin.net for pin in part.part.pins}
    return Unmeasurable(reason, f'[part."{part.ref}"] kind = "resistor"  value = "…"' if len(ends) <= 2 else "")
