"""The text of a first rcrules.toml. What was read from the board is written out; what was not is asked."""

import json
import re
from collections.abc import Iterable, Iterator, Sequence
from typing import Final

from rcrules.design import natural
from rcrules.findings import Document, Json
from rcrules.quantities import show
from rcrules.starter._questions import Question, questions

FIRST_PACKS: Final = ("power-on-reset", "debounce", "analog-inputs", "capacitor-voltage", "stored-energy")
"""Packs that most boards want; the others are for a team to choose."""
_SHOWN_LINES: Final = 12
"""Lines of one question; the rest is counted."""
_SHOWN_REFS: Final = 8
_SECTIONS: Final = ("conditions", "supply", "ground", "net", "pin", "part", "defaults", "settings")
_HEAD: Final = """\
# First project file of this board, written from its netlist and BOM. Review it: what stands here counts as your word.
# A line behind # asks: take the # away and fill in. Nothing else is needed; every line may go.
"""
_SEVERAL: Final = re.compile(r"(?<=[\"\]]) +(?=[\w-]+ = )")
"""Between facts that are asked for in one line; a line of TOML holds one."""
_CONDITIONS: Final = (
    '# temperature = "-20 degC .. 60 degC"   # at which the board works; 0 °C to 70 °C is assumed',
    '# life = "10 year"                      # assumed where it is not said',
)
_LEVELS: Final = (
    '# low = "30 % of …"    # V_IL of the data sheet',
    '# high = "70 % of …"   # V_IH of the data sheet',
)
_RAMP: Final = (
    '# valid = "…"          # the level from which it counts as up',
    '# rise = "… .. …"      # from 0 to 100 %',
)
Tables = dict[str, list[str]]
"""Header -> lines below it."""


def project_text(document: Document, name: str, netlists: Sequence[str], boms: Sequence[str]) -> str:
    """TOML that loads as it is; ``netlists`` and ``boms`` relative to where the file will stand."""
    asked = questions(document.findings)
    tables: Tables = {"[conditions]": list(_CONDITIONS)}
    _supplies(document, tables)
    _grounds(document, tables)
    _pins(document, tables)
    _ask(asked, tables)
    blocks = [_HEAD + _summary(asked), _board(document, name, netlists, boms), *_blocks(tables), *_unrated(document)]
    return "\n".join(blocks)


def _summary(asked: Sequence[Question]) -> str:
    if not asked:
        return "# Nothing has to be asked: every finding of the rules below is decided.\n"
    lines = [f"#  {number:2}. {item.about}: decides {_findings(item.decides)}" for number, item in enumerate(asked, 1)]
    return "\n".join(["# Most useful first:", *lines]) + "\n"


def _findings(number: int) -> str:
    return "1 finding" if number == 1 else f"{number} findings"


def _board(document: Document, name: str, netlists: Sequence[str], boms: Sequence[str]) -> str:
    met = [pack["name"] for pack in document.packs if any(rule["met"] for rule in pack["rules"])]
    lines = ["[board]", f"name    = {text(name)}"]
    lines += [f"netlist = {_list(netlists)}"] if netlists else []
    lines += [f"bom     = {_list(boms)}"] if boms else []
    lines.append(f"rules   = [{', '.join(map(text, met))}]     # the packs that meet something on this board")
    return "\n".join(lines) + "\n"


def _list(names: Sequence[str]) -> str:
    return text(names[0]) if len(names) == 1 else f"[{', '.join(map(text, names))}]"


def _supplies(document: Document, tables: Tables) -> None:
    """Every supply once, with its voltage where name or pins tell it."""
    rows = [row for row in document.held if row["kind"] == "supply" and row["joined"] is None]
    for row in sorted(rows, key=lambda row: natural(row["net"])):
        why = comment("; ".join(row["evidence"][:2]))
        line = f'# voltage = "…"   # not known: {why}'
        if row["nominal"] is not None and row["sure"]:
            line = f"voltage = {text(show(row['nominal'], 'V', 6))}   # from {why}; add its tolerance: +/- 5 %"
        elif row["nominal"] is not None:
            line = f"# voltage = {text(show(row['nominal'], 'V', 6))}   # unsure: {why}"
        own = tables.setdefault(f"[supply.{text(row['net'])}]", [])
        own += [] if any("voltage = " in other for other in own) else [line]


def _grounds(document: Document, tables: Tables) -> None:
    nets = [row["net"] for row in document.held if row["kind"] == "ground" and row["sure"]]
    if nets:
        tables["[ground]"] = [f"nets = [{', '.join(map(text, sorted(nets, key=natural)))}]"]


def _pins(document: Document, tables: Tables) -> None:
    """What every reset and every debounced input needs: the levels of its data sheet, and how its supply comes up."""
    nodes = [node for network in document.networks for node in network["nodes"]]
    for node in (node for node in nodes if node["role"] in ("power-on-delay", "debounce")):
        for pin in node["feeds"]:
            own = tables.setdefault(f"[pin.{text(pin)}]", [])
            own += [f"# {comment(node['role'])} on {comment(node['net'])}", *(() if own else _LEVELS)]
        for net in node["fed_from"]:
            own = tables.get(f"[supply.{text(net)}]", [])
            own += [line for line in _RAMP if line not in own]


def _ask(asked: Iterable[Question], tables: Tables) -> None:
    """The questions as lines behind #, each in its table."""
    for number, question in enumerate(asked, 1):
        for header, line, decides in question.lines[:_SHOWN_LINES]:
            own = tables.setdefault(header, [])
            for fact in _SEVERAL.split(line):
                key = fact.partition(" = ")[0]
                own[:] = [other for other in own if not other.startswith(f"# {key} = ")]
                if not any(other.startswith(f"{key} = ") for other in own):
                    own.append(f"# {fact}   # question {number}: decides {_findings(decides)}")
        if (rest := len(question.lines) - _SHOWN_LINES) > 0:
            own.append(f"# and {rest} more like it; a name may be a glob")


def _blocks(tables: Tables) -> Iterator[str]:
    """The tables in the order of the sections."""
    order = {section: index for index, section in enumerate(_SECTIONS)}
    headers = sorted(tables, key=lambda header: order.get(header.strip("[").partition(".")[0].strip("]"), len(order)))
    for header in headers:
        yield "\n".join([header, *tables[header]]) + "\n"


def _unrated(document: Document) -> Iterator[str]:
    """Capacitors without a rated voltage, by value and by the place of their BOM line."""
    groups: dict[tuple[str, str], list[str]] = {}
    for row in document.parts:
        if row["kind"] == "capacitor" and row["fitted"] and row["value"] and row["rated_voltage"] is None:
            groups.setdefault((row["text"], _place(row)), []).append(row["ref"])
    if groups:
        lines = [f"# {comment(value)} {place}: {_refs(refs)}" for (value, place), refs in _largest_first(groups)]
        yield "\n".join(["# Capacitors whose rated voltage no input gives, by value and BOM line:", *lines]) + "\n"


def _largest_first(groups: dict[tuple[str, str], list[str]]) -> list[tuple[tuple[str, str], list[str]]]:
    return sorted(groups.items(), key=lambda item: (-len(item[1]), item[0]))


def _place(row: Json) -> str:
    origin = (row["origins"] or {}).get("value")
    return f"({comment(origin['file'])}:{origin['line']})" if origin and origin.get("file") else ""


def _refs(refs: Sequence[str]) -> str:
    shown = ", ".join(map(comment, refs[:_SHOWN_REFS]))
    return shown + (f" and {len(refs) - _SHOWN_REFS} more" if len(refs) > _SHOWN_REFS else "")


def text(value: str) -> str:
    """A TOML basic string; what cannot be seen stands as an escape."""
    whole = value.encode("utf-8", "replace").decode("utf-8")
    quoted = json.dumps(whole, ensure_ascii=False)
    return "".join(letter if letter.isprintable() else _escape(ord(letter)) for letter in quoted)


def _escape(code: int) -> str:
    return f"\\u{code:04x}" if code < 0x10000 else f"\\U{code:08x}"


def comment(value: str) -> str:
    """A name in a comment: on one line, without what cannot be seen."""
    return "".join(letter if letter.isprintable() else " " for letter in value)
