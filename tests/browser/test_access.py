"""The app for everybody: no finding of axe on any page in any theme, keyboard alone, glove-sized targets, no sideways scroll."""

from __future__ import annotations

import re
from itertools import pairwise
from pathlib import Path

import pytest
from playwright.sync_api import expect

from . import shell
from .conftest import PHONE, TABLET_LANDSCAPE, TABLET_PORTRAIT

pytestmark = pytest.mark.browser

WEB = Path(__file__).resolve().parents[2] / "web"
AXE = WEB / "node_modules" / "axe-core" / "axe.min.js"
THEMES = ("paper", "sun", "dark")
TAP_PX = 48
TAP_GLOVE_PX = 60
GAP_PX = 8
JOB = "#/job/demo-harbour-hall"
PAGES = {
    "jobs": "#/",
    "wall": JOB,
    "joint": f"{JOB}/joint/panel",
    "joint beyond": f"{JOB}/joint/metal",
    "joint referred": f"{JOB}/joint/fire",
    "face": f"{JOB}/joint/panel/face",
    "sheet": f"{JOB}/sheet/panel",
    "history": f"{JOB}/history",
    "kept": "#/kept",
    "help": "#/help",
}


def show(page, url, name):
    """Go to a page of the demo job and wait until it is whole."""
    page.goto(url + PAGES[name])
    expect(page.locator("h1")).to_be_visible()
    if name in ("joint", "face", "sheet"):
        expect(page.get_by_test_id("verdict").first).to_be_visible(timeout=shell.WORKING_LIMIT_MS)
    if name == "joint":
        expect(page.get_by_test_id("scrubber")).to_be_visible()


@pytest.mark.parametrize("theme", THEMES)
def test_axe_finds_nothing_on_any_page(tablet, site, theme):
    page = shell.demo(tablet, site.url, theme)
    # The policy of the page lets no foreign script in; the test's own is put into the page's world directly.
    axe = AXE.read_text("utf-8")
    found = {}
    for name in PAGES:
        show(page, site.url, name)
        page.evaluate(f"() => {{ {axe} ; return true }}")
        result = page.evaluate(
            "() => window.axe.run(document, {resultTypes: ['violations'], runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'wcag2aaa', 'best-practice']})"
        )
        for item in result["violations"]:
            found.setdefault(
                f"{name}: {item['id']}", [node["target"] for node in item["nodes"]][:3]
            )
    assert found == {}


@pytest.mark.parametrize("theme", THEMES)
def test_texts_have_seven_to_one_and_lines_three_to_one(theme):
    """Token pairs, computed from the style sheet by the formula of WCAG 2.2."""
    tokens = read_tokens(theme)

    def contrast(one, other):
        light, dark = sorted((luminance(tokens[one]), luminance(tokens[other])), reverse=True)
        return (light + 0.05) / (dark + 0.05)

    for ground in ("paper", "field", "solid"):
        for text in ("ink", "soft", "accent", "ok", "warn", "bad"):
            assert contrast(text, ground) >= 7, (
                theme,
                text,
                ground,
                round(contrast(text, ground), 2),
            )
        assert contrast("line", ground) >= 3, (theme, ground, round(contrast("line", ground), 2))
    assert contrast("on-accent", "accent") >= 7
    assert contrast("hatch", "solid") >= 3 or contrast("ink", "solid") >= 7
    assert contrast("bead", "paper") >= 3
    assert contrast("focus", "focus-ground") >= 3


def read_tokens(theme):
    css = (WEB / "src" / "styles" / "tokens.css").read_text("utf-8")
    plain = re.search(r":root \{(.*?)\}", css, re.S).group(1)
    own = (
        ""
        if theme == "paper"
        else re.search(rf':root\[data-theme="{theme}"\] \{{(.*?)\}}', css, re.S).group(1)
    )
    return dict(re.findall(r"--([\w-]+): (#[0-9a-f]{6});", plain + own))


def luminance(colour):
    channels = [int(colour[at : at + 2], 16) / 255 for at in (1, 3, 5)]
    red, green, blue = (
        c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4 for c in channels
    )
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue


def test_contrast_formula_gives_the_published_extremes():
    # Source: W3C, WCAG 2.2, definition of contrast ratio: 21:1 for black on white, 1:1 for equal colours.
    assert (luminance("#ffffff") + 0.05) / (luminance("#000000") + 0.05) == pytest.approx(21)


SMALL = """least => [...document.querySelectorAll('button, a.button, select, input, textarea, summary, .crumbs a, .row-link, .issue')]
  .filter(el => el.checkVisibility({visibilityProperty: true, opacityProperty: false}) && !el.closest('.hidden-word'))
  .map(el => {
    const target = el.matches('input[type=radio], input[type=checkbox], input[type=file]') ? el.closest('label, .tick') ?? el : el;
    const box = target.getBoundingClientRect();
    return {what: el.outerHTML.slice(0, 90), w: box.width, h: box.height};
  })
  .filter(box => box.w > 0 && (box.h < least - 0.5 || box.w < least - 0.5))"""


@pytest.mark.parametrize("size", [TABLET_LANDSCAPE, PHONE], ids=["tablet", "phone"])
def test_every_target_takes_a_finger(make_context, site, size):
    context = make_context(**size)
    page = shell.demo(context, site.url)
    for name in ("jobs", "wall", "joint", "face", "sheet", "kept", "history"):
        show(page, site.url, name)
        small = page.evaluate(SMALL, TAP_PX)
        assert small == [], (name, small[:5])
    page.goto(site.url + PAGES["wall"])
    page.get_by_test_id("arrange").click()
    assert page.evaluate(SMALL, TAP_PX) == []


def test_at_the_face_every_target_takes_a_glove(tablet, site):
    page = shell.demo(tablet, site.url)
    show(page, site.url, "face")
    small = page.evaluate(
        """least => [...document.querySelectorAll('.inputs .line, .inputs .chip, .inputs .radio')].map(el => el.getBoundingClientRect())
             .filter(box => box.height > 0 && (box.height < least - 0.5 || box.width < least - 0.5)).length""",
        TAP_GLOVE_PX,
    )
    assert small == 0
    # A verdict that is read at arm's length.
    assert (
        float(
            page.locator(".verdict-word").first.evaluate(
                "el => parseFloat(getComputedStyle(el).fontSize)"
            )
        )
        >= 36
    )


def test_neighbouring_targets_keep_their_distance(tablet, site):
    page = shell.demo(tablet, site.url)
    for name in ("jobs", "wall", "joint", "face"):
        show(page, site.url, name)
        close = page.evaluate(
            """gap => {
                 let found = 0;
                 for (const group of document.querySelectorAll('.actions, .control, .chips, .undo, .radios, .themes, .scrub-line')) {
                   const boxes = [...group.querySelectorAll('button, .button, .line, .radio, select, input')].filter(el => !el.closest('.radio, .picker') || el.matches('.radio, .picker')).map(el => el.getBoundingClientRect()).filter(b => b.width > 0);
                   boxes.forEach((a, i) => boxes.slice(i + 1).forEach(b => {
                     const x = Math.max(a.left - b.right, b.left - a.right), y = Math.max(a.top - b.bottom, b.top - a.bottom);
                     if (Math.max(x, y) < gap - 0.6) found += 1;
                   }));
                 }
                 return found;
               }""",
            GAP_PX,
        )
        assert close == 0, name


WIDTHS = {
    "tablet lying": TABLET_LANDSCAPE,
    "tablet standing": TABLET_PORTRAIT,
    "768 px": {**TABLET_PORTRAIT, "viewport": {"width": 768, "height": 1024}},
    "phone": PHONE,
    # 200 % zoom of a lying tablet leaves half of its pixels.
    "lying at 200 %": {**TABLET_LANDSCAPE, "viewport": {"width": 590, "height": 410}},
    "standing at 200 %": {**TABLET_LANDSCAPE, "viewport": {"width": 410, "height": 590}},
}


@pytest.mark.parametrize("width", WIDTHS)
def test_no_page_scrolls_sideways(make_context, site, width):
    context = make_context(**WIDTHS[width])
    page = shell.demo(context, site.url)
    for name in PAGES:
        show(page, site.url, name)
        over = page.evaluate("document.documentElement.scrollWidth - innerWidth")
        assert over <= 0, (name, over)


def test_the_section_is_the_largest_thing_on_its_page(tablet, site):
    page = shell.demo(tablet, site.url)
    show(page, site.url, "joint")
    area = "el => { const b = el.getBoundingClientRect(); return b.width * b.height }"
    drawing = page.get_by_test_id("drawing").evaluate(area)
    others = [
        part.evaluate(area)
        for part in page.locator(".verdict, .scrubber, .band, .issues, .joint-head, .field").all()
    ]
    assert drawing > max(others)
    # Verdict, section and scrubber stand together above the fold.
    bottom = page.get_by_test_id("scrubber").evaluate("el => el.getBoundingClientRect().bottom")
    assert bottom <= page.locator(".foot").evaluate("el => el.getBoundingClientRect().top")


def test_a_joint_is_sized_with_the_keyboard_alone(tablet, site):
    page = shell.demo(tablet, site.url)
    page.reload()
    expect(page.locator(".small-verdict").first).to_be_visible(timeout=shell.WORKING_LIMIT_MS)
    page.keyboard.press("Tab")
    expect(page.get_by_text("Skip to the page")).to_be_focused()
    page.keyboard.press("Enter")
    expect(page.locator("main")).to_be_focused()
    tab_to(page, lambda: page.evaluate("document.activeElement.className === 'row-link'"))
    page.keyboard.press("Enter")
    expect(page.locator("main[data-page=joint]")).to_be_visible()
    # The new page is read from its heading.
    expect(page.locator("h1")).to_be_focused()
    tab_to(page, lambda: page.evaluate("document.activeElement.dataset.testid === 'scrubber'"))
    before = page.get_by_test_id("frame-title").inner_text()
    page.keyboard.press("ArrowRight")
    expect(page.get_by_test_id("frame-title")).not_to_have_text(before)
    tab_to(page, lambda: page.evaluate("document.activeElement.id === 'field-joints-0-width'"))
    page.keyboard.press("Control+a")
    page.keyboard.type("6")
    page.keyboard.press("Enter")
    expect(shell.verdict(page)).to_have_attribute("data-verdict", "beyond")
    # The change of verdict is said aloud.
    expect(page.get_by_test_id("spoken")).to_contain_text("Beyond class")
    page.keyboard.press("Control+z")
    expect(shell.verdict(page)).not_to_have_attribute("data-verdict", "beyond")


def tab_to(page, is_there, most=120):
    for _ in range(most):
        page.keyboard.press("Tab")
        if is_there():
            assert page.evaluate(
                "getComputedStyle(document.activeElement).outlineStyle !== 'none'"
            ), "the focus does not show"
            return
    raise AssertionError("the keyboard does not get there")


def test_the_focus_is_never_hidden_by_head_or_foot(tablet, site):
    page = shell.demo(tablet, site.url)
    show(page, site.url, "joint")
    for _ in range(60):
        page.keyboard.press("Tab")
        hidden = page.evaluate(
            """() => {
                 const el = document.activeElement;
                 if (!el || el === document.body || el.closest('.head, .foot') || el.matches('.skip, .inputs, .table-wrap')) return null;
                 const box = el.getBoundingClientRect(), head = document.querySelector('.head').getBoundingClientRect(), foot = document.querySelector('.foot').getBoundingClientRect();
                 return box.bottom <= head.bottom || box.top >= foot.top ? el.outerHTML.slice(0, 120) : null;
               }"""
        )
        assert hidden is None


def test_landmarks_headings_language_and_live_region(tablet, site):
    page = shell.demo(tablet, site.url)
    assert page.get_attribute("html", "lang") == "en"
    for name in PAGES:
        show(page, site.url, name)
        assert page.locator("main").count() == 1 and page.locator("h1").count() == 1, name
        levels = [
            int(tag[1])
            for tag in page.locator("h1, h2, h3, h4").evaluate_all(
                "list => list.filter(el => el.checkVisibility()).map(el => el.tagName)"
            )
        ]
        assert levels[0] == 1, name
        assert all(after - before <= 1 for before, after in pairwise(levels)), (name, levels)
    expect(page.get_by_test_id("spoken")).to_have_attribute("aria-live", "polite")


def test_a_verdict_is_a_word_and_a_mark_and_a_line_never_colour_alone(tablet, site):
    page = shell.demo(tablet, site.url)
    looks = {}
    for joint in ("panel", "metal", "brick", "fire"):
        page.goto(f"{site.url}{JOB}/joint/{joint}")
        word = page.locator(".verdict-word").first
        expect(word).to_be_visible(timeout=shell.WORKING_LIMIT_MS)
        looks[word.locator("span").inner_text()] = word.evaluate(
            "el => getComputedStyle(el).borderBottomStyle + ' ' + (el.querySelector('path')?.getAttribute('d') ?? '')"
        )
    assert len(looks) >= 3 and len(set(looks.values())) == len(looks)


def test_reduced_motion_and_more_contrast_are_heeded(make_context, site):
    context = make_context(reduced_motion="reduce", contrast="more")
    page = shell.demo(context, site.url)
    assert page.evaluate(
        "getComputedStyle(document.documentElement).getPropertyValue('--soft').trim()"
    ) == page.evaluate(
        "getComputedStyle(document.documentElement).getPropertyValue('--ink').trim()"
    )
    assert (
        page.evaluate("getComputedStyle(document.querySelector('button')).transitionDuration")
        == "0s"
    )
