"""The report for code-scanning services: SARIF 2.1.0 (OASIS, errata 01).

Every path is relative to the folder of the run, ``SRCROOT``; nothing of the machine, no clock. Texts are plain: what
would become a link or a placeholder is escaped.
"""

import json
from typing import Final

from rcrules.findings import Document, Finding, Json
from rcrules.reports._lines import safe
from rcrules.reports._report import Report
from rcrules.reports._sarif_results import ordered, result, scene
from rcrules.reports._sarif_texts import ROOT, artifact, message, physical

_SCHEMA: Final = "https://docs.oasis-open.org/sarif/sarif/v2.1.0/errata01/os/schemas/sarif-schema-2.1.0.json"
_MOST: Final = 25_000
"""Results that services take in one run."""
_LARGE: Final = 1_000_000
"""A log with more characters is written without blanks."""
_SEVERITIES: Final = {"error": "error", "warning": "warning", "note": "recommendation"}


def render(
    document: Document,
    *,
    verbose: bool = False,
    color: bool = False,  # noqa: ARG001 - a file for programs
    width: int | None = None,  # noqa: ARG001
) -> str:
    """One run; with verbose what holds as well."""
    found = {"$schema": _SCHEMA, "version": "2.1.0", "runs": [_run(document, verbose=verbose)]}
    text = json.dumps(found, ensure_ascii=False, allow_nan=False, indent=1)
    if len(text) > _LARGE:
        text = json.dumps(found, ensure_ascii=False, allow_nan=False, separators=(",", ":"))
    return text + "\n"


def _run(document: Document, *, verbose: bool) -> Json:
    findings = ordered(document, verbose=verbose)
    rules = _rules(document, findings)
    shared = scene(document, rules)
    return {
        "tool": {"driver": {"name": "rcrules", "semanticVersion": document.tool, "rules": rules}},
        "automationDetails": {"id": f"rcrules/{safe(str(document.board['name'])).replace('/', '-')}/"},
        "invocations": [_invocation(document, left_out=len(findings) - _MOST)],
        "originalUriBaseIds": {ROOT: {"description": message("the folder in which rcrules was run")}},
        "artifacts": [_artifact(row) for row in document.inputs],
        "columnKind": "unicodeCodePoints",
        "results": [result(shared, item) for item in findings[:_MOST]],
    }


def _rules(document: Document, findings: list[Finding]) -> list[Json]:
    """Every rule that was applied, once, by id; a rule's reason stands in its findings."""
    whys = {item.rule: item.why for item in document.findings}
    found = {rule["id"]: _rule(rule, pack["name"], whys) for pack in document.packs for rule in pack["rules"]}
    for item in findings:
        row = {"id": item.rule, "title": item.title, "level": item.level, "text": item.title, "source": item.source}
        found.setdefault(item.rule, _rule(row, item.pack, whys))
    return [found[name] for name in sorted(found)]


def _rule(row: Json, pack: str, whys: dict[str, str]) -> Json:
    source = f"Source: {row['source']}." if row["source"] else ""
    why = whys.get(row["id"], "")
    return {
        "id": safe(row["id"]),
        "name": "".join(word.capitalize() for word in safe(row["id"]).split("-")),
        "shortDescription": message(row["title"]),
        "fullDescription": message(row["text"]),
        "help": message(" ".join(filter(None, (why, source))) or row["title"]),
        "defaultConfiguration": {"level": row["level"]},
        "properties": {"tags": [safe(pack)], "problem.severity": _SEVERITIES[row["level"]], "precision": "high"},
    }


def _invocation(document: Document, *, left_out: int) -> Json:
    """The run went well, whatever was found; remarks about inputs and rules are its notifications."""
    told = [_notification(row["text"], row["place"]) for row in document.problems]
    if left_out > 0:
        told.append(_notification(f"{left_out} results left out, the least grave: services take {_MOST}", {}))
    return {"executionSuccessful": True, "toolExecutionNotifications": told}


def _notification(text: str, place: Json) -> Json:
    locations = {"locations": [{"physicalLocation": physical(place)}]} if place.get("file") else {}
    return {"level": "note", "message": message(text), **locations}


def _artifact(row: Json) -> Json:
    return {
        "location": artifact(row["file"]),
        "roles": ["analysisTarget"],
        "hashes": {"sha-256": row["sha256"]},
    }


REPORT = Report(
    name="sarif",
    suffix=".sarif",
    summary="For code-scanning services (SARIF 2.1.0).",
    render=render,
    for_programs=True,
)
