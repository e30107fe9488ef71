"""Places as the document holds them."""

from rcrules.errors import Place
from rcrules.findings import Json


def place_json(place: Place) -> Json:
    """File, and line and column where they are known."""
    found: Json = {"file": place.file}
    if place.line is not None:
        found["line"] = place.line
    if place.column is not None:
        found["column"] = place.column
    return found
