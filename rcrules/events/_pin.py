"""A question about a pin or contact: the DC states of its net, or what it discharges when it closes."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from rcrules.design import Pin
from rcrules.events._bench import Bench
from rcrules.events._build import build, terminal_of
from rcrules.events._circuit import ZERO, Arm, Circuit
from rcrules.events._clamps import hold_rails
from rcrules.events._contacts import arm, nearest, normally
from rcrules.events._diodes import add_all, widened
from rcrules.events._levels import Leveller
from rcrules.events._options import OptionValue, plain_of
from rcrules.events._part import Extremes, ends_of, states_of, swings_of, switched_on
from rcrules.events._sources import PROJECT, Sources, still
from rcrules.events._structure import check_paths
from rcrules.events._table import LEAST_OHMS, Table
from rcrules.events._unmeasurable import Unmeasurable
from rcrules.measures import Measure
from rcrules.networks import Network
from rcrules.problems import Form, LevelForm, Problem, Structure
from rcrules.quantities import Spread


@dataclass(frozen=True, slots=True, kw_only=True)
class _Spot:
    """A pin in its network."""

    bench: Bench
    pin: Pin
    joint: str
    network: Network
    table: Table
    circuit: Circuit
    sources: Sources


def pose_pin(bench: Bench, pin: Pin, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The problem of a measure at a pin. Raises Unmeasurable."""
    spot = _spot(bench, pin)
    by_kind = {"level": _level, "short": _short}
    return by_kind.get(measure.poses, _states)(spot, measure, options)


def _spot(bench: Bench, pin: Pin) -> _Spot:
    joint, table = bench.joint(pin.net), Table()
    network = next((item for item in bench.board.networks if joint in item.free), None)
    if network is None:
        raise Unmeasurable(f"the net of {pin.key} is in no network")
    active = next((node.active for node in network.nodes if node.active and node.joint == joint), None)
    if active is not None:
        raise Unmeasurable(f"active network: {active}")
    network = widened(bench, network)
    circuit = build(bench, network, table, [joint])
    sources = Sources(bench=bench, table=table)
    add_all(bench, circuit, sources, network)
    return _Spot(bench=bench, pin=pin, joint=joint, network=network, table=table, circuit=circuit, sources=sources)


def _states(spot: _Spot, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """Every subset of supplies, both levels of drivers, contacts open and closed."""
    circuit, bench = spot.circuit, spot.bench
    contacts = tuple(arm(bench, circuit, spot.table, item) for item in spot.network.contacts)
    levels: tuple[tuple[str, LevelForm], ...] = ()
    if options.get("above") == "limit":
        levels = (("limit", _limit(spot)),)
    for closed in ((), contacts) if contacts else ((),):
        check_paths(circuit, closed)
    ends = (spot.joint, spot.joint if levels else ZERO)
    least = options.get("extreme") == "least"
    railed = hold_rails(bench, circuit, spot.sources)
    waves, transient = switched_on(circuit, spot.sources)
    extremes = Extremes(least=least, signed=False, every=transient)
    states = states_of(circuit, spot.sources, ends, extremes)
    ohms = circuit.values("resistor")
    structure = Structure(
        shape=circuit.shape(),
        ohms=ohms,
        farads=circuit.values("capacitor"),
        waveforms=waves,
        amps=circuit.amps(),
        diodes=circuit.diodes(),
        earlier=(circuit.shape(contacts), (*ohms, *(item.value for item in contacts))) if contacts else None,
        empty=True,
        at=circuit.terminal(spot.joint),
        states=states,
        swings=swings_of(circuit, spot.sources) if transient else (),
        levels=levels,
        options=(*plain_of(measure, options), ("transient", float(transient)), ("railed", float(railed))),
    )
    return Problem(structure=structure, parameters=tuple(spot.table.parameters), names=circuit.names(before=contacts))


def _limit(spot: _Spot) -> LevelForm:
    """The most that the pin may carry, as a level. Raises Unmeasurable."""
    level = spot.bench.pin_fact(spot.pin, lambda facts: facts.max_voltage)
    if level is None:
        raise Unmeasurable(
            f"highest voltage of {spot.pin.key} is not known", f'[pin."{spot.pin.key}"] max-voltage = "…"'
        )
    leveller = Leveller(bench=spot.bench, circuit=spot.circuit, table=spot.table)
    for joint in leveller.nets(level):
        terminal_of(spot.bench, spot.circuit, joint)
    return leveller.form(f"{spot.pin.key} max-voltage", level, rising=True)


def _level(spot: _Spot, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """The state in which the input is lowest, or highest: supplies on, one driver, pin or contact acting on it."""
    low, circuit = measure.name == "input_voltage_low", spot.circuit
    open_, closed = _positions(spot, low=low)
    railed = hold_rails(spot.bench, circuit, spot.sources)
    sources = tuple(_on(spot, name, high=not low) for name in circuit.held)
    positions = [closed if low else open_] if _to_ground(spot, closed) else [open_, closed]
    for position in positions:
        check_paths(circuit, position)
    ohms = circuit.values("resistor")
    shapes = [(circuit.shape(position), (*ohms, *(item.value for item in position))) for position in positions]
    structure = Structure(
        shape=shapes[0][0],
        ohms=shapes[0][1],
        farads=circuit.values("capacitor"),
        waveforms=tuple(still(volts) for volts in sources),
        amps=circuit.amps(),
        diodes=circuit.diodes(),
        earlier=shapes[1] if len(shapes) > 1 else None,
        at=circuit.terminal(spot.joint),
        states=(sources,),
        options=(*plain_of(measure, options), ("transient", 0.0), ("railed", float(railed))),
    )
    return Problem(
        structure=structure, parameters=tuple(spot.table.parameters), names=circuit.names(positions[0], positions[-1])
    )


def _positions(spot: _Spot, *, low: bool) -> tuple[tuple[Arm, ...], tuple[Arm, ...]]:
    """What is closed while the input rests, and while the nearest contact or the weakest pin acts on it."""
    bench, circuit, table = spot.bench, spot.circuit, spot.table
    usual = [item for item in spot.network.contacts if normally(bench, item) == "closed"]
    acting: list[Arm] = []
    pulls = _drives(spot)
    own = nearest(bench, spot.network, circuit, spot.joint) if spot.network.contacts else None
    if own is not None:
        acting = [arm(bench, circuit, table, own)]
    elif pulls:
        acting = [max(pulls, key=lambda item: _ohms(spot, item))]
    elif not any(spot.sources.kind(joint) == "driven" for joint in circuit.joints.values()):
        driven = circuit.driven([name for name in circuit.joints if name != ZERO])
        if low == (spot.joint in driven):
            raise Unmeasurable(f"nothing that is known drives {spot.pin.key} {'low' if low else 'high'}")
    others = tuple(arm(bench, circuit, table, item) for item in usual if own is None or item.ref != own.ref)
    return others, (*others, *acting)


def _drives(spot: _Spot) -> list[Arm]:
    """Other pins at the net that drive it low, as resistors to ground."""
    found = []
    for pin in spot.bench.pins(spot.joint):
        drive = spot.bench.pin_fact(pin, lambda facts: facts.drive)
        if drive is not None and pin.key != spot.pin.key:
            found.append(_drive(spot, pin, drive))
    return found


def _drive(spot: _Spot, pin: Pin, drive: tuple[Spread, Spread]) -> Arm:
    """A pin that drives low: the voltage that it still reaches at a current, as a resistance."""
    volts, amps = drive
    ohms = Spread(low=volts.low / amps.high, nominal=volts.nominal / amps.nominal, high=volts.high / amps.low, unit="Ω")
    value = spot.table.given(f"{pin.key} drive", ohms, PROJECT, least=LEAST_OHMS, always=True)
    return Arm(ref=f"{pin.key} drive", kind="resistor", a=spot.joint, b=spot.circuit.hold(ZERO), value=value)


def _ohms(spot: _Spot, item: Arm) -> float:
    """Nominal resistance of a pin that drives."""
    return next(parameter.nominal for parameter in spot.table.parameters if parameter.name == item.ref)


def _to_ground(spot: _Spot, closed: Sequence[Arm]) -> bool:
    """Whether what closes leads to 0 V and nothing is ever below it: then closed is lowest and open highest."""
    spreads = [spot.sources.volts(joint) for joint in spot.circuit.joints.values()]
    positive = all(spread is not None and spread.low >= 0.0 for spread in spreads)
    return positive and all(ZERO in (item.a, item.b) for item in closed)


def _on(spot: _Spot, name: str, *, high: bool) -> Form:
    """Voltage of a source that is on: a supply's own, the lower or higher level of a driver."""
    low_form, high_form = ends_of(spot.circuit, spot.sources, name)
    joint = spot.circuit.joints.get(name)
    if joint is not None and spot.sources.kind(joint) == "supply":
        return spot.sources.supply(joint)
    return high_form if high else low_form


def _short(spot: _Spot, measure: Measure, options: Mapping[str, OptionValue]) -> Problem:
    """All sources at their highest, at rest; then the contact closes, or the pin drives low."""
    bench, circuit = spot.bench, spot.circuit
    contact = next((item for item in spot.network.contacts if item.ref == spot.pin.ref), None)
    usual = [item for item in spot.network.contacts if normally(bench, item) == "closed" and item is not contact]
    before = tuple(arm(bench, circuit, spot.table, item) for item in usual)
    closing = _closing(spot) if contact is None else arm(bench, circuit, spot.table, contact)
    check_paths(circuit, before)
    ohms = circuit.values("resistor")
    after = (*before, closing)
    sources = [still(_on(spot, name, high=True)) for name in circuit.held]
    structure = Structure(
        shape=circuit.shape(after),
        ohms=(*ohms, *(item.value for item in after)),
        farads=circuit.values("capacitor"),
        waveforms=tuple(sources),
        amps=circuit.amps(),
        diodes=circuit.diodes(),
        earlier=(circuit.shape(before), (*ohms, *(item.value for item in before))),
        at=circuit.terminal(closing.a),
        against=circuit.terminal(closing.b),
        element=len(ohms) + len(before),
        options=plain_of(measure, options),
    )
    names = circuit.names(after, before)
    return Problem(structure=structure, parameters=tuple(spot.table.parameters), names=names)


def _closing(spot: _Spot) -> Arm:
    """The pin as a resistor to ground. Raises Unmeasurable where its strength is not known."""
    drive = spot.bench.pin_fact(spot.pin, lambda facts: facts.drive)
    if drive is None:
        key = spot.pin.key
        raise Unmeasurable(f"strength of {key} is not known", f'[pin."{key}"] drive = "… V at … mA"')
    return _drive(spot, spot.pin, drive)
