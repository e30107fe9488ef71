"""What a fed pin is: reset, converter, amplifier, logic, supply, regulator, timer, connector or other."""

from collections.abc import Iterable
from fnmatch import fnmatchcase
from functools import lru_cache

from rcrules.design import Pin
from rcrules.names import has_token, tokens
from rcrules.networks._family import family, inverting
from rcrules.networks._fed_words import CHANNEL, CONVERTER, FEEDBACK, OUTPUT, RESET, SUPPLY, TIMING
from rcrules.networks._spot import Spot, View
from rcrules.parts import RatedPart
from rcrules.project import Project


def whole(pin: Pin) -> str:
    """The one word of a pin name without marks and index: ``COMP`` of ``COMP1``, ``SS`` of ``SS/TR``, else ''."""
    words = [word for word in tokens(pin.name) if not word.isdigit()]
    if len(words) == 2:
        return words[0] if "/" in pin.name else "".join(words)
    return words[0] if len(words) == 1 else ""


def words_of(pin: Pin) -> frozenset[str]:
    """All words of a pin name."""
    return frozenset(tokens(pin.name))


def family_of(view: View, ref: str) -> str:
    """What an IC is, '' where it is not known."""
    if ref not in view.families:
        part = view.draft.design.parts.get(ref)
        texts = [*(fact.text for fact in part.values), part.symbol, part.description] if part is not None else []
        view.families[ref] = family(" ".join(texts), tuple(pin.name for pin in view.pins_of(ref)))
    return view.families[ref]


def kind_fed(view: View, pin: Pin) -> str:
    """One of vocabulary.FED_KINDS for an input-like pin."""
    kind = view.kind(pin)
    return _of_part(kind, family_of(view, pin.ref) if kind == "ic" else "", view.draft.project, pin)


def pin_kinds(part: RatedPart, project: Project) -> dict[str, str]:
    """Number of each pin of a part -> what the pin is, as ``kind_fed`` says it, whether a network feeds it or not."""
    own = part.part
    texts = (*(fact.text for fact in own.values), own.symbol, own.description)
    group = family(" ".join(texts), tuple(pin.name for pin in own.pins))
    return {pin.number: _of_part(part.kind, group, project, pin) for pin in own.pins}


def _of_part(kind: str, group: str, project: Project, pin: Pin) -> str:
    if kind == "connector":
        return "connector"
    if _given(project, pin) == "supply":
        return "supply"
    return _kind_of_ic_pin(group, pin, _hint(pin)) if kind == "ic" else "other"


def reads(view: View, pin: Pin) -> bool:
    """Whether the pin takes a voltage in: an IC's input, a transistor's control pin; what the project says wins."""
    given = _given(view.draft.project, pin)
    if given is not None:
        return given == "input"
    kind = view.kind(pin)
    if kind == "transistor":
        return is_control(view, pin)
    if kind != "ic" or pin.type in ("open-collector", "open-emitter", "power-out", "no-connect"):
        return False
    return family_of(view, pin.ref) == "controller" or not _drives(pin)


def _drives(pin: Pin) -> bool:
    """Whether a pin is an output by its name."""
    return pin.type != "input" and any(word.startswith(OUTPUT) for word in tokens(pin.name))


def is_control(view: View, pin: Pin) -> bool:
    """Whether the pin is a transistor's gate or base; without names pin 1 is, as in most small packages."""
    if view.kind(pin) != "transistor":
        return False
    word = tokens(pin.name)
    if word:
        return word[0] in ("G", "GATE", "B", "BASE")
    return pin.number == "1" and not any(other.name.strip("~") for other in view.pins_of(pin.ref))


def feeding(view: View, here: Spot) -> tuple[Pin, ...]:
    """Input-like pins at the joint and behind stoppers, each once."""
    seen: dict[str, Pin] = {}
    for pin in view.pins_near(here):
        if reads(view, pin):
            seen.setdefault(pin.key, pin)
    return tuple(seen.values())


def kinds(view: View, pins: Iterable[Pin]) -> tuple[str, ...]:
    """The different kinds of the pins, in order of name."""
    return tuple(sorted({kind_fed(view, pin) for pin in pins}))


def _given(project: Project, pin: Pin) -> str | None:
    """What the project file calls the pin."""
    for key, facts in project.pins.items():
        if facts.kind is not None and any(fnmatchcase(f"{pin.ref}.{end}", key) for end in (pin.name, pin.number)):
            return facts.kind
    return None


def _hint(pin: Pin) -> str:
    """The pin's name, or where it has none the name of its net: the last evidence."""
    return pin.name if pin.name.strip("~ ") else "" if pin.net.startswith(("Net-", "#")) else pin.net


@lru_cache(maxsize=4096)
def _named(name: str) -> str:
    words = frozenset(tokens(name))
    plain = {word for word in words if not word.isdigit()}
    if any(has_token(name, word) for word in RESET):
        return "reset"
    if any(word in CONVERTER or word.startswith("AIN") for word in plain) and "VREF" not in name.upper():
        return "adc"
    return (
        "supply"
        if words & SUPPLY
        or name.strip("~{} ") in SUPPLY
        or any(w.startswith(("VDD", "VCC", "AVCC", "VREF")) for w in plain)
        else ""
    )


def _kind_of_ic_pin(group: str, pin: Pin, hint: str) -> str:
    named = _named(hint)
    if pin.type == "power-in" or (named == "supply" and pin.name):
        return "supply"
    if named == "reset" or (named == "adc" and group != "amplifier"):
        return named
    if group == "adc" and words_of(pin) & CHANNEL:
        return "adc"
    if group == "amplifier" or inverting(pin.name) is not None:
        return "amplifier"
    return _by_group(group, pin)


def _by_group(group: str, pin: Pin) -> str:
    word = whole(pin)
    if group == "regulator":
        return "supply" if word == "IN" else "regulator"
    if word in FEEDBACK:
        return "regulator"
    if group == "timer" or word in TIMING:
        return "timer"
    if group in ("logic", "controller", "adc"):
        return "logic"
    return "logic" if pin.type in ("input", "bidirectional", "tri-state", "output") else "other"
