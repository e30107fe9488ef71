"""Exports that describe one netlist between them: parts get what the library of another file says of them."""

from collections.abc import Mapping, Sequence
from dataclasses import replace

from rcrules.errors import Place
from rcrules.readers._export import Export, ExportPart, ExportPin, Primitive, Remark
from rcrules.readers._fitting import fitting


def join(exports: Sequence[Export]) -> tuple[Export, ...]:
    """The exports in their order, parts and pins completed from the primitives that any of them defines.

    Remarks: a library without parts, parts without a library.
    """
    library: dict[str, Primitive] = {}
    for export in exports:
        library.update(export.library)
    named = {part.ref: part.symbol for export in exports if export.by_primitive for part in export.parts if part.symbol}
    if not library and not named:
        return tuple(exports)
    return tuple(_joined(export, library, named) for export in exports)


def _joined(export: Export, library: Mapping[str, Primitive], named: Mapping[str, str]) -> Export:
    if not export.by_primitive:
        return export
    remarks = [*export.remarks, *_missing(export, library, named)]
    return replace(
        export,
        parts=tuple(_part(part, library.get(part.symbol)) for part in export.parts),
        pins=tuple(_pin(pin, library.get(named.get(pin.ref, ""))) for pin in export.pins),
        remarks=tuple(remarks),
    )


def _part(part: ExportPart, primitive: Primitive | None) -> ExportPart:
    if primitive is None:
        return part
    value = primitive.value.text if primitive.value else ""
    fitted, why = fitting(value, ((name, cell.text) for name, cell in primitive.fields.items()))
    return replace(
        part,
        value=primitive.value,
        footprint=primitive.footprint,
        symbol=primitive.symbol or part.symbol,
        fields=primitive.fields,
        fitted=fitted,
        fitted_why=why,
    )


def _pin(pin: ExportPin, primitive: Primitive | None) -> ExportPin:
    name, kind = primitive.pins.get(pin.number, ("", "")) if primitive is not None else ("", "")
    return replace(pin, name=pin.name or name, type=kind or pin.type)


def _missing(export: Export, library: Mapping[str, Primitive], named: Mapping[str, str]) -> list[Remark]:
    """What is missing of the three files, and primitives that the library does not define."""
    place = Place(file=export.source, line=1)
    listed = [part for part in export.parts if part.symbol]
    if listed and not library:
        return [Remark(place=place, text="the library of primitives is not given; values of parts are not known")]
    if export.pins and not named:
        return [Remark(place=place, text="the list of parts is not given; values of parts are not known")]
    unknown = sorted({part.symbol for part in listed if part.symbol not in library})
    text = f"the library does not define {', '.join(unknown[:5])}{' …' if len(unknown) > 5 else ''}"
    return [Remark(place=place, text=text)] if unknown else []
