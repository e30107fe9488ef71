"""Numbers that an expression names: facts of the subject, or numbers that are looked up."""

from rcrules.checks._facts import facts
from rcrules.checks._lookup import Missing, look_up
from rcrules.checks._subject import Subject
from rcrules.events import Unmeasurable, part_parameter
from rcrules.networks import Board
from rcrules.parts import Known, RatedPart
from rcrules.problems import Parameter
from rcrules.project import Project
from rcrules.quantities import Spread
from rcrules.rulebook import NUMBER_FACTS, Rule


def named_number(name: str, rule: Rule, subject: Subject, board: Board, project: Project) -> Parameter | Missing:
    """A column; one without spread is a plain number."""
    if name in ("resistance", "capacitance"):
        return _own_value(subject)
    if name in NUMBER_FACTS:
        known = fact_numbers(subject, board, project)
        if name in known:
            value = known[name]
            return _column(name, Spread(low=value, nominal=value, high=value, unit=NUMBER_FACTS[name]), "the board")
        return Missing(reason=f"{name.replace('_', ' ')} is not known there", ask=_ask(name, subject))
    found = look_up(name, rule, subject, board, project)
    if isinstance(found, Missing):
        return found
    if isinstance(found.value, str):
        return Missing(reason=f"{name} is {found.value!r} in {found.origin}, no number", ask=())
    return _column(name, found.value, found.origin)


def fact_numbers(subject: Subject, board: Board, project: Project) -> dict[str, float]:
    """Facts of the subject by name, SI; those that are not known, or differ between its views, are left out."""
    views = [facts(view, board) for view in subject.views]
    same = {name: value for name, value in views[0].items() if all(view.get(name) == value for view in views)}
    part = subject.target if isinstance(subject.target, RatedPart) else None
    if part is not None:
        ratings = {"rated_voltage": part.rated_voltage, "rated_power": part.rated_power}
        same |= {name: rating.si for name, rating in ratings.items() if isinstance(rating, Known)}
    if project.temperature is not None:
        same |= {"temperature_low": project.temperature.low, "temperature_high": project.temperature.high}
    return same


def _column(name: str, spread: Spread, origin: str) -> Parameter:
    return Parameter(
        name=name,
        unit=spread.unit,
        low=spread.low,
        nominal=spread.nominal,
        high=spread.high,
        given_low=spread.low,
        given_high=spread.high,
        origin=origin,
    )


def _own_value(subject: Subject) -> Parameter | Missing:
    """Resistance or capacitance of the part itself."""
    if not isinstance(subject.target, RatedPart):
        return Missing(reason=f"a {subject.kind} has no value of its own", ask=())
    try:
        return part_parameter(subject.target)
    except Unmeasurable as error:
        return Missing(reason=error.reason, ask=(error.ask,) if error.ask else ())


def _ask(name: str, subject: Subject) -> tuple[str, ...]:
    """The line that would give a fact."""
    if name.startswith("temperature"):
        return ('[conditions] temperature = "…"',)
    fact = name.replace("_", "-").removesuffix("-low").removesuffix("-nominal").removesuffix("-high")
    if fact in ("rated-voltage", "rated-power"):
        return tuple(f'[part."{ref}"] {fact} = "…"' for ref in subject.refs)
    return ()
