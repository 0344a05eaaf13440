"""The take-off page: rows typed, pasted, filled down, refused at their cell, compared and taken out as files."""

from __future__ import annotations

import csv
import io
import json
import re
import zipfile
from pathlib import Path

import pytest
from playwright.sync_api import expect

from beadwright import desk

from . import shell
from .conftest import PHONE, TABLET_LANDSCAPE
from .test_access import AXE, GAP_PX, SMALL, TAP_PX, THEMES, WIDTHS

pytestmark = pytest.mark.browser

DEMO = "demo/harbour-hall.beadwright.json"
ROOT = Path(__file__).resolve().parents[2]
RUNS = "/takeoff/runs"
RULES = "['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'wcag2aaa', 'best-practice']"


def opened(context, url, theme="paper"):
    page = shell.demo(context, url, theme)
    page.goto(url + "#/job/demo-harbour-hall/takeoff")
    expect(page.get_by_test_id("bars")).to_be_visible(timeout=shell.WORKING_LIMIT_MS)
    return page


def cell(page, index, key, rows=RUNS):
    return page.locator(f'[data-pointer-cell="{rows}/{index}/{key}"] .line')


def put(page, index, key, text, rows=RUNS):
    target = cell(page, index, key, rows)
    target.fill(text)
    target.blur()


def figure(page, key):
    return page.get_by_test_id(f"answer-{key}").locator(".figure")


def demo_answer():
    return desk.evaluate(json.loads((ROOT / DEMO).read_text("utf-8")))["takeoff"]


def test_the_demo_shows_what_the_core_says(tablet, site):
    page = opened(tablet, site.url)
    answer = demo_answer()
    for band in answer["answers"]:
        expect(figure(page, band["key"])).to_contain_text(band["answer"])
    expect(page.locator("[data-testid^=row-run-]")).to_have_count(answer["run_count"])
    for index, run in enumerate(answer["runs"]):
        expect(page.get_by_test_id(f"row-run-{index}")).to_contain_text(run["text"])
    # Every table of the core is there: the first open, the others behind their titles, all whole on paper.
    page.emulate_media(media="print")
    for table in answer["tables"]:
        shown = page.get_by_test_id(f"table-{table['key']}")
        expect(shown).to_be_visible()
        expect(shown.locator("tbody tr")).to_have_count(len(table["rows"]))
    for step in answer["steps"]:
        expect(page.get_by_test_id(f"step-{step['key']}").first).to_contain_text(step["result"])
    # What the picture says in bars stands in the table under it in figures.
    for bar in page.get_by_test_id("bars").locator(".bw-num").all():
        expect(page.get_by_test_id("table-orders")).to_contain_text(bar.text_content())


def test_a_run_typed_in_inches_is_counted(tablet, site):
    page = opened(tablet, site.url)
    count = demo_answer()["run_count"]
    page.get_by_test_id("add-run").click()
    expect(cell(page, count, "name")).to_be_focused()
    page.keyboard.type("Coping")
    put(page, count, "length", "80' 6\"")
    put(page, count, "count", "2")
    put(page, count, "width", "5/8 in")
    put(page, count, "colour", "grey")
    page.get_by_test_id(f"open-run-{count}").click()
    shell.pick(page, f"{RUNS}/{count}/section", "bed")
    shell.pick(page, f"{RUNS}/{count}/sealant", "facade")
    shell.type_in(page, f"{RUNS}/{count}/depth", "3/8 in")
    # 2 x 80.5 ft = 49.0728 m; 5/8 in x 3/8 in = 151.2 mm2; 7.42 l.
    expect(page.get_by_test_id(f"row-run-{count}")).to_contain_text("49.1 m of bed")
    expect(page.get_by_test_id(f"row-run-{count}")).to_contain_text("7.42 l net")
    expect(cell(page, count, "width")).to_have_value("5/8 in")
    expect(figure(page, "sealant")).not_to_contain_text("117.2 l")


def test_a_bare_number_takes_the_unit_of_the_column(tablet, site):
    page = opened(tablet, site.url)
    put(page, 0, "width", "20")
    expect(cell(page, 0, "width")).to_have_value("20 mm")
    put(page, 0, "length", "9,25")
    expect(cell(page, 0, "length")).to_have_value("9,25 m")


@pytest.mark.parametrize(
    ("key", "text"),
    [
        ("length", "-3 m"),
        ("width", "0"),
        ("colour", "grye"),
        ("length", "1e12 m"),
        ("length", "=2+2"),
    ],
)
def test_a_bad_row_is_told_at_its_cell_and_the_rest_still_totals(tablet, site, key, text):
    page = opened(tablet, site.url)
    before = demo_answer()
    rest = before["gross_ml"] - before["runs"][1]["gross_ml"]
    put(page, 1, key, text)
    row = page.get_by_test_id("row-run-1")
    expect(row.get_by_test_id("message").first).to_be_visible()
    target = cell(page, 1, key)
    expect(target).to_have_attribute("aria-invalid", "true")
    # The cell names its message, so that a reader hears it there.
    names = target.get_attribute("aria-describedby").split()
    assert all(page.locator(f"#{name}").is_visible() for name in names) and names
    expect(figure(page, "left-out")).to_contain_text("1 left out")
    expect(figure(page, "sealant")).to_contain_text(f"{rest / 1000:.2f} l")
    expect(page.get_by_test_id("table-orders")).to_contain_text("1 run left out")
    # The list on top leads to the field in the whole form of the row.
    page.get_by_test_id("issues").locator(f'[data-path="{RUNS}/1/{key}"]').click()
    expect(shell.line(page, f"{RUNS}/1/{key}")).to_be_focused()
    page.get_by_test_id("undo").click()
    expect(page.get_by_test_id("answer-left-out")).to_have_count(0)


def test_a_paste_with_decimal_commas_is_previewed_then_added(tablet, site):
    page = opened(tablet, site.url)
    count = demo_answer()["run_count"]
    page.get_by_test_id("open-paste").click()
    page.locator("#paste-text").fill(
        "Name\tLänge\tCount\tWidth [mm]\tColour\tSealant\tDepth [mm]\n"
        "Attic\t12,5\t3\t10\tgrey\tFaçade sealant, grey\t6\n"
        "Plinth\t7,25 m\t2\t12,5\tsand\tFaçade sealant, grey\t6\n"
    )
    read = page.get_by_test_id("paste-read")
    expect(read).to_contain_text("Decimal comma")
    expect(read).to_contain_text("Cells split by tab")
    # A heading that nobody knows is left aside, and a person says what it is.
    expect(page.get_by_test_id("column-1")).to_have_value("")
    page.get_by_test_id("column-1").select_option("length")
    expect(read).to_contain_text("Length, in m where the cell names no unit")
    expect(page.locator("[data-testid^=row-run-]")).to_have_count(count)
    page.get_by_test_id("take-pasted").click()
    expect(page.locator("[data-testid^=row-run-]")).to_have_count(count + 2)
    expect(cell(page, count, "length")).to_have_value("12,5 m")
    expect(cell(page, count + 1, "width")).to_have_value("12,5 mm")
    # 3 x 12.5 m of 10 mm x 6 mm
    expect(page.get_by_test_id(f"row-run-{count}")).to_contain_text("37.5 m of butt 10 mm × 6 mm")
    shell.saved(page)
    page.get_by_test_id("notice-undo").click()
    expect(page.locator("[data-testid^=row-run-]")).to_have_count(count)


def test_a_csv_file_of_the_office_is_read(tablet, site, tmp_path):
    page = opened(tablet, site.url)
    file = tmp_path / "runs.csv"
    file.write_bytes("Run;Length;Colour\r\nFaçade;3,5;grey\r\n".encode("cp1252"))
    page.get_by_test_id("open-paste").click()
    page.get_by_test_id("paste-file").set_input_files(file)
    expect(page.get_by_test_id("paste-read")).to_contain_text("3 columns understood")
    expect(page.get_by_test_id("paste-read")).to_contain_text("Façade")
    page.get_by_test_id("drop-paste").click()
    expect(page.get_by_test_id("pasting")).to_have_count(0)


def test_a_thousand_runs_in_forty_colours_stay_quick(tablet, site, tmp_path):
    page = opened(tablet, site.url)
    count = demo_answer()["run_count"]
    page.locator('[data-more="takeoff settings"]').click()
    shell.type_in(page, "/takeoff/colours", "")  # any colour goes
    rows = [
        f"Run {n};{5 + n % 7},5;{10 + n % 9};6;c{n % 40};Façade sealant, grey" for n in range(1000)
    ]
    file = tmp_path / "runs.csv"
    file.write_text("\n".join(["Run;Length;Width;Depth;Colour;Sealant", *rows]), "utf-8")
    page.get_by_test_id("open-paste").click()
    page.get_by_test_id("paste-file").set_input_files(file)
    expect(page.get_by_test_id("paste-read")).to_contain_text("1000 rows")
    page.get_by_test_id("take-pasted").click()
    # A second is what a quiet machine needs; the tests share theirs.
    expect(page.get_by_test_id("table-sums-colour").locator("tbody tr")).to_have_count(
        44, timeout=6_000
    )
    # So many rows come to the page a part at a time.
    part = page.locator("[data-testid^=row-run-]")
    shown = part.count()
    assert count < shown < 200
    page.get_by_role("button", name=re.compile("^Show 50 more")).click()
    expect(part).to_have_count(shown + 50)


def test_fill_down_and_undo(tablet, site):
    page = opened(tablet, site.url)
    count = demo_answer()["run_count"]
    before = [cell(page, index, "colour").input_value() for index in range(count)]
    assert len(set(before)) > 1
    cell(page, 2, "colour").click()
    page.get_by_test_id("fill-down").first.click()
    expect(cell(page, count - 1, "colour")).to_have_value(before[2])
    after = [cell(page, index, "colour").input_value() for index in range(count)]
    assert after == before[:3] + [before[2]] * (count - 3)
    page.get_by_test_id("undo").click()
    expect(cell(page, count - 1, "colour")).to_have_value(before[-1])
    assert [cell(page, index, "colour").input_value() for index in range(count)] == before
    # A field that stands only in the whole form goes down as well.
    page.get_by_test_id("open-run-0").click()
    page.get_by_test_id("fill-field").select_option("zone")
    page.get_by_test_id("fill-row").click()
    page.get_by_test_id(f"open-run-{count - 1}").click()
    expect(shell.line(page, f"{RUNS}/{count - 1}/zone")).to_have_value("North")


def test_duplicate_move_remove_and_enter(tablet, site):
    page = opened(tablet, site.url)
    count = demo_answer()["run_count"]
    cell(page, 0, "length").click()
    page.keyboard.press("Enter")
    expect(cell(page, 1, "length")).to_be_focused()
    page.get_by_test_id("duplicate").first.click()
    expect(page.locator("[data-testid^=row-run-]")).to_have_count(count + 1)
    expect(cell(page, 2, "name")).to_be_focused()
    expect(cell(page, 2, "name")).to_have_value("North panels, horizontals (copy)")
    page.get_by_test_id("open-run-2").click()
    page.get_by_role("button", name="Move up North panels, horizontals (copy)").click()
    expect(cell(page, 1, "name")).to_have_value("North panels, horizontals (copy)")
    page.get_by_role("button", name="Remove North panels, horizontals (copy)").click()
    expect(page.locator("[data-testid^=row-run-]")).to_have_count(count)
    page.get_by_test_id("notice-undo").click()
    expect(page.locator("[data-testid^=row-run-]")).to_have_count(count + 1)


def test_packages_and_rates_are_rows_too_and_a_price_changes_the_cost(tablet, site):
    page = opened(tablet, site.url)
    cost = figure(page, "cost")
    expect(cost).to_contain_text(demo_answer()["cost_text"])
    page.locator('[data-more="list /takeoff/packs"]').click()
    put(page, 0, "price", "99.99", "/takeoff/packs")
    expect(cost).not_to_contain_text(demo_answer()["cost_text"])
    page.get_by_test_id("undo").click()
    expect(cost).to_contain_text(demo_answer()["cost_text"])


def test_an_empty_take_off_offers_common_rows_to_edit(tablet, site):
    page = shell.home(tablet, site.url)
    shell.calculator_ready(page)
    page.get_by_test_id("new-metric").click()
    expect(page.locator("main[data-page=wall]")).to_be_visible()
    page.get_by_test_id("to-takeoff").click()
    expect(page.get_by_test_id("no-runs")).to_be_visible()
    page.locator('[data-more="list /takeoff/rates"]').click()
    page.get_by_test_id("start-rate").click()
    page.get_by_test_id("open-rate-0").click()
    expect(shell.line(page, "/takeoff/rates/0/basis")).to_have_value(
        re.compile("common practice, edit")
    )
    page.get_by_test_id("add-run").click()
    put(page, 0, "name", "Sill")
    put(page, 0, "length", "12")
    # No joint, no sealant: said at the row, not guessed.
    expect(page.get_by_test_id("row-run-0").get_by_test_id("message").first).to_be_visible()


def test_a_change_is_laid_beside_the_job(tablet, site):
    page = opened(tablet, site.url)
    page.locator('[data-more="takeoff compare"]').click()
    page.locator("#change-phases").select_option("one")
    page.get_by_test_id("compare-now").click()
    job = json.loads((ROOT / DEMO).read_text("utf-8"))
    for row in desk.compare_takeoff(job, {"one_phase": True})["table"]["rows"]:
        for text in row["cells"]:
            expect(page.get_by_test_id("table-compare")).to_contain_text(text)
    page.locator("#change-width").fill("2 apples")
    page.get_by_test_id("compare-now").click()
    expect(page.locator(".is-compare [role=alert]")).to_be_visible()
    # The job is as it was.
    expect(figure(page, "cost")).to_contain_text(demo_answer()["cost_text"])


def downloaded(page, kind):
    with page.expect_download() as waiting:
        page.get_by_test_id(f"export-{kind}").click()
    return waiting.value.suggested_filename, Path(waiting.value.path()).read_bytes()


def test_csv_and_workbook_are_made_offline_with_the_totals_on_screen(tablet, site):
    page = opened(tablet, site.url)
    expect(page.get_by_test_id("offline-state")).to_contain_text("offline", timeout=90_000)
    page.reload()
    expect(page.get_by_test_id("bars")).to_be_visible(timeout=shell.WORKING_LIMIT_MS)
    site.stop()
    tablet.set_offline(True)
    job = json.loads((ROOT / DEMO).read_text("utf-8"))
    answer = demo_answer()

    name, data = downloaded(page, "takeoff-csv")
    assert name.endswith(".csv")
    rows = list(csv.DictReader(io.StringIO(data.decode("utf-8-sig"), newline="")))
    total = rows[-1]
    assert total["Part"] == "total"
    expect(figure(page, "cost")).to_contain_text(f"{total['Cost']} {total['Currency']}")
    expect(figure(page, "sealant")).to_contain_text(f"{float(total['With waste [l]']):.1f} l")
    assert float(total["Length [m]"]) == pytest.approx(answer["length_m"])

    name, data = downloaded(page, "takeoff-xlsx")
    assert name.endswith(".xlsx")
    # The very workbook that the core makes outside the browser, which other tests recompute.
    assert members(data) == members(desk.export(job, "takeoff-xlsx")[2])


def members(data):
    with zipfile.ZipFile(io.BytesIO(data)) as book:
        return {name: book.read(name) for name in book.namelist()}


def unfolded(page):
    """Everything of the page that opens, open."""
    page.get_by_test_id("open-run-0").click()
    for name in (
        "list /takeoff/packs",
        "list /takeoff/extras",
        "list /takeoff/rates",
        "takeoff settings",
        "takeoff compare",
    ):
        page.locator(f'[data-more="{name}"]').click()
    page.locator("#change-sealant").select_option(index=1)
    page.get_by_test_id("compare-now").click()
    expect(page.get_by_test_id("table-compare")).to_be_visible()
    page.get_by_test_id("open-paste").click()
    page.locator("#paste-text").fill("Run;Length\nA;1,5\n")
    expect(page.get_by_test_id("paste-read")).to_be_visible()
    put(page, 1, "length", "-1")
    expect(page.get_by_test_id("row-run-1").get_by_test_id("message").first).to_be_visible()


@pytest.mark.parametrize("theme", THEMES)
def test_axe_finds_nothing(tablet, site, theme):
    page = opened(tablet, site.url, theme)
    unfolded(page)
    axe = AXE.read_text("utf-8")
    page.evaluate(f"() => {{ {axe} ; return true }}")
    result = page.evaluate(
        f"() => window.axe.run(document, {{resultTypes: ['violations'], runOnly: {RULES}}})"
    )
    assert {
        item["id"]: [node["target"] for node in item["nodes"]][:3] for item in result["violations"]
    } == {}


@pytest.mark.parametrize("width", WIDTHS)
def test_the_page_never_scrolls_sideways(make_context, site, width):
    page = opened(make_context(**WIDTHS[width]), site.url)
    unfolded(page)
    assert page.evaluate("document.documentElement.scrollWidth - innerWidth") <= 0


@pytest.mark.parametrize("size", [TABLET_LANDSCAPE, PHONE], ids=["tablet", "phone"])
def test_every_target_takes_a_finger_and_keeps_its_distance(make_context, site, size):
    page = opened(make_context(**size), site.url)
    unfolded(page)
    assert page.evaluate(SMALL, TAP_PX) == []
    close = page.evaluate(
        """gap => [...document.querySelectorAll('.row-line')].filter(line => {
             const boxes = [...line.querySelectorAll('.line, button')].map(el => el.getBoundingClientRect());
             return boxes.some((a, i) => boxes.slice(i + 1).some(b =>
               Math.max(Math.max(a.left - b.right, b.left - a.right), Math.max(a.top - b.bottom, b.top - a.bottom)) < gap - 0.6));
           }).length""",
        GAP_PX,
    )
    assert close == 0
