"""All measures by name."""

import sys
from collections.abc import Mapping
from functools import cache
from types import MappingProxyType

from rcrules.discovery import members
from rcrules.measures._measure import Measure


@cache
def registry() -> Mapping[str, Measure]:
    """Name -> measure, by name; read once from the files of this room."""
    found = members(sys.modules["rcrules.measures"], "MEASURE", Measure)
    return MappingProxyType({measure.name: measure for measure in found})
