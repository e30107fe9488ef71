"""Proposals in words."""

from collections.abc import Iterator

from rcrules.findings import Finding, Json
from rcrules.reports._words import bounds, in_percent


def proposal_texts(finding: Finding) -> Iterator[str]:
    """``R12 15 kΩ (32.8 ms .. 53.5 ms .. 74.5 ms; on the BOM as R31; needs R12: ±1 %)``; or why there is none."""
    told = finding.proposals
    if told is None:
        return
    yield from (_proposal(item, finding) for item in told["found"])
    if told["reason"]:
        yield told["reason"]


def _proposal(item: Json, finding: Finding) -> str:
    changes = " and ".join(change_text(change) for change in item["changes"])
    words = [text for text in (_after(item, finding), *_sources(item)) if text]
    words += [f"needs {need}" for need in item["needs"]]
    return f"{changes} ({'; '.join(words)})"


def change_text(change: Json) -> str:
    """``R12 15 kΩ``, ``C4 rated voltage 10 V``."""
    what = "" if change["what"] == "value" else f" {change['what']}"
    return f"{change['ref']}{what} {change['now']}"


def _after(item: Json, finding: Finding) -> str:
    """The finding's own numbers as they would be."""
    own = (row for row in item["findings"] if (row["rule"], row["net"]) == (finding.rule, finding.net))
    row = next((row for row in own if row["parts"] == finding.parts and row["measured"]), None)
    if row is None:
        return ""
    measured = row["measured"]
    percent = in_percent(finding)
    return bounds(measured["low"], measured["nominal"], measured["high"], measured["unit"], percent=percent)


def _sources(item: Json) -> list[str]:
    return list(dict.fromkeys(change["source"] for change in item["changes"] if change["what"] == "value"))
