"""What changed against a saved document, folded, in Markdown."""

from collections.abc import Mapping
from typing import Final

from rcrules.findings import Document, Json
from rcrules.reports._markdown_words import code, plain
from rcrules.reports._text_comparison import causes_text, counts_text, verdict_text
from rcrules.reports._words import parts_text

_SHOWN: Final = 50
"""Rows in the folded list; the rest is counted, so that the comment stays one that can be posted."""


def comparison_items(document: Document, texts: Mapping[str, str]) -> list[str]:
    """One folded list: every finding that broke, mended, moved or still fails; nothing without a comparison."""
    found = document.comparison
    if found is None:
        return []
    rows = [f"- {_row(row, texts)}" for row in found["findings"][:_SHOWN]]
    rest = len(found["findings"]) - len(rows)
    rows += [f"- {rest} more"] if rest else []
    rows += [f"- networks {change}: {plain(', '.join(ids))}" for change, ids in found["networks"].items() if ids]
    summary = f"{plain(counts_text(found))} against {plain(str(found['board']))} as saved"
    return ["<details>", f"<summary>{summary}</summary>", "", *rows, "", "</details>", ""]


def _row(row: Json, texts: Mapping[str, str]) -> str:
    """``**broke** `rule` at NRST (R12 10 kΩ): was holds 30 ms, now fails 20 ms; since C7 10 µF → 4.7 µF``."""
    where = plain(", ".join(filter(None, (row["net"], parts_text(row["parts"], texts)))))
    told = f"**{row['change']}** {code(row['rule'])} at {where}"
    if row["was"] != row["now"]:
        told += f": was {_verdict(row['was'])}, now {_verdict(row['now'])}"
    return told + (f"; since {plain(causes_text(row['causes']))}" if row["causes"] else "")


def _verdict(verdict: Json | None) -> str:
    return plain(verdict_text(verdict).replace("   ", ", "))
