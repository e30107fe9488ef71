"""One summary of several boards."""

from collections.abc import Sequence

from rcrules.findings import Document
from rcrules.reports._columns import aligned
from rcrules.reports._lines import Line
from rcrules.reports._text_comparison import counts_text
from rcrules.reports._text_summary import totals


def boards_lines(documents: Sequence[Document]) -> list[Line]:
    """A heading, then one line a board: what fails, what holds, what changed."""
    bad = sum(any(item.outcome == "fails" for item in document.findings) for document in documents)
    head: Line = (("boards", "name"), f"   {len(documents)}, {bad or 'none'} of them with findings that fail")
    rows = [[str(item.board["name"]), totals(item, verbose=True), _changed(item)] for item in documents]
    return [(), head, *aligned(rows, "        ")]


def _changed(document: Document) -> str:
    return f"against the saved: {counts_text(document.comparison)}" if document.comparison else ""
