"""Places as the document holds them."""

from os.path import isabs
from pathlib import Path

from rcrules.errors import Place
from rcrules.findings import Json


def place_json(place: Place) -> Json:
    """File, and line and column where they are known."""
    found: Json = {"file": shown(place.file)}
    if place.line is not None:
        found["line"] = place.line
    if place.column is not None:
        found["column"] = place.column
    return found


def shown(path: str) -> str:
    """A path that tells nothing of the machine: relative as given, or below the working folder, else the file name."""
    if not isabs(path):
        return path
    given = Path(path)
    return str(given.relative_to(Path.cwd())) if given.is_relative_to(Path.cwd()) else given.name
