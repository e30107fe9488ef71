"""Properties of a structure under which a theorem of ``_theory`` holds, decided exactly, never by a tolerance."""

from collections.abc import Iterable
from dataclasses import dataclass

from rcrules.problems import Array, Form, Structure, Waveform


@dataclass(frozen=True, slots=True, kw_only=True)
class Monotone:
    """A network at one common voltage that its sources then move in one direction only.

    With u = |v - start|: u is 0 at first, each source's u is 0 or one and the same form, and none ever falls.
    """

    swing: Form
    """Voltage at which the moved sources end, above the common start (rising) or the start above 0 (falling)."""
    rising: bool
    far: frozenset[int]
    """Held terminals that move, or differ from the start from the first instant."""
    near: frozenset[int]
    """Held terminals that stay at the start voltage."""
    together: bool
    """True: all far terminals have the same waveform."""
    times: frozenset[int]
    """Columns of the instants at which sources bend."""


def is_zero(form: Form) -> bool:
    """Whether a form is 0 in every case."""
    return all(factor == 0.0 for factor, _ in form)


def columns(forms: Iterable[Form]) -> frozenset[int]:
    """The columns on which forms depend."""
    return frozenset(index for form in forms for factor, term in form if factor != 0.0 for index in term)


def increasing(form: Form, low: Array) -> bool:
    """Whether a form is >= 0 and rises with each of its columns over the box."""
    return all(factor >= 0.0 and all(low[index] >= 0.0 for index in term) for factor, term in form)


def monotone(structure: Structure, low: Array) -> Monotone | None:
    """How the sources move, where they do it as Monotone says; None otherwise."""
    start = _common_start(structure)
    if structure.amps or start is None or not increasing(start, low):
        return None
    rising = is_zero(start)
    tracks = [_track(wave, start, rising) for wave in structure.waveforms]
    ends = {track for track in tracks if track}
    if None in tracks or len(ends) != 1:
        return None
    swing = next(end for end in ends if end is not None)
    far = [index for index, track in enumerate(tracks) if track]
    if not increasing(swing, low):
        return None
    waves = [structure.waveforms[index].points for index in far]
    free = structure.shape.free
    return Monotone(
        swing=swing,
        rising=rising,
        far=frozenset(free + index for index in far),
        near=frozenset(free + index for index, track in enumerate(tracks) if not track),
        together=len(set(waves)) == 1,
        times=columns(time for wave in structure.waveforms for time, _ in wave.points),
    )


def grounded(structure: Structure) -> bool:
    """Whether no capacitor bridges: each joins a free terminal, or none, to held terminals that never move."""
    free, waves = structure.shape.free, structure.waveforms
    still = {free + index for index, wave in enumerate(waves) if _still(wave)}
    return all(
        (min(pair) < free <= max(pair) and max(pair) in still) or min(pair) >= free
        for pair in structure.shape.capacitors
    )


def left_open(structure: Structure, low: Array) -> bool:
    """Whether everything was at rest on one voltage, which is then left open, and all held terminals are at 0 V."""
    forms = {form for _, form in structure.pinned}
    still = all(is_zero(wave.before) and _still(wave) for wave in structure.waveforms)
    passives = (*structure.ohms, *structure.farads, *forms)
    plain = not structure.amps and not structure.empty and structure.earlier is None and structure.against is None
    return plain and still and len(forms) == 1 and grounded(structure) and all(increasing(f, low) for f in passives)


def discharges(structure: Structure) -> bool:
    """Whether resistors lead from the observed terminals to held ones; dielectrics do not count."""
    free = structure.shape.free
    pairs = [pair for index, pair in enumerate(structure.shape.resistors) if index not in structure.leaks]
    groups = _components(range(free), pairs)
    ends = [end for end in (structure.at, structure.against) if end is not None and end < free]
    return all(any(end in group and max(group) >= free for group in groups) for end in ends)


def single_mode(structure: Structure) -> bool:
    """Whether all capacitors lie at the observed terminal against held terminals that never move."""
    pairs = structure.shape.capacitors
    return grounded(structure) and structure.against is None and all(structure.at in pair for pair in pairs)


def stepped(structure: Structure) -> bool:
    """Whether no source changes after the first instant."""
    return all(len(wave.points) == 1 for wave in structure.waveforms)


def ladder_end(structure: Structure, source: int) -> bool:
    """Whether the resistors form one path from a held terminal to the observed one, and no other resistor is there."""
    left, here = list(structure.shape.resistors), source
    while left:
        following = [pair for pair in left if here in pair]
        if len(following) != 1:
            return False
        left.remove(following[0])
        here = sum(following[0]) - here
        if here >= structure.shape.free:
            return False
    return here == structure.at


def _still(wave: Waveform) -> bool:
    return all(volts == wave.before for _, volts in wave.points)


def _track(wave: Waveform, start: Form, rising: bool) -> Form | None:
    """() where a source stays at the start; the swing where it moves away for good; None where it does else."""
    volts = [form for _, form in wave.points]
    moved = [form for form in volts if form != start and not (rising and is_zero(form))]
    if not moved:
        return ()
    if volts[-len(moved) :] != moved or len(set(moved)) != 1 or (not rising and not is_zero(moved[0])):
        return None
    return moved[0] if rising else start


def _common_start(structure: Structure) -> Form | None:
    """The one voltage at which every free terminal starts, whatever the resistances; None where there is no such."""
    free = structure.shape.free
    sources = {free + index: wave.before for index, wave in enumerate(structure.waveforms)} | dict(structure.pinned)
    sources = {terminal: () if is_zero(form) else form for terminal, form in sources.items()}
    if structure.empty:
        return () if all(form == () for form in sources.values()) else None
    pairs = (structure.earlier[0] if structure.earlier else structure.shape).resistors
    found = {sources[terminal] for terminal, _ in structure.pinned}
    for group in _components([item for item in range(free) if item not in sources], pairs):
        found |= {sources[terminal] for terminal in group if terminal in sources}
    return found.pop() if len(found) == 1 else None


def _components(free: Iterable[int], pairs: Iterable[tuple[int, int]]) -> list[set[int]]:
    """Free terminals joined by resistors, each set with the other terminals around it."""
    near: dict[int, set[int]] = {terminal: set() for terminal in free}
    for a, b in pairs:
        for here, there in ((a, b), (b, a)):
            if here in near:
                near[here].add(there)
    groups: list[set[int]] = []
    while near:
        group, queue = set(), [next(iter(near))]
        while queue:
            here = queue.pop()
            group.add(here)
            queue += near.pop(here, set()) - group
        groups.append(group)
    return groups
