"""Under what circumstances a finding came about: what of the board, the rule and the conditions it rests on."""

from collections.abc import Iterator

from rcrules.comparison._changes import connections, source, spread, value
from rcrules.findings import Document, Finding, Json
from rcrules.quantities import show


def circumstances(item: Finding, document: Document) -> dict[str, dict[str, str]]:
    """``parts`` and ``nets`` of the networks it stands at, and what was ``judged``, each by name, in words."""
    names = around(item, document)
    ends = connections(document)
    parts = {row["ref"]: _part(row, ends) for row in document.parts if row["ref"] in names}
    nets = {row["net"]: source(row) or "" for row in document.held if row["net"] in names}
    return {"parts": parts, "nets": nets, "judged": dict(_judged(item, document))}


def _part(row: Json, ends: dict[str, str]) -> str:
    """``10 µF (6.2 µF .. 13.8 µF), NRST to GND``."""
    texts = [value(row) + (f" ({spread(row)})" if spread(row) else "")]
    texts += [show(row[key], unit) for key, unit in (("rated_voltage", "V"), ("rated_power", "W")) if row[key]]
    texts += [row["dielectric"]] if row["dielectric"] else []
    texts += [] if row["fitted"] else ["not fitted"]
    return ", ".join([*texts, ends[row["ref"]]] if row["ref"] in ends else texts)


def _judged(item: Finding, document: Document) -> Iterator[tuple[str, str]]:
    yield "limit", limit(item)
    yield "outcome", "undecided" if item.outcome == "undecided" else "fails"
    if item.measured is not None:
        low, high = (show(end, item.measured.unit) for end in (item.measured.low, item.measured.high))
        yield "measured", f"{low} .. {high}"
    for name, row in document.conditions.items():
        yield name, spread(row) or "not given"


def limit(item: Finding) -> str:
    """``at least 30 ms``."""
    if item.limit is None:
        return "none"
    found = item.limit
    texts = [
        f"{word} {show(found[key], found['unit'], 6)}"
        for key, word in (("at_least", "at least"), ("at_most", "at most"))
        if key in found
    ]
    return " and ".join(texts) or str(found["text"])


def around(item: Finding | None, document: Document) -> set[str]:
    """References and held nets of the networks at which a finding stands."""
    if item is None:
        return set()
    own = [network for network in document.networks if _holds(network, item)]
    branches = [branch for network in own for branch in network["branches"]]
    nets = {net for branch in branches for net in branch["nets"]}
    return {*item.parts, *(branch["part"] for branch in branches), *nets, *((item.net,) if item.net else ())}


def _holds(network: Json, item: Finding) -> bool:
    return any(node["net"] == item.net for node in network["nodes"]) or any(
        branch["part"] in item.parts for branch in network["branches"]
    )
