"""What single forms of an EDIF file say: names, texts, numbers."""

import re
from collections.abc import Iterator, Mapping
from math import isfinite
from typing import Final

from rcrules.readers._sexpr import Form

_CODES: Final = re.compile(r"%((?:\s*\d{1,3})(?:\s+\d{1,3})*\s*)%")
_UNITS: Final = {
    "capacitance": "F",
    "resistance": "ohm",
    "inductance": "H",
    "voltage": "V",
    "current": "A",
    "power": "W",
    "time": "s",
    "frequency": "Hz",
}
_FAR: Final = 400
"""Powers of ten beyond which a number is none."""


def text_of(quoted: str) -> str:
    """What a quoted text says: ``%34%`` is a quote; a bare ``%`` stays; line ends are dropped."""
    if "%" in quoted:
        quoted = _CODES.sub(_decoded, quoted)
    return quoted.replace("\r", "").replace("\n", "")


def _decoded(found: re.Match[str]) -> str:
    codes = [int(code) for code in found[1].split()]
    return "".join(map(chr, codes)) if min(codes) >= ord(" ") and max(codes) < 256 else found[0]


def said(item: Form, scales: Mapping[str, float]) -> str:
    """The text of a property; a number with a unit is brought to the base unit.

    scales: base units for one user unit, by kind.
    """
    unit = child(item, "unit")
    kind = unit.first().casefold() if unit is not None else ""
    for form in item.forms:
        match form.head:
            case "string":
                shown = child(form, "stringdisplay")
                return (shown if shown is not None else form).first()
            case "boolean":
                return form.forms[0].head or "" if form.forms else form.first().casefold()
            case "integer" | "number":
                return _quantity(number_form(form), kind, scales)
            case "minomax":
                return " .. ".join(_quantity(number, kind, scales) for number in _spread(form))
    return ""


def _quantity(number: float | None, kind: str, scales: Mapping[str, float]) -> str:
    if number is None:
        return ""
    return f"{number * scales.get(kind, 1.0):.12g} {_UNITS.get(kind, '')}".strip()


def children(form: Form, head: str) -> Iterator[Form]:
    """Forms of that name."""
    return (item for item in form.forms if item.head == head)


def child(form: Form, head: str) -> Form | None:
    """First form of that name; None without one."""
    for item in form.forms:
        if item.head == head:
            return item
    return None


def named(form: Form) -> tuple[str, str]:
    """Identifier, and the text that is to be shown, '' where none is given."""
    renamed = child(form, "rename")
    if renamed is not None:
        shown = child(renamed, "stringdisplay")
        texts = [*renamed.atoms, *(shown.atoms[:1] if shown is not None else ())]
        inner = child(renamed, "name")
        key = inner.first() if inner is not None else renamed.first()
        return key, texts[1] if len(texts) > 1 else ""
    inner = child(form, "name")
    return (inner if inner is not None else form).first(), ""


def designator(form: Form) -> str:
    """The designator in a form, '' without one."""
    item = child(form, "designator")
    if item is None:
        return ""
    shown = child(item, "stringdisplay")
    return (shown if shown is not None else item).first().strip()


def number(text: str) -> float | None:
    """The finite number that a text is, else None."""
    try:
        value = float(text)
    except ValueError:
        return None
    return value if isfinite(value) else None


def number_form(form: Form) -> float | None:
    """The number of ``(number 5)``, ``(number (e 47 -1))`` or ``(e 47 -1)``."""
    inner = child(form, "e")
    atoms = (inner if inner is not None else form).atoms
    if (inner is not None or form.head == "e") and len(atoms) == 2:
        mantissa, exponent = map(number, atoms)
        if mantissa is None or exponent is None or abs(exponent) > _FAR:
            return None
        return number(f"{mantissa!r}e{int(exponent)}") if "e" not in repr(mantissa) else mantissa * 10.0**exponent
    return number(atoms[0]) if atoms else None


def _spread(form: Form) -> list[float]:
    """Least and greatest of a value with bounds; the nominal one alone where it is given."""
    triple = child(form, "mnm")
    if triple is None:
        return []
    ends = [number(atom) for atom in triple.atoms] or [number_form(item) for item in triple.forms]
    given = [end for end in ends if end is not None]
    return [given[1]] if len(given) == 3 else given
