"""Step 1: files in, exports out."""

from rcrules.readers._export import Cell, Export, ExportPart, ExportPin, Reader, Remark, Source

__all__ = ["Cell", "Export", "ExportPart", "ExportPin", "Reader", "Remark", "Source"]
