"""The review page: whole by itself, readable by all, with everything the document holds."""

import base64
import gzip
import hashlib
import importlib.util
import itertools
import json
import re
import subprocess
import sys
from dataclasses import replace
from typing import Any

import pytest
from lxml import html

from rcrules.errors import UserMistake
from rcrules.findings import Document
from rcrules.reports import reports
from tests.reports._sample import DOCUMENT, FINDINGS, answering, finding


def text_of(document: Document) -> str:
    return reports()["html"].render(document)


def tree(document: Document) -> Any:
    return html.fromstring(text_of(document))


@pytest.fixture(scope="module")
def page() -> Any:
    return tree(DOCUMENT)


def words(element: Any) -> str:
    return " ".join(" ".join(element.itertext()).split())


def test_nothing_is_fetched_from_anywhere(page: Any) -> None:
    text = text_of(DOCUMENT)
    assert not re.search(r"https?:|//[a-z]|@import|url\(", text)
    assert not list(page.iter("link", "img", "iframe", "object", "embed"))
    assert all(item.get("href").startswith("#") for item in page.iter("a"))


def test_only_our_own_script_may_run(page: Any) -> None:
    """The policy names the hash of the one script; a script slipped in by a name would be refused."""
    (script,) = page.iter("script")
    (policy,) = page.xpath("//meta[@http-equiv='Content-Security-Policy']/@content")
    digest = base64.b64encode(hashlib.sha256(script.text.encode()).digest()).decode()
    assert "default-src 'none'" in policy
    assert f"script-src 'sha256-{digest}'" in policy


def test_every_finding_has_a_row_and_a_block_that_it_leads_to(page: Any) -> None:
    (table,) = page.xpath("//table[@id='findings-table']")
    links = table.xpath(".//tbody//a/@href")
    assert len(links) == len(FINDINGS)
    blocks = page.xpath("//details[contains(@class, 'finding')]/@id")
    assert sorted(f"#{name}" for name in blocks) == sorted(links)


def test_links_lead_somewhere_and_names_are_used_once(page: Any) -> None:
    names = page.xpath("//@id")
    assert len(names) == len(set(names))
    assert {link.removeprefix("#") for link in page.xpath("//a/@href")} <= set(names)


def test_the_gravest_stand_first(page: Any) -> None:
    told = [words(row[0]) for row in page.xpath("//table[@id='findings-table']/tbody/tr")]
    assert [item.split()[0] for item in told] == [
        *["error"] * 3,
        "warning",
        *["undecided"] * 4,
        "holds",
        "waived",
    ]


def test_tables_have_captions_and_headers_and_drawings_have_words(page: Any) -> None:
    tables = [item for item in page.iter("table") if item.get("class") not in ("bars", "steps")]
    assert all(item.find("caption") is not None for item in tables)
    assert all(cell.get("scope") for cell in page.iter("th"))
    drawings = list(page.iter("svg"))
    assert drawings
    assert all(item.get("role") == "img" and len(item.get("aria-label")) > 10 for item in drawings)
    assert page.get("lang") == "en"


def test_headings_leave_no_level_out(page: Any) -> None:
    levels = [int(item.tag[1]) for item in page.iter("h1", "h2", "h3", "h4", "h5")]
    assert levels[0] == 1
    assert levels.count(1) == 1
    assert all(after - before <= 1 for before, after in itertools.pairwise(levels))


def test_each_missing_fact_stands_once_with_what_it_decides(page: Any) -> None:
    (section,) = page.xpath("//section[@id='undecided']")
    lines = [line for item in section.iter("pre") for line in item.text_content().split("\n") if line.strip()]
    assert lines == ['[settings."input-settles-in-window"] settling_window = "…"', '[part."C9"] tolerance = "…"']
    first, *_, last = section.iter("article")
    assert [words(item).split(":")[0] for item in first.iter("li")] == [
        "input-settles-in-window at AIN0 (R20 1 kΩ, C21 1 nF, feeds U5.AIN0)",
        "input-settles-in-window at AIN1 (R20 1 kΩ, C21 1 nF, feeds U5.AIN1)",
    ]
    assert "no line of the project file would decide" in words(last)


def test_parts_are_told_with_every_origin(page: Any) -> None:
    rows = {row[0].text_content(): words(row) for row in page.xpath("//table[@id='parts-table']/tbody/tr")}
    assert set(rows) == {row["ref"] for row in DOCUMENT.parts}
    assert "10 µF “10uF 16V” 9 µF .. 11 µF" in rows["C7"]
    assert "value: BOM value (gauge-bom.csv:14)" in rows["C7"]
    assert "tolerance -10 % .. +10 %: 10 % from BOM field 'Tol'" in rows["C7"]
    assert "not known: not understood" in rows["C44"]


@pytest.mark.parametrize(
    ("section", "told"),
    [
        ("inputs", "00" * 32),
        ("inputs", "gauge-bom.csv:14:5 C7: value 10uF of the BOM"),
        ("assumptions", "no tolerance given, 20 % assumed"),
        ("assumptions", "the surge is limited by the supply"),
        ("coverage", "capacitors 6"),
        ("rules", "for every capacitor, the voltage_ratio must keep its limit"),
        ("networks", "time constant 61.3 ms .. 100 ms .. 139 ms (proved)"),
        ("networks", "time constant active network"),
        ("networks", "shortest at C7 -38.1 % (tolerance -20 %"),
        ("networks", "never reached in the worst case"),
        ("networks", "waived by analogue team on 2026-03-01"),
        ("parts", "+48V supply 45.6 V .. 48 V .. 50.4 V (assumed) name"),
    ],
)
def test_what_the_document_holds_is_told(section: str, told: str, page: Any) -> None:
    assert told in words(page.xpath(f"//section[@id='{section}']")[0])


def test_cautions_stand_at_the_top(page: Any) -> None:
    (header,) = page.iter("header")
    assert "Caution (stored-energy): A calculation is not a measurement." in words(header)


def test_a_document_without_rules_is_a_page_too() -> None:
    bare = replace(
        DOCUMENT, packs=[], findings=[], networks=[], parts=[], held=[], assumptions=[], waivers=[], problems=[]
    )
    told = words(tree(bare))
    assert "No rule was applied" in told
    assert "No RC network was found." in told


def test_a_finding_about_a_part_in_no_network_is_told_apart() -> None:
    (found,) = tree(replace(DOCUMENT, findings=[finding(net=None, parts=["C99"])])).xpath(
        "//article[@aria-labelledby='elsewhere-title']"
    )
    assert "reset-lifts-late-enough" in words(found)


def test_what_changed_against_a_saved_document_is_told_only_where_something_was_compared(page: Any) -> None:
    assert not page.xpath("//section[@id='changes']")
    verdict = {"outcome": "fails", "level": "error", "measured": None, "limit": {"at_least": 0.03, "unit": "s"}}
    row = {"change": "broke", "rule": "r", "net": "NRST", "parts": ["C7"], "was": None, "now": verdict}
    compared = {
        "board": "harbour gauge",
        "tool": "0.1.0",
        "share": 0.05,
        "findings": [{**row, "causes": ["C7 22 µF → 10 µF"], "finding": 0}],
        "networks": {"added": ["AIN2"], "removed": []},
        "changes": [],
    }
    (section,) = tree(replace(DOCUMENT, comparison=compared)).xpath("//section[@id='changes']")
    told = words(section)
    assert "Against harbour gauge as saved: 1 broke." in told
    assert "broke r NRST C7 10 µF not there fails at least 30 ms C7 22 µF → 10 µF" in told
    assert "Networks added: AIN2" in told


def test_how_a_number_comes_about_is_told_in_full() -> None:
    (block,) = tree(replace(DOCUMENT, findings=[answering()])).xpath("//details[@id='f0']")
    told = words(block)
    assert "Time from the event until the voltage reaches a level." in told
    assert "+3V3 3.2 V .. 3.3 V .. 3.4 V 0 V before; 0 V at 0 s, 3.3 V at 1.25 ms" in told
    assert "NRST 0 V 0 V 3.3 V" in told
    assert "100 ms 100 %" in told
    assert "lowest: 21.9 ms C7 6.188 µF, R12 9.9 kΩ, the rest nominal" in told
    assert "t tau · ln(+3V3 / (+3V3 - v)) 100 ms · ln(3.3 V / (3.3 V - 0.99 V)) 35.7 ms" in told
    assert len(block.xpath(".//*[@class='plot']")) == 1
    assert "with 95 % confidence" in told


def test_the_largest_share_has_the_longest_bar_and_what_does_nothing_has_none() -> None:
    (block,) = tree(replace(DOCUMENT, findings=[answering()])).xpath("//details[@id='f0']")
    rows = block.xpath(".//table[@class='bars']/tbody/tr")
    assert [words(row) for row in rows] == [
        "C7 9 µF .. 10 µF .. 11 µF 75 % BOM field 'Tol'",
        "R12 9 kΩ .. 10 kΩ .. 11 kΩ 25 % assumed: BOM field 'Tol'",
    ]
    assert block.xpath(".//td[@class='bar']/span/@style") == ["width:100.0%", "width:33.3%"]


def test_a_board_with_very_many_findings_keeps_all_but_the_gravest_packed() -> None:
    """And says so, so that the page stays one that opens at once."""
    many = [answering(outcome="holds", margin=0.1) for _ in range(600)]
    small = tree(replace(DOCUMENT, findings=many))
    assert len(small.xpath("//*[@class='plot']")) == 600
    assert not small.xpath("//*[@class='packed']")
    large = tree(replace(DOCUMENT, findings=[*many, answering()]))
    assert len(large.xpath("//*[@class='plot']")) == 1
    assert "unpacked when they are opened" in words(large)
    (packed,) = large.xpath("//script[@id='store']/text()")
    bodies = json.loads(gzip.decompress(base64.b64decode(packed)))
    places = large.xpath("//*[*[@class='packed']]/@id")
    assert set(bodies) == set(places)
    assert all('class="plot"' in body for name, body in bodies.items() if name.startswith("f"))


def luminance(color: str) -> float:
    """Relative luminance of ``#rrggbb`` (WCAG 2.1, definition of relative luminance)."""
    parts = [int(color[index : index + 2], 16) / 255 for index in (1, 3, 5)]
    red, green, blue = (part / 12.92 if part <= 0.03928 else ((part + 0.055) / 1.055) ** 2.4 for part in parts)
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue


@pytest.mark.parametrize("scheme", ["light", "dark"])
def test_texts_have_enough_contrast(scheme: str) -> None:
    """WCAG 2.1, 1.4.3: at least 4.5 to 1 for text."""
    light, dark, *_ = (
        dict(re.findall(r"--([\w-]+): (#\w{6})", block))
        for block in re.findall(r":root \{(.*?)\}", text_of(DOCUMENT), re.S)
    )
    colors = light if scheme == "light" else dark
    for name in ("ink", "dim", "link", "error", "warning", "note", "open", "good", "grey", "level", "curve"):
        for ground in ("paper", "panel"):
            high, low = sorted((luminance(colors[name]), luminance(colors[ground])), reverse=True)
            assert (high + 0.05) / (low + 0.05) >= 4.5, f"{name} on {ground}"


@pytest.mark.parametrize("absent", ["jinja2", "schemdraw"])
def test_without_its_packages_it_says_what_to_install(absent: str, monkeypatch: pytest.MonkeyPatch) -> None:
    found = importlib.util.find_spec
    monkeypatch.setattr("rcrules.reports.html.find_spec", lambda name: None if name == absent else found(name))
    with pytest.raises(UserMistake, match=rf"needs {absent}, which is missing\n.*pip install 'rcrules\[html\]'"):
        text_of(DOCUMENT)


def test_knowing_the_report_imports_none_of_its_packages() -> None:
    code = "import sys, rcrules.reports as r; r.reports(); print({'jinja2', 'schemdraw'} & set(sys.modules))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout == "set()\n"
