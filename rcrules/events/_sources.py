"""Voltages of the held terminals: supplies, drivers, ground, and how they move."""

from dataclasses import dataclass

from rcrules.events._bench import Bench
from rcrules.events._table import Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.problems import Form, Waveform, constant
from rcrules.quantities import Spread

SPREAD_ASSUMED = 0.05
"""Relative spread of a supply whose voltage is read from its name alone."""
PROJECT = "the project file"


@dataclass(frozen=True, slots=True, kw_only=True)
class Sources:
    """Voltages of joints as forms, each supply one column wherever it acts."""

    bench: Bench
    table: Table

    def kind(self, joint: str) -> str:
        """``ground``, ``supply`` or ``driven``; a joint that nothing holds counts as driven."""
        held = self.bench.held(joint)
        return held.kind if held else "driven"

    def volts(self, joint: str) -> Spread | None:
        """Voltage of a supply, or swing of a driven net; None = not known."""
        if self.kind(joint) == "supply":
            given = self.bench.supply_fact(joint, lambda facts: facts.voltage)
        else:
            given = self.bench.net_fact(joint, lambda facts: facts.swing)
        held = self.bench.held(joint)
        return given or (held.voltage if held else None)

    def most(self, joint: str) -> Spread | None:
        """Everything that a supply or driven net may be at, what is assumed included; None = not known."""
        found = self.volts(joint)
        held = self.bench.held(joint)
        if found is None and held is not None and held.within is not None:
            return self._between(*held.within)
        known = self.kind(joint) != "supply" or self.bench.supply_fact(joint, lambda facts: facts.voltage) is not None
        return found if found is None or known else _widened(found)

    def rails(self, joint: str) -> tuple[Form, Form] | None:
        """Lowest and highest voltage of an output that stays within its part's rails, as far as it may go.

        None where the swing is known, or a rail is not. How far it goes is an assumption: from not at all to the rail.
        """
        held = self.bench.held(joint)
        if held is None or held.within is None or self.volts(joint) is not None:
            return None
        if any(self.kind(rail) != "ground" and self.most(rail) is None for rail in held.within):
            return None
        text = f"{joint} stays within {held.within[0]} and {held.within[1]}, the rails of the part that drives it"
        reach = Spread(low=0.0, nominal=1.0, high=1.0, unit="1")
        share = self.table.assumed(f"{joint} reach", reach, text, f'[net."{joint}"] swing = "…"')
        low, high = (() if self.kind(rail) == "ground" else self.supply(rail) for rail in held.within)
        return _times(share, low), _times(share, high)

    def supply(self, joint: str, note: str = "") -> Form:
        """The column of a supply's voltage. Raises Unmeasurable where it is not known.

        note: an assumption about how it moves, told with it.
        """
        if joint in self.table.forms:
            return self.table.forms[joint]
        ask = f'[supply."{joint}"] voltage = "…"'
        given = self.bench.supply_fact(joint, lambda facts: facts.voltage)
        held = self.bench.held(joint)
        if given is None and held is not None and held.given:
            given = held.voltage
        if given is not None:
            rise = f'[supply."{joint}"] rise = "…"'
            return self.table.assumed(joint, given, note, rise, given=given) if note else self._given(joint, given)
        if held is None or held.voltage is None:
            raise Unmeasurable(f"voltage of {joint} is not known", ask)
        told = f"{joint} is {held.voltage.nominal:g} V ±{100 * SPREAD_ASSUMED:g} % by its name or pins"
        return self.table.assumed(joint, _widened(held.voltage), f"{told}; {note}" if note else told, ask)

    def at_rest(self, joint: str) -> Form:
        """What a driver that does not take part rests at: anywhere within its swing. Raises Unmeasurable."""
        spread = self.swing(joint)
        text = f"{joint} rests anywhere within its swing"
        rest = Spread(low=spread.low, nominal=spread.low, high=spread.high, unit="V")
        return (
            self.table.assumed(f"{joint} at rest", rest, text, "") if spread.low < spread.high else constant(spread.low)
        )

    def swing(self, joint: str) -> Spread:
        """Levels between which a driven net moves. Raises Unmeasurable where they are not known."""
        found = self.volts(joint)
        if found is None:
            raise Unmeasurable(f"what drives {joint} is not known", f'[net."{joint}"] swing = "…"')
        return found

    def still(self, joint: str) -> Form:
        """Voltage of a joint that does not move."""
        return self.supply(joint) if self.kind(joint) == "supply" else self.at_rest(joint)

    def rise(self, joint: str) -> Form | None:
        """Time of the supply's ramp from 0 to 100 % [s]; None = not given."""
        spread = self.bench.supply_fact(joint, lambda facts: facts.rise)
        return None if spread is None else self.table.given(f"{joint} rise", spread, PROJECT, least=0.0)

    def fall(self, joint: str) -> Form | None:
        """Time of the supply's fall to 0 [s]; None = not given."""
        said = self.bench.supply_fact(joint, lambda facts: facts.fall)
        return self.table.given(f"{joint} fall", said, PROJECT, least=0.0) if isinstance(said, Spread) else None

    def goes(self, joint: str) -> str:
        """What becomes of a supply at power-down: ``open``, ``never`` (it stays up), or '' = it falls to 0 V."""
        said = self.bench.supply_fact(joint, lambda facts: facts.fall)
        return said if isinstance(said, str) else ""

    def opens(self, joint: str) -> bool:
        """Whether nothing feeds a joint any more once the board is switched off."""
        return self.kind(joint) == "supply" and self.goes(joint) == "open"

    def edge(self, joint: str) -> Form | None:
        """Time that a driver takes from one level to the other [s]; None = not given."""
        spread = self.bench.net_fact(joint, lambda facts: facts.edge)
        return None if spread is None else self.table.given(f"{joint} edge", spread, PROJECT, least=0.0)

    def begins(self, joint: str, depth: int = 8) -> Form:
        """When a supply starts to rise: at once, or when the supply it comes ``after`` is valid [s]."""
        after = self.bench.supply_fact(joint, lambda facts: facts.after)
        if after is None or depth == 0:
            return ()
        earlier = self.bench.joint(after)
        ramp = self.rise(earlier)
        return self.begins(earlier, depth - 1) + (_times(ramp, self._valid_share(earlier)) if ramp else ())

    def _valid_share(self, joint: str) -> Form:
        """Part of its ramp after which a supply is valid."""
        valid, volts = self.bench.supply_fact(joint, lambda facts: facts.valid), self.volts(joint)
        if valid is None or volts is None or volts.low <= 0.0:
            return constant(1.0)
        share = Spread(
            low=min(valid.low / volts.high, 1.0),
            nominal=min(valid.nominal / volts.nominal, 1.0),
            high=min(valid.high / volts.low, 1.0),
            unit="1",
        )
        return self.table.given(f"{joint} valid share", share, PROJECT)

    def _between(self, lower: str, upper: str) -> Spread | None:
        """Everything from one rail to another; None = one of them is not known."""
        zero = Spread(low=0.0, nominal=0.0, high=0.0, unit="V")
        ends = [zero if self.kind(rail) == "ground" else self.most(rail) for rail in (lower, upper)]
        known = [end for end in ends if end is not None]
        if len(known) < 2:
            return None
        return Spread(low=known[0].low, nominal=known[1].nominal, high=known[1].high, unit="V")

    def _given(self, joint: str, spread: Spread) -> Form:
        return self.table.given(joint, spread, PROJECT)


def still(volts: Form) -> Waveform:
    """A source that does not move."""
    return Waveform(before=volts, points=(((), volts),))


def moved(before: Form, after: Form, begins: Form = (), takes: Form | None = None) -> Waveform:
    """A source that goes from one voltage to another, at once or along a straight line."""
    if not takes and not begins:
        return Waveform(before=before, points=(((), after),))
    start = [((), before)] if begins else []
    return Waveform(before=before, points=(*start, (begins, before), (begins + (takes or ()), after)))


def _times(first: Form, second: Form) -> Form:
    return tuple((a * b, (*x, *y)) for a, x in first for b, y in second)


def _widened(volts: Spread) -> Spread:
    if volts.low < volts.high:
        return volts
    ends = sorted((volts.nominal * (1 - SPREAD_ASSUMED), volts.nominal * (1 + SPREAD_ASSUMED)))
    return Spread(low=ends[0], nominal=volts.nominal, high=ends[1], unit="V")
