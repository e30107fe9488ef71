"""What is proved about edges and gains, beside ``_theory``.

E1  A terminal that one exponential of time constant τ takes from 0 V to V, passing A and then B:
    t/(B - A) = τ times the mean of 1/(V - v) over A .. B, so it rises with τ, A and B, and falls with V.
    With A and B parts of V it is τ ln((1 - a)/(1 - b))/((b - a) V).
E2  A single free terminal between conductances g, capacitances c to the source and G, C to held terminals:
    |H|² = (g² + ω²c²)/((g + G)² + ω²(c + C)²) falls with G and C; it rises with g where c = 0, and with c where g = 0,
    for x²/((x + a)² + b²) rises with x where a, b >= 0.
"""

from rcrules.measures._measure import Theory
from rcrules.measures._theory import Slopes, unproved
from rcrules.measures._topology import columns, increasing, is_zero, monotone, single_mode, stepped
from rcrules.problems import Array, LevelForm, Structure


def slowness(structure: Structure, low: Array, high: Array) -> Theory:
    """E1 where every resistor leads to the source that moves."""
    moves = monotone(structure, low)
    passives = (*structure.ohms, *structure.farads)
    plain = stepped(structure) and single_mode(structure) and all(increasing(form, low) for form in passives)
    if moves is None or not (plain and moves.rising and structure.rising and structure.shape.free == 1):
        return unproved(structure, low, high)
    levels = [level for _, level in structure.levels]
    to_source = all(max(pair) in moves.far for pair in structure.shape.resistors)
    if not to_source or not (_fixed(levels, low) or _parts(levels, moves.far, low)):
        return unproved(structure, low, high)
    slopes = Slopes([0] * len(low))
    slopes.add(columns(passives), 1)
    slopes.add(columns([moves.swing]), -1)
    for level in levels:
        slopes.add(columns([level.offset, *(fraction for _, fraction in level.follows)]), 1)
    return slopes.theory()


def _fixed(levels: list[LevelForm], low: Array) -> bool:
    return all(level.kind == "voltage" and not level.follows and increasing(level.offset, low) for level in levels)


def _parts(levels: list[LevelForm], far: frozenset[int], low: Array) -> bool:
    """Whether every level is a part of the source."""
    return all(
        level.kind == "voltage"
        and is_zero(level.offset)
        and bool(level.follows)
        and all(terminal in far and increasing(fraction, low) for terminal, fraction in level.follows)
        for level in levels
    )


def gain(structure: Structure, low: Array, high: Array) -> Theory:
    """E2; at 0 Hz nothing depends on capacitances, and T1 holds."""
    del high
    passives = (*structure.ohms, *structure.farads)
    slopes = Slopes([0] * len(low))
    direct = float(structure.option("frequency")) == 0.0
    if structure.shape.free != 1 or not all(increasing(form, low) for form in passives):
        slopes.add(columns(structure.ohms if direct else passives), None)
        return slopes.theory(vertices=direct and _once(structure))
    source = int(structure.option("source"))
    resistors, capacitors = structure.shape.resistors, structure.shape.capacitors
    mixed = not direct and any(source in pair for pair in resistors) and any(source in pair for pair in capacitors)
    for pair, form in zip(resistors, structure.ohms, strict=True):
        slopes.add(columns([form]), _slope(pair, source, free=1, mixed=mixed, own=-1))
    for pair, form in zip(capacitors, () if direct else structure.farads, strict=not direct):
        slopes.add(columns([form]), _slope(pair, source, free=1, mixed=mixed, own=1))
    return slopes.theory()


def _slope(pair: tuple[int, int], source: int, *, free: int, mixed: bool, own: int) -> int | None:
    """Slope of the gain in a branch: ``own`` for one to the source, the reverse for any other to a held terminal."""
    if min(pair) >= free or max(pair) < free:
        return 0
    if source in pair:
        return None if mixed else own
    return -own


def _once(structure: Structure) -> bool:
    """Whether each column lies in one resistance only, alone or in a sum."""
    met = [index for form in structure.ohms for index in columns([form])]
    return len(met) == len(set(met)) and all(len(term) <= 1 for form in structure.ohms for _, term in form)
