"""Texts with units to SI floats and back; the only room that knows units."""

from rcrules.quantities._model import QuantityError, Spread
from rcrules.quantities._read import parse_quantity
from rcrules.quantities._show import show
from rcrules.quantities._units import QUANTITY_NAMES, SAMPLES, parse_unit

__all__ = ["QUANTITY_NAMES", "SAMPLES", "QuantityError", "Spread", "parse_quantity", "parse_unit", "show"]
