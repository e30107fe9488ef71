"""The drawing of a network: symbols from the drawing library, slimmed so that a thousand fit on a page."""

import re
from collections.abc import Mapping, Sequence
from functools import lru_cache
from typing import Any, Final

import schemdraw
import schemdraw.elements as elm
from markupsafe import Markup, escape

from rcrules.findings import Json
from rcrules.reports._lines import safe
from rcrules.reports._page._layout import Branch, Label, Plan, Symbol, plan
from rcrules.reports._page._sheets import Sheet, sheets

schemdraw.use("svg")

_MARKS: Final = {"ground": elm.Ground, "supply": elm.Vdd}
_PARTS: Final = {"resistor": elm.ResistorIEC, "capacitor": elm.Capacitor, "wire": elm.Line}
_TAG: Final = re.compile(r"<(path|circle|polygon|polyline|line)\b([^>]*)/>")
_NUMBER: Final = re.compile(r"-?\d+\.\d+(?:e-?\d+)?")
_UNIT: Final = 36.0
"""Steps of the view box in one unit of the library."""


def drawings(network: Json, held: Sequence[Json], texts: Mapping[str, str]) -> list[Markup]:
    """The network as SVG with alternative texts: one drawing, or several where one would be too large to read."""
    nodes = {str(node["net"]): node["feeds"] for node in network["nodes"]}
    kinds = {row["net"]: row["kind"] for row in held if row["net"] not in nodes}
    branches = [_branch(row, texts) for row in network["branches"]]
    return [_drawing(sheet, nodes) for sheet in sheets(branches, kinds)]


def _drawing(sheet: Sheet, nodes: Mapping[str, Sequence[str]]) -> Markup:
    found = plan(sheet.branches, sheet.held, nodes)
    told = "; ".join(f"{item.ref} {item.value} between {' and '.join(item.nets)}" for item in sheet.branches)
    return Markup(
        f'<svg class="circuit" {_box(found)} role="img" aria-label="Circuit: {escape(safe(told))}">'
        f"{_symbols(tuple(found.symbols))}{_labels(found)}</svg>"
    )


def _branch(row: Json, texts: Mapping[str, str]) -> Branch:
    ref = row["part"]
    kind = "capacitor" if ref.startswith("C") else "resistor"
    value = texts.get(ref, ref).removeprefix(ref).strip()
    return Branch(ref=ref, value=value, kind=kind, nets=(row["nets"][0], row["nets"][1]))


def _box(found: Plan) -> str:
    """The part of the plane that holds everything, and how large it is shown."""
    points = [point for symbol in found.symbols for point in (symbol.start, symbol.end or symbol.start)]
    points += [
        (x + side, y) for label in found.labels for x, y in [label.at] for side in _reach(label.text, label.anchor)
    ]
    left, right = min(x for x, _ in points) - 0.4, max(x for x, _ in points) + 0.4
    low, high = min(y for _, y in points) - 0.8, max(y for _, y in points) + 0.5
    wide, tall = (right - left) * _UNIT, (high - low) * _UNIT
    return (
        f'viewBox="{left * _UNIT:.0f} {-high * _UNIT:.0f} {wide:.0f} {tall:.0f}" width="{wide:.0f}" height="{tall:.0f}"'
    )


def _reach(text: str, anchor: str) -> tuple[float, float]:
    """How far a text reaches to the left and to the right of its point."""
    wide = 0.23 * len(text)
    return {"start": (0.0, wide), "middle": (-wide / 2, wide / 2), "end": (-wide, 0.0)}[anchor]


@lru_cache(maxsize=2**10)
def _symbols(symbols: tuple[Symbol, ...]) -> str:
    """What the library draws, without its styles: those are the page's. Many networks of a board look the same."""
    whole = schemdraw.Drawing(show=False)
    for symbol in symbols:
        whole.add(_element(symbol.kind, symbol.start, symbol.end))
    text: str = whole.get_imagedata("svg").decode()
    return "".join(_slim(tag, attributes) for tag, attributes in _TAG.findall(text))


def _element(kind: str, start: tuple[float, float], end: tuple[float, float] | None) -> Any:
    if end is not None:
        return _PARTS[kind]().endpoints(start, end)
    if kind in _MARKS:
        return _MARKS[kind]().at(start)
    return elm.Dot(open=kind == "driven").at(start)


def _slim(tag: str, attributes: str) -> str:
    filled = ' class="f"' if "fill:currentColor" in attributes or "fill:black" in attributes else ""
    kept = re.sub(r'\s*style="[^"]*"\s*', "", attributes).rstrip()
    return f"<{tag}{filled}{_NUMBER.sub(_short, kept)}/>"


def _short(found: re.Match[str]) -> str:
    """One decimal; whole numbers without one."""
    return f"{round(float(found[0]), 1) + 0.0:g}"


def _labels(found: Plan) -> str:
    return "".join(_label(label) for label in found.labels if label.text)


def _label(label: Label) -> str:
    (x, y), look = label.at, f' class="{label.look}"' if label.look else ""
    anchor = f' text-anchor="{label.anchor}"' if label.anchor != "start" else ""
    return f'<text{look} x="{x * _UNIT:.0f}" y="{-y * _UNIT:.0f}"{anchor}>{escape(safe(label.text))}</text>'
