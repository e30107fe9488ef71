"""The document itself."""

from rcrules.findings import Document, dumps
from rcrules.reports._report import Report


def render(  # one form only
    document: Document,
    *,
    verbose: bool = False,  # noqa: ARG001
    color: bool = False,  # noqa: ARG001
    width: int | None = None,  # noqa: ARG001
) -> str:
    """The findings document as JSON."""
    return dumps(document)


REPORT = Report(
    name="json",
    suffix=".json",
    summary="The findings document, for other programs and for later.",
    render=render,
    for_programs=True,
    derived=True,
)
