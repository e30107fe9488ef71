"""The document itself."""

from rcrules.findings import Document, dumps
from rcrules.reports._report import Report


def render(document: Document, *, verbose: bool = False, color: bool = False) -> str:  # noqa: ARG001 - one form only
    """The findings document as JSON."""
    return dumps(document)


REPORT = Report(
    name="json", suffix=".json", summary="The findings document, for other programs and for later.", render=render
)
