"""Names come from strangers: whatever they are, every report keeps its structure and does nothing but tell them."""

import json
import re
from collections.abc import Callable
from dataclasses import replace
from functools import cache
from typing import Any, Final

import pytest
from hypothesis import given
from hypothesis import strategies as st
from lxml import etree, html
from markdown_it import MarkdownIt

from rcrules.findings import Document
from rcrules.reports import reports
from tests.reports._sample import DOCUMENT, finding

PIECES: Final = [
    "<script>alert(1)</script>",
    "<img src=x onerror=alert(1)>",
    "</style><b>",
    "]]>",
    "<!--",
    "-->",
    "&lt;&amp;&#x1b;",
    "\x1b[2J\x1b]0;x\x07",
    "\x9b31m",
    "](javascript:alert(1))",
    "[x](0)",
    "{0}",
    "javascript:alert(1)",
    "https://example.invalid/a",
    "@somebody",
    "|",
    "\n\n# heading",
    "\r\n- item",
    "\u2028",
    "\u202egnp.exe\u2066",
    "\u200b\ufeff",
    "\x00\ufffe\uffff\ud800",
    "`code` **b** _i_ ~~s~~ $x$ \\",
    "'\" onload=x",
    "{{}} %s ${x}",
    "10 µF",
    "Größe 電圧",
]
NAMES: Final = (
    st.lists(st.sampled_from(PIECES) | st.text(max_size=4), min_size=1, max_size=4).map("x".join).filter(str.strip)
)
UNSEEN: Final = re.compile(
    "[\x00-\x09\x0b-\x1f\x7f-\x9f\u00ad\u061c\u200b-\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufffe\uffff\ud800-\udfff]"
)
"""What steers a terminal, hides, or turns a line around; a line feed ends lines of ours."""
TAME: Final = "name"


def named(name: str) -> Document:
    """The sample with the name in every place where a stranger's text may stand."""
    place = {"file": f"{name}.xml", "line": 1}
    texts: dict[str, Any] = {
        "rule": name,
        "title": name,
        "pack": name,
        "net": name,
        "parts": [name],
        "feeds": [name],
        "why": name,
        "source": name,
        "cause": name,
        "places": [place],
    }
    worst = {"parameter": name, "value": 1.0, "unit": "F", "relative": 0.1, "why": name, "from": name}
    options = {"event": "power-up", "to": name}
    failing = finding(**texts, options=options, detail={"side": "at_least", "level_text": name, "worst": [worst]})
    undecided = finding(**texts, outcome="undecided", reason=name, ask=[f'[pin."{name}"] low = "…"'], measured=None)
    held = {**DOCUMENT.held[0], "net": name, "evidence": [name]}
    node = {**DOCUMENT.networks[0]["nodes"][0], "net": name, "evidence": [name], "feeds": [name], "parts": [name]}
    branch = {"part": name, "nets": [name, f"{name}2"]}
    part = {**DOCUMENT.parts[0], "ref": name, "text": name, "value": None, "coverage": "unreadable"}
    part |= {"why_unknown": name, "reason": name, "dielectric": name}
    rule = {"id": name, "title": name, "level": "error", "text": name, "met": 1, "source": name}
    pack = {"name": name, "title": name, "file": name, "needs_facts": True, "caution": name, "rules": [rule]}
    waiver = {**DOCUMENT.waivers[0], "rule": name, "reason": name, "who": name, "told": [name], "place": place}
    return replace(
        DOCUMENT,
        board={**DOCUMENT.board, "name": name},
        inputs=[{**DOCUMENT.inputs[0], "file": name}],
        parts=[part],
        held=[held],
        packs=[pack],
        networks=[{"id": name, "branches": [branch], "nodes": [node]}],
        findings=[failing, undecided, replace(failing, outcome="waived", waiver=0), replace(failing, outcome="holds")],
        assumptions=[{"about": name, "text": name, "ask": name}],
        waivers=[waiver],
        problems=[{"place": place, "text": name}, {"place": {}, "text": name}],
    )


def shape(value: Any) -> Any:
    """A JSON value without its texts; keys of objects count, but not the name itself."""
    if isinstance(value, dict):
        return [shape(item) for item in value.values()]
    return [shape(item) for item in value] if isinstance(value, list) else type(value)


def of_json(text: str) -> Any:
    return shape(json.loads(text))


def of_sarif(text: str) -> Any:
    """Without a link or a placeholder in any message."""
    texts = re.findall(r'"text": "((?:[^"\\]|\\.)*)"', text)
    plain = [re.sub(r"\\[\\\[\]]", "", json.loads(f'"{found}"')) for found in texts]
    assert not [found for found in plain if re.search(r"[\[\]]|(?<!\{)\{\d+\}", found)]
    return shape(json.loads(text))


def of_xml(text: str) -> Any:
    return [(item.tag, sorted(item.attrib)) for item in etree.fromstring(text.encode()).iter()]


def of_markdown(text: str) -> Any:
    """Blocks and what stands in them, but for how often plain text is broken."""
    tokens = MarkdownIt("commonmark").enable(["table", "strikethrough"]).parse(text)
    inner = [child.type for token in tokens for child in token.children or ()]
    return [token.type for token in tokens], [kind for kind in inner if not kind.startswith("text")]


def of_text(text: str) -> Any:
    return text.count("\n")


def of_html(text: str) -> Any:
    """Elements, attributes and where links lead; one script, ours; nothing from elsewhere."""
    found = list(html.fromstring(text).iter("*"))
    assert sum(item.tag == "script" for item in found) == 1
    assert all(value.startswith("#") for item in found for name, value in item.attrib.items() if name == "href")
    assert not [name for item in found for name in item.attrib if name == "src" or name.startswith("on")]
    return [(item.tag, sorted(item.attrib)) for item in found]


READ: Final[dict[str, Callable[[str], Any]]] = {
    "html": of_html,
    "json": of_json,
    "junit": of_xml,
    "markdown": of_markdown,
    "parts": of_text,
    "sarif": of_sarif,
    "text": of_text,
}


@cache
def tame(report: str, verbose: bool) -> Any:
    return READ[report](reports()[report].render(named(TAME), verbose=verbose))


def test_every_report_is_read() -> None:
    assert set(READ) == set(reports())


@pytest.mark.parametrize("verbose", [False, True])
@pytest.mark.parametrize("report", READ)
@given(name=NAMES)
def test_a_hostile_name_changes_nothing_but_the_text(report: str, verbose: bool, name: str) -> None:
    text = reports()[report].render(named(name), verbose=verbose)
    assert not UNSEEN.search(text)
    assert READ[report](text) == tame(report, verbose)
