"""Recognises the fields of netlists and BOMs that hold ratings, and reads them."""

import re
from dataclasses import replace
from functools import lru_cache
from typing import Final

from rcrules.parts._preferred import SYMMETRIC_LETTERS
from rcrules.parts._texts import ValueKind, ValueText, read_value

_FIELDS: Final = {
    "tolerance": "tol tolerance toleranz tolerancia tolérance допуск tolerance% tol%",
    "voltage": "v vdc vac wvdc wv voltage volt volts ratedvoltage voltagerating voltagerated vrated ratedv vmax "
    "maxvoltage workingvoltage voltaje tension tensión tensionnominal spannung nennspannung voltagev "
    "voltagedc напряжение",
    "dielectric": "dielectric dielectrico dieléctrico diélectrique dielektrikum tc construct construction material "
    "temperaturecoefficient tempcoeff tempco tcc characteristic composition technology type",
    "coefficient": "tc tcr tempco temperaturecoefficient tempcoeff ppm",
    "power": "power watt watts wattage powerrating powerwatts ratedpower pwr potencia leistung puissance w мощность",
    "rating": "value2 req rating ratings spec specs specification specifications requirement requirements parameters "
    "characteristics parametric caracteristicas",
    "description": "description desc descripcion descripción beschreibung designation bezeichnung details componente",
}
"""What a field holds -> its names without blanks and signs, lower case."""
_NUMBERS: Final = re.compile(
    r"mpn\d?|mypn|pn|part(?:number|num|no|nr)?|(?:mfg|mfr|manf|man|manufacturers?|producer|vendor)(?:pn|num|part(?:number|no)?)"
    r"|mfgmfg|mfg|mfr|manf|order(?:ing)?(?:code|number)|n(?:ro|umerode|úmerode)(?:de)?parte"
    r"|(?:code|r[eé]f[eé]rence)fabricant|(?:hersteller(?:teile)?|bestell|artikel|teile)nummer|артикул|партномер"
)
"""Names of fields that hold part numbers, without blanks and signs, lower case."""
_BARE: Final = re.compile(r"[<>=]*\s*(\d{1,6}(?:[.,]\d{1,4})?)")


@lru_cache(maxsize=4096)
def holds(name: str) -> frozenset[str]:
    """What a field of this name holds: ``tolerance``, ``voltage`` …; empty for a field without ratings."""
    plain = re.sub(r"[\W_]+", "", name.lower())
    return frozenset(what for what, names in _FIELDS.items() if plain in names.split())


@lru_cache(maxsize=4096)
def holds_number(name: str) -> bool:
    """Whether a field of this name holds a part number: ``MPN``, ``manf#``, ``Nro. parte``."""
    return _NUMBERS.fullmatch(re.sub(r"[\W_]+", "", name.lower())) is not None


@lru_cache(maxsize=65536)
def read_field(what: frozenset[str], text: str, kind: ValueKind) -> ValueText:
    """The ratings in a field; a number alone takes the unit of its field: ``25`` under ``V``, ``5`` under ``Tol``."""
    read = read_value(text, kind, bare=False)
    if what & {"rating", "description"}:
        return read if "description" in what else replace(read, value=None)
    number = _BARE.fullmatch(text.strip())
    alone = float(number[1].replace(",", ".")) if number else None
    return ValueText(
        tolerance=(read.tolerance or _tolerance(text, alone)) if "tolerance" in what else None,
        rated_voltage=(read.rated_voltage or alone) if "voltage" in what else None,
        rated_power=(read.rated_power or alone) if "power" in what else None,
        coefficient=read.coefficient if "coefficient" in what else None,
        dielectric=read.dielectric if "dielectric" in what else None,
        technology=read.technology if "dielectric" in what else None,
    )


def _tolerance(text: str, alone: float | None) -> tuple[float, float] | None:
    """A percentage without its sign, from 1 up (``0.05`` may be a fraction), or a tolerance letter."""
    share = SYMMETRIC_LETTERS.get(text.strip()) or (alone / 100 if alone is not None and 1 <= alone < 100 else None)
    return (-share, share) if share else None
