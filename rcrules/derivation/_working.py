"""One case of a problem on a sheet: its circuit, sources and levels as numbers that lines can be made of."""

from collections.abc import Iterable
from dataclasses import dataclass, field

import numpy as np

from rcrules.derivation._reduce import Link, Mesh
from rcrules.derivation._sheet import Number, Sheet
from rcrules.measures import Measure
from rcrules.problems import Array, LevelForm, Names, Problem, Solved, evaluate, solved


@dataclass(slots=True, kw_only=True)
class Working:
    """A case being worked out by hand beside what the engine says of it."""

    problem: Problem
    names: Names
    measure: Measure
    cases: Array
    """(1, column)"""
    sheet: Sheet
    solved: Solved
    modal: bool = False
    """True: what happens over time is taken from the modes of the whole network, diodes as they conduct."""
    checks: list[tuple[Number, Number]] = field(default_factory=list)
    """Numbers on the sheet that must be equal."""

    @property
    def free(self) -> int:
        """Number of free terminals."""
        return self.problem.structure.shape.free

    @property
    def at(self) -> int:
        """The observed terminal."""
        return self.problem.structure.at

    @property
    def starts(self) -> list[float]:
        """When each piece of the sources starts [s]."""
        return [float(start) for start in self.solved.sources[0][0]]

    def name(self, terminal: int) -> str:
        """What a terminal is called."""
        return self.names.terminals[terminal]

    def mesh(self, *, earlier: bool = False) -> Mesh:
        """Resistors and drawn currents after the event, or before it."""
        structure = self.problem.structure
        shape, forms, called = structure.shape, structure.ohms, self.names.resistors
        if earlier and structure.earlier is not None:
            (shape, forms), called = structure.earlier, self.names.earlier
        links = [
            Link(a=pair[0], b=pair[1], ohms=self.sheet.number(name, self._of(form), "Ω"))
            for pair, form, name in zip(shape.resistors, forms, called, strict=True)
            if np.isfinite(self._of(form))
        ]
        draws: dict[int, list[Number]] = {}
        for terminal, form in structure.amps:
            if self._of(form) != 0.0:
                draws.setdefault(terminal, []).append(self.sheet.number(self._symbol(form), self._of(form), "A"))
        return Mesh(sheet=self.sheet, names=self.names.terminals, free=self.free, links=links, draws=draws)

    def capacitors(self, terminal: int) -> list[tuple[int, Number]]:
        """Capacitors at a terminal: the other end of each, and its capacitance."""
        shape = self.problem.structure.shape
        found = []
        for pair, farads, name in zip(shape.capacitors, self.solved.farads[0], self.names.capacitors, strict=True):
            if terminal in pair and pair[0] != pair[1] and farads > 0.0:
                symbol = f"({name})" if " + " in name else name
                found.append((sum(pair) - terminal, self.sheet.number(symbol, float(farads), "F")))
        return found

    def held(self, values: Iterable[float]) -> dict[int, Number]:
        """Voltages of the held terminals; values (held,) [V]."""
        return {
            self.free + index: self.sheet.number(self.name(self.free + index), float(value), "V")
            for index, value in enumerate(values)
        }

    def volts(self, piece: int) -> dict[int, Number]:
        """Voltages of the held terminals at the start of a piece."""
        return self.held(self.solved.sources[1][0, piece])

    def slopes(self, piece: int) -> dict[int, float]:
        """Slopes of the held terminals in a piece, those that are not 0 [V/s]."""
        row = self.solved.sources[2][0, piece]
        return {self.free + index: float(slope) for index, slope in enumerate(row) if slope != 0.0}

    def before(self) -> dict[int, Number]:
        """Voltages of the held terminals before the event."""
        return self.held(self.solved.volts_before[0, self.free :])

    def form(self, form: tuple[tuple[float, tuple[int, ...]], ...], symbol: str, unit: str) -> Number:
        """A form as a number, called by its column where it is one."""
        return self.sheet.number(self._symbol(form) or symbol, self._of(form), unit)

    def piece_at(self, time: float) -> tuple[int, float]:
        """The piece of the signal in which an instant lies, and when it starts [s]: sources bend or diodes switch."""
        signal = self.solved.signal
        there = [index for index, length in enumerate(signal.lengths) if length[0] > 0.0]
        found = [index for index in there if signal.starts[index, 0] < time] or there[:1]
        index = max(found, key=lambda item: float(signal.starts[item, 0]))
        return index, float(signal.starts[index, 0])

    def piece_of(self, time: float) -> int:
        """The piece in which an instant lies: the last one that starts before it."""
        found = [index for index, start in enumerate(self.starts) if start < time]
        return found[-1] if found else 0

    def _of(self, form: tuple[tuple[float, tuple[int, ...]], ...]) -> float:
        return float(evaluate(form, self.cases)[0])

    def _symbol(self, form: tuple[tuple[float, tuple[int, ...]], ...]) -> str:
        """Name of the column that a form is; '' where it is none."""
        if len(form) == 1 and form[0][0] == 1.0 and len(form[0][1]) == 1:
            return self.problem.parameters[form[0][1][0]].name
        return ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Height:
    """A level as it stands in one piece."""

    number: Number
    slope: float
    """[V/s]"""


def working(
    problem: Problem, names: Names, measure: Measure, case: tuple[float, ...], digits: int, *, modal: bool = False
) -> Working:
    """A new sheet for a case."""
    return Working(
        problem=problem,
        names=names,
        measure=measure,
        cases=(cases := np.array([case], dtype=float)),
        sheet=Sheet(digits=digits),
        solved=solved(problem.structure, cases),
        modal=modal,
    )


def height(work: Working, level: LevelForm, piece: int, final: Number | None = None) -> Height:
    """The level at the start of a piece. final: where v ends, for levels that count in it."""
    sheet = work.sheet
    if level.kind != "voltage":
        return Height(number=_of_step(work, level, final), slope=0.0)
    volts, slopes = work.volts(piece), work.slopes(piece)
    terms = [(work.form(form, "part", "1"), terminal) for terminal, form in level.follows]
    numbers = [item for part, terminal in terms for item in (part, volts[terminal])]
    slope = sum(part.value * slopes.get(terminal, 0.0) for part, terminal in terms)
    texts = ["{} · {}" for _ in terms]
    if level.offset or not terms:
        numbers, texts = [*numbers, work.form(level.offset, "level", "V")], [*texts, "{}"]
    count = len(terms)

    def compute(*values: float) -> float:
        return sum(values[2 * index] * values[2 * index + 1] for index in range(count)) + sum(values[2 * count :])

    return Height(number=sheet.work("L", "V", " + ".join(texts), compute, *numbers, note="the level"), slope=slope)


def _of_step(work: Working, level: LevelForm, final: Number | None) -> Number:
    sheet = work.sheet
    end = final or sheet.given("v(end)", float(work.solved.final[0]), "V", "where v ends")
    part = work.form(level.fraction, "part", "1")
    if level.kind == "final":
        return sheet.work("L", "V", "{} · {}", lambda f, e: f * e, part, end, note="the level")
    start = sheet.number("v(0-)", float(work.solved.start[0]), "V")
    return sheet.work(
        "L", "V", "{} + {} · ({} - {})", lambda s, f, e, s2: s + f * (e - s2), start, part, end, start, note="the level"
    )
