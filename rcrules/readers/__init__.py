"""Step 1: files in, exports out."""

from rcrules.readers._export import Cell, Export, ExportPart, ExportPin, Reader, Remark, Source
from rcrules.readers._load import SIZE_LIMIT, load
from rcrules.readers._read import read

__all__ = [
    "SIZE_LIMIT",
    "Cell",
    "Export",
    "ExportPart",
    "ExportPin",
    "Reader",
    "Remark",
    "Source",
    "load",
    "read",
]
