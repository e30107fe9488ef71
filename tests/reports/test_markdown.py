"""The report for a pull request, read by a general-purpose Markdown parser."""

from collections.abc import Iterator
from dataclasses import replace

import pytest
from markdown_it import MarkdownIt
from markdown_it.token import Token

from rcrules.findings import Document
from rcrules.reports import reports
from tests.reports._sample import DOCUMENT, FINDINGS, finding

HOSTILE = [
    "<script>alert(1)</script>",
    "[x](javascript:alert(1))",
    "![x](http://example.invalid/a.png)",
    "**bold** _i_ ~~s~~ `c` | a | # h",
    "@somebody #12 www.example.invalid http://example.invalid",
    "a\n\n# heading\n- item",
    "&lt;b&gt; \\* \\",
    "1. one",
    "23) two",
    "- three",
    "=== :bug: $x$",
    "\x1b[2J\u202egnp",
]


def render(document: Document, **how: bool) -> str:
    return reports()["markdown"].render(document, **how)


def tokens(text: str) -> Iterator[Token]:
    """Every token, those inside texts too."""
    parser = MarkdownIt("commonmark").enable(["table", "strikethrough"])
    for token in parser.parse(text):
        yield token
        yield from token.children or ()


def words(text: str) -> str:
    """What a reader sees."""
    return "".join(token.content for token in tokens(text) if token.type in ("text", "code_inline", "text_special"))


@pytest.mark.parametrize("name", HOSTILE)
def test_a_name_reads_as_it_is_and_does_nothing(name: str) -> None:
    hostile = finding(net=name, why=name, source=name, feeds=[name])
    undecided = finding(outcome="undecided", net=name, reason=name, ask=[f'[pin."{name}"] low = "…"'])
    document = replace(
        DOCUMENT,
        board={**DOCUMENT.board, "name": name},
        findings=[hostile, undecided],
        problems=[{"place": {}, "text": name}],
    )
    text = render(document, verbose=True)
    kinds = {token.type for token in tokens(text)}
    assert not kinds & {
        "html_inline",
        "html_block",
        "link_open",
        "image",
        "table_open",
        "s_open",
        "em_open",
        "fence",
        "ordered_list_open",
    }
    assert sum(token.type == "heading_open" for token in tokens(text)) == 4
    assert sum(token.type == "strong_open" for token in tokens(text)) == 2
    shown = name.replace("\n", "\\x0a").replace("\x1b", "\\x1b").replace("\u202e", "\\u202e")
    assert words(text).count(shown) >= 5


@pytest.mark.parametrize("text", ["@somebody", "http://example.invalid", "www.example.invalid", "WWW.example.invalid"])
def test_no_name_calls_a_person_or_becomes_a_link(text: str) -> None:
    assert text not in render(replace(DOCUMENT, findings=[finding(net=text, why=text)]))


def test_what_fails_comes_first_and_errors_before_warnings() -> None:
    text = render(DOCUMENT)
    marks = ["## Fails", "**error**", "**warning**", "## Undecided", "## Caution"]
    assert [text.index(mark) for mark in marks] == sorted(text.index(mark) for mark in marks)


def test_a_board_that_keeps_its_rules_has_no_sections() -> None:
    assert "##" not in render(replace(DOCUMENT, findings=[item for item in FINDINGS if item.outcome == "holds"]))


def test_only_the_most_useful_lines_are_told_unless_all_are_asked_for() -> None:
    asking = [
        finding(outcome="undecided", net=f"N{n}", ask=[f'[settings."r{n}"] hold = "…"'], reason="x") for n in range(11)
    ]
    document = replace(DOCUMENT, findings=asking)
    assert "- 3 more\n" in render(document)
    assert render(document, verbose=True).count('[settings."') == 11


def test_without_rules_it_tells_the_networks() -> None:
    text = render(replace(DOCUMENT, packs=[], findings=[]))
    assert "214 parts, 131 nets, 1 RC network with 2 nodes\n" in text
    assert "## Networks\n\n- power-on-delay 1: NRST\n- feedback 1: FB\n" in text
