"""Texts with two meanings: what settles them, and where nothing does."""

import re
from collections.abc import Sequence
from dataclasses import replace
from typing import Final

from rcrules.parts._dielectrics import class_one, class_two
from rcrules.parts._preferred import E24, preferred
from rcrules.parts._tokens import Token

_COEFFICIENT: Final = re.compile(r"[NPnp](?:030|033|080|33|75|100|150|220|330|470|750|1500|2200)")
"""Old names of temperature coefficients: N750 is -750 ppm/K."""
_GLUED: Final = re.compile(r"(?<![\w.])(\d{1,3})[pnuµPNUkKMRr](\d{2,5}(?:\.\d{1,2})?)\s?([Vv%])")
_PERCENT: Final = re.compile(r"[1235]|10|20|0\.1|0\.25|0\.5|1\.0|2\.5")
_VOLTS: Final = re.compile(
    r"2\.5|6\.3|10|16|20|25|30|35|40|50|63|75|80|100|120|150|160|200|250|275|300|305|310|350|400|450|500|600|630|1000"
)
"""Rated voltages of capacitors that may be glued to a value: ``10u16V``."""


def told_apart(found: tuple[Token, ...], kind: str) -> tuple[Token, ...]:
    """The tokens, where a full value settles that ``U2J``, ``2R1`` and ``N750`` beside it are dielectrics."""
    if kind != "capacitor" or not any(_full(token) for token in found):
        return found
    return tuple(
        replace(token, kind="word") if _dielectric(token) and _others(found, token) else token for token in found
    )


def _full(token: Token) -> bool:
    return token.kind == "value" or (token.kind == "rkm" and token.parts["whole"] != "")


def _others(found: Sequence[Token], token: Token) -> bool:
    return any(_full(other) for other in found if other is not token)


def _dielectric(token: Token) -> bool:
    if token.kind not in ("rkm", "code", "bare"):
        return False
    known = class_one(token.text) is not None or (token.text[:1] == "2" and class_two(token.text) is not None)
    return known or (token.kind == "rkm" and _COEFFICIENT.fullmatch(token.text) is not None)


def glued(text: str) -> str:
    """Why digits between a letter and ``V`` or ``%`` may part in two ways (``2u250V``), '' when they do not."""
    for found in _GLUED.finditer(text):
        whole, digits, sign = found.groups()
        usual = _PERCENT if sign == "%" else _VOLTS
        split = usual.fullmatch(digits[1:]) and preferred(float(f"{whole}.{digits[0]}"), (len(E24),))
        if split or not usual.fullmatch(digits):
            return f"'{found[0]}' may be parted in two ways"
    return ""
