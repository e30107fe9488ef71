"""The lists of the page: parts, held nets, assumptions, coverage, rules, waivers, inputs, remarks."""

from collections import Counter
from typing import Any

from rcrules.findings import Document, Json
from rcrules.reports._text_comparison import causes_text, counts_text, verdict_text
from rcrules.reports._text_whereabouts import CLASSES, counts_as
from rcrules.reports._words import bounds, number, part_texts, parts_text


def parts(document: Document) -> list[Json]:
    """Every resistor and capacitor with what is known and where it comes from."""
    return [
        {
            "ref": row["ref"],
            "kind": row["kind"],
            "text": row["text"] or "",
            "value": _value(row),
            "sort": row["value"] or 0,
            "range": _spread(row),
            "facts": _facts(row),
            "shares": [_share(share) for share in row["shares"]],
            "origins": [f"{fact.replace('_', ' ')}: {_origin(origin)}" for fact, origin in row["origins"].items()],
            "where": CLASSES[row["coverage"]],
            "reason": row["reason"] or "",
        }
        for row in document.parts
    ]


def _value(row: Json) -> str:
    if row["value"] is None:
        return f"not known: {row['why_unknown'] or 'no reason kept'}"
    return number(row["value"], row["unit"] or "")


def _spread(row: Json) -> str:
    if row["low"] is None or row["high"] is None:
        return ""
    return f"{number(row['low'], row['unit'] or '')} .. {number(row['high'], row['unit'] or '')}"


def _facts(row: Json) -> list[str]:
    told = [
        f"rated {number(row[key], unit)}" for key, unit in (("rated_voltage", "V"), ("rated_power", "W")) if row[key]
    ]
    told += [str(row["dielectric"])] if row["dielectric"] else []
    return told + ([] if row["fitted"] else ["not fitted"])


def _share(row: Json) -> str:
    return f"{row['name']} {_signed(row['low'])} .. {_signed(row['high'])}: {row['from']}"


def _signed(share: float) -> str:
    return f"{100 * share:+.3g} %" if share else "0 %"


def _origin(origin: Json) -> str:
    place = ":".join(str(origin[key]) for key in ("file", "line", "column") if origin.get(key) is not None)
    return f"{origin['from']} ({place})" if place else str(origin["from"])


def held(document: Document) -> list[Json]:
    """Nets whose voltage is set from outside the networks."""
    return [{**row, "range": _volts(row), "evidence": "; ".join(row["evidence"])} for row in document.held]


def _volts(row: Json) -> str:
    if row["low"] is None:
        return "not known"
    return bounds(row["low"], row["nominal"], row["high"], row["unit"])


def assumptions(document: Document) -> list[Json]:
    """What no input gave; what is assumed alike and settled by one line stands together."""
    alike: dict[tuple[str, str], list[str]] = {}
    for row in document.assumptions:
        alike.setdefault((row["text"].removeprefix("assumed: "), row["ask"]), []).append(row["about"])
    return [{"about": ", ".join(names), "text": text, "ask": ask} for (text, ask), names in alike.items()]


def coverage(document: Document) -> list[tuple[str, int, list[int]]]:
    """Kind, how many, how many in each class of the order of CLASSES."""
    found = []
    for kind in ("capacitor", "resistor"):
        classes = Counter(row["coverage"] for row in document.parts if counts_as(row) == kind)
        found.append((f"{kind}s", classes.total(), [classes[name] for name in CLASSES]))
    return found


def rules(document: Document) -> list[Json]:
    """Every rule with the pack it is from."""
    return [{**rule, "pack": pack["name"]} for pack in document.packs for rule in pack["rules"]]


def waivers(document: Document) -> list[Json]:
    """Accepted findings as written, with what became of each."""
    return [{**row, "at": row["net"] or row["part"] or "", "told": "; ".join(row["told"])} for row in document.waivers]


def comparison(document: Document) -> Any:
    """What changed against a saved document; None where nothing was compared."""
    found = document.comparison
    if not found:
        return None
    texts = part_texts(document)
    rows = [
        {
            **row,
            "where": "   ".join(filter(None, (row["net"], parts_text(row["parts"], texts)))),
            "was": verdict_text(row["was"]),
            "now": verdict_text(row["now"]),
            "causes": causes_text(row["causes"]),
        }
        for row in found["findings"]
    ]
    return {"board": found["board"], "counts": counts_text(found), "rows": rows, "networks": found["networks"]}


def inputs(document: Document) -> list[Json]:
    """The files that were read."""
    return document.inputs


def remarks(document: Document) -> list[tuple[str, str]]:
    """Place and text of what was odd about the inputs."""
    return [
        (":".join(str(row["place"][key]) for key in ("file", "line", "column") if row["place"].get(key)), row["text"])
        for row in document.problems
    ]
