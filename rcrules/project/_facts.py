"""The tables of facts: ``[supply]``, ``[net]``, ``[pin]``, ``[part]`` and ``[defaults]``, key by key."""

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any, Final, Literal

from rcrules.levels import Level, parse_level
from rcrules.project._model import NetFacts, PartFacts, PinFacts, SupplyFacts
from rcrules.quantities import QuantityError, Spread, parse_quantity
from rcrules.tomlfile import Table, cut, guess, listed
from rcrules.vocabulary import DIELECTRIC_CODE, DIELECTRICS, HELD_KINDS, PART_KINDS, PIN_KINDS, ROLES

Reader = Callable[[Table, str], Any]

MAX_TEXT: Final = 200
_PAIR: Final = re.compile(r"([A-Za-z0-9]{1,8})-([A-Za-z0-9]{1,8})")
_MOST_ELEMENTS: Final = 64
_USUAL: Final = ("X7R", "X5R", "X6S", "X7S", "X7T", "X8R", "Y5V", "Z5U", "C0G", "NP0")
"""Letter codes that a slip is likely to mean."""
_LIKE_QUANTITY: Final = re.compile(r"\s*[+−-]?[0-9.]+\s*[A-Za-zµμΩ°%/]{0,6}\s*")


@dataclass(frozen=True, slots=True)
class _Amount:
    """Reads a quantity."""

    unit: str | None
    """SI unit; None = any."""
    least: float | None = None

    def __call__(self, table: Table, key: str) -> Spread | None:
        return table.quantity(key, self.unit, least=self.least)


def _word(*choices: str) -> Reader:
    return lambda table, key: table.word(key, choices)


def _text(table: Table, key: str) -> str | None:
    return table.text(key)


def _level(table: Table, key: str) -> Level | None:
    """A voltage, fixed or following a net; edges of the pin's own band and shares of a response make no sense here."""
    return table.parsed(key, _pin_level, "a level such as '30 % of +3V3' or '1.2 V'")


def _pin_level(text: str) -> Level:
    level = parse_level(text)
    if level.edge is not None or level.of is not None:
        expected = "a voltage, '30 % of +3V3' or '+3V3 + 0.3 V'"
        raise QuantityError("a level of a pin cannot follow the response", length=len(text), expected=expected)
    return level


def _pull(table: Table, key: str) -> tuple[Spread, str] | None:
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


def _load(table: Table, key: str) -> Spread | None:
    """A constant current, or a constant power."""
    spread = table.quantity(key, None)
    if spread is None or spread.unit in ("A", "W"):
        return spread
    table.wrong(key, f"'{key}' must be a current or a power, such as '0 A .. 120 mA'", found=table.found(key))
    return None


def _fall(table: Table, key: str) -> Spread | str | None:
    """A time, or what else becomes of a supply that is switched off."""
    return table.parsed(key, _time_or_word, "a time such as '5 ms .. 50 ms', 'open' or 'never'")


def _time_or_word(text: str) -> Spread | str:
    if text.strip() in ("open", "never"):
        return text.strip()
    spread = parse_quantity(text, "s")
    if spread.low < 0:
        raise QuantityError("a time must not be below 0", length=len(text))
    return spread


def _drive(table: Table, key: str) -> tuple[Spread, Spread] | None:
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


def _tolerance(table: Table, key: str) -> tuple[float, float] | None:
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


def _bias_curve(table: Table, key: str) -> tuple[tuple[float, float], ...]:
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


def _elements(table: Table, key: str) -> tuple[tuple[str, str], ...]:
    """``1-8 2-7 3-6 4-5``, pin numbers of each element of an array."""
    return table.parsed(key, _pairs, "pairs of pins such as '1-8 2-7 3-6 4-5'") or ()


def _pairs(text: str) -> tuple[tuple[str, str], ...]:
    found = [_PAIR.fullmatch(word) for word in text.replace(",", " ").split()]
    pairs = tuple((pair[1], pair[2]) for pair in found if pair is not None and pair[1] != pair[2])
    if not pairs or len(pairs) < len(found) or len(pairs) > _MOST_ELEMENTS:
        raise QuantityError("no pairs of pins", length=len(text), expected="pairs such as '1-8 2-7 3-6 4-5'")
    return pairs


def _flag(table: Table, key: str) -> bool | None:
    return table.flag(key)


SUPPLY: Final[Mapping[str, Reader]] = {
    "voltage": _Amount("V"),
    "valid": _Amount("V"),
    "rise": _Amount("s", 0),
    "after": _text,
    "fall": _fall,
    "load": _load,
}
NET: Final[Mapping[str, Reader]] = {
    "swing": _Amount("V"),
    "source-resistance": _Amount("Ω", 0),
    "wiring-capacitance": _Amount("F", 0),
    "edge": _Amount("s", 0),
    "role": _word(*ROLES),
    "held": _word(*HELD_KINDS, "free"),
}
PIN: Final[Mapping[str, Reader]] = {
    "kind": _word(*PIN_KINDS),
    "low": _level,
    "high": _level,
    "rising": _Amount("V"),
    "falling": _Amount("V"),
    "pull-up": _pull,
    "pull-down": _pull,
    "leakage": _Amount("A"),
    "capacitance": _Amount("F", 0),
    "max-voltage": _level,
    "drive": _drive,
    "sample-capacitance": _Amount("F", 0),
    "sample-resistance": _Amount("Ω", 0),
    "acquisition-time": _Amount("s", 0),
    "full-scale": _Amount("V"),
}
DEFAULTS: Final[Mapping[str, Reader]] = {
    "tolerance": _tolerance,
    "rated-voltage": _Amount("V", 0),
    "rated-power": _Amount("W", 0),
    "dielectric": dielectric,
    "tcr": _Amount("1/K"),
    "bias-curve": _bias_curve,
    "distribution": _word("uniform", "normal"),
    "absorption": _Amount("1", 0),
    "leakage": _Amount("A", 0),
    "insulation-resistance": _Amount("Ω", 0),
    "contact-resistance": _Amount("Ω", 0),
    "bounce": _Amount("s", 0),
    "forward": _Amount("V", 0),
    "on-resistance": _Amount("Ω", 0),
    "breakdown": _Amount("V", 0),
}
PART: Final[Mapping[str, Reader]] = {
    **DEFAULTS,
    "kind": _word(*PART_KINDS),
    "value": _Amount(None, 0),
    "fitted": _flag,
    "elements": _elements,
    "contact": _word("normally open", "normally closed"),
}

NUMBERS: Final[Mapping[str, str]] = {
    key.replace("-", "_"): reader.unit
    for table in (NET, PIN, PART)
    for key, reader in table.items()
    if isinstance(reader, _Amount) and reader.unit is not None
}
"""Numbers of nets, pins and parts by the names that rules use, with their units."""
_OWN: Final = {"net": NET, "pin": PIN, "part": PART}


def line_for(table: Literal["net", "pin", "part"], name: str, number: str, text: str = "…") -> str:
    """The line that gives a number: ``[pin."U5.AIN0"] acquisition-time = "…"``, or in ``set`` where it is not a key."""
    key = number.replace("_", "-")
    own = f'{key} = "{text}"' if key in _OWN[table] else f'set = {{ {number} = "{text}" }}'
    return f'[{table}."{name}"] {own}'


def supply_facts(table: Table) -> SupplyFacts:
    """``[supply."+3V3"]``"""
    return SupplyFacts(place=table.place, **_read(table, SUPPLY))


def net_facts(table: Table) -> NetFacts:
    """``[net."SDA"]``"""
    table.only([*NET, "set"])
    return NetFacts(place=table.place, **_with_free(table, _read(table, NET, known_only=False), NetFacts))


def pin_facts(table: Table) -> PinFacts:
    """``[pin."U3.NRST"]``"""
    table.only([*PIN, "set"], do=_FREE)
    return PinFacts(place=table.place, **_with_free(table, _read(table, PIN, known_only=False), PinFacts))


def part_facts(table: Table, keys: Mapping[str, Reader] = PART) -> PartFacts:
    """``[part."C12"]``, or with the keys DEFAULTS ``[defaults.capacitor]``."""
    table.only([*keys, "set"], do=_FREE)
    return PartFacts(place=table.place, **_with_free(table, _read(table, keys, known_only=False), PartFacts))


_FREE: Final = "a word or number of your own goes into set = { … }"


def _read(table: Table, keys: Mapping[str, Reader], *, known_only: bool = True) -> dict[str, Any]:
    """Every key that is there and right, by its name in the model."""
    if known_only:
        table.only(list(keys))
    found = {key: read(table, key) for key, read in keys.items() if key in table.data}
    return {key.replace("-", "_"): value for key, value in found.items() if value is not None and value != ()}


def _with_free(table: Table, found: dict[str, Any], model: type) -> dict[str, Any]:
    """Numbers also under their own keys in ``set``, beside the free words; without a field in the model, only there."""
    fields = getattr(model, "__dataclass_fields__", {})
    spreads = {name.replace("_", "-"): value for name, value in found.items() if isinstance(value, Spread)}
    words, own = free_words(table.table("set"))
    kept = {name: value for name, value in found.items() if name in fields}
    numbers = {name: spread.nominal for name, spread in (spreads | own).items()}
    return {**kept, "set": {**numbers, **words}, "spreads": spreads | own}


def free_words(table: Table | None) -> tuple[dict[str, str | float], dict[str, Spread]]:
    """Words and numbers of a table whose names are its author's own; numbers nominal, and again with their bounds.

    A text that looks like a number with a unit must be one: ``"30 mz"`` is a mistake, ``"4-20 mA loop"`` a word.
    """
    words: dict[str, str | float] = {}
    spreads: dict[str, Spread] = {}
    for key, value in (table.data if table else {}).items():
        if isinstance(value, str) and not _is_quantity(value) and not _LIKE_QUANTITY.fullmatch(value):
            words[key] = value[:MAX_TEXT]
        elif table is not None and (spread := table.quantity(key, None)) is not None:
            words[key], spreads[key] = spread.nominal, spread
    return words, spreads


def _is_quantity(text: str) -> bool:
    try:
        parse_quantity(text)
    except QuantityError:
        return False
    return True
