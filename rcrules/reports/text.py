"""The report for a terminal or a log: what broke first, then what one line would decide, then the counts."""

from rcrules.findings import Document
from rcrules.reports._report import Report
from rcrules.reports._text_comparison import comparison_lines
from rcrules.reports._text_findings import findings_lines
from rcrules.reports._text_networks import networks_lines
from rcrules.reports._text_summary import header_lines, summary_lines
from rcrules.reports._text_waivers import waiver_lines
from rcrules.reports._words import part_texts
from rcrules.reports._wrap import laid_out


def render(document: Document, *, verbose: bool = False, color: bool = False, width: int | None = None) -> str:
    """The findings; the networks where no rules were applied."""
    body = findings_lines(document, verbose=verbose) if document.packs else networks_lines(document, verbose=verbose)
    against = comparison_lines(document, part_texts(document), verbose=verbose)
    body += waiver_lines(document, verbose=verbose)
    lines = [*header_lines(document, verbose=verbose), *against, *body, *summary_lines(document, verbose=verbose)]
    return laid_out(lines, color=color, width=width)


REPORT = Report(name="text", suffix=".txt", summary="For people at a terminal.", render=render)
