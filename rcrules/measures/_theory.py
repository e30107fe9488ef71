"""What is proved about the slope of a quantity in each column, and where its extremes lie.

T1  A DC voltage or current is linear-fractional in each resistance and linear in each source: its extremes over a box
    lie at vertices (each column alone moves it one way, whatever the others are).
T2  Every time constant rises with every resistance and every capacitance (min-max principle of the pencil C - τG).
T3  Grounded capacitors, one common start, sources that move away from it and never back: with u = |v - start|,
    C u' = -G u + s is a cooperative system (off-diagonals of -G are >= 0) whose state never falls. At every instant u
    falls with each C and each R to a moved source, and rises with each R to a source at rest (Kamke and Müller).
T3b The same for a network at rest on one supply that is then left open: no node rises, since the supply fed it.
T4  The far end of a ladder that is driven at the other end and loaded nowhere: u falls with every R and every C.
"""

from collections.abc import Iterable
from dataclasses import dataclass

from rcrules.measures._measure import Theory
from rcrules.measures._topology import (
    Monotone,
    columns,
    grounded,
    increasing,
    is_zero,
    ladder_end,
    left_open,
    monotone,
    single_mode,
    stepped,
)
from rcrules.problems import Array, Form, LevelForm, Structure


@dataclass(slots=True)
class Slopes:
    """Signs per column while they are being collected; a column that is met with two signs has none."""

    signs: list[int | None]

    def add(self, met: Iterable[int], sign: int | None) -> None:
        """Note a sign for columns."""
        for index in met:
            known = self.signs[index]
            self.signs[index] = sign if known in (0, sign) else None

    def theory(self, *, vertices: bool = False) -> Theory:
        """What has been collected."""
        return Theory(signs=tuple(self.signs), vertices=vertices)


def unproved(structure: Structure, low: Array, high: Array) -> Theory:
    """Nothing is known but that columns on which nothing depends have no influence."""
    del high
    slopes = Slopes([0] * len(low))
    slopes.add(_circuit(structure) | _sources(structure) | _levels(structure), None)
    return slopes.theory()


def slowest_mode(structure: Structure, low: Array, high: Array) -> Theory:
    """T2 for the slowest time constant."""
    return _by_time_constant(structure, low, high, 1)


def corner(structure: Structure, low: Array, high: Array) -> Theory:
    """T2 for a corner of 1/(2πτ): all capacitors at the observed terminal, one way from the source to it."""
    source = int(structure.option("source"))
    paths = [any(source in pair for pair in pairs) for pairs in (structure.shape.resistors, structure.shape.capacitors)]
    passives = (*structure.ohms, *structure.farads)
    if single_mode(structure) and not all(paths) and all(increasing(form, low) for form in passives):
        return _by_time_constant(structure, low, high, -1)
    slopes = Slopes([0] * len(low))
    slopes.add(columns((*structure.ohms, *structure.farads)), None)
    return slopes.theory()


def steady(structure: Structure, low: Array, high: Array) -> Theory:
    """T1 for a DC voltage; each resistance must lie in one resistor only."""
    del high
    slopes = Slopes([0] * len(low))
    slopes.add(columns(structure.ohms), None)
    slopes.add(columns(form for _, form in structure.amps), None)
    slopes.add(columns(wave.points[-1][1] for wave in structure.waveforms), None)
    return slopes.theory(vertices=_multilinear(structure))


def crossing(structure: Structure, low: Array, high: Array, level: LevelForm) -> Theory:
    """T3, T4 for the time at which the observed voltage passes a level; T2 where it is one exponential."""
    moves = _applies(structure, low)
    if moves is None or not _comparable(structure, moves, level, low):
        return _charging(structure, low, high, level)
    slopes = Slopes([0] * len(low))
    _passives(slopes, structure, moves, relative=level.kind != "voltage")
    raising = 1 if moves.rising else -1
    if level.kind == "voltage" and not level.follows:
        slopes.add(columns([moves.swing]), -raising)
        slopes.add(columns([level.offset]), raising if increasing(level.offset, low) else None)
    else:
        slopes.add(columns([*(fraction for _, fraction in level.follows), level.fraction]), raising)
    slopes.add(moves.times, None if level.follows else 1)
    return slopes.theory()


def fraction_left(structure: Structure, low: Array, high: Array) -> Theory:
    """T3, T4, T2 for the part of the step that is left at an instant, or the time at which a given part is left."""
    if _exponential(structure, low):
        return _by_time_constant(structure, low, high, 1)
    return crossing(structure, low, high, LevelForm(kind="step"))


def one_exponential(structure: Structure, low: Array, high: Array) -> Theory:
    """T2 for a span between two parts of the step: sources that only step, and one exponential."""
    if not _exponential(structure, low):
        return unproved(structure, low, high)
    return _by_time_constant(structure, low, high, 1)


def voltage_later(structure: Structure, low: Array, high: Array) -> Theory:
    """T3, T4 for the voltage at an instant."""
    moves = _applies(structure, low)
    if moves is None:
        return unproved(structure, low, high)
    slopes = Slopes([0] * len(low))
    _passives(slopes, structure, moves, relative=False)
    slopes.add(moves.times, None)
    turned = [sign if sign is None or not moves.rising else -sign for sign in slopes.signs]
    slopes = Slopes(turned)
    slopes.add(columns([moves.swing]), 1)
    return slopes.theory()


def _by_time_constant(structure: Structure, low: Array, high: Array, sign: int) -> Theory:
    del high
    slopes = Slopes([0] * len(low))
    for form in (*structure.ohms, *structure.farads):
        slopes.add(columns([form]), sign if increasing(form, low) else None)
    return slopes.theory()


def _exponential(structure: Structure, low: Array) -> bool:
    """Whether the observed voltage is one exponential, which starts at the event."""
    passives = (*structure.ohms, *structure.farads)
    return stepped(structure) and single_mode(structure) and all(increasing(form, low) for form in passives)


def _charging(structure: Structure, low: Array, high: Array, level: LevelForm) -> Theory:
    """One exponential from 0 V to a fixed level, t = τ ln(1/(1 - level/final)), currents drawn included."""
    fixed = level.kind == "voltage" and not level.follows and increasing(level.offset, low)
    if fixed and left_open(structure, low):
        return _decaying(structure, low, level)
    if not (fixed and structure.empty and structure.rising and _exponential(structure, low)):
        return unproved(structure, low, high)
    slopes = Slopes([0] * len(low))
    slopes.add(columns(structure.farads), 1)
    slopes.add(columns(structure.ohms), None)
    for _, amps in structure.amps:
        slopes.add(columns([amps]), 1 if all(factor >= 0.0 and len(term) == 1 for factor, term in amps) else None)
    for wave in structure.waveforms:
        volts = wave.points[-1][1]
        slopes.add(columns([volts]), -1 if increasing(volts, low) else None)
    slopes.add(columns([level.offset]), 1)
    return slopes.theory()


def _decaying(structure: Structure, low: Array, level: LevelForm) -> Theory:
    """T3b for the time of the fall to a fixed level."""
    slopes = Slopes([0] * len(low))
    slopes.add(columns(structure.farads), 1)
    for pair, form in zip(structure.shape.resistors, structure.ohms, strict=True):
        slopes.add(columns([form]), 1 if max(pair) >= structure.shape.free else None)
    slopes.add(columns(form for _, form in structure.pinned), 1)
    slopes.add(columns([level.offset]), -1)
    return slopes.theory()


def _applies(structure: Structure, low: Array) -> Monotone | None:
    """The conditions of T3 on circuit and sources."""
    passives = (*structure.ohms, *structure.farads)
    if structure.against is not None or not grounded(structure):
        return None
    if not all(increasing(form, low) for form in passives):
        return None
    moves = monotone(structure, low)
    return moves if moves is not None and moves.together else None


def _comparable(structure: Structure, moves: Monotone, level: LevelForm, low: Array) -> bool:
    """Whether a level is fixed, or a part of nothing but the swing itself."""
    if structure.rising != moves.rising:
        return False
    swing = columns([moves.swing])
    if level.kind != "voltage":
        return moves.rising or level.kind == "step"
    if not level.follows:
        return not swing & columns([level.offset])
    parts = [fraction for _, fraction in level.follows]
    known = moves.far | moves.near
    return (
        is_zero(level.offset) and all(t in known for t, _ in level.follows) and all(increasing(f, low) for f in parts)
    )


def _passives(slopes: Slopes, structure: Structure, moves: Monotone, *, relative: bool) -> None:
    """Signs of a crossing time in R and C; relative = to the terminal's own end, which then must not move with R."""
    for form in structure.farads:
        slopes.add(columns([form]), 1)
    if len(moves.far) == 1 and ladder_end(structure, next(iter(moves.far))):
        slopes.add(columns(structure.ohms), 1)
        return
    ends = {max(pair) for pair in structure.shape.resistors if max(pair) >= structure.shape.free}
    fixed_end = not relative or not ends & moves.near
    for pair, form in zip(structure.shape.resistors, structure.ohms, strict=True):
        slopes.add(columns([form]), _slope_of(pair, structure, moves) if fixed_end else None)


def _slope_of(pair: tuple[int, int], structure: Structure, moves: Monotone) -> int | None:
    free = structure.shape.free
    if min(pair) >= free:
        return 0
    if max(pair) < free:
        return None
    return 1 if max(pair) in moves.far else -1


def _multilinear(structure: Structure) -> bool:
    """Whether each column of a resistance lies in one resistor, alone or in a sum, and nowhere else."""
    met: list[int] = []
    for form in structure.ohms:
        if any(len(term) > 1 for _, term in form):
            return False
        met.extend(columns([form]))
    return len(met) == len(set(met)) and not set(met) & _sources(structure)


def _circuit(structure: Structure) -> frozenset[int]:
    forms: list[Form] = [*structure.ohms, *structure.farads, *(form for _, form in structure.amps)]
    return columns([*forms, *(structure.earlier[1] if structure.earlier else ())])


def _sources(structure: Structure) -> frozenset[int]:
    forms: list[Form] = []
    for wave in structure.waveforms:
        forms.append(wave.before)
        for time, volts in wave.points:
            forms += [time, volts]
    forms += [form for _, form in structure.pinned]
    return columns([*forms, *(form for state in structure.states for form in state)])


def _levels(structure: Structure) -> frozenset[int]:
    levels = [level for _, level in structure.levels]
    if structure.reference is not None:
        levels.append(structure.reference[1])
    forms: list[Form] = [structure.rating or ()]
    for level in levels:
        forms += [level.offset, level.fraction, *(fraction for _, fraction in level.follows)]
    return columns(forms)
