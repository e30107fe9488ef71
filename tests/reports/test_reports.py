from collections.abc import Callable
from dataclasses import replace

import pytest

from rcrules.findings import dumps, loads
from rcrules.reports import reports
from tests.reports._sample import DOCUMENT

Compare = Callable[[str, str], None]
FORMS = [(name, verbose) for name in sorted(reports()) for verbose in (False, True)]


@pytest.mark.parametrize(("name", "verbose"), FORMS)
def test_the_whole_output_is_as_reviewed(name: str, verbose: bool, same_as_golden: Compare) -> None:
    report = reports()[name]
    file = f"findings{'-verbose' if verbose else ''}{report.suffix}"
    same_as_golden(file, report.render(DOCUMENT, verbose=verbose))


@pytest.mark.parametrize("verbose", [False, True])
def test_without_rules_the_text_report_tells_the_networks(verbose: bool, same_as_golden: Compare) -> None:
    found = replace(DOCUMENT, packs=[], findings=[])
    same_as_golden(f"networks{'-verbose' if verbose else ''}.txt", reports()["text"].render(found, verbose=verbose))


@pytest.mark.parametrize(("name", "verbose"), FORMS)
def test_the_document_is_enough(name: str, verbose: bool) -> None:
    render = reports()[name].render
    assert render(loads(dumps(DOCUMENT)), verbose=verbose) == render(DOCUMENT, verbose=verbose)


def test_every_report_is_known_by_name() -> None:
    assert set(reports()) == {"html", "json", "junit", "markdown", "parts", "sarif", "text"}
