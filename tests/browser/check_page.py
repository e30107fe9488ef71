"""The review page in a headless Chromium: it opens quickly, says nothing on the console, sorts and filters.

Not part of the ordinary run (the name does not start with ``test_``): it needs a browser on the machine.
    pytest tests/browser/check_page.py
"""

import shutil
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import pytest
from playwright.sync_api import Browser, Locator, Page, sync_playwright

from rcrules.findings import Document
from rcrules.reports import reports
from tests.browser._large import large
from tests.reports._sample import DOCUMENT, finding

FLAGS = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
]
ROWS = "#findings-table tbody tr"


@pytest.fixture(scope="module")
def browser() -> Iterator[Browser]:
    """The Chromium of the machine, with an empty profile."""
    path = shutil.which("chromium") or shutil.which("chromium-browser") or shutil.which("google-chrome")
    assert path, "no Chromium on this machine: install the package chromium"
    with sync_playwright() as playwright:
        found = playwright.chromium.launch(executable_path=path, args=FLAGS)
        yield found
        found.close()


def opened(browser: Browser, document: Document, folder: Path, **how: object) -> tuple[Page, list[str]]:
    """The page of a document, and what it says on the console."""
    path = folder / "review.html"
    path.write_text(reports()["html"].render(document), encoding="utf-8")
    page = browser.new_page(**how)  # type: ignore[arg-type] # options of the browser by name
    told: list[str] = []
    page.on("console", lambda message: told.append(message.text))
    page.on("pageerror", lambda error: told.append(str(error)))
    page.on("request", lambda request: told.append(request.url) if not request.url.startswith("file:") else None)
    page.goto(path.as_uri())
    return page, told


@pytest.fixture
def page(browser: Browser, tmp_path: Path) -> Iterator[Page]:
    found, told = opened(browser, DOCUMENT, tmp_path)
    yield found
    assert told == []
    found.close()


def shown(page: Page) -> list[str]:
    """The rows that are seen, by their rule and place."""
    return [row.inner_text() for row in page.locator(ROWS).all() if row.is_visible()]


def test_words_and_choices_filter_the_findings(page: Page) -> None:
    assert page.locator("form.filter output").first.inner_text() == "10 of 10 shown"
    page.get_by_label("Outcome").select_option("undecided")
    assert len(shown(page)) == 4
    page.locator("form.filter input[type=search]").first.fill("ain1")
    assert len(shown(page)) == 1
    assert "AIN1" in shown(page)[0]
    assert page.locator("form.filter output").first.inner_text() == "1 of 10 shown"
    page.get_by_label("Outcome").select_option("")
    page.get_by_label("Level").select_option("note")
    assert shown(page) == []


def test_a_click_on_a_header_sorts_and_a_second_one_turns_the_order(page: Page) -> None:
    button = page.locator("#findings-table thead button", has_text="Rule")
    rules = page.locator(f"{ROWS} th")
    before = rules.all_inner_texts()
    button.click()
    assert rules.all_inner_texts() == sorted(before)
    assert page.locator("#findings-table thead th[aria-sort]").get_attribute("aria-sort") == "ascending"
    button.click()
    assert rules.all_inner_texts() == sorted(before, reverse=True)


def test_numbers_sort_as_numbers(page: Page) -> None:
    page.locator("#parts-table thead button", has_text="Value").click()
    refs = page.locator("#parts-table tbody th").all_inner_texts()
    assert refs[:2] == ["C44", "C21"]
    assert refs[-1] == "R31"


def test_the_keyboard_reaches_sorting_and_details(page: Page) -> None:
    button = page.locator("#findings-table thead button", has_text="Rule")
    button.focus()
    page.keyboard.press("Enter")
    assert page.locator("#findings-table thead th[aria-sort]").count() == 1
    summary = page.locator("details.finding summary").first
    was = page.locator("details.finding").first.get_attribute("open")
    summary.focus()
    page.keyboard.press("Enter")
    assert page.locator("details.finding").first.get_attribute("open") != was


def test_a_row_leads_to_its_details_and_opens_them(page: Page) -> None:
    link = page.locator(f"{ROWS} th a", has_text="voltage-within-rating").last
    target = page.locator(str(link.get_attribute("href")))
    assert target.get_attribute("open") is None
    link.click()
    page.wait_for_function("document.querySelector(location.hash).open")
    assert target.is_visible()


def test_without_script_everything_is_there_and_no_control_is_dead(browser: Browser, tmp_path: Path) -> None:
    page, told = opened(browser, DOCUMENT, tmp_path, java_script_enabled=False)
    assert page.locator(ROWS).count() == 10
    assert page.locator("form.filter:visible").count() == 0
    assert page.locator("thead button").count() == 0
    assert told == []
    page.close()


@pytest.mark.parametrize("width", [360, 1280])
@pytest.mark.parametrize("scheme", ["light", "dark"])
def test_the_page_fits_the_window(width: int, scheme: str, browser: Browser, tmp_path: Path) -> None:
    """Only tables and drawings scroll sideways, inside their own frames."""
    page, told = opened(browser, DOCUMENT, tmp_path, viewport={"width": width, "height": 800}, color_scheme=scheme)
    page.locator("details").evaluate_all("all => all.forEach(item => { item.open = true; })")
    assert page.evaluate("document.documentElement.scrollWidth") <= width
    assert told == []
    page.close()


def test_a_hostile_name_runs_nothing(browser: Browser, tmp_path: Path) -> None:
    name = "</script><script>document.title='run'</script><img src=x onerror=\"document.title='run'\">]]>"
    hostile = replace(DOCUMENT, board={**DOCUMENT.board, "name": name}, findings=[finding(net=name, why=name)])
    page, told = opened(browser, hostile, tmp_path)
    assert page.title() == f"{name}: RC networks"
    assert page.locator("script").count() == 1
    assert told == []
    page.close()


def test_what_is_packed_comes_when_it_is_opened_or_seen(browser: Browser, tmp_path: Path) -> None:
    page, told = opened(browser, large(300), tmp_path)
    last = page.locator(f"{ROWS} th a").last
    target = page.locator(str(last.get_attribute("href")))
    assert target.locator(".plot").count() == 0
    last.click()
    target.locator(".plot").wait_for()
    network = page.locator(".network", has=target)
    network.locator("svg.circuit").wait_for()
    assert page.locator(".network > .packed").count() > 200
    assert told == []
    page.close()


def test_on_paper_what_holds_stays_closed_and_the_rest_opens(browser: Browser, tmp_path: Path) -> None:
    page, told = opened(browser, DOCUMENT, tmp_path)
    page.emulate_media(media="print")
    page.pdf()
    holding, failing = page.locator("details.finding.holds"), page.locator("details.finding.undecided")
    assert failing.first.locator("dl").first.is_visible()
    assert not holding.first.locator("dl").first.is_visible()
    assert told == []
    page.close()


def lands(page: Page, link: Locator) -> bool:
    """Whether a link leads to its block, however much of the page was not laid out before."""
    link.click()
    page.wait_for_timeout(500)
    top = page.evaluate("document.querySelector(location.hash).getBoundingClientRect().top")
    return -5 <= top < page.evaluate("innerHeight")


def test_a_thousand_networks_make_a_page_that_opens_at_once(browser: Browser, tmp_path: Path) -> None:
    """Under 15 MB; under two seconds on a machine with nothing else to do, which a busy one gets three times over."""
    times = []
    for _ in range(3):
        page, told = opened(browser, large(1000), tmp_path)
        times.append(page.evaluate("performance.getEntriesByType('navigation')[0].loadEventEnd"))
        assert page.locator(ROWS).count() == 3000
        assert lands(page, page.locator(f"{ROWS} th a").nth(2900))
        assert told == []
        page.close()
    assert (tmp_path / "review.html").stat().st_size < 15e6
    print(f"1000 networks: open after {min(times):.0f} ms")
    assert min(times) < 6000
