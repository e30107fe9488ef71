"""A rule in one plain sentence."""

from collections.abc import Iterator
from typing import Final

from rcrules.expressions import Call, calls, text_of
from rcrules.levels import Level
from rcrules.quantities import show
from rcrules.rulebook._model import Limit, OptionValue, Rule, Selection
from rcrules.tomlfile import listed

_PHRASES: Final = (
    ("with role", "role"),
    ("named", "name"),
    ("on net", "net"),
    ("feeding pin", "pin"),
    ("of reference", "part"),
    ("on sheet", "sheet"),
    ("of kind", "kind"),
    ("feeding a pin of kind", "kind_fed"),
    ("of dielectric", "dielectric"),
    ("recognised as", "certainty"),
)
"""Words, and the field of the selection that they tell."""


def plural(subject: str) -> str:
    """``supplies``."""
    return f"{subject[:-1]}ies" if subject.endswith("y") else f"{subject}s"


def sentence(rule: Rule) -> str:
    """``for every node with role debounce, the delay after release to 'may switch' must be at least 10 ms``"""
    selection = "".join(f" {phrase}," for phrase in [_selected(rule.selection, rule.held_against)] if phrase)
    subject = f"for every {rule.held_against}{selection or ','}"
    name = rule.measure.name if rule.value is not None else rule.measure.name.replace("_", " ")
    what = " ".join([f"the {_end(rule)}{name}", *_options(rule)])
    bounds = _bounds(rule) or listed(rule.one_of)
    judged = " at nominal values" if rule.nominal and _spreads(rule) else ""
    never = "; never reaching the level is fine" if rule.never == "holds" else ""
    share = "" if rule.passing is None else f" on {100 * rule.passing:.6g} % of the boards"
    return f"{subject} {what}{judged} must be {bounds}{share}{never}"


def _end(rule: Rule) -> str:
    """``lowest ``, of times ``shortest `` and so on: the end of the bounds that a limit is about."""
    if rule.nominal or rule.passing is not None or rule.fact or len(rule.limits) != 1 or not _spreads(rule):
        return ""
    is_sum = rule.value is not None and not isinstance(rule.value, Call)
    ends = ("shortest ", "longest ") if rule.measure.unit == "s" and not is_sum else ("lowest ", "highest ")
    return ends[rule.limits[0].kind == "at-most"] + ("value of " if is_sum else "")


def _spreads(rule: Rule) -> bool:
    """Whether what is judged is more than a count."""
    return rule.value is None or bool(rule.terms) or not calls(rule.value)


def _bounds(rule: Rule) -> str:
    """``at least 10 ms and at most 1 s``."""
    return " and ".join(_limit(rule, limit) for limit in rule.limits)


def _selected(selection: Selection, subject: str) -> str:
    return " ".join(_phrases(selection, subject))


def _phrases(selection: Selection, subject: str) -> Iterator[str]:
    """What each key asks, in words."""
    for phrase, key in _PHRASES:
        items = tuple(item for item in getattr(selection, key) if key != "kind" or item != subject)
        if items:
            yield f"{phrase} {listed(items)}"
    if selection.value_at_least is not None:
        yield f"of at least {show(selection.value_at_least.nominal, selection.value_at_least.unit)}"
    if selection.value_at_most is not None:
        yield f"of at most {show(selection.value_at_most.nominal, selection.value_at_most.unit)}"
    if selection.polarised is not None:
        yield "polarised" if selection.polarised else "not polarised"
    if selection.when is not None:
        yield f"where {selection.when_text}"
    if selection.any_of:
        yield "either " + ", or ".join(_selected(item, subject) for item in selection.any_of)
    if selection.exclude:
        yield "except those " + ", and those ".join(_selected(item, subject) for item in selection.exclude)


def _options(rule: Rule) -> Iterator[str]:
    for key, value in rule.options.items():
        if key == "event":
            yield f"after {value}"
        elif (key == "from" and value == "event") or value == "none":
            continue
        else:
            yield f"{key.replace('_', ' ')} {_shown(rule, key, value)}"


def _shown(rule: Rule, key: str, value: OptionValue) -> str:
    if isinstance(value, Level):
        return f"'{value.text}'"
    if isinstance(value, float | int):
        unit = rule.measure.options[key].unit
        return f"{100 * value:.4g} %" if unit == "1" else show(float(value), unit)
    return _name(rule, value[1:]) if value.startswith("?") else value


def _limit(rule: Rule, limit: Limit) -> str:
    if limit.choices:
        return limit.text
    words = limit.kind.replace("-", " ")
    if limit.expression is not None:
        return f"{words} {text_of(limit.expression)}"
    if limit.value is not None:
        return f"{words} {limit.text}"
    if limit.table is not None:
        name, amounts = limit.table
        by_word = (f"{show(item.nominal, item.unit)} where {name} is {word}" for word, item in amounts.items())
        return f"{words} {', '.join(by_word)}"
    return f"{words} {_name(rule, limit.name or '')}"


def _name(rule: Rule, name: str) -> str:
    """A looked-up number, and where it comes from."""
    own = rule.given.get(name)
    if own is None:
        return f"{name} (of the project file)"
    if own == "ask":
        return f"{name} (asked)"
    return f"{name} ({show(own.nominal, own.unit)} unless the project says otherwise)"
