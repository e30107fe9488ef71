"""The document as the parts of the page, put into the template."""

import base64
import hashlib
import re
from functools import cache
from importlib.resources import files
from typing import Any, Final

from jinja2 import Environment, FunctionLoader, StrictUndefined
from markupsafe import Markup

from rcrules.findings import Document
from rcrules.reports._lines import safe
from rcrules.reports._page._findings import Shown, shown
from rcrules.reports._page._lists import assumptions, comparison, coverage, held, inputs, parts, remarks, rules, waivers
from rcrules.reports._page._networks import Article, articles, elsewhere
from rcrules.reports._page._store import store
from rcrules.reports._page._summary import facts, tiles
from rcrules.reports._page._undecided import missing_facts
from rcrules.reports._text_whereabouts import CLASSES

_BETWEEN: Final = re.compile(r">\n+<")
"""Line ends between tags: a browser makes a node of each, which counts on a page of a thousand networks."""


def page(document: Document) -> str:
    """The page, ending in a newline."""
    script, sections = _file("script.js"), _sections(document)
    digest = base64.b64encode(hashlib.sha256(script.encode()).digest()).decode()
    text = (
        _environment()
        .get_template("page.html")
        .render(
            board=str(document.board["name"]),
            tool=document.tool,
            style=Markup(_file("style.css")),
            script=Markup(script),
            digest=Markup(digest),
            **sections,
        )
    )
    return (_BETWEEN.sub("><", text) if sections["store"] else text).rstrip() + "\n"


def _sections(document: Document) -> dict[str, Any]:
    found = shown(document)
    networks = articles(document, found)
    return {
        "tiles": tiles(document),
        "facts": facts(document),
        "cautions": [pack for pack in document.packs if pack["caution"]],
        "findings": found,
        "store": _packed(found, networks),
        "networks": networks,
        "elsewhere": elsewhere(document, found),
        "undecided": missing_facts(document, found),
        "parts": parts(document),
        "held": held(document),
        "assumptions": assumptions(document),
        "coverage": coverage(document),
        "classes": list(CLASSES.values()),
        "rules": rules(document),
        "waivers": waivers(document),
        "comparison": comparison(document),
        "inputs": inputs(document),
        "remarks": remarks(document),
    }


def _packed(found: list[Shown], networks: list[Article]) -> Markup:
    """What stands below the headlines of packed findings and below the names of packed networks."""
    bodies = {item.id: _macro("finding.html", "body", item) for item in found if item.packed}
    return store(bodies | {item.id: _macro("network.html", "head", item) for item in networks if item.packed})


def _macro(template: str, name: str, item: object) -> str:
    return str(getattr(_environment().get_template(template).module, name)(item))


@cache
def _environment() -> Environment:
    """Every text is escaped, with control and invisible characters shown as escapes; a missing name is our mistake."""
    return Environment(
        loader=FunctionLoader(_file),
        autoescape=True,
        undefined=StrictUndefined,
        finalize=_seen,
        trim_blocks=True,
        lstrip_blocks=True,
    )


def _seen(value: Any) -> Any:
    return value if hasattr(value, "__html__") else safe(str(value))


@cache
def _file(name: str) -> str:
    return (files("rcrules.reports._page") / name).read_text(encoding="utf-8")
