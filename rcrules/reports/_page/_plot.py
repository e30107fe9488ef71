"""The response of a finding as a small drawing of its own: a library's plot of the same would be ten times as long.

Coordinates carry one decimal; colours are classes, so that light and dark are the page's.
"""

import math
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import Final

from markupsafe import Markup, escape

from rcrules.findings import Finding, Json
from rcrules.quantities import show
from rcrules.reports._lines import safe

_WIDE: Final = 640
_HIGH: Final = 260
_LEFT: Final = 62
_RIGHT: Final = 132
_TOP: Final = 18
_BOTTOM: Final = 34
_TICKS: Final = 5
_MOST_POINTS: Final = 60
_PAST: Final = 3.0
"""So many times as far as the level is met the response is shown."""
_FAR: Final = 2.5
"""A limit more than so many times beyond that is told at the edge."""
_ROOM: Final = 1.1
_LONGEST: Final = 18
"""Letters of a level's name that fit beside the frame."""
_NEAR: Final = 12.0
"""Labels closer than this are moved apart."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Frame:
    """Where times and values stand on the drawing."""

    times: tuple[float, float]
    values: tuple[float, float]

    def x(self, time: float) -> float:
        """Column of a time, inside the frame."""
        start, end = self.times
        inner = _WIDE - _LEFT - _RIGHT
        return _LEFT + inner * min(max((time - start) / (end - start), 0.0), 1.0)

    def y(self, value: float) -> float:
        """Row of a value, inside the frame."""
        low, high = self.values
        inner = _HIGH - _TOP - _BOTTOM
        return _TOP + inner * (1.0 - min(max((value - low) / (high - low), 0.0), 1.0))


def plot(finding: Finding) -> Markup | None:
    """The drawing; None where no response was kept."""
    response = finding.response
    if not response or len(response["time"]) < 2:
        return None
    frame = _frame(finding, response)
    name = escape(safe(f"{finding.measure.replace('_', ' ')} of {finding.net or ', '.join(finding.parts)}"))
    body = "".join(_body(finding, response, frame))
    return Markup(
        f'<svg class="plot" viewBox="0 0 {_WIDE} {_HIGH}" role="img" aria-label="Response for the {name}">{body}</svg>'
    )


def _frame(finding: Finding, response: Json) -> Frame:
    heights = [value for key in ("nominal", "low_case", "high_case") for value in response[key] or ()]
    heights += [row[key] for row in response["thresholds"] for key in ("low", "nominal", "high")]
    heights += _limits(finding, response, across=False)
    finite = [value for value in heights if _known(value)] or [0.0]
    low, high = min(finite), max(finite)
    room = 0.06 * (high - low) or abs(high) or 1.0
    return Frame(times=_span(finding, response), values=(low - room, high + room))


def _span(finding: Finding, response: Json) -> tuple[float, float]:
    """From the first time kept to some way past the crossing, and to the limit where that is not far off."""
    start, end = response["time"][0], response["time"][-1]
    met = [time for time in (response["crossing"] or {}).values() if _known(time) and time > 0.0]
    end = min(end, _PAST * max(met)) if met else end
    reached = [_ROOM * time for time in _limits(finding, response, across=True) if _ROOM * time <= _FAR * end]
    start = max(start, -0.05 * end)
    return start, max([end, *reached, start + 1e-15])


def _known(value: object) -> bool:
    return isinstance(value, int | float) and math.isfinite(value)


def _limit(finding: Finding, response: Json) -> Json:
    """The limit as the response tells it; one on the axis of values as the finding does."""
    own = finding.limit or {}
    return response["limit"] or (own if own.get("unit") == response["unit"] else {})


def _limits(finding: Finding, response: Json, *, across: bool) -> list[float]:
    """The limits that stand on the time axis, or on the axis of values."""
    limit, unit = _limit(finding, response), (finding.limit or {}).get("unit")
    here = unit == ("s" if across else response["unit"])
    return [limit[key] for key in ("at_least", "at_most") if here and _known(limit.get(key))]


def _body(finding: Finding, response: Json, frame: Frame) -> Iterator[str]:
    yield from _axes(response["unit"], frame)
    yield from _forbidden(finding, response, frame)
    time = response["time"]
    low, high = (response[key] or () for key in ("low_case", "high_case"))
    if low and high:
        there, back = _points(time, low, frame), reversed(_points(time, high, frame))
        yield f'<path class="spread" d="M{" ".join([*there, *back])}z"/>'
    for look, values in (("case", low if not high else high if not low else ()), ("nominal", response["nominal"])):
        if values:
            yield f'<path class="{look}" d="M{" ".join(_points(time, values, frame))}"/>'
    yield from _thresholds(finding, response, frame)
    yield from _crossings(response, frame)


def _points(time: Sequence[float], values: Sequence[float], frame: Frame) -> list[str]:
    """The corners of a curve inside the frame: not more than are seen."""
    pairs = list(_inside([pair for pair in zip(time, values, strict=True) if all(map(_known, pair))], frame.times))
    step = math.ceil(len(pairs) / _MOST_POINTS) if pairs else 1
    kept = pairs[::step] + ([pairs[-1]] if (len(pairs) - 1) % step else [])
    return [f"{frame.x(t):.1f} {frame.y(v):.1f}" for t, v in kept]


def _inside(pairs: Sequence[tuple[float, float]], span: tuple[float, float]) -> Iterator[tuple[float, float]]:
    """The part of a curve between two times, its ends on straight lines between neighbours."""
    start, end = span
    if pairs and start <= pairs[0][0] <= end:
        yield pairs[0]
    for (t, v), (later, then) in pairwise(pairs):
        for edge in (start, end):
            if t < edge < later:
                yield edge, v + (then - v) * (edge - t) / (later - t)
        if start <= later <= end:
            yield later, then


def _axes(unit: str, frame: Frame) -> Iterator[str]:
    bottom, right = _HIGH - _BOTTOM, _WIDE - _RIGHT
    for value in ticks(*frame.values):
        y = frame.y(value)
        yield f'<path class="grid" d="M{_LEFT} {y:.1f}H{right}"/>'
        yield _text(_LEFT - 6, y + 4, show(value, unit), "end")
    for time in ticks(*frame.times):
        x = frame.x(time)
        yield f'<path class="grid" d="M{x:.1f} {_TOP}V{bottom}"/>'
        yield _text(x, bottom + 16, show(time, "s"), "middle")
    yield f'<path class="axis" d="M{_LEFT} {_TOP}V{bottom}H{right}"/>'


def ticks(low: float, high: float) -> list[float]:
    """Round numbers between two ends, about five: steps of 1, 2 or 5 times a power of ten."""
    rough = (high - low) / _TICKS
    power = 10.0 ** math.floor(math.log10(rough))
    step = power * min((factor for factor in (1, 2, 5, 10) if factor * power >= rough), default=10)
    first, last = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    return [float(f"{index * step:.12g}") + 0.0 for index in range(first, last + 1)]


def _forbidden(finding: Finding, response: Json, frame: Frame) -> Iterator[str]:
    """The side of each limit on which the number must not lie, and the limit itself."""
    limit, right, bottom = _limit(finding, response), _WIDE - _RIGHT, _HIGH - _BOTTOM
    for key in ("at_least", "at_most"):
        if not _known(limit.get(key)):
            continue
        value = float(limit[key])
        text = f"limit {show(value, finding.limit['unit'] if finding.limit else 's')}"
        if value in _limits(finding, response, across=True):
            x = frame.x(value)
            start, end = (_LEFT, x) if key == "at_least" else (x, right)
            if value > frame.times[1]:
                text += " →"
            yield f'<path class="forbidden" d="M{start:.1f} {_TOP}H{end:.1f}V{bottom}H{start:.1f}z"/>'
            yield f'<path class="limit" d="M{x:.1f} {_TOP}V{bottom}"/>'
            yield _text(min(x, right - 30), _TOP - 6, text, "middle", "limit-text")
        elif value in _limits(finding, response, across=False):
            y = frame.y(value)
            start, end = (y, bottom) if key == "at_least" else (_TOP, y)
            yield f'<path class="forbidden" d="M{_LEFT} {start:.1f}H{right}V{end:.1f}H{_LEFT}z"/>'
            yield f'<path class="limit" d="M{_LEFT} {y:.1f}H{right}"/>'
            yield _text(right - 4, y - 4, text, "end", "limit-text")


def _thresholds(finding: Finding, response: Json, frame: Frame) -> Iterator[str]:
    """A band from lowest to highest with its line; beside it what the rule calls it, moved apart."""
    right, named = _WIDE - _RIGHT, []
    for row in response["thresholds"]:
        if not _known(row["nominal"]):
            continue
        low, high = (row[key] if _known(row[key]) else row["nominal"] for key in ("low", "high"))
        top, bottom, y = frame.y(high), frame.y(low), frame.y(row["nominal"])
        yield f'<path class="band" d="M{_LEFT} {top:.1f}H{right}V{bottom:.1f}H{_LEFT}z"/>'
        yield f'<path class="threshold" d="M{_LEFT} {y:.1f}H{right}"/>'
        named.append((y, str(finding.options.get(row["name"], row["name"]))))
    for y, name in _apart(named):
        yield _text(
            right + 6, y + 4, name if len(name) <= _LONGEST else f"{name[: _LONGEST - 1]}…", "start", "threshold-text"
        )


def _apart(named: Iterable[tuple[float, str]]) -> Iterator[tuple[float, str]]:
    last = -_NEAR
    for y, name in sorted(named):
        last = max(y, last + _NEAR)
        yield last, name


def _crossings(response: Json, frame: Frame) -> Iterator[str]:
    """When the threshold is met: a mark for the nominal case and for both ends, with the times between."""
    found = response["crossing"] or {}
    times = {key: found[key] for key in ("low", "nominal", "high") if _known(found.get(key))}
    if not times:
        return
    bottom = _HIGH - _BOTTOM
    inside = {key: time for key, time in times.items() if frame.times[0] <= time <= frame.times[1]}
    if "low" in inside and "high" in inside:
        yield f'<path class="reach" d="M{frame.x(inside["low"]):.1f} {bottom}H{frame.x(inside["high"]):.1f}"/>'
    for key, time in inside.items():
        look = "crossing" if key == "nominal" else "crossing end"
        yield f'<path class="{look}" d="M{frame.x(time):.1f} {bottom - 7}v14"/>'


def _text(x: float, y: float, text: str, anchor: str, look: str = "") -> str:
    named = f' class="{look}"' if look else ""
    return f'<text{named} x="{x:.1f}" y="{y:.1f}" text-anchor="{anchor}">{escape(safe(text))}</text>'
