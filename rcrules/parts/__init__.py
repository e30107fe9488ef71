"""Step 3: design in, parts with kind, value, spread and ratings out."""

from rcrules.parts._apart import apart
from rcrules.parts._chip_power import chip_power
from rcrules.parts._diodes import DiodeModel, diode_model
from rcrules.parts._kinds import kind_of
from rcrules.parts._model import Insulation, Known, RatedPart, Share, Unknown
from rcrules.parts._preferred import series
from rcrules.parts._rate import rate
from rcrules.parts._shares import ASSUMED_TEMPERATURE
from rcrules.parts._spread import at_bias
from rcrules.parts._texts import ValueText, read_value

__all__ = [
    "ASSUMED_TEMPERATURE",
    "DiodeModel",
    "Insulation",
    "Known",
    "RatedPart",
    "Share",
    "Unknown",
    "ValueText",
    "apart",
    "at_bias",
    "chip_power",
    "diode_model",
    "kind_of",
    "rate",
    "read_value",
    "series",
]
