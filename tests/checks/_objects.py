"""Small boards and rules made by hand."""

from typing import Any

from rcrules.design import Design, Net, Part, Pin
from rcrules.errors import Place
from rcrules.measures import Measure, Theory
from rcrules.networks import Board, Branch, Held, Network, Node
from rcrules.parts import Known, RatedPart
from rcrules.quantities import Spread
from rcrules.rulebook import Pack, Rule, Selection

PLACE = Place(file="board.xml", line=7)
PACK = Pack(name="house", title="House rules", needs_facts=False, caution="", file="house.toml")
MEASURE = Measure(
    name="delay",
    subject="node",
    unit="s",
    summary="",
    compute=lambda _, cases: cases[:, 0],
    theory=lambda _, low, __: Theory(signs=(1,) * len(low)),
)


def rule(**changed: Any) -> Rule:
    """A rule that meets every node."""
    fields: dict[str, Any] = {
        "id": "late-enough",
        "pack": PACK,
        "place": PLACE,
        "title": "Late enough",
        "level": "error",
        "selection": Selection(),
        "measure": MEASURE,
        "options": {},
        "limits": (),
    }
    return Rule(**{**fields, **changed})


def part(ref: str, kind: str, si: float, *nets: str, **changed: Any) -> RatedPart:
    """A fitted part between nets."""
    pins = tuple(
        Pin(ref=ref, number=str(number), name="", type="passive", net=net, place=PLACE)
        for number, net in enumerate(nets, 1)
    )
    own = Part(
        ref=ref,
        place=PLACE,
        values=(),
        fields={},
        footprint="",
        symbol="",
        description="",
        sheet=changed.pop("sheet", "/"),
        fitted=True,
        fitted_why="",
        pins=pins,
    )
    fields: dict[str, Any] = {"text": f"{si:g}", "value": Known(si=si, origin="netlist value")}
    return RatedPart(part=own, kind=kind, kind_why="reference", **{**fields, **changed})


def spread(value: float, unit: str) -> Spread:
    """A number without spread."""
    return Spread(low=value, nominal=value, high=value, unit=unit)


def board(**changed: Any) -> Board:
    """A reset of R1 and C1 that feeds U3.NRST, and a decoupling capacitor C2."""
    parts = {
        item.ref: item
        for item in (
            part("R1", "resistor", 1e4, "+3V3", "NRST", sheet="/cpu/"),
            part("C1", "capacitor", 1e-6, "NRST", "GND", dielectric="X7R", sheet="/cpu/"),
            part("C2", "capacitor", 1e-7, "+3V3", "GND", dielectric="C0G"),
            part("U3", "ic", 0.0, "NRST"),
        )
    }
    pins = [pin for item in parts.values() for pin in item.part.pins]
    nets = {net: tuple(pin for pin in pins if pin.net == net) for net in ("+3V3", "GND", "NRST")}
    design = Design(
        parts={ref: item.part for ref, item in parts.items()},
        nets={name: Net(name=name, pins=own, place=PLACE) for name, own in nets.items()},
        exports=(),
        remarks=(),
    )
    node = Node(
        net="NRST",
        joint="NRST",
        across=None,
        role="power-on-delay",
        certainty="sure",
        evidence=(),
        parts=("R1", "C1"),
        fed_from=("+3V3",),
        feeds=("U3.NRST",),
        kinds_fed=("reset",),
    )
    network = Network(
        id="NRST",
        branches=(
            Branch(ref="R1", kind="resistor", a="+3V3", b="NRST"),
            Branch(ref="C1", kind="capacitor", a="NRST", b="GND"),
        ),
        free=("NRST",),
        held=("+3V3", "GND"),
        nodes=(node,),
    )
    held = {
        "+3V3": Held(net="+3V3", kind="supply", voltage=spread(3.3, "V"), given=True, evidence=(), sure=True),
        "GND": Held(net="GND", kind="ground", voltage=spread(0, "V"), given=True, evidence=(), sure=True),
    }
    fields: dict[str, Any] = {
        "design": design,
        "parts": parts,
        "held": held,
        "joints": {"+3V3": "+3V3", "GND": "GND", "NRST": "NRST"},
        "networks": (network,),
        "coverage": {"R1": "network", "C1": "network", "C2": "decoupling"},
        "reasons": {},
    }
    return Board(**{**fields, **changed})
