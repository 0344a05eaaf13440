"""Faults found by a stranger at the page: an offer passed over, a drawer that shut under the hand."""

import json

from playwright.sync_api import expect

from . import shell
from .test_journey import DEAF_TO_ITS_END


def test_typing_that_was_offered_back_is_set_aside_when_one_works_on(make_context, site):
    tablet = make_context()
    tablet.add_init_script(DEAF_TO_ITS_END)
    page = shell.demo(tablet, site.url)
    page.locator(".joints .row-link").first.click()
    target = shell.line(page, "/joints/0/place")
    target.click()
    target.fill("Typed, never left")
    expect(page.get_by_test_id("save-state")).to_contain_text("Draft kept")
    address = page.url
    page.close()
    page = tablet.new_page()
    page.goto(address)
    expect(page.get_by_test_id("banner-draft")).to_be_visible(timeout=30_000)
    shell.type_in(page, "/joints/0/name", "Worked on")
    expect(page.get_by_test_id("banner-draft")).to_have_count(0)
    shell.saved(page)
    page.goto(f"{site.url}#/job/demo-harbour-hall/history")
    aside = page.get_by_test_id("set-aside")
    expect(aside).to_have_count(1)
    aside.get_by_role("button", name="Bring back").click()
    page.locator(".joints .row-link").first.click()
    expect(shell.line(page, "/joints/0/place")).to_have_value("Typed, never left")
    # The other change is one step back, not gone.
    page.get_by_test_id("undo").click()
    expect(shell.line(page, "/joints/0/name")).to_have_value("Worked on")


def test_a_drawer_opened_by_a_fault_stays_open_while_the_fault_is_mended(tablet, site):
    page = shell.demo(tablet, site.url)
    page.locator(".joints .row-link").first.click()
    pointer = "/joints/0/side_a/moisture_irreversible"
    shell.unfold(page, "/joints/0/side_a", "Material data")
    shell.type_in(page, pointer, "ten")
    expect(shell.field(page, pointer).get_by_test_id("message")).to_be_visible()
    page.reload()
    expect(shell.line(page, pointer)).to_be_visible(timeout=30_000)
    target = shell.line(page, pointer)
    target.click()
    target.fill("")
    target.press_sequentially("0.05", delay=120)
    expect(target).to_be_focused()
    expect(target).to_have_value("0.05")
    target.blur()
    expect(target).to_have_value("0.05 %")


def test_one_job_is_saved_with_its_photos_and_nothing_of_the_others(tablet, site, tmp_path):
    page = shell.demo(tablet, site.url)
    page.goto(site.url + "#/")
    page.get_by_test_id("new-inch").click()
    shell.type_in(page, "/title", "Another job")
    shell.saved(page)
    page.goto(site.url + "#/job/demo-harbour-hall")
    with page.expect_download() as waiting:
        page.get_by_test_id("export-with-photos").click()
    waiting.value.save_as(tmp_path / "one.json")
    text = (tmp_path / "one.json").read_text("utf-8")
    assert "Harbour Hall" in text and json.loads(text)
    assert "Another job" not in text
    page.goto(site.url + "#/")
    page.get_by_test_id("restore").set_input_files(tmp_path / "one.json")
    expect(page.locator("main")).to_contain_text("Harbour Hall")
