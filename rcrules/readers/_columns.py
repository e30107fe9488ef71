"""Header spellings of BOMs and pin lists, as they occur in life."""

import re
import unicodedata
from collections.abc import Mapping, Sequence
from functools import lru_cache
from typing import Final

REFERENCE: Final = (
    *("reference", "references", "refdes", "ref des", "reference designator", "reference designators"),
    *("designator", "designators", "ref", "refs", "part reference", "part references", "item reference"),
    *("component reference", "referencia", "referencias", "referenz", "repere", "bezeichner", "position", "pos"),
    *("supplier and ref", "locations", "location", "componente", "component", "components", "identificacion"),
)
VALUE: Final = (
    *("value", "val", "valor", "wert", "valeur", "valore", "part value", "component value", "comp value", "cmp value"),
    *("comment", "value1", "value 1", "nominal", "nominal value", "name", "designation", "part", "part name"),
    *("componente", "component", "libref", "library ref", "part type", "part number", "part no", "mpn", "description"),
    *("desc", "part description"),
)
"""Best first: a weak name such as ``Part`` or ``Description`` holds the value only where no better one exists."""
QUANTITY: Final = (
    *("qty", "quantity", "qnty", "qte", "count", "amount", "menge", "anzahl", "cant", "cantidad", "cantidad por pcb"),
    *("qty per board", "quantity per board", "qty per pcb", "number", "total qty", "total quantity"),
)
FOOTPRINT: Final = (
    *("footprint", "pcb footprint", "package", "package case", "case", "foot", "encapsulado", "gehause", "pattern"),
    *("decal", "case package", "footprint estandar", "size", "case size", "land pattern"),
)
DESCRIPTION: Final = ("description", "desc", "descripcion", "part description", "beschreibung", "details")
SYMBOL: Final = ("libpart", "lib part", "symbol", "libref", "library ref", "cmp name", "library part", "part type")
OTHERS: Final = frozenset(
    {"item", "id", "no", "nr", "datasheet", "manufacturer", "mfg", "mfr", "manf", "mpn", "part number", "supplier"}
    | {"vendor", "vend", "vend1", "tolerance", "tol", "voltage", "dnp", "mounted", "populate", "fitted", "notes"}
    | {"manufacturer part number", "manufacturer part", "lib", "library", "supplier part", "rating", "power", "layer"}
    | {
        "fabricante",
        "marca",
        "url",
        "fab",
        "distributor",
        "field4",
        "campo1",
        "catalog",
        "cat",
        "sheet",
        "note",
        "type",
    }
)
"""Further names that tell a header row from a row of data."""
NET: Final = ("net", "net name", "netname", "signal", "signal name", "net label", "netz", "node name", "nets", "node")
PART: Final = (*REFERENCE, "part", "comp", "device", "part ref", "part designator", "instance", "symbol ref")
PIN: Final = (
    *("pin", "pin number", "pin no", "pin num", "pinnumber", "pin nr", "pad", "pad number", "pad name", "terminal"),
    *("pins", "pin designator", "contact"),
)
PIN_VALUE: Final = ("value", "part value", "component value", "val", "valor", "wert")
PIN_NAME: Final = ("pin name", "pinname", "pin function", "pinfunction", "function", "pin label")
PIN_TYPE: Final = ("pin type", "pintype", "electrical type", "pin electrical type", "etype", "type", "direction")
JOINED: Final = (
    *("ref pin", "part pin", "refdes pin", "component pin", "reference pin", "pin", "pins"),
    *("connection", "connections", "node", "nodes", "terminal", "terminals", "members"),
)
PIN_LIST_KEYS: Final = frozenset({"net", "pin", "pin-name", "pin-type"})
"""Canonical names that only a pin list has."""
_BOM_NAMES: Final = frozenset({*REFERENCE, *VALUE, *QUANTITY, *FOOTPRINT, *DESCRIPTION, *SYMBOL}) | OTHERS
_LONGEST: Final = 60
"""Characters of the longest cell that may be a header."""
_MARKS: Final = re.compile(r"[^\w]+|_")


@lru_cache(maxsize=4096)
def plain(name: str) -> str:
    """A header for comparison: lower case, without accents and marks; ``Reference(s)`` is ``references``."""
    letters = name.replace("(s)", "s").replace("#", " no ")
    if not letters.isascii():
        bare = unicodedata.normalize("NFKD", letters)
        letters = "".join(character for character in bare if not unicodedata.combining(character))
    return " ".join(_MARKS.sub(" ", letters.lower()).split())


def find(headers: Sequence[str], names: Sequence[str], taken: frozenset[int] = frozenset()) -> int | None:
    """Index of the column with the best of the names, None without one."""
    spelled = [plain(header) for header in headers]
    for name in names:
        for index, header in enumerate(spelled):
            if header == name and index not in taken:
                return index
    return None


def find_named(headers: Sequence[str], columns: Mapping[str, str], key: str) -> int | None:
    """Index of the column that the project names for a key, None without one."""
    wanted = columns.get(key)
    return None if wanted is None else find(headers, (plain(wanted),))


def is_bom_header(cells: Sequence[str], columns: Mapping[str, str]) -> bool:
    """True for a row with a name for references and at least one more known name."""
    wanted = {plain(name) for name in columns.values()}
    names = {plain(cell) for cell in cells if 0 < len(cell) <= _LONGEST}
    known = {name for name in names if name in _BOM_NAMES or name in wanted}
    reference = plain(columns["reference"]) if "reference" in columns else None
    return len(known) > 1 and any(name in REFERENCE or name == reference for name in names)
