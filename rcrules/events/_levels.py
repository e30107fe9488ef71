"""Levels of rules and pins in columns."""

from dataclasses import dataclass

from rcrules.events._bench import Bench
from rcrules.events._build import terminal_of
from rcrules.events._circuit import Circuit
from rcrules.events._sources import PROJECT
from rcrules.events._table import Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.levels import Level
from rcrules.networks import Node
from rcrules.problems import Form, LevelForm
from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class Leveller:
    """Turns levels into forms; nets that a level follows become held terminals."""

    bench: Bench
    circuit: Circuit
    table: Table
    node: Node | None = None

    def nets(self, level: Level, *, rising: bool = True) -> list[str]:
        """Joints that a level follows."""
        levels = [level] if level.edge is None else [item for _, item in self._thresholds(level.edge, rising=rising)]
        return [self.bench.joint(net) for item in levels for _, net in item.nets]

    def form(self, name: str, level: Level, *, rising: bool) -> LevelForm:
        """A level in columns. Raises Unmeasurable where the pin's thresholds are not known."""
        named = level.edge is not None
        if level.edge is not None:
            name, level = self._edge(level.edge, rising=rising)
        if level.of is not None:
            return LevelForm(kind=level.of, fraction=self._number(name, level.fraction, named=False))
        follows = []
        for part, net in level.nets:
            terminal = terminal_of(self.bench, self.circuit, self.bench.joint(net))
            single = len(level.nets) == 1 and not level.offset
            form = self._number(name if single else f"{name} part of {net}", part, named=named and part.nominal != 1.0)
            follows.append((self.circuit.terminal(terminal), form))
        return LevelForm(kind="voltage", offset=self._number(name, level.offset, named=named), follows=tuple(follows))

    def _number(self, name: str, spread: Spread | None, *, named: bool) -> Form:
        if spread is None or (spread.low == spread.high == 0.0):
            return ()
        return self.table.given(name, spread, PROJECT, always=named)

    def _edge(self, edge: str, *, rising: bool) -> tuple[str, Level]:
        """The threshold of the fed pin that decides: of several pins the first to switch, or the last."""
        earliest = (edge == "may switch") == rising
        return (min if earliest else max)(
            self._thresholds(edge, rising=rising), key=lambda item: self._nominal(item[1])
        )

    def _thresholds(self, edge: str, *, rising: bool) -> list[tuple[str, Level]]:
        """Name and level of the threshold of every fed pin of which it is known. Raises Unmeasurable where none is."""
        feeds = self.node.feeds if self.node else ()
        found = [item for key in feeds if (item := self._threshold(key, edge, rising=rising)) is not None]
        if found:
            return found
        if not feeds:
            raise Unmeasurable(f"{self.node.net if self.node else 'it'} feeds no pin whose thresholds would count")
        raise Unmeasurable(f"thresholds of {feeds[0]} are not known", f'[pin."{feeds[0]}"] low = "…"  high = "…"')

    def _threshold(self, key: str, edge: str, *, rising: bool) -> tuple[str, Level] | None:
        pin = self.bench.pin(key)
        if pin is None:
            return None
        schmitt = self.bench.pin_fact(pin, lambda facts: facts.rising if rising else facts.falling)
        lower = (edge == "may switch") == rising
        if schmitt is not None:
            volts = schmitt.low if lower else schmitt.high
            level = Level(text=edge, offset=Spread(low=volts, nominal=volts, high=volts, unit="V"))
            return f"{key} {'rising' if rising else 'falling'}", level
        if lower:
            low = self.bench.pin_fact(pin, lambda facts: facts.low)
            return None if low is None else (f"{key} low", low)
        high = self.bench.pin_fact(pin, lambda facts: facts.high)
        return None if high is None else (f"{key} high", high)

    def _nominal(self, level: Level) -> float:
        volts = level.offset.nominal if level.offset else 0.0
        for part, net in level.nets:
            held = self.bench.held(self.bench.joint(net))
            volts += part.nominal * (held.voltage.nominal if held and held.voltage else 1.0)
        return volts
