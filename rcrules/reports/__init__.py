"""Step 12: the document in, a text out; one report per file."""

from functools import cache

from rcrules.reports._columns import aligned
from rcrules.reports._lines import Line, Span, safe
from rcrules.reports._report import Render, Report
from rcrules.reports._text_boards import boards_lines
from rcrules.reports._text_derivation import derivation_lines
from rcrules.reports._words import in_percent, limit_text, measured_text, number
from rcrules.reports._wrap import laid_out

__all__ = [
    "Line",
    "Render",
    "Report",
    "Span",
    "aligned",
    "boards_lines",
    "derivation_lines",
    "in_percent",
    "laid_out",
    "limit_text",
    "measured_text",
    "number",
    "reports",
    "safe",
]


@cache
def reports() -> dict[str, Report]:
    """Every report by name."""
    import sys

    from rcrules.discovery import members

    return {report.name: report for report in members(sys.modules[__name__], "REPORT", Report)}
