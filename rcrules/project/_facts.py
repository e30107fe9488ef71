"""The tables of facts: ``[supply]``, ``[net]``, ``[pin]``, ``[part]`` and ``[defaults]``, key by key."""

import re
from collections.abc import Mapping
from typing import Any, Final, Literal

from rcrules.project._amounts import (
    Amount,
    Reader,
    bias_curve,
    dielectric,
    drive,
    elements,
    fall,
    flag,
    load,
    pin_level,
    pull,
    text_of,
    tolerance,
    word_of,
)
from rcrules.project._model import NetFacts, PartFacts, PinFacts, SupplyFacts
from rcrules.quantities import QuantityError, Spread, parse_quantity
from rcrules.tomlfile import Table
from rcrules.vocabulary import HELD_KINDS, PART_KINDS, PIN_KINDS, ROLES

MAX_TEXT: Final = 200
_LIKE_QUANTITY: Final = re.compile(r"\s*[+−-]?[0-9.]+\s*[A-Za-zµμΩ°%/]{0,6}\s*")

SUPPLY: Final[Mapping[str, Reader]] = {
    "voltage": Amount("V"),
    "valid": Amount("V"),
    "rise": Amount("s", 0),
    "after": text_of,
    "fall": fall,
    "load": load,
}
NET: Final[Mapping[str, Reader]] = {
    "swing": Amount("V"),
    "source-resistance": Amount("Ω", 0),
    "wiring-capacitance": Amount("F", 0),
    "edge": Amount("s", 0),
    "role": word_of(*ROLES),
    "held": word_of(*HELD_KINDS, "free"),
}
PIN: Final[Mapping[str, Reader]] = {
    "kind": word_of(*PIN_KINDS),
    "low": pin_level,
    "high": pin_level,
    "rising": Amount("V"),
    "falling": Amount("V"),
    "pull-up": pull,
    "pull-down": pull,
    "leakage": Amount("A"),
    "capacitance": Amount("F", 0),
    "max-voltage": pin_level,
    "drive": drive,
    "sample-capacitance": Amount("F", 0),
    "sample-resistance": Amount("Ω", 0),
    "acquisition-time": Amount("s", 0),
    "full-scale": Amount("V"),
}
DEFAULTS: Final[Mapping[str, Reader]] = {
    "tolerance": tolerance,
    "rated-voltage": Amount("V", 0),
    "rated-power": Amount("W", 0),
    "dielectric": dielectric,
    "tcr": Amount("1/K"),
    "load-life": Amount("1", 0),
    "bias-curve": bias_curve,
    "distribution": word_of("uniform", "normal"),
    "absorption": Amount("1", 0),
    "leakage": Amount("A", 0),
    "insulation-resistance": Amount("Ω", 0),
    "contact-resistance": Amount("Ω", 0),
    "bounce": Amount("s", 0),
    "forward": Amount("V", 0),
    "on-resistance": Amount("Ω", 0),
    "breakdown": Amount("V", 0),
}
PART: Final[Mapping[str, Reader]] = {
    **DEFAULTS,
    "kind": word_of(*PART_KINDS),
    "value": Amount(None, 0),
    "voltage-across": Amount("V"),
    "fitted": flag,
    "elements": elements,
    "contact": word_of("normally open", "normally closed"),
}

NUMBERS: Final[Mapping[str, str]] = {
    key.replace("-", "_"): reader.unit
    for table in (NET, PIN, PART)
    for key, reader in table.items()
    if isinstance(reader, Amount) and reader.unit is not None
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
