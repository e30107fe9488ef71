"""What the cards of elements say: their nodes, what they are worth, and what kind of part they are."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Final

from rcrules.quantities import show
from rcrules.readers._spice_cards import Card
from rcrules.readers._spice_numbers import doubt, number
from rcrules.readers._spice_sums import Scope, SumError

UNITS: Final = {"R": "Ω", "C": "F", "L": "H"}
_NODES: Final = {
    "R": 2,
    "C": 2,
    "L": 2,
    "V": 2,
    "I": 2,
    "B": 2,
    "F": 2,
    "H": 2,
    "D": 2,
    "J": 3,
    "Z": 3,
    "M": 4,
    "Q": 3,
    "E": 4,
    "G": 4,
    "S": 4,
    "W": 2,
    "T": 4,
    "O": 4,
    "K": 0,
}
_PIN_NAMES: Final = {
    "D": ("A", "K"),
    "Q": ("C", "B", "E", "S"),
    "M": ("D", "G", "S", "B"),
    "J": ("D", "G", "S"),
    "V": ("+", "-"),
    "I": ("+", "-"),
}
_SYMBOLS: Final = {
    "V": "voltage source",
    "I": "current source",
    "J": "JFET",
    "Z": "MESFET",
    "E": "controlled source",
    "G": "controlled source",
    "F": "controlled source",
    "H": "controlled source",
    "B": "controlled source",
}
_INSTEAD_OF_NODES: Final = frozenset({"poly", "value", "table", "laplace", "freq", "vol", "cur"})
_WAVES: Final = frozenset({"sin", "pulse", "exp", "pwl", "sffm", "am"})
CONTROLLED: Final = frozenset("BEFGH")
"""Letters of elements that no board holds: what has them is the model of a device."""
_MOST_DIGITS: Final = 12


@dataclass(frozen=True, slots=True, kw_only=True)
class Model:
    """A ``.model`` card."""

    kind: str
    numbers: Mapping[str, str]
    """Parameters in lower case."""


@dataclass(slots=True, kw_only=True)
class Element:
    """An element as its card gives it."""

    nodes: tuple[str, ...]
    pin_names: tuple[str, ...] = ()
    pin_types: tuple[str, ...] = ()
    value: str = ""
    """As text with its unit, '' where the deck gives none or simulators do not agree on it."""
    symbol: str = ""
    fields: dict[str, str] = field(default_factory=dict)
    remarks: list[str] = field(default_factory=list)


def element(card: Card, models: Mapping[str, Model], scope: Scope) -> Element:
    """The element of a card that is no subcircuit's. Fewer nodes than its letter asks for: as many as there are."""
    letter = card.head[:1].upper()
    nodes = card.words[1 : 1 + _node_count(card, letter, models)]
    rest = card.words[1 + len(nodes) :]
    found = Element(nodes=nodes, symbol=_SYMBOLS.get(letter, ""), pin_names=_PIN_NAMES.get(letter, ()))
    if letter in UNITS:
        found.pin_types = ("passive",) * len(nodes)
        _worth(card, letter, rest, models, scope, found)
    elif letter in "VI":
        _source(letter, rest, scope, found)
    else:
        found.value = next((word for word in rest if number(word) is None), "")
    return found


def wanted(card: Card) -> int | None:
    """Nodes that an element's letter asks for, None where it does not say."""
    return _NODES.get(card.head[:1].upper())


def _node_count(card: Card, letter: str, models: Mapping[str, Model]) -> int:
    words = [word.lower() for word in card.words[1:]]
    if letter not in _NODES:
        return max(0, len(words) - 1)
    count = _NODES[letter]
    if letter in "EG" and any(word in _INSTEAD_OF_NODES for word in words[2:4]):
        return 2
    if letter in "QM":
        at = next((at for at, word in enumerate(words) if at > 2 and word in models), None)
        if at is not None:
            return min(at, 4)
        if letter == "Q":
            return 4 if len(words) > 4 and number(words[3]) is None and number(words[4]) is None else 3
        return 4 if len(words) > 4 else 3
    return count


def _worth(
    card: Card, letter: str, rest: tuple[str, ...], models: Mapping[str, Model], scope: Scope, found: Element
) -> None:
    """The value of a resistor, capacitor or inductor, its multipliers worked in."""
    named = dict(card.named)
    model = next((models[word.lower()] for word in rest if word.lower() in models), None)
    said = named.get(letter.lower()) or next((word for word in rest if word.lower() not in models), "")
    if not said and model is not None:
        said = _of_model(letter, model, named)
    for word in rest:
        if word.endswith("%") and number(word[:-1]) is not None:
            found.fields["Tolerance"] = word
            found.remarks.append(f"{word!r} is taken as the tolerance; simulators take it as the name of a model")
    unit = UNITS[letter]
    try:
        value = amount(said, scope)
        times = amount(named.get("m", "1"), scope) * (amount(named.get("scale", "1"), scope) if letter == "R" else 1)
        value = value / times if letter == "R" and times else value * times
        if "tc1" in named:
            found.fields["TC"] = f"{amount(named['tc1'], scope) * 1e6:.6g} ppm/K"
    except SumError as error:
        found.remarks.append(f"no value: {error}" if said else "no value")
        return
    found.value = show(value, unit, _MOST_DIGITS)
    if doubt(said, unit):
        found.remarks.append(doubt(said, unit))


def _of_model(letter: str, model: Model, named: Mapping[str, str]) -> str:
    """The value that a model gives: its own, else sheet resistance times squares."""
    own = model.numbers.get(letter.lower()) or model.numbers.get("cap" if letter == "C" else "")
    if own:
        return own
    sheet, length, width = model.numbers.get("rsh"), named.get("l"), named.get("w")
    if letter == "R" and sheet and length and width:
        narrow = model.numbers.get("narrow", "0")
        return f"({sheet})*(({length})-({narrow}))/(({width})-({narrow}))"
    return ""


def _source(letter: str, rest: tuple[str, ...], scope: Scope, found: Element) -> None:
    """A source: a steady voltage is a supply; one that an analysis moves drives its node."""
    words = [word.lower() for word in rest]
    wave = any(word in _WAVES or word == "ac" for word in words)
    steady = words[words.index("dc") + 1 :] if "dc" in words else words
    try:
        level = amount(steady[0], scope) if steady else 0.0
    except SumError:
        level = 0.0
    if rest:
        found.fields["Waveform"] = " ".join(rest)[:200]
    if letter == "V" and level and not wave:
        found.value, found.symbol = show(level, "V", _MOST_DIGITS).replace(" ", ""), "battery"
        found.pin_types = ("power-out", "passive")
    elif letter == "V":
        found.pin_types = ("output", "passive")


def amount(text: str, scope: Scope) -> float:
    """What a number or a sum comes to. Raises SumError, also where simulators do not agree."""
    read = number(text)
    if read is None:
        return scope.value(text)
    if read.trap:
        raise SumError(read.trap)
    return read.value
