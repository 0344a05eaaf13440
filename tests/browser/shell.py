"""Steps that a person takes in the app, for the tests of the shell. Everything goes through the page."""

from __future__ import annotations

from typing import Any

from playwright.sync_api import Locator, Page, expect

WORKING_LIMIT_MS = 30_000


def home(context: Any, url: str) -> Page:
    """The list of jobs, in a fresh page."""
    page = context.new_page()
    page.goto(url)
    expect(page.get_by_role("heading", name="Jobs", exact=True)).to_be_visible()
    return page


def demo(context: Any, url: str, theme: str = "paper") -> Page:
    """The wall page of the demo job, with its verdicts."""
    page = context.new_page()
    page.goto(url + "#/demo/harbour-hall")
    expect(page.locator("main[data-page=wall]")).to_be_visible()
    page.get_by_test_id(f"theme-{theme}").click()
    expect(page.locator(".small-verdict").first).to_be_visible(timeout=WORKING_LIMIT_MS)
    return page


def calculator_ready(page: Page) -> None:
    expect(page.get_by_test_id("core-state")).to_have_attribute(
        "data-phase", "ready", timeout=WORKING_LIMIT_MS
    )


def field(page: Page, pointer: str) -> Locator:
    """One field with its label, help, control, reading and messages."""
    return page.locator(f'[data-pointer="{pointer}"]')


def line(page: Page, pointer: str) -> Locator:
    """The control of a field that is typed into or chosen from."""
    return field(page, pointer).locator(".line")


def type_in(page: Page, pointer: str, text: str) -> None:
    """Type as a person does, then leave the field."""
    target = line(page, pointer)
    target.click()
    target.fill("")
    target.press_sequentially(text)
    target.blur()


def pick(page: Page, pointer: str, value: str) -> None:
    line(page, pointer).select_option(value)


def unfold(page: Page, pointer_of_row: str, section: str) -> None:
    """Open the seldom-used fields of a section."""
    button = page.locator(f'[data-more="more {pointer_of_row} {section}"]')
    if button.get_attribute("aria-expanded") == "false":
        button.click()


def saved(page: Page) -> None:
    """The foot of the page says that all is on the disk."""
    expect(page.get_by_test_id("save-state")).to_have_attribute("data-kind", "saved")
    expect(page.get_by_test_id("save-state")).to_contain_text("Saved")


def verdict(page: Page) -> Locator:
    return page.get_by_test_id("verdict").first


def drawn_width(page: Page) -> float:
    """Width of the bead in the drawing, in the drawing's own units."""
    return float(
        page.locator("[data-testid=drawing] .bw-bead").first.evaluate(
            "bead => bead.getBBox().width"
        )
    )
