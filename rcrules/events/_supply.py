"""A question about a supply: the capacitors, bleeders and load that hang right on it."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from rcrules.engine import Shape
from rcrules.events._bench import Bench
from rcrules.events._circuit import ZERO, Circuit
from rcrules.events._discharge import pose_discharge
from rcrules.events._levels import Leveller
from rcrules.events._options import OptionValue, levels_of, plain_of
from rcrules.events._sources import PROJECT, Sources, moved, still
from rcrules.events._table import Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import Branch, Held
from rcrules.problems import Form, LevelForm, Names, Problem, Structure, Waveform


@dataclass(frozen=True, slots=True, kw_only=True)
class _Supply:
    """A supply and the branches between it and ground."""

    bench: Bench
    joint: str
    table: Table
    sources: Sources
    branches: tuple[Branch, ...]

    def of(self, kind: str) -> tuple[Branch, ...]:
        """Branches of a kind."""
        return tuple(item for item in self.branches if item.kind == kind)


def pose_supply(bench: Bench, held: Held, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The problem of a measure at a supply. Raises Unmeasurable."""
    joint, table = bench.joint(held.net), Table()
    sources = Sources(bench=bench, table=table)
    found = tuple(item for item in bench.branches.get(joint, ()) if _far(sources, item, joint) == "ground")
    supply = _Supply(bench=bench, joint=joint, table=table, sources=sources, branches=found)
    if not supply.of("capacitor"):
        raise Unmeasurable(f"no capacitor from {joint} to ground")
    if measure.poses == "discharge":
        first = supply.of("capacitor")[0]
        ground = first.b if first.a == joint else first.a
        return pose_discharge(bench, Branch(ref=joint, kind="capacitor", a=joint, b=ground), measure, options)
    return _posed(supply, measure, options)


def _far(sources: Sources, branch: Branch, joint: str) -> str:
    return sources.kind(branch.b if branch.a == joint else branch.a)


def _posed(supply: _Supply, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The supply as held terminal 0, ground as 1; resistors count where something is drawn for a while."""
    volts = supply.sources.supply(supply.joint)
    resistors = supply.of("resistor") if measure.name == "hold_up_time" else ()
    capacitors = supply.of("capacitor")
    load, draws = _load(supply) if measure.name == "hold_up_time" else ((), "")
    farads = tuple(_value(supply, item) for item in capacitors)
    structure = Structure(
        shape=Shape(0, 2, ((0, 1),) * len(resistors), ((0, 1),) * len(capacitors)),
        ohms=tuple(_value(supply, item) for item in resistors),
        farads=farads,
        curves=_curves(supply, capacitors) if measure.incremental else (),
        waveforms=(_wave(supply, measure, volts), still(())),
        at=0,
        against=1,
        load=load,
        levels=_levels(supply, measure, options),
        states=((volts, ()),),
        rising=False,
        options=(*plain_of(measure, options), *((("draws", draws),) if draws else ())),
    )
    names = Names(
        terminals=(supply.joint, ZERO),
        resistors=tuple(item.ref for item in resistors),
        capacitors=tuple(item.ref for item in capacitors),
    )
    return Problem(structure=structure, parameters=tuple(supply.table.parameters), names=names)


def _curves(supply: _Supply, capacitors: Sequence[Branch]) -> tuple[tuple[int, tuple[tuple[float, float], ...]], ...]:
    """The bias curves of those that have one, whose columns then hold at 0 V."""
    found = []
    for index, item in enumerate(capacitors):
        part = supply.bench.board.parts[item.ref]
        if part.bias_curve:
            supply.table.without_bias(part)
            found.append((index, part.bias_curve))
    return tuple(found)


def _value(supply: _Supply, branch: Branch) -> Form:
    most = supply.sources.most(supply.joint)
    volts = None if most is None else max(abs(most.low), abs(most.high))
    return supply.table.part(supply.bench.board.parts[branch.ref], volts)


def _wave(supply: _Supply, measure: Measure, volts: Form) -> Waveform:
    """At rest, or along its ramp. Raises Unmeasurable where the ramp is not known."""
    if measure.name != "inrush_current":
        return still(volts)
    rise = supply.sources.rise(supply.joint)
    if rise is None:
        raise Unmeasurable(f"rise of {supply.joint} is not known", f'[supply."{supply.joint}"] rise = "…"')
    return moved((), volts, (), rise)


def _load(supply: _Supply) -> tuple[Form, str]:
    """What the project says that is drawn: a current or a power. Raises Unmeasurable."""
    load = supply.bench.supply_fact(supply.joint, lambda facts: facts.load)
    if load is None:
        raise Unmeasurable(f"load of {supply.joint} is not known", f'[supply."{supply.joint}"] load = "…"')
    form = supply.table.given(f"{supply.joint} load", load, PROJECT, least=0.0)
    return form, "power" if load.unit == "W" else "current"


def _levels(supply: _Supply, measure: Measure, options: Mapping[str, OptionValue]) -> tuple[tuple[str, LevelForm], ...]:
    found = []
    circuit = Circuit(held=[supply.joint, ZERO])
    leveller = Leveller(bench=supply.bench, circuit=circuit, table=supply.table)
    for name, level in levels_of(measure, options).items():
        if level.of is not None or level.nets or level.edge:
            raise Unmeasurable("a supply falls to a fixed voltage")
        found.append((name, leveller.form(name, level, rising=False)))
    return tuple(found)
