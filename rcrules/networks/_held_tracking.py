"""Supplies whose voltage follows from what a part is: halves, passed inputs, charge pumps of line drivers, one cell."""

import re
from collections.abc import Iterator
from typing import Final

from rcrules.design import Pin
from rcrules.networks._held_names import volts_in
from rcrules.networks._links import words
from rcrules.networks._scene import Scene
from rcrules.parts import RatedPart

CELL_VOLTS: Final = (3.0, 3.7, 4.2)
"""A lithium-ion cell: empty, nominal, full [V] (from memory)."""
SEVERAL: Final = re.compile(r"\b[2-9]\s?[SX]\b|[SX]\s?[2-9]\b|\b(TWO|DUAL|MULTI|[2-9]).?CELL", re.IGNORECASE)
"""Words of several cells in series or side by side."""
_CHARGER: Final = re.compile(r"CHARGER|CHARGE.?MANAG|(LI|LITHIUM).{0,12}CHARG", re.IGNORECASE)
_CHARGES: Final = frozenset(("PROG", "ISET", "ICHG", "CHRG", "STAT", "STAT1", "CHG"))
_BATTERY: Final = re.compile(r"V?BATT?(_?\d)?|BAT\+?|V?SYS(_?\d)?")
_HALF: Final = re.compile(r"VTT(_?REF)?|REFOUT")
_INPUT: Final = re.compile(r"V?BUS|VIN")
_WHOLE: Final = re.compile(r"VDDQ\w*")
_LINE_DRIVER: Final = re.compile(r"(?<!\d)32(?:2[123]|32|4[13])(?!\d)")
"""Type numbers of line drivers for TIA-232 at 3 V, whose charge pumps make ±5.5 V (from memory)."""
_PUMPED_VOLTS: Final = 5.5

Reading = tuple[float | tuple[float, float, float] | None, str]
"""[V], or least, nominal and most [V], and where it was read."""


def followed(scene: Scene, joint: str) -> Iterator[Reading]:
    """Voltages [V] of the joint that a part there makes from another of its nets, or from a cell."""
    for pin in scene.of_kind(joint, "ic"):
        part, name = scene.parts[pin.ref], pin.name.upper().strip("~{}")
        if _HALF.fullmatch(name):
            yield from ((volts / 2, f"half of {other.key}") for other, volts in _at(part, _WHOLE))
        elif name == "PMID":
            yield from ((volts, f"{other.key} through {pin.ref}") for other, volts in _at(part, _INPUT))
        elif name in ("V+", "VS+", "V-", "VS-") and _LINE_DRIVER.search(part.text):
            yield -_PUMPED_VOLTS if name.endswith("-") else _PUMPED_VOLTS, f"the charge pump of {pin.ref}"
        elif _BATTERY.fullmatch(name) and _charges_one(part):
            yield CELL_VOLTS, f"the one cell that {pin.ref} charges"


def _charges_one(part: RatedPart) -> bool:
    names = {pin.name.upper().strip("~{}") for pin in part.part.pins}
    return bool(_CHARGER.search(words(part)) or names & _CHARGES) and not SEVERAL.search(words(part))


def _at(part: RatedPart, name: re.Pattern[str]) -> Iterator[tuple[Pin, float]]:
    """Pins of a name on nets whose names tell their voltage [V]."""
    for pin in part.part.pins:
        volts = volts_in(pin.net) if name.fullmatch(pin.name.upper()) else None
        if volts is not None:
            yield pin, volts
