"""The page for a design review: one file, no network, no foreign script."""

from importlib.util import find_spec
from typing import Final

from rcrules.errors import Mistake, Place, UserMistake
from rcrules.findings import Document
from rcrules.reports._report import Report

_NEEDED: Final = ("jinja2", "schemdraw")
"""What the ``html`` extra brings."""


def render(
    document: Document,
    *,
    verbose: bool = False,  # noqa: ARG001 - the page tells everything, folded
    color: bool = False,  # noqa: ARG001 - the reader's light or dark setting decides
    width: int | None = None,  # noqa: ARG001
) -> str:
    """The whole page. Raises UserMistake where the packages of the ``html`` extra are missing."""
    missing = [name for name in _NEEDED if find_spec(name) is None]
    if missing:
        problem = f"the HTML report needs {' and '.join(missing)}, which {'is' if len(missing) == 1 else 'are'} missing"
        do = "install them with: pip install 'rcrules[html]'"
        raise UserMistake(Mistake(place=Place(file="--report html"), problem=problem, do=do))
    from rcrules.reports._page import page

    return page(document)


REPORT = Report(
    name="html",
    suffix=".html",
    summary="One page for a design review: every network drawn, plotted, judged; every assumption listed.",
    render=render,
    for_programs=True,
    derived=True,
)
