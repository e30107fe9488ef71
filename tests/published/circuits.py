"""Circuits as a table of branches, posed by hand: the smallest way to a Structure."""

from dataclasses import replace

from rcrules.engine import Shape
from rcrules.problems import Form, LevelForm, Parameter, Problem, Structure, Waveform, column, constant


def parameter(name: str, nominal: float, share: float = 0.0) -> Parameter:
    """A number with a relative spread."""
    low, high = nominal * (1 - share), nominal * (1 + share)
    return Parameter(
        name=name, unit="", low=low, nominal=nominal, high=high, given_low=low, given_high=high, origin="test"
    )


def steps(volts: Form, before: Form = ()) -> Waveform:
    """A jump at 0."""
    return Waveform(before=before, points=(((), volts),))


def ramps(volts: Form, seconds: float) -> Waveform:
    """From 0 V along a straight line."""
    return Waveform(before=(), points=(((), ()), (constant(seconds), volts)))


def circuit(free: str, held: str, branches: str, waves: dict[str, Waveform], **numbers: tuple[float, float]) -> Problem:
    """``branches`` = "R1 IN N, C1 N GND"; numbers = value and relative spread of each; one word per terminal."""
    names = [*free.split(), *held.split()]
    parts = [item.split() for item in branches.split(",")]
    parameters = [parameter(name, *number) for name, number in numbers.items()]
    index = {item.name: number for number, item in enumerate(parameters)}
    pairs = {ref: (names.index(a), names.index(b)) for ref, a, b in parts}
    resistors, capacitors = [r for r in pairs if r[0] == "R"], [c for c in pairs if c[0] == "C"]
    structure = Structure(
        shape=Shape(
            len(free.split()),
            len(held.split()),
            tuple(pairs[r] for r in resistors),
            tuple(pairs[c] for c in capacitors),
        ),
        ohms=tuple(column(index[ref]) for ref in resistors),
        farads=tuple(column(index[ref]) for ref in capacitors),
        waveforms=tuple(waves.get(name, steps(())) for name in held.split()),
        empty=True,
    )
    return Problem(structure=structure, parameters=tuple(parameters))


def changed(problem: Problem, **changes: object) -> Problem:
    """The same problem with another structure."""
    return replace(problem, structure=replace(problem.structure, **changes))  # type: ignore[arg-type]  # any field


def volts(value: float) -> LevelForm:
    """A fixed level."""
    return LevelForm(kind="voltage", offset=constant(value))


def of(terminal: int, fraction: float) -> LevelForm:
    """A level that follows a held terminal."""
    return LevelForm(kind="voltage", follows=((terminal, constant(fraction)),))
