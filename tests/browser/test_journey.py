"""The whole journey by hand, in both unit systems, at tablet size: size a joint, read why, print."""

from __future__ import annotations

import re
from dataclasses import dataclass

import pytest
from playwright.sync_api import expect

from . import shell

pytestmark = pytest.mark.browser


@dataclass(frozen=True)
class Journey:
    """What one person types, and what must stand there afterwards."""

    start: str
    summer: str
    winter: str
    length: str
    length_reads: str
    narrow: str
    narrow_kept: str
    narrow_reads: str
    wide: str
    face_width: str
    face_surface: str
    face_air: str


JOURNEYS = {
    "metric": Journey(
        "new-metric",
        "32",
        "-14",
        "4,8 m",
        "15 ft 9 in",
        "6",
        "6 mm",
        "0.236 in",
        "24",
        "24",
        "12",
        "11",
    ),
    "inch": Journey(
        "new-inch",
        "90",
        "7",
        "12' 6 1/2\"",
        "3.823 m",
        "5/16",
        "5/16 in",
        "7.9 mm",
        "1 1/4",
        "1 1/4",
        "54",
        "52",
    ),
}


@pytest.mark.parametrize("system", JOURNEYS)
def test_a_joint_is_sized_read_checked_at_the_face_and_printed(tablet, site, system):
    journey = JOURNEYS[system]
    page = shell.home(tablet, site.url)
    page.get_by_test_id(journey.start).click()
    expect(page.locator("main[data-page=wall]")).to_be_visible()

    shell.type_in(page, "/title", "Stair tower")
    page.get_by_test_id("add-sealant").click()
    shell.type_in(page, "/sealants/0/name", "Grey, one part")
    shell.pick(page, "/sealants/0/family", "polyurethane-1k")
    shell.pick(page, "/sealants/0/class", "c920-50")
    shell.type_in(page, "/site/summer_air", journey.summer)
    shell.type_in(page, "/site/winter_air", journey.winter)

    page.get_by_test_id("add-joint").click()
    expect(page.locator("main[data-page=joint]")).to_be_visible()
    shell.pick(page, "/joints/0/side_a/substrate", "concrete-precast")
    shell.type_in(page, "/joints/0/side_a/length", journey.length)
    expect(shell.field(page, "/joints/0/side_a/length").locator(".reads")).to_contain_text(
        journey.length_reads
    )
    page.get_by_test_id("same-sides").click()
    expect(shell.line(page, "/joints/0/side_b/length")).to_have_value(journey.length)

    # Without a width the app says one.
    expect(shell.verdict(page)).to_contain_text("Sized")
    expect(page.get_by_test_id("answer-width")).to_contain_text("How wide")

    # Too narrow: the word comes first, with its reason; the bare number took the unit of the chip.
    shell.type_in(page, "/joints/0/width", journey.narrow)
    expect(shell.line(page, "/joints/0/width")).to_have_value(journey.narrow_kept)
    expect(shell.field(page, "/joints/0/width").locator(".reads")).to_contain_text(
        journey.narrow_reads
    )
    expect(shell.verdict(page)).to_have_attribute("data-verdict", "beyond")
    expect(shell.verdict(page).locator("svg.mark")).to_be_visible()

    shell.type_in(page, "/joints/0/width", journey.wide)
    expect(shell.verdict(page)).to_have_attribute("data-verdict", "within")
    for question in ("width", "depth", "rod"):
        expect(page.get_by_test_id(f"answer-{question}")).to_be_visible()

    # The section moves with the temperature: colder opens it, hotter closes it.
    scrubber = page.get_by_test_id("scrubber")
    scrubber.focus()
    page.keyboard.press("Home")
    coldest, open_width = page.get_by_test_id("frame-title").inner_text(), shell.drawn_width(page)
    page.keyboard.press("End")
    expect(page.get_by_test_id("frame-title")).not_to_have_text(coldest)
    assert shell.drawn_width(page) < open_width
    assert scrubber.get_attribute("aria-valuetext").startswith(
        page.get_by_test_id("frame-title").inner_text()
    )

    # At the face.
    page.get_by_test_id("to-face").click()
    expect(shell.verdict(page)).to_contain_text("Not measured yet")
    base = "/joints/0/face"
    shell.type_in(page, f"{base}/width", journey.face_width)
    shell.type_in(page, f"{base}/surface", journey.face_surface)
    shell.type_in(page, f"{base}/air", journey.face_air)
    shell.type_in(page, f"{base}/humidity", "50")
    # Nothing counts as dry until someone says so.
    expect(shell.verdict(page)).to_contain_text("whether the bond faces are dry")
    shell.field(page, f"{base}/wetness").get_by_text("Dry", exact=True).click()
    expect(shell.verdict(page)).to_have_attribute("data-verdict", "seal")
    expect(page.get_by_test_id("checks").get_by_role("listitem").first).to_be_visible()
    page.locator(f'[data-pointer="{base}/wetness"]').get_by_text("Wet", exact=True).click()
    expect(shell.verdict(page)).to_have_attribute("data-verdict", re.compile("wait|stop"))

    # The sheet prints the working, whole.
    shell.saved(page)
    page.get_by_role("link", name="Sheet", exact=True).click()
    expect(page.get_by_test_id("sheet")).to_contain_text("Stair tower")
    steps = page.locator(".joint-sheet .step")
    expect(steps.first).to_be_visible()
    assert steps.count() > 10
    assert all(text.strip() for text in steps.locator(".step-source").all_inner_texts()), (
        "a step without a source"
    )
    page.emulate_media(media="print")
    expect(page.locator(".head")).to_be_hidden()
    expect(page.get_by_text("Prepared", exact=True)).to_be_visible()
    expect(page.locator(".joint-sheet .title-strip")).to_be_visible()
    page.emulate_media(media="screen")

    # A reload keeps everything as it was typed.
    page.reload()
    page.get_by_role("link", name="Wall", exact=True).click()
    row = page.locator("[data-testid^=joint-row-]")
    expect(row).to_have_count(1)
    expect(row.locator(".small-verdict")).to_contain_text("Within class")
    row.get_by_role("link").click()
    expect(shell.line(page, "/joints/0/side_a/length")).to_have_value(journey.length)
    expect(shell.verdict(page)).to_have_attribute("data-verdict", "within")


def test_undo_goes_back_through_every_step_and_outlives_a_reload(tablet, site):
    page = shell.home(tablet, site.url)
    page.get_by_test_id("new-metric").click()
    steps = 55
    shell.line(page, "/title").wait_for()
    for number in range(1, steps + 1):
        shell.line(page, "/title").fill(f"Title {number}")
        shell.line(page, "/title").press("Enter")
    shell.saved(page)
    page.reload()
    undo, redo = page.get_by_test_id("undo"), page.get_by_test_id("redo")
    for _ in range(steps):
        undo.click()
    expect(page.get_by_role("heading", level=1)).to_have_text("Untitled job")
    for _ in range(steps):
        page.keyboard.press("Control+y")
    expect(page.get_by_role("heading", level=1)).to_have_text(f"Title {steps}")
    expect(redo).to_be_disabled()
    page.keyboard.press("Control+z")
    expect(page.get_by_role("heading", level=1)).to_have_text(f"Title {steps - 1}")


def test_joints_are_copied_moved_removed_and_brought_back(tablet, site):
    page = shell.demo(tablet, site.url)
    names = page.locator(".joints .row-name")
    before = names.all_inner_texts()
    page.get_by_test_id("arrange").click()
    page.get_by_role("button", name=f"Move down {before[0]}").click()
    expect(names.nth(1)).to_have_text(before[0])
    page.get_by_role("button", name=f"Make a copy of {before[1]}").click()
    expect(names).to_have_count(len(before) + 1)
    expect(names.nth(1)).to_have_text(f"{before[1]} (copy)")
    page.get_by_role("button", name=f"Remove {before[2]}", exact=True).click()
    expect(names).to_have_count(len(before))
    page.get_by_test_id("notice-undo").click()
    expect(names).to_have_count(len(before) + 1)
    page.get_by_test_id("undo").click()
    page.get_by_test_id("undo").click()
    expect(names).to_have_text(before)
    shell.saved(page)


def test_the_page_is_of_use_before_the_calculator_is_ready(make_context, site):
    from server import Reply

    context = make_context()
    page = shell.demo(context, site.url)
    page.close()
    # The wasm never comes: jobs can still be read and typed into, and the page says what it waits for.
    site.intercept = lambda path: (
        Reply(status=503)
        if path.endswith((".wasm", ".bin.gz", ".snapshot.gz"))
        or "/py/" in path
        or "snapshot/" in path
        else None
    )
    late = make_context()
    page = late.new_page()
    page.goto(site.url + "#/demo/harbour-hall")
    expect(page.get_by_role("heading", name="Harbour Hall", exact=False)).to_be_visible()
    page.locator(".joints .row-link").first.click()
    shell.type_in(page, "/joints/0/width", "18")
    expect(shell.line(page, "/joints/0/width")).to_have_value("18 mm")
    shell.saved(page)
    expect(page.get_by_test_id("core-state")).not_to_have_attribute("data-phase", "ready")
    expect(page.locator(".sheet .waiting").first).to_contain_text(
        re.compile("Working starts when ready|Stopped")
    )


def test_two_windows_one_writes_and_the_other_takes_over(tablet, site):
    first = shell.demo(tablet, site.url)
    second = tablet.new_page()
    second.goto(first.url)
    expect(second.get_by_test_id("banner-read-only")).to_be_visible()
    second.locator(".joints .row-link").first.click()
    expect(shell.line(second, "/joints/0/name")).to_have_attribute("readonly", "")
    second.get_by_test_id("take-over").click()
    expect(second.get_by_test_id("banner-read-only")).to_have_count(0)
    shell.type_in(second, "/joints/0/name", "Renamed here")
    shell.saved(second)
    expect(first.get_by_test_id("banner-read-only")).to_be_visible()


def test_a_file_is_looked_at_before_it_changes_anything(tablet, site, tmp_path):
    import json

    page = shell.demo(tablet, site.url)
    with page.expect_download() as waiting:
        page.get_by_test_id("export-job").click()
    path = tmp_path / waiting.value.suggested_filename
    waiting.value.save_as(path)
    job = json.loads(path.read_text("utf-8"))
    assert job["format"] == "beadwright-job"
    job["joints"][0]["width"] = "21 mm"
    job["of_a_later_version"] = {"kept": True}
    path.write_text(json.dumps(job), "utf-8")

    page.get_by_role("link", name="Beadwright").click()
    page.get_by_test_id("open-file").set_input_files(path)
    changes = page.get_by_test_id("import-changes")
    expect(changes).to_contain_text("21 mm")
    expect(changes.locator("tbody tr")).to_have_count(2)
    page.get_by_test_id("import-replace").click()
    expect(page.locator("main[data-page=wall]")).to_be_visible()
    page.locator(".joints .row-link").first.click()
    expect(shell.line(page, "/joints/0/width")).to_have_value("21 mm")
    page.get_by_test_id("undo").click()
    expect(shell.line(page, "/joints/0/width")).not_to_have_value("21 mm")


@pytest.mark.parametrize(
    ("content", "message"),
    [
        (b"", "empty"),
        (b'{"format":"beadwright-job","version":1,"joints":[', "cut off or damaged"),
        (b"PK\x03\x04 \xff\xfe", "not UTF-8"),
        (b'{"hello": 1}', "not a Beadwright job"),
    ],
    ids=["empty", "truncated", "not text", "foreign"],
)
def test_a_bad_file_gets_a_plain_answer_and_changes_nothing(
    tablet, site, tmp_path, content, message
):
    page = shell.home(tablet, site.url)
    path = tmp_path / "strange.json"
    path.write_bytes(content)
    page.get_by_test_id("open-file").set_input_files(path)
    expect(page.get_by_test_id("import")).to_contain_text(message, timeout=shell.WORKING_LIMIT_MS)
    page.get_by_test_id("import-cancel").click()
    expect(page.get_by_test_id("no-jobs")).to_be_visible()


def test_a_newer_file_is_read_only_and_passed_on_as_it_came(tablet, site, tmp_path):
    page = shell.home(tablet, site.url)
    path = tmp_path / "newer.beadwright.json"
    raw = b'{"format":"beadwright-job","version":99,"id":"n","title":"From next year","units":"metric","joints":[],"brand_new":[1,2]}'
    path.write_bytes(raw)
    page.get_by_test_id("open-file").set_input_files(path)
    expect(page.get_by_test_id("import")).to_contain_text("newer", timeout=shell.WORKING_LIMIT_MS)
    with page.expect_download() as waiting:
        page.get_by_role("button", name="Save the file as it came").click()
    waiting.value.save_as(tmp_path / "out.json")
    assert (tmp_path / "out.json").read_bytes() == raw
    page.get_by_role("button", name="Look at it").click()
    expect(page.get_by_test_id("banner-read-only")).to_be_visible()
    expect(page.get_by_test_id("add-joint")).to_have_count(0)


def test_text_of_a_job_is_never_markup(tablet, site, tmp_path):
    page = shell.home(tablet, site.url)
    path = tmp_path / "markup.beadwright.json"
    nasty = "<img src=x onerror=document.title='owned'><script>document.title='owned'</script>"
    path.write_text(
        __import__("json").dumps({
            "format": "beadwright-job", "version": 1, "id": "m", "title": nasty, "units": "metric", "site": {"summer_air": "30 °C", "winter_air": "-10 °C"},
            "sealants": [{"id": "s", "name": nasty, "family": "polyurethane-1k", "class": "c920-25"}],
            "joints": [{"id": "j", "name": nasty, "kind": "butt", "use": "weather", "sealant": "s", "width": "20 mm",
                        "side_a": {"substrate": "concrete-precast", "length": "3 m"}, "side_b": {"substrate": "concrete-precast", "length": "3 m"}, "note": nasty}],
        }),
        "utf-8",
    )  # fmt: skip
    page.get_by_test_id("open-file").set_input_files(path)
    page.get_by_test_id("import-new").click(timeout=shell.WORKING_LIMIT_MS)
    page.locator(".joints .row-link").click()
    expect(page.get_by_role("heading", level=1)).to_have_text(nasty)
    expect(page.get_by_test_id("drawing").locator("svg")).to_be_visible()
    page.get_by_role("link", name="Sheet", exact=True).click()
    expect(page.locator(".joint-sheet")).to_be_visible()
    assert page.locator("#app img, #app script").count() == 0
    assert "owned" not in page.title()[:6]
    assert tablet.requests.page_errors == []


def test_a_full_journey_breaks_no_policy(tablet, site):
    page = shell.demo(tablet, site.url)
    for name in page.locator(".joints .row-name").all_inner_texts()[:3]:
        page.get_by_role("link", name="Wall", exact=True).click()
        page.locator(".joints .row-link", has_text=name).click()
        expect(page.get_by_test_id("drawing").locator("svg")).to_be_visible()
    page.get_by_test_id("to-face").click()
    page.get_by_role("link", name="Sheet", exact=True).click()
    expect(page.locator(".joint-sheet").first).to_be_visible()
    assert tablet.requests.page_errors == []
    assert [
        text for text in tablet.requests.console_errors if "Content Security Policy" in text
    ] == []


# A page that is killed hears nothing beforehand: no event that it could save at.
DEAF_TO_ITS_END = """const add = EventTarget.prototype.addEventListener;
EventTarget.prototype.addEventListener = function (type, ...rest) {
  if (!['visibilitychange', 'pagehide', 'freeze', 'beforeunload'].includes(type)) add.call(this, type, ...rest);
};"""


def test_what_was_typed_when_the_page_died_is_offered_back(make_context, site):
    tablet = make_context()
    tablet.add_init_script(DEAF_TO_ITS_END)
    page = shell.demo(tablet, site.url)
    page.locator(".joints .row-link").first.click()
    target = shell.line(page, "/joints/0/place")
    target.fill("Typed, never left")
    expect(page.get_by_test_id("save-state")).to_contain_text("Draft kept")
    address = page.url
    page.close()
    again = tablet.new_page()
    again.goto(address)
    banner = again.get_by_test_id("banner-draft")
    expect(banner).to_be_visible()
    expect(shell.line(again, "/joints/0/place")).not_to_have_value("Typed, never left")
    again.get_by_test_id("restore-draft").click()
    expect(shell.line(again, "/joints/0/place")).to_have_value("Typed, never left")
    expect(banner).to_have_count(0)
    shell.saved(again)


def test_the_last_good_answer_stays_and_says_that_it_is_old(tablet, site):
    page = shell.demo(tablet, site.url)
    page.locator(".joints .row-link").first.click()
    expect(shell.verdict(page)).to_have_attribute("data-verdict", "within")
    page.workers[0].evaluate("self.close()")  # the worker dies without a word
    shell.type_in(page, "/joints/0/width", "5")
    expect(page.get_by_test_id("stale").first).to_be_visible()
    expect(shell.verdict(page)).to_have_attribute("data-verdict", "within")
    expect(shell.line(page, "/joints/0/width")).to_have_value("5 mm")
    # Restarted and asked again, without a hand's turn.
    expect(shell.verdict(page)).to_have_attribute("data-verdict", "beyond", timeout=60_000)
    expect(page.get_by_test_id("stale")).to_have_count(0)


def test_every_export_comes_out(tablet, site, tmp_path):
    page = shell.demo(tablet, site.url)
    page.get_by_role("link", name="Sheet", exact=True).click()
    expect(page.locator(".joint-sheet").first).to_be_visible()
    for kind, sign in (
        ("job", b"beadwright-job"),
        ("sheet", b"<!doctype html>"),
        ("text", b"Harbour Hall"),
        ("schedule", b"Precast panel to panel"),
    ):
        with page.expect_download() as waiting:
            page.get_by_test_id(f"export-{kind}").click()
        path = tmp_path / waiting.value.suggested_filename
        waiting.value.save_as(path)
        assert sign.lower() in path.read_bytes().lower(), kind


def test_bin_backup_and_restore(tablet, site, tmp_path):
    page = shell.demo(tablet, site.url)
    page.get_by_role("link", name="Beadwright").click()
    row = page.get_by_test_id("job-row-demo-harbour-hall")
    with page.expect_download() as waiting:
        page.get_by_test_id("backup").click()
    backup = tmp_path / "all.json"
    waiting.value.save_as(backup)
    row.get_by_role("button", name="To the bin").click()
    row.get_by_role("button", name="Yes, to the bin").click()
    expect(row).to_have_count(0)
    page.goto(site.url + "#/kept")
    page.get_by_role("button", name="Put back").click()
    expect(page.get_by_text("The bin is empty.")).to_be_visible()
    page.goto(site.url + "#/")
    row.get_by_role("button", name="To the bin").click()
    row.get_by_role("button", name="Yes, to the bin").click()
    expect(row).to_have_count(0)
    page.goto(site.url + "#/kept")
    page.get_by_role("button", name="Empty the bin").click()
    page.get_by_role("button", name="Yes, delete 1 job for good").click()
    expect(page.get_by_text("The bin is empty.")).to_be_visible()
    page.goto(site.url + "#/")
    expect(page.get_by_test_id("no-jobs")).to_be_visible()
    page.get_by_test_id("restore").set_input_files(backup)
    expect(row).to_be_visible()
    row.get_by_role("link").click()
    expect(page.locator(".joints .row-name").first).to_have_text("Precast panel to panel")

    # A job that has gone on since is never put over unasked.
    page.locator('[data-more="job block"]').click()
    shell.type_in(page, "/title", "Gone on since")
    shell.saved(page)
    page.goto(site.url + "#/")
    page.get_by_test_id("restore").set_input_files(backup)
    expect(page.get_by_test_id("banner-clash")).to_contain_text("on this tablet too")
    page.get_by_test_id("clash-keep").click()
    expect(row).to_contain_text("Gone on since")
    page.get_by_test_id("restore").set_input_files(backup)
    page.get_by_test_id("clash-both").click()
    expect(page.locator("[data-testid^=job-row-]")).to_have_count(2)


def test_a_file_can_be_dropped_on_the_list(tablet, site):
    page = shell.home(tablet, site.url)
    page.evaluate(
        """() => {
             const data = new DataTransfer();
             data.items.add(new File(['{"format":"beadwright-job","version":1,"id":"d","title":"Dropped","units":"inch","joints":[]}'], 'dropped.beadwright.json', {type: 'application/json'}));
             document.querySelector('main .page').dispatchEvent(new DragEvent('drop', {dataTransfer: data, bubbles: true, cancelable: true}));
           }"""
    )
    expect(page.get_by_role("heading", name="Dropped")).to_be_visible(timeout=shell.WORKING_LIMIT_MS)
    page.get_by_test_id("import-new").click()
    expect(page.locator("main[data-page=wall] h1")).to_have_text("Dropped")


def test_an_earlier_copy_is_brought_back_as_a_new_step(tablet, site):
    page = shell.demo(tablet, site.url)
    page.locator('[data-more="job block"]').click()
    shell.type_in(page, "/title", "Second title")
    shell.saved(page)
    page.get_by_role("link", name="Earlier copies").click()
    page.get_by_test_id("revision-1").get_by_role("button", name="Bring back").click()
    expect(page.get_by_role("heading", level=1)).to_have_text("Harbour Hall (invented example)")
    page.get_by_test_id("undo").click()
    expect(page.get_by_role("heading", level=1)).to_have_text("Second title")


def test_photos_stay_with_their_joint_and_come_back_by_undo(tablet, site, tmp_path):
    page = shell.demo(tablet, site.url)
    page.locator(".joints .row-link").first.click()
    picture = page.evaluate(
        """async () => {
             const canvas = new OffscreenCanvas(2400, 1600);
             const pen = canvas.getContext('2d');
             pen.fillRect(0, 0, 1200, 1600);
             const blob = await canvas.convertToBlob({type: 'image/png'});
             return [...new Uint8Array(await blob.arrayBuffer())];
           }"""
    )
    path = tmp_path / "bead.png"
    path.write_bytes(bytes(picture))
    page.get_by_test_id("add-photo").set_input_files(path)
    photo = page.get_by_test_id("photo")
    expect(photo.locator("img")).to_be_visible()
    size = photo.locator("img").evaluate("img => [img.naturalWidth, img.naturalHeight]")
    assert size[0] <= 1600 and abs(size[0] / size[1] - 1.5) < 0.01
    shell.saved(page)
    page.reload()
    expect(photo.locator("img")).to_be_visible()
    photo.get_by_role("button", name="Take off photo 1").click()
    expect(photo).to_have_count(0)
    page.get_by_test_id("undo").click()
    expect(photo.locator("img")).to_be_visible()
