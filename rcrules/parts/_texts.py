"""Reads the value texts of resistors and capacitors: value, tolerance, ratings, dielectric, size, fitted or not."""

from dataclasses import dataclass, replace
from functools import lru_cache
from typing import Final

from rcrules.parts._not_fitted import without_marks
from rcrules.parts._numbers import shown
from rcrules.parts._preferred import letter_tolerance
from rcrules.parts._ratings import Ratings, ratings
from rcrules.parts._spelling import plain, thousands_or_decimals, with_points
from rcrules.parts._tokens import tokens
from rcrules.parts._twofold import glued, told_apart
from rcrules.parts._values import Value, ValueKind, value_of

__all__ = ["ValueKind", "ValueText", "read_value"]

_LONGEST: Final = 300
TIGHT: Final = 0.025
"""Relative tolerance up to which parts come in the series of three digits."""


@dataclass(frozen=True, slots=True, kw_only=True)
class ValueText:
    """What one text says about a resistor or capacitor; None = nothing."""

    value: float | None = None
    """[Ω] or [F]"""
    why_unknown: str = ""
    """Why there is no value."""
    tolerance: tuple[float, float] | None = None
    """Relative low (negative) and high."""
    tolerance_why: str = ""
    """Why a tolerance that is written is not known: a letter with two meanings."""
    rated_voltage: float | None = None
    """[V]"""
    rated_power: float | None = None
    """[W]"""
    coefficient: float | None = None
    """[1/K], both ways."""
    dielectric: str | None = None
    technology: str | None = None
    """``thin film``, ``thick film``, ``wire-wound`` …"""
    size: str = ""
    count: int | None = None
    """``4`` of ``4x10k``: so many elements."""
    fitted: bool = True
    fitted_why: str = ""


@lru_cache(maxsize=65536)
def read_value(text: str, kind: ValueKind, *, tolerance_given: bool = False, bare: bool = True) -> ValueText:
    """Read a value text.

    tolerance_given: another source gives a tolerance of at most TIGHT, so that three digits on a resistor are a value
    of a fine series, not a code.
    bare: numbers without unit may be the value; false for descriptions and rating fields.
    """
    if len(text) > _LONGEST:
        return ValueText(why_unknown=f"longer than {_LONGEST} characters")
    marked, rest = without_marks(text)
    latin = plain(rest)
    words = with_points(latin)
    found = told_apart(tuple(tokens(words, kind)), kind)
    read = ratings(found, kind)
    tight = tolerance_given or (read.tolerance is not None and read.tolerance[1] <= TIGHT)
    value = value_of(text, found, kind, bare=bare, tight=tight)
    if value.si is None and marked and not words.strip(" <>()[]*"):
        value = Value(why=f"marked '{marked}', no value")
    elif "{" in rest:
        value = Value(why=f"'{shown(rest.strip())}' is an expression")
    elif unsure := thousands_or_decimals(latin):
        value = Value(why=unsure)
    elif parted := glued(words):
        value, read = Value(why=parted), replace(read, tolerance=None, voltage=None)
    return _result(value, read, kind, marked)


def _result(value: Value, read: Ratings, kind: ValueKind, marked: str) -> ValueText:
    tolerance, why = _tolerance(value, read, kind)
    return ValueText(
        value=value.si,
        why_unknown="" if value.si is not None else value.why,
        tolerance=tolerance,
        tolerance_why=why,
        rated_voltage=read.voltage,
        rated_power=read.power,
        coefficient=read.coefficient,
        dielectric=read.dielectric,
        technology=read.technology,
        size=read.size,
        count=read.count,
        fitted=not marked,
        fitted_why=f"value text '{marked}'" if marked else "",
    )


def _tolerance(value: Value, read: Ratings, kind: ValueKind) -> tuple[tuple[float, float] | None, str]:
    """The tolerance in per cent, in picofarads, or by the letter behind the value; else why it is not known."""
    picofarads = read.picofarads if read.picofarads is not None else value.picofarads
    letter = value.letter or read.letter
    if read.tolerance is not None:
        return read.tolerance, ""
    if picofarads is not None and value.si:
        return (-picofarads / value.si, picofarads / value.si), ""
    if not letter or not value.si:
        return None, ""
    share = letter_tolerance(letter, value.si if kind == "capacitor" else None)
    return share, "" if share is not None else f"the tolerance letter '{letter}' is used in several meanings"
