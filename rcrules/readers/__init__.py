"""Step 1: files in, exports out."""

from rcrules.readers._bounds import Limits
from rcrules.readers._export import Cell, Export, ExportPart, ExportPin, Reader, Remark, Source, Variant
from rcrules.readers._fitting import fitted_in, tells_fitting
from rcrules.readers._join import join
from rcrules.readers._load import load
from rcrules.readers._proposal import proposal
from rcrules.readers._read import known, read

__all__ = [
    "Cell",
    "Export",
    "ExportPart",
    "ExportPin",
    "Limits",
    "Reader",
    "Remark",
    "Source",
    "Variant",
    "fitted_in",
    "join",
    "known",
    "load",
    "proposal",
    "read",
    "tells_fitting",
]
