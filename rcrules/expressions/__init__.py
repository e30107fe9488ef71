"""Sums of quantities, names and calls, written in rules: text in, a checked tree out, values for given names."""

from rcrules.expressions._dimensions import Dimension, dimension_of, named, unit_of
from rcrules.expressions._evaluate import Values, value_of
from rcrules.expressions._known import FUNCTIONS, Known
from rcrules.expressions._parse import parse_expression
from rcrules.expressions._tree import (
    Binary,
    Call,
    Expression,
    Name,
    Number,
    Power,
    Text,
    Unary,
    calls,
    changed,
    names,
    text_of,
)
from rcrules.expressions._units import units_of

__all__ = [
    "FUNCTIONS",
    "Binary",
    "Call",
    "Dimension",
    "Expression",
    "Known",
    "Name",
    "Number",
    "Power",
    "Text",
    "Unary",
    "Values",
    "calls",
    "changed",
    "dimension_of",
    "named",
    "names",
    "parse_expression",
    "text_of",
    "unit_of",
    "units_of",
    "value_of",
]
