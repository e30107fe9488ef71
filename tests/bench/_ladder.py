"""Ladders of many sections whose every resistor and capacitor is uncertain, as problems of a measure."""

from dataclasses import dataclass, replace

from rcrules.engine import Shape
from rcrules.measures import registry
from rcrules.problems import LevelForm, Parameter, Problem, Quantity, Structure, Waveform, column, constant

OHMS, FARADS = 1e3, 1e-9
SPREAD = 0.2
"""Of every part, to both sides."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Asked:
    """A measure of one node of a ladder."""

    name: str
    problem: Problem
    measure: Quantity


def questions(sections: int, at: int) -> tuple[Asked, ...]:
    """Delay to 70 %, rise time and corner frequency of the node behind so many sections (from 0), driven by 1 V."""
    series = tuple((sections if node == 0 else node - 1, node) for node in range(sections))
    shunt = tuple((node, sections + 1) for node in range(sections))
    plain = Structure(
        shape=Shape(free=sections, held=2, resistors=series, capacitors=shunt),
        ohms=tuple(column(index) for index in range(sections)),
        farads=tuple(column(sections + index) for index in range(sections)),
        waveforms=(_step(1.0), _step(0.0)),
        at=at,
    )
    low, high = (LevelForm(kind="step", fraction=constant(part)) for part in (0.1, 0.9))
    asked = {
        "delay": replace(plain, levels=(("to", LevelForm(kind="voltage", offset=constant(0.7))),)),
        "rise_time": replace(plain, levels=(("low", low), ("high", high))),
        "corner_frequency": replace(plain, options=(("source", float(sections)), ("passes", "low"))),
    }
    parameters = (*_parts("R", OHMS, "Ω", sections), *_parts("C", FARADS, "F", sections))
    return tuple(
        Asked(name=name, problem=Problem(structure=structure, parameters=parameters), measure=registry()[name])
        for name, structure in asked.items()
    )


def _step(volts: float) -> Waveform:
    return Waveform(before=constant(0.0), points=((constant(0.0), constant(volts)),))


def _parts(letter: str, value: float, unit: str, count: int) -> tuple[Parameter, ...]:
    low, high = value * (1.0 - SPREAD), value * (1.0 + SPREAD)
    return tuple(
        Parameter(
            name=f"{letter}{number}",
            unit=unit,
            low=low,
            nominal=value,
            high=high,
            given_low=low,
            given_high=high,
            origin="the ladder",
        )
        for number in range(1, count + 1)
    )
