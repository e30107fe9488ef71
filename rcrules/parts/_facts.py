"""Gathers what each source says about a part, the strongest first, and keeps what loses."""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from typing import Final, Generic, TypeVar

from rcrules.design import Fact, Part
from rcrules.errors import Place
from rcrules.parts._fields import holds, read_field
from rcrules.parts._part_numbers import BY_PATTERN, Numbers, numbers
from rcrules.parts._texts import TIGHT, ValueKind, ValueText, read_value
from rcrules.project import PartFacts, Project, ranked
from rcrules.quantities import show

T = TypeVar("T")
_DEFAULT: Final = "project [defaults."


@dataclass(frozen=True, slots=True, kw_only=True)
class Said(Generic[T]):
    """A fact with its source."""

    fact: T
    origin: str
    place: Place | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Source:
    """One text about a part, read."""

    read: ValueText
    text: str
    origin: str
    place: Place


@dataclass(frozen=True, slots=True, kw_only=True)
class Facts:
    """Everything the sources say about one part, in order of precedence; the first of each wins."""

    project: tuple[tuple[str, PartFacts], ...]
    """Tables of the project file that name the part: (``project [part."C7"]``, facts), exact names first."""
    fields: tuple[Source, ...]
    """Rating fields, of the BOM first."""
    values: tuple[Source, ...]
    """Value texts, of the BOM first."""
    valued: tuple[Source, ...]
    """The texts that may give the value: value texts, part numbers and descriptions."""
    sources: tuple[Source, ...]
    """All texts in order of precedence."""
    defaults: tuple[tuple[str, PartFacts], ...]
    """``project [defaults.capacitor]``."""
    stops: tuple[str, ...] = ()
    """Part numbers that nearly fit a pattern, in words."""

    @property
    def tables(self) -> tuple[tuple[str, PartFacts], ...]:
        """All tables of the project file in order of precedence."""
        return (*self.project, *self.defaults)


def tables_for(part: Part, project: Project) -> tuple[tuple[str, PartFacts], ...]:
    """The [part] tables that name a reference, the most specific first."""
    return tuple((f'project [part."{key}"]', table) for key, table in ranked(project.parts, (part.ref,)))


def gather(part: Part, kind: ValueKind, tables: Sequence[tuple[str, PartFacts]], project: Project) -> Facts:
    """Read every text about a resistor or capacitor."""
    fields, descriptions = _fields(part, kind)
    given = (*(source.read.tolerance for source in (*fields, *descriptions)), *(table.tolerance for _, table in tables))
    tight = any(tolerance is not None and tolerance[1] <= TIGHT for tolerance in given)
    values = tuple(_source(fact, read_value(fact.text, kind, tolerance_given=tight)) for fact in part.values)
    read = numbers(part, kind, project.part_numbers) if project.part_numbers else Numbers()
    numbered = tuple(
        Source(read=facts, text=fact.text, origin=f"{fact.origin}{BY_PATTERN}'{name}'", place=fact.place)
        for facts, fact, name in read.read
    )
    believed = tuple(source for source in descriptions if not _stale(source, values))
    defaults = project.defaults.get(kind)
    return Facts(
        project=tuple(tables),
        fields=fields,
        values=values,
        valued=(*values, *numbered, *believed),
        sources=(*fields, *values, *numbered, *believed),
        defaults=((f"{_DEFAULT}{kind}]", defaults),) if defaults is not None else (),
        stops=read.stops,
    )


def _stale(description: Source, values: Sequence[Source]) -> bool:
    """Whether a schematic's description, taken from a symbol library, tells another value than the part's own text."""
    told, known = description.read.value, next((s.read.value for s in values if s.read.value is not None), None)
    return description.origin.startswith("netlist") and None not in (told, known) and told != known


def _fields(part: Part, kind: ValueKind) -> tuple[tuple[Source, ...], tuple[Source, ...]]:
    ratings: list[Source] = []
    descriptions: list[Source] = []
    for name, facts in part.fields.items():
        what = holds(name)
        for fact in facts if what else ():
            target = descriptions if "description" in what else ratings
            target.append(_source(fact, read_field(what, fact.text, kind)))
    ratings.sort(key=lambda source: not source.origin.startswith("BOM"))
    return tuple(ratings), tuple(descriptions)


def _source(fact: Fact, read: ValueText) -> Source:
    return Source(read=read, text=fact.text, origin=fact.origin, place=fact.place)


def texts_say(sources: Iterable[Source], attribute: str) -> Iterator[Said[object]]:
    """The facts of one name that texts give."""
    for source in sources:
        found = getattr(source.read, attribute)
        if found is not None and found != "":
            yield Said(fact=found, origin=source.origin, place=source.place)


def tables_say(tables: Iterable[tuple[str, PartFacts]], attribute: str) -> Iterator[Said[object]]:
    """The facts of one name that tables of the project file give."""
    for origin, table in tables:
        found = getattr(table, attribute)
        if found is not None:
            yield Said(fact=found, origin=origin, place=table.place)


def disagreements(name: str, said: Sequence[Said[T]], unit: str) -> tuple[str, ...]:
    """The facts that lost and differ from the winner, in words.

    Where two value texts differ the design tells it, and a default is there to lose.
    """
    if len(said) < 2:
        return ()
    won = _told(said[0].fact, unit)
    lost = {
        _told(item.fact, unit): item.origin
        for item in reversed(said)
        if item.fact != said[0].fact and not _is_value_text(item, said[0]) and not item.origin.startswith(_DEFAULT)
    }
    return tuple(f"{name} {won} ({said[0].origin}) is taken, not {text} ({lost[text]})" for text in lost if text != won)


def _is_value_text(*said: Said[T]) -> bool:
    return all(item.origin in ("BOM value", "netlist value") for item in said)


def _told(fact: object, unit: str) -> str:
    if isinstance(fact, float):
        return show(fact, unit, digits=4)
    if isinstance(fact, tuple):
        low, high = fact
        return f"±{show(high, '%', digits=4)}" if low == -high else f"{show(low, '%')} / +{show(high, '%')}"
    return str(fact)
