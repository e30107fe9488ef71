"""What one key of a table of facts may hold: a quantity, a level, a pull, a load, a tolerance, a curve."""

import re
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any, Final

from rcrules.levels import Level, parse_level
from rcrules.quantities import QuantityError, Spread, parse_quantity
from rcrules.tomlfile import Table, cut, guess, listed
from rcrules.vocabulary import DIELECTRIC_CODE, DIELECTRICS

Reader = Callable[[Table, str], Any]
"""Reads the key of a table; None or () where it says nothing right."""

_PAIR: Final = re.compile(r"([A-Za-z0-9]{1,8})-([A-Za-z0-9]{1,8})")
_MOST_ELEMENTS: Final = 64
_USUAL: Final = ("X7R", "X5R", "X6S", "X7S", "X7T", "X8R", "Y5V", "Z5U", "C0G", "NP0")
"""Letter codes that a slip is likely to mean."""


@dataclass(frozen=True, slots=True)
class Amount:
    """Reads a quantity."""

    unit: str | None
    """SI unit; None = any."""
    least: float | None = None

    def __call__(self, table: Table, key: str) -> Spread | None:
        return table.quantity(key, self.unit, least=self.least)


def word_of(*choices: str) -> Reader:
    return lambda table, key: table.word(key, choices)


def text_of(table: Table, key: str) -> str | None:
    return table.text(key)


def pin_level(table: Table, key: str) -> Level | None:
    """A voltage, fixed or following a net; edges of the pin's own band and shares of a response make no sense here."""
    return table.parsed(key, _pin_level, "a level such as '30 % of +3V3' or '1.2 V'")


def _pin_level(text: str) -> Level:
    level = parse_level(text)
    if level.edge is not None or level.of is not None:
        expected = "a voltage, '30 % of +3V3' or '+3V3 + 0.3 V'"
        raise QuantityError("a level of a pin cannot follow the response", length=len(text), expected=expected)
    return level


def pull(table: Table, key: str) -> tuple[Spread, str] | None:
    return table.parsed(key, _resistance_to_net, "a resistance and a net, such as '25 kohm .. 55 kohm to +3V3'")


def _resistance_to_net(text: str) -> tuple[Spread, str]:
    """``25 kohm .. 55 kohm to +3V3``"""
    amount, word, net = text.partition(" to ")
    if not word or not net.strip():
        raise QuantityError("no net", at=len(text.rstrip()), expected="the net that it goes to, such as '… to +3V3'")
    spread = parse_quantity(amount.rstrip(), "Ω")
    if spread.low <= 0:
        raise QuantityError("a resistance must be above 0", length=len(amount))
    return spread, net.strip().strip("\"'")


def load(table: Table, key: str) -> Spread | None:
    """A constant current, or a constant power."""
    spread = table.quantity(key, None)
    if spread is None or spread.unit in ("A", "W"):
        return spread
    table.wrong(key, f"'{key}' must be a current or a power, such as '0 A .. 120 mA'", found=table.found(key))
    return None


def fall(table: Table, key: str) -> Spread | str | None:
    """A time, or what else becomes of a supply that is switched off."""
    return table.parsed(key, _time_or_word, "a time such as '5 ms .. 50 ms', 'open' or 'never'")


def _time_or_word(text: str) -> Spread | str:
    if text.strip() in ("open", "never"):
        return text.strip()
    spread = parse_quantity(text, "s")
    if spread.low < 0:
        raise QuantityError("a time must not be below 0", length=len(text))
    return spread


def drive(table: Table, key: str) -> tuple[Spread, Spread] | None:
    return table.parsed(key, _voltage_at_current, "a voltage and a current, such as '0.4 V at 3 mA'")


def _voltage_at_current(text: str) -> tuple[Spread, Spread]:
    """``0.4 V at 3 mA``"""
    volts, word, amps = text.partition(" at ")
    if not word:
        raise QuantityError("no current", at=len(text.rstrip()), expected="the current, such as '… at 3 mA'")
    voltage = parse_quantity(volts, "V")
    try:
        return voltage, parse_quantity(amps, "A")
    except QuantityError as error:
        raise error.moved(len(volts) + len(word)) from None


def tolerance(table: Table, key: str) -> tuple[float, float] | None:
    return table.parsed(key, relative, "a share such as '5 %' or '-20 % +80 %'")


def relative(text: str) -> tuple[float, float]:
    """``5 %``, ``+/- 5 %`` and ``-20 % +80 %`` as lowest and highest relative change."""
    signed = text.lstrip().startswith(("-", "+", "±", "−"))
    try:
        if signed:
            whole = parse_quantity(f"1 {text}", "1")
            low, high = whole.low - 1, whole.high - 1
        else:
            share = parse_quantity(text, "1")
            low, high = -share.high, share.high
    except QuantityError as error:
        raise (error.moved(-min(2, error.at)) if signed else error) from None
    if low <= -1 or high > 10:
        raise QuantityError("not a tolerance", length=len(text), expected="a share such as '5 %' or '-20 % +80 %'")
    return low, high


def dielectric(table: Table, key: str) -> str | None:
    """A letter code or a technology; an unknown word is a mistake, with a guess."""
    word = table.text(key)
    if word is None or word in DIELECTRICS or DIELECTRIC_CODE.fullmatch(word.upper()):
        return word
    problem = f"'{key}': no dielectric '{cut(word)}'{guess(word, (*DIELECTRICS, *_USUAL))}"
    table.wrong(key, problem, expected=f"a letter code such as X7R, C0G or 2C1, or {listed(DIELECTRICS)}")
    return None


def bias_curve(table: Table, key: str) -> tuple[tuple[float, float], ...]:
    """``[["0 V", "100 %"], ["5 V", "62 %"]]``, voltages rising."""
    rows, expected = table.data[key], 'a list of pairs such as ["5 V", "62 %"]'
    if not isinstance(rows, list) or not all(isinstance(row, list) and len(row) == 2 for row in rows) or not rows:
        table.wrong(key, f"'{key}' must be {expected}", found=table.found(key))
        return ()
    points: list[tuple[float, float]] = []
    for number in range(len(rows)):
        volts = table.quantity((key, number, 0), "V", least=0)
        share = table.quantity((key, number, 1), "1", least=0, most=10)
        if volts is None or share is None:
            return ()
        if points and volts.nominal <= points[-1][0]:
            table.wrong((key, number, 0), f"'{key}': the voltages must rise", found=table.found((key, number, 0)))
            return ()
        points.append((volts.nominal, share.nominal))
    return tuple(points)


def elements(table: Table, key: str) -> tuple[tuple[str, str], ...]:
    """``1-8 2-7 3-6 4-5``, pin numbers of each element of an array."""
    return table.parsed(key, _pairs, "pairs of pins such as '1-8 2-7 3-6 4-5'") or ()


def _pairs(text: str) -> tuple[tuple[str, str], ...]:
    found = [_PAIR.fullmatch(word) for word in text.replace(",", " ").split()]
    pairs = tuple((pair[1], pair[2]) for pair in found if pair is not None and pair[1] != pair[2])
    if not pairs or len(pairs) < len(found) or len(pairs) > _MOST_ELEMENTS:
        raise QuantityError("no pairs of pins", length=len(text), expected="pairs such as '1-8 2-7 3-6 4-5'")
    return pairs


def flag(table: Table, key: str) -> bool | None:
    return table.flag(key)
