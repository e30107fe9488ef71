"""One part out of what every export says about its reference."""

from collections.abc import Iterator, Sequence

from rcrules.design._model import Fact, Part, Pin
from rcrules.readers import Export, ExportPart

Said = tuple[str, ExportPart]
"""``BOM`` or ``netlist``, and what it says about the part."""


def word(export: Export) -> str:
    """How origins call an export."""
    return "BOM" if export.kind == "bom" else "netlist"


def merge(said: Sequence[Said], pins: tuple[Pin, ...], open_pins: tuple[Pin, ...] = ()) -> Part:
    """The part with every fact kept.

    said: at least one entry, BOMs first: their value wins. Names of symbol, footprint and sheet come from the
    schematic where it gives them; a description from the BOM where it gives one.
    """
    schematic_first = [part for kind, part in said if kind == "netlist"] + [p for k, p in said if k == "BOM"]
    fitted, why = _fitting(said)
    return Part(
        ref=said[0][1].ref,
        place=schematic_first[0].place,
        values=tuple(_values(said)),
        fields=_fields(said),
        footprint=next((part.footprint for part in schematic_first if part.footprint), ""),
        symbol=next((part.symbol for part in schematic_first if part.symbol), ""),
        description=next((part.description for _, part in said if part.description), ""),
        sheet=next((part.sheet for part in schematic_first if part.sheet), ""),
        fitted=fitted,
        fitted_why=why,
        pins=pins,
        open_pins=open_pins,
    )


def _values(said: Sequence[Said]) -> Iterator[Fact]:
    for kind, part in said:
        if part.value is not None:
            yield Fact(text=part.value.text, origin=f"{kind} value", place=part.value.place)


def _fields(said: Sequence[Said]) -> dict[str, tuple[Fact, ...]]:
    """Every field and description by lower-case name, in the order of the exports."""
    fields: dict[str, tuple[Fact, ...]] = {}
    for kind, part in said:
        for name, cell in part.fields.items():
            fact = Fact(text=cell.text, origin=f"{kind} field {name!r}", place=cell.place)
            fields[name.lower()] = (*fields.get(name.lower(), ()), fact)
        if part.description:
            held = fields.get("description", ())
            if all(fact.text != part.description for fact in held):
                origin = f"{kind} description"
                fields["description"] = (*held, Fact(text=part.description, origin=origin, place=part.place))
    return fields


def _fitting(said: Sequence[Said]) -> tuple[bool, str]:
    for kind, part in said:
        if part.fitted is False:
            return False, f"{kind}: {part.fitted_why}" if part.fitted_why else kind
    return True, next((f"{kind}: {part.fitted_why}" for kind, part in said if part.fitted), "")
