"""Step 11: the one document that every report is made from."""

from rcrules.findings._derived import Derived, derived_text
from rcrules.findings._document import Document, Finding, Json, Quantity
from rcrules.findings._encode import SCHEMA, dumps, loads, settled
from rcrules.findings._schema import schema_text

__all__ = [
    "SCHEMA",
    "Derived",
    "Document",
    "Finding",
    "Json",
    "Quantity",
    "derived_text",
    "dumps",
    "loads",
    "schema_text",
    "settled",
]
