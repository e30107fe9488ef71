"""TOML files with the place of every key and value."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from rcrules.errors import Place

Path = tuple[str | int, ...]
"""Keys and array indexes from the root: ``("rule", 2, "at-least")``."""


@dataclass(frozen=True, slots=True, kw_only=True)
class TomlFile:
    """A parsed TOML file whose items know where they stand."""

    name: str
    data: Mapping[str, Any]
    text: str
    keys: Mapping[Path, Place]
    """Where each key stands."""
    values: Mapping[Path, Place]
    """Where each value starts (for a string: its opening quote)."""


def load(name: str, text: str) -> TomlFile:
    """Parse; bounded work. Raises UserMistake with line and column."""
    raise NotImplementedError(name, text)
