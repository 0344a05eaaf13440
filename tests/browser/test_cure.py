"""The cure page by hand: the demo read, a run added, weather mistyped, the section solved, the calendar taken."""

from __future__ import annotations

import re
from datetime import datetime

import pytest
from playwright.sync_api import Page, expect

from . import shell
from .conftest import PLACE, ROOT
from .test_access import SMALL, TAP_PX, WIDTHS

pytestmark = pytest.mark.browser

AXE = ROOT / "web" / "node_modules" / "axe-core" / "axe.min.js"
NORTH, BATH = "run-north", "run-bath"
NUMPY_LIMIT_MS = 60_000
TOO_WET = "120"


def cure(context, url: str, theme: str = "paper") -> Page:
    """The cure page of the demo job, with its first answer."""
    page = shell.demo(context, url, theme)
    page.get_by_test_id("to-cure").click()
    expect(page.locator("main[data-page=cure]")).to_be_visible()
    expect(page.get_by_test_id("answer-all-through")).to_be_visible(timeout=NUMPY_LIMIT_MS)
    return page


def solved(page: Page) -> None:
    """Wait for numpy, and for the answer that it makes possible."""
    expect(page.get_by_test_id(f"cure-run-{NORTH}")).to_have_attribute(
        "data-method", "section", timeout=NUMPY_LIMIT_MS
    )


def words(page: Page) -> str:
    return page.locator("#app").inner_text()


def never_nan(page: Page) -> None:
    assert not re.search(r"\b(nan|inf|infinity|undefined|null)\b", words(page), re.IGNORECASE)


def unfold(page: Page, testid: str) -> None:
    button = page.get_by_test_id(testid).locator(".disclose").first
    if button.get_attribute("aria-expanded") == "false":
        button.click()


def faults_of(page: Page) -> list[str]:
    """What axe finds. Its source is run by the test's door, which the page's policy does not bind."""
    page.evaluate(f"() => {{ {AXE.read_text('utf-8')} ; return true }}")
    kinds = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "wcag2aaa", "best-practice"]
    found = page.evaluate(
        "kinds => window.axe.run(document, {resultTypes: ['violations'], runOnly: kinds})", kinds
    )
    return [f"{item['id']}: {item['nodes'][0]['html'][:200]}" for item in found["violations"]]


def test_the_demo_says_when_its_runs_are_through(tablet, site):
    page = cure(tablet, site.url)
    expect(page.get_by_test_id("drawing-timeline").locator("svg")).to_be_visible()
    for run in (NORTH, BATH):
        part = page.get_by_test_id(f"cure-run-{run}")
        expect(part.get_by_test_id("answer-through").locator(".figure")).to_contain_text(
            re.compile(r"20\d\d, \d\d:\d\d")
        )
        part.get_by_role("button", name="Stages").click()
        expect(part.get_by_test_id("table-stages").locator("tbody tr")).not_to_have_count(0)
    expect(page.get_by_test_id("cure-room").get_by_test_id("answer-room")).to_contain_text("mg/m³")
    never_nan(page)


def test_numpy_comes_later_and_the_section_takes_the_throats_place(tablet, site):
    page = cure(tablet, site.url)
    part = page.get_by_test_id(f"cure-run-{NORTH}")
    through = part.get_by_test_id("answer-through").locator(".figure")
    method = part.get_attribute("data-method")
    first = through.inner_text()
    if method == "throat":
        expect(page.get_by_test_id("estimate")).to_contain_text("throat")
        expect(part.get_by_test_id("drawing-section")).to_have_count(0)
    solved(page)
    expect(part.get_by_test_id("drawing-section").locator("svg path").first).to_be_visible()
    expect(page.get_by_test_id("estimate")).to_have_count(0)
    assert method == "section" or through.inner_text() != first, (
        "a rod behind the bead makes the section slower"
    )


def test_a_run_is_added_and_gets_its_clock(tablet, site):
    page = cure(tablet, site.url)
    page.get_by_test_id("add-sealed").click()
    shell.type_in(page, "/cure/sealed/2/name", "Stair, west side")
    shell.pick(page, "/cure/sealed/2/joint", "panel")
    shell.type_in(page, "/cure/sealed/2/when", "2026-11-25 09:30")
    expect(page.get_by_role("heading", name="Stair, west side")).to_be_visible()
    part = page.locator("section.part", has=page.get_by_role("heading", name="Stair, west side"))
    expect(part.get_by_test_id("answer-through").locator(".figure")).to_contain_text(
        re.compile(r"20\d\d")
    )
    shell.saved(page)

    page.get_by_test_id("copy-sealed-2").click()
    expect(page.get_by_role("heading", name="Stair, west side (copy)")).to_be_visible()
    unfold(page, "sealed-3")
    page.get_by_test_id("remove-sealed-3").click()
    expect(page.get_by_role("heading", name="Stair, west side (copy)")).to_have_count(0)
    page.get_by_test_id("notice-undo").click()
    expect(page.get_by_role("heading", name="Stair, west side (copy)")).to_be_visible()


def test_weather_that_cannot_be_gets_its_message_and_no_nan(tablet, site):
    page = cure(tablet, site.url)
    page.get_by_test_id("open-weather-0").click()
    shell.type_in(page, "/cure/weather/0/humidity", TOO_WET)
    expect(shell.field(page, "/cure/weather/0/humidity").get_by_test_id("message")).to_contain_text(
        "100"
    )
    never_nan(page)

    page.get_by_test_id("open-weather-0").click()
    expect(page.get_by_test_id("row-weather-0").get_by_test_id("message")).to_contain_text("100")
    page.get_by_test_id("issues").locator("a[data-path='/cure/weather/0/humidity']").click()
    expect(shell.line(page, "/cure/weather/0/humidity")).to_be_focused()

    shell.type_in(page, "/cure/weather/0/humidity", "71")
    expect(shell.field(page, "/cure/weather/0/humidity").get_by_test_id("message")).to_have_count(0)


@pytest.mark.parametrize(
    ("pointer", "text"),
    [
        ("/cure/weather/0/least", "-40"),
        ("/cure/room/length", "0"),
        ("/cure/pasted", "a, b, c, d"),
        ("/cure/zone", "Nowhere/Land"),
    ],
)
def test_bad_input_is_answered_in_words(tablet, site, pointer, text):
    page = cure(tablet, site.url)
    if pointer.startswith("/cure/weather"):
        page.get_by_test_id("open-weather-0").click()
    shell.type_in(page, pointer, text)
    shell.saved(page)
    expect(page.get_by_test_id("stale")).to_have_count(0)
    never_nan(page)
    assert tablet.requests.page_errors == []


def test_without_weather_and_with_a_covered_bead_it_stays_plain(tablet, site):
    page = cure(tablet, site.url)
    for _ in range(5):
        page.get_by_test_id("open-weather-0").click()
        page.get_by_test_id("row-weather-0").get_by_role("button", name="Remove").click()
    expect(page.get_by_test_id("rows-weather").locator("li")).to_have_count(0)
    unfold(page, "sealed-0")
    shell.pick(page, "/cure/sealed/0/front", "covered")
    trouble = page.get_by_test_id(f"cure-run-{NORTH}").get_by_test_id("trouble")
    expect(trouble).to_contain_text("No moisture path")
    never_nan(page)


def test_a_day_is_copied_to_the_day_after_the_last(tablet, site):
    page = cure(tablet, site.url)
    page.get_by_test_id("copy-weather").click()
    cell = "[data-pointer-cell='/cure/weather/{}/{}'] .line"
    expect(page.locator(cell.format(5, "least"))).to_be_focused()
    expect(page.locator(cell.format(5, "day"))).to_have_value("2026-11-29")
    kept = page.locator(cell.format(4, "most")).input_value()
    expect(page.locator(cell.format(5, "most"))).to_have_value(kept)


def test_a_job_without_a_zone_is_offered_that_of_the_tablet(tablet, site):
    page = cure(tablet, site.url)
    expect(page.get_by_test_id("take-zone")).to_have_count(0)
    shell.type_in(page, "/cure/zone", "")
    page.get_by_test_id("take-zone").click()
    expect(shell.line(page, "/cure/zone")).to_have_value(PLACE["timezone_id"])
    expect(page.get_by_test_id("take-zone")).to_have_count(0)


def test_days_are_pasted_as_text(tablet, site):
    page = cure(tablet, site.url)
    page.locator("[data-pointer='/cure/pasted'] textarea").fill(
        "2026-11-29, 2, 9, 80\n2026-11-30, 3, 10, 75"
    )
    page.locator("[data-pointer='/cure/pasted'] textarea").blur()
    page.get_by_role("button", name="Weather as used").click()
    expect(page.get_by_test_id("table-weather").locator("tbody tr")).to_have_count(7)


def test_the_calendar_file_holds_the_stages_at_the_right_hour(tablet, site):
    page = cure(tablet, site.url)
    solved(page)
    with page.expect_download() as waiting:
        page.get_by_test_id("export-calendar").click()
    assert waiting.value.suggested_filename.endswith(".ics")
    with open(waiting.value.path(), "rb") as file:
        calendar = pytest.importorskip("icalendar").Calendar.from_ical(file.read())
    events = list(calendar.walk("VEVENT"))
    assert len(events) > 4
    starts = [event.decoded("DTSTART") for event in events]
    assert all(isinstance(start, datetime) and start.tzinfo is not None for start in starts), (
        "the zone of the job is known in the browser"
    )
    # November in Berlin is an hour ahead, whatever the tablet holds.
    assert {start.utcoffset().total_seconds() / 3600 for start in starts} == {1.0}
    with page.expect_download() as sheet:
        page.get_by_test_id("export-cure-sheet").click()
    with open(sheet.value.path(), encoding="utf-8") as file:
        text = file.read()
    assert "North face, grid 3 to 4" in text and "nan" not in text.lower().split()


@pytest.mark.parametrize("theme", ["paper", "sun", "dark"])
def test_axe_finds_nothing(tablet, site, theme):
    page = cure(tablet, site.url, theme)
    solved(page)
    unfold(page, "sealed-0")
    page.get_by_test_id("open-weather-0").click()
    assert faults_of(page) == []


@pytest.mark.parametrize("width", WIDTHS)
def test_nothing_scrolls_sideways_and_every_target_takes_a_finger(make_context, site, width):
    page = cure(make_context(**WIDTHS[width]), site.url)
    solved(page)
    unfold(page, "sealed-0")
    page.get_by_test_id("open-weather-0").click()
    wide, seen = page.evaluate("[document.documentElement.scrollWidth, innerWidth]")
    assert wide <= seen
    assert page.evaluate(SMALL, TAP_PX) == []


def test_the_page_is_printed_whole(tablet, site):
    page = cure(tablet, site.url)
    solved(page)
    page.emulate_media(media="print")
    expect(page.locator(".inputs")).to_be_hidden()
    part = page.get_by_test_id(f"cure-run-{NORTH}")
    for table in ("stages", "depths"):
        expect(part.get_by_test_id(f"table-{table}")).to_be_visible()
    expect(part.get_by_text("INV-2207")).to_be_visible()
