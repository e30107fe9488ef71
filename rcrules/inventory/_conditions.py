"""Under what conditions the board is judged."""

from rcrules.findings import Json
from rcrules.project import Project
from rcrules.quantities import Spread


def conditions(project: Project) -> Json:
    """Temperature and life as the project file gives them; null where it does not: parts then assume."""
    return {"temperature": _bounds(project.temperature, "degC"), "life": _bounds(project.life, "s")}


def _bounds(spread: Spread | None, unit: str) -> Json:
    low, nominal, high = (spread.low, spread.nominal, spread.high) if spread else (None, None, None)
    return {"low": low, "nominal": nominal, "high": high, "unit": unit}
