"""Findings as SARIF results, the gravest first."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Final

from rcrules.findings import Document, Finding, Json
from rcrules.reports._lines import safe
from rcrules.reports._sarif_texts import message, physical
from rcrules.reports._told import paragraphs, subject_text, waiver_text
from rcrules.reports._words import badness, part_texts
from rcrules.vocabulary import OUTCOMES, SEVERITIES

_KINDS: Final = {"fails": "fail", "waived": "fail", "undecided": "open", "holds": "pass"}
_BASELINES: Final = {"new": "new", "unchanged": "unchanged", "moved": "updated"}
_FINGERPRINTS: Final = ("circuitReferences/v1", "circuitTopology/v1")
"""Names of the two keys of a finding's fingerprint."""


def ordered(document: Document, *, verbose: bool) -> list[Finding]:
    """What fails, what is undecided, what is waived; what holds only on request."""
    shown = [item for item in document.findings if verbose or item.outcome != "holds"]
    return sorted(shown, key=_order)


def _order(finding: Finding) -> tuple[object, ...]:
    worst = -round(badness(finding), 9)
    subject = (finding.rule, finding.net or "", finding.parts)
    return (OUTCOMES.index(finding.outcome), SEVERITIES.index(finding.level), worst, subject)


@dataclass(frozen=True, slots=True, kw_only=True)
class Scene:
    """What all results of one document share."""

    document: Document
    texts: Mapping[str, str]
    """Reference -> the part in words."""
    values: Mapping[str, Json]
    """Reference -> the place where its value was read."""
    rules: Mapping[str, int]
    """Rule -> its index in the list of rules."""


def scene(document: Document, rules: list[Json]) -> Scene:
    """The scene of a document and its rules as SARIF lists them."""
    origins = {row["ref"]: row["origins"].get("value", {}) for row in document.parts}
    return Scene(
        document=document,
        texts=part_texts(document),
        values={ref: origin for ref, origin in origins.items() if origin.get("file")},
        rules={rule["id"]: number for number, rule in enumerate(rules)},
    )


def result(scene: Scene, finding: Finding) -> Json:
    """One finding; ``kind`` other than fail goes with level none (section 3.27.10)."""
    kind = _KINDS[finding.outcome]
    told = [text.rstrip(".") for text in (subject_text(finding, scene.texts), *paragraphs(finding))]
    places = _places(scene, finding)
    found: Json = {
        "ruleId": safe(finding.rule),
        "ruleIndex": scene.rules[safe(finding.rule)],
        "kind": kind,
        "level": finding.level if kind == "fail" else "none",
        "message": message(". ".join(told)),
        "locations": [{**_at(places[:1]), "logicalLocations": list(_logical(finding))}],
        "relatedLocations": [
            {"id": number, **_at([named]), "message": message(named[0])} for number, named in enumerate(places[1:])
        ],
        "partialFingerprints": dict(zip(_FINGERPRINTS, finding.fingerprint.split("."), strict=False)),
        "suppressions": [_suppression(scene.document, finding)] if finding.outcome == "waived" else [],
    }
    if scene.document.comparison is not None and finding.baseline is not None:
        found["baselineState"] = _BASELINES[finding.baseline]
    return found


def _at(named: list[tuple[str, Json]]) -> Json:
    return {"physicalLocation": physical(named[0][1])} if named else {}


def _places(scene: Scene, finding: Finding) -> list[tuple[str, Json]]:
    """Each place of the finding with what stands there: its parts first, then its net, then where values were read."""
    before = max(len(finding.places) - len(finding.parts), 0)
    named = [(f"part {ref}", place) for ref, place in zip(finding.parts, finding.places[before:], strict=False)]
    named += [(f"net {finding.net}", place) for place in finding.places[:before]]
    named += [(f"value of {ref}", scene.values[ref]) for ref in finding.parts if ref in scene.values]
    unique: dict[tuple[object, ...], tuple[str, Json]] = {}
    for text, place in named:
        unique.setdefault((place["file"], place.get("line"), place.get("column")), (text, place))
    return list(unique.values())


def _logical(finding: Finding) -> Iterator[Json]:
    names = [("net", finding.net)] if finding.net else []
    for kind, name in (*names, *(("part", ref) for ref in finding.parts), *(("pin", pin) for pin in finding.feeds)):
        yield {"name": safe(name), "fullyQualifiedName": f"/{kind}/{safe(name)}", "kind": kind}


def _suppression(document: Document, finding: Finding) -> Json:
    found: Json = {"kind": "external", "status": "accepted", "justification": safe(waiver_text(document, finding))}
    if finding.waiver is not None:
        found["location"] = {"physicalLocation": physical(document.waivers[finding.waiver]["place"])}
    return found
