"""Facts of subjects that rules may name, in conditions and in expressions: numbers with their units, and words."""

from collections.abc import Mapping
from typing import Final

from rcrules.vocabulary import CERTAINTIES, FED_KINDS, PART_KINDS, ROLES, TECHNOLOGIES

FACTS: Final[Mapping[str, str]] = {
    **{f"{fact}_{end}": "V" for fact in ("supply", "voltage", "rated_voltage") for end in ("low", "nominal", "high")},
    "rated_voltage": "V",
    "rated_power": "W",
    "resistance": "Ω",
    "capacitance": "F",
    "tolerance": "1",
}
"""Numbers by name, with their units: supplies that feed the subject, voltage across or at it, facts of its parts. Of
several parts the largest value, the widest tolerance and the weakest rating count."""
WORDS: Final[Mapping[str, tuple[str, ...]]] = {
    "dielectric": (),
    "technology": TECHNOLOGIES,
    "size": (),
    "sheet": (),
    "kind": PART_KINDS,
    "role": ROLES,
    "kind_fed": FED_KINDS,
    "certainty": CERTAINTIES,
    "polarised": ("yes", "no"),
}
"""Words by name, with the closed list that they are of; () = any text."""
