"""Voltage levels as texts: ``1.2 V``, ``30 % of +3V3``, ``+3V3 + 0.3 V``, ``63 % of final``, ``may switch``.

level = "may switch" | "must have switched" | quantity [V]
      | fraction "of" ("final" | "step")
      | [fraction "of"] net [("+" | "-") quantity [V]]
net   = quoted text, or bare text; a sign that belongs to the offset has a blank on both sides
"""

import re
from dataclasses import dataclass
from typing import Final, Literal

from rcrules.quantities import QuantityError, Spread, parse_quantity

_LONGEST: Final = 300
_OF: Final = re.compile(r"\s+of\s+")
_SIGN: Final = re.compile(r"\s[+−-]\s")
_LIKE_QUANTITY: Final = re.compile(r"[+−-]?[0-9]+([.,][0-9]*)?\s*[A-Za-zµμΩ°%/]*")
_EXPECTED: Final = (
    "a voltage, 'N % of final', 'N % of step', 'N % of NET', 'NET - 0.5 V', 'may switch' or 'must have switched'"
)
_EDGES: Final[dict[str, Literal["may switch", "must have switched"]]] = {
    "may switch": "may switch",
    "must have switched": "must have switched",
}
_OWN: Final[dict[str, Literal["final", "step"]]] = {"final": "final", "step": "step"}
_ONE: Final = Spread(low=1.0, nominal=1.0, high=1.0, unit="1")


@dataclass(frozen=True, slots=True, kw_only=True)
class Level:
    """A voltage that may follow nets, the node's own response, or the thresholds of the fed pin.

    The level is ``offset + sum(fraction * voltage of net)``; or ``fraction`` of the node's final value or step; or an
    edge of the undefined band of the pin that the node feeds.
    """

    text: str
    """As written."""
    offset: Spread | None = None
    """[V]"""
    nets: tuple[tuple[Spread, str], ...] = ()
    """Fraction (1 = 100 %) and net name; the level follows the net's momentary voltage."""
    of: Literal["final", "step"] | None = None
    fraction: Spread | None = None
    """Used with ``of``."""
    edge: Literal["may switch", "must have switched"] | None = None


def parse_level(text: str) -> Level:
    """Read a level. Raises QuantityError with the offset of the first character not understood."""
    if len(text) > _LONGEST:
        raise QuantityError("too long for a level", at=_LONGEST, expected=f"at most {_LONGEST} characters")
    words = " ".join(text.split())
    if words in _EDGES:
        return Level(text=text, edge=_EDGES[words])
    if not words:
        raise QuantityError("no level", expected=_EXPECTED)
    share = _OF.search(text)
    if share is not None:
        return _of(text, share)
    if words[0] in "\"'":
        return _net(text, 0, _ONE)
    try:
        return Level(text=text, offset=parse_quantity(text, "V"))
    except QuantityError:
        if _LIKE_QUANTITY.fullmatch(words):
            raise
    return _net(text, 0, _ONE)


def _of(text: str, share: re.Match[str]) -> Level:
    fraction = parse_quantity(text[: share.start()], "1")
    rest = text[share.end() :].strip()
    if rest in _OWN:
        return Level(text=text, of=_OWN[rest], fraction=fraction)
    return _net(text, share.end(), fraction)


def _net(text: str, at: int, fraction: Spread) -> Level:
    """The net, and perhaps an offset, from ``at`` on."""
    name, end = _name(text, at, alone=fraction is _ONE)
    rest = text[end:]
    if not rest.strip():
        return Level(text=text, nets=((fraction, name),))
    sign = _SIGN.match(rest)
    if sign is None:
        problem = f"'{rest.strip()}' not understood"
        raise QuantityError(problem, at=end, length=len(rest), expected="' + 0.3 V' or the end")
    try:
        offset = parse_quantity(rest[sign.end() :], "V")
    except QuantityError as error:
        raise error.moved(end + sign.end()) from None
    return Level(text=text, nets=((fraction, name),), offset=offset if "+" in sign[0] else _minus(offset))


def _name(text: str, at: int, *, alone: bool) -> tuple[str, int]:
    """Name and where it ends; a bare name ends before the last free-standing sign that a number follows.

    alone: no ``N % of`` in front; then a bare name with blanks is refused, since it is more likely a misspelt level.
    """
    at += len(text[at:]) - len(text[at:].lstrip())
    quote = text[at : at + 1]
    quoted = quote in ("'", '"')
    if quoted:
        end = text.find(quote, at + 1)
        if end < 0:
            raise QuantityError("a quote that does not close", at=at, expected=f"a second {quote}")
        name, end = text[at + 1 : end], end + 1
    else:
        signs = [sign.start() for sign in _SIGN.finditer(text, at) if text[sign.end() : sign.end() + 1].isdigit()]
        end = signs[-1] if signs else len(text)
        name = text[at:end].strip()
    if not name or (" " in name and alone and not quoted):
        raise QuantityError(f"'{name}' is no level", at=at, length=max(len(name), 1), expected=_EXPECTED)
    return name, end


def _minus(spread: Spread) -> Spread:
    return Spread(low=-spread.high, nominal=-spread.nominal, high=-spread.low, unit=spread.unit)
