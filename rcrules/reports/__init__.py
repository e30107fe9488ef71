"""Step 12: the document in, a text out; one report per file."""

from functools import cache

from rcrules.reports._lines import safe
from rcrules.reports._report import Render, Report

__all__ = ["Render", "Report", "reports", "safe"]


@cache
def reports() -> dict[str, Report]:
    """Every report by name."""
    import sys

    from rcrules.discovery import members

    return {report.name: report for report in members(sys.modules[__name__], "REPORT", Report)}
