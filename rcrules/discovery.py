"""Collects the one object that each file of a room offers."""

import importlib
import pkgutil
from types import ModuleType
from typing import TypeVar

Offered = TypeVar("Offered")


def members(package: ModuleType, attribute: str, kind: type[Offered]) -> tuple[Offered, ...]:
    """The object ``attribute`` of every module of ``package`` whose name has no leading underscore, by module name.

    Raises TypeError, with the module's name, where the object is missing or of another kind.
    """
    found = []
    for info in sorted(pkgutil.iter_modules(package.__path__), key=lambda info: info.name):
        if info.name.startswith("_"):
            continue
        module = importlib.import_module(f"{package.__name__}.{info.name}")
        offered = getattr(module, attribute, None)
        if not isinstance(offered, kind):
            raise TypeError(f"{module.__name__} must offer {attribute}, a {kind.__name__}; found {offered!r}")
        found.append(offered)
    return tuple(found)
