"""Small designs made by hand."""

from rcrules.design import Design, Fact, Part, Pin
from rcrules.errors import Place

PLACE = Place(file="board.xml", line=7)
BOM = Place(file="bom.csv", line=3, column=4)


def part(ref, value="", *, bom="", symbol="", footprint="", description="", pins=2, fitted=True, place=PLACE, **fields):
    """A part; field names with a leading ``bom_`` come from the BOM, an underscore is a blank."""
    values = [Fact(text=bom, origin="BOM value", place=BOM)] if bom else []
    values += [Fact(text=value, origin="netlist value", place=place)] if value else []
    facts = {}
    for name, text in fields.items():
        word = name.removeprefix("bom_").replace("_", " ")
        origin, at = (f"BOM field '{word}'", BOM) if name.startswith("bom_") else (f"netlist field '{word}'", place)
        facts[word.lower()] = (*facts.get(word.lower(), ()), Fact(text=text, origin=origin, place=at))
    if description:
        facts["description"] = (Fact(text=description, origin="netlist description", place=PLACE),)
    return Part(
        ref=ref,
        place=PLACE,
        values=tuple(values),
        fields=facts,
        footprint=footprint,
        symbol=symbol,
        description=description,
        sheet="/",
        fitted=fitted,
        fitted_why="" if fitted else "netlist: value 'DNP'",
        pins=tuple(
            Pin(ref=ref, number=str(number), name="", type="passive", net=f"N{number}", place=PLACE)
            for number in range(1, pins + 1)
        ),
    )


def design(*parts):
    """A design of parts, without nets."""
    return Design(parts={item.ref: item for item in parts}, nets={}, exports=(), remarks=())
