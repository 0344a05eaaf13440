"""Bad input at each kind of field: the message stands at the field, and what was typed stays."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
from playwright.sync_api import expect

from . import shell

pytestmark = pytest.mark.browser

SITE = "/site"
JOINT = "/joints/0"
SIDE = "/joints/0/side_a"

# page, pointer, section to unfold (or None), what is typed, what stays, words of the message
BAD = [
    ("joint", f"{JOINT}/width", None, "potato", "potato", "cannot be read"),
    ("joint", f"{JOINT}/width", None, "0 mm", "0 mm", "more than"),
    ("joint", f"{JOINT}/width", None, "900 mm", "900 mm", "or less"),
    ("joint", f"{JOINT}/width", None, "20 °C", "20 °C", "length"),
    ("joint", f"{JOINT}/width", None, "5/0", "5/0 mm", "divides by zero"),
    ("joint", f"{SIDE}/length", None, "1,500 m", "1,500 m", "can mean"),
    ("joint", f"{SIDE}/length", None, "-3 m", "-3 m", "more than"),
    ("joint", f"{SIDE}/absorption", "Temperature", "140 %", "140 %", "or less"),
    ("joint", f"{SIDE}/expansion", "Material data", "12 mm", "12 mm", "expansion"),
    ("joint", f"{SIDE}/summer_surface", "Temperature", "900 °C", "900 °C", "or less"),
    ("wall", f"{SITE}/summer_air", None, "warm", "warm", "temperature"),
    ("wall", f"{SITE}/winter_air", None, "900", "900 °C", "or less"),
    ("wall", f"{SITE}/dew_margin", None, "3 mm", "3 mm", "temperature difference"),
    ("wall", f"{SITE}/green_limit", None, "lots", "lots", "percentage"),
    ("wall", f"{SITE}/building_year", None, "old", "old", "number"),
    ("wall", "/title", None, "x" * 250, "x" * 250, "at most 200"),
]


@pytest.fixture
def wall(tablet, site):
    return shell.demo(tablet, site.url)


def go_to(page, where):
    if where == "joint":
        page.locator(".joints .row-link").first.click()
        expect(page.get_by_test_id("drawing")).to_be_visible()
    else:
        page.locator('[data-more="job block"]').click()


@pytest.mark.parametrize(
    ("where", "pointer", "section", "typed", "stays", "words"),
    BAD,
    ids=lambda value: str(value)[-24:],
)
def test_bad_input_is_told_at_its_field_and_stays_as_typed(
    wall, where, pointer, section, typed, stays, words
):
    go_to(wall, where)
    if section is not None:
        shell.unfold(wall, pointer.rsplit("/", 1)[0], section)
    target = shell.line(wall, pointer)
    target.fill(typed)
    target.blur()
    message = shell.field(wall, pointer).get_by_test_id("message").first
    expect(message).to_contain_text(words)
    expect(message).to_contain_text("Fix:")
    expect(target).to_have_value(stays)
    # Said to those who do not see it: marked invalid, and the message belongs to the control.
    expect(target).to_have_attribute("aria-invalid", "true")
    assert message.get_attribute("id") in target.get_attribute("aria-describedby").split()
    # The list at the top jumps to the field.
    entry = wall.get_by_test_id("issues").locator(f'[data-path="{pointer}"]').first
    entry.click()
    expect(target).to_be_focused()
    shell.saved(wall)


def test_bad_input_outlives_a_reload_with_its_message(wall):
    go_to(wall, "joint")
    shell.type_in(wall, f"{JOINT}/width", "potato")
    shell.saved(wall)
    wall.reload()
    expect(shell.line(wall, f"{JOINT}/width")).to_have_value("potato")
    expect(shell.field(wall, f"{JOINT}/width").get_by_test_id("message")).to_be_visible(
        timeout=shell.WORKING_LIMIT_MS
    )


def test_a_contradiction_is_named_at_the_field(wall):
    shell.type_in(wall, f"{SITE}/winter_air", "45")
    expect(
        shell.field(wall, f"{SITE}/winter_air")
        .get_by_test_id("message")
        .or_(shell.field(wall, f"{SITE}/summer_air").get_by_test_id("message"))
        .first
    ).to_be_visible()
    expect(shell.line(wall, f"{SITE}/winter_air")).to_have_value("45 °C")


def test_an_unusual_value_warns_and_is_used(wall):
    go_to(wall, "joint")
    shell.type_in(wall, f"{JOINT}/width", "90")
    message = shell.field(wall, f"{JOINT}/width").get_by_test_id("message")
    expect(message).to_contain_text("Check:")
    expect(shell.line(wall, f"{JOINT}/width")).not_to_have_attribute("aria-invalid", "true")
    expect(shell.verdict(wall)).not_to_have_attribute("data-verdict", "unknown")


def test_the_chip_gives_a_bare_number_its_unit_and_only_that(wall):
    go_to(wall, "joint")
    pointer = f"{JOINT}/width"
    chip = shell.field(wall, pointer).get_by_role("button", name="in", exact=True)
    target = shell.line(wall, pointer)
    target.fill("")
    target.blur()
    chip.click()
    shell.type_in(wall, pointer, "3/4")
    expect(target).to_have_value("3/4 in")
    expect(shell.field(wall, pointer).locator(".reads")).to_contain_text("19.1 mm")
    expect(chip).to_have_attribute("aria-pressed", "true")
    # The other chip stands in for the unit that is there; the number is left alone.
    shell.field(wall, pointer).get_by_role("button", name="mm", exact=True).click()
    expect(target).to_have_value("3/4 mm")
    # A unit that was typed is not touched.
    shell.type_in(wall, pointer, "1 1/4 in")
    expect(target).to_have_value("1 1/4 in")
    # The unit that stood there last is what a bare number takes next.
    shell.type_in(wall, pointer, "1")
    expect(target).to_have_value("1 in")


def test_while_typing_the_answer_already_counts_with_the_chip(wall):
    go_to(wall, "joint")
    pointer = f"{JOINT}/width"
    target = shell.line(wall, pointer)
    target.fill("22")
    expect(shell.field(wall, pointer).locator(".reads")).to_contain_text("0.866 in")
    expect(target).to_have_value("22")
    expect(shell.field(wall, pointer).get_by_test_id("message")).to_have_count(0)


def test_fields_come_and_go_with_the_choices_they_belong_to(wall):
    expect(shell.field(wall, f"{SITE}/irradiance")).to_have_count(0)
    shell.pick(wall, f"{SITE}/temperature_method", "sol-air")
    expect(shell.field(wall, f"{SITE}/irradiance")).to_be_visible()
    shell.pick(wall, f"{SITE}/temperature_method", "tabulated")
    expect(shell.field(wall, f"{SITE}/irradiance")).to_have_count(0)
    go_to(wall, "joint")
    expect(shell.field(wall, f"{SIDE}/length_along")).to_have_count(0)
    shell.field(wall, f"{JOINT}/kind").get_by_text("Butt with slip").click()
    expect(shell.field(wall, f"{SIDE}/length_along")).to_be_visible()
    finishes = shell.line(wall, f"{SIDE}/finish").locator("option").all_inner_texts()
    shell.pick(wall, f"{SIDE}/substrate", "aluminium")
    expect(shell.line(wall, f"{SIDE}/finish").locator("option").first).to_be_attached()
    assert shell.line(wall, f"{SIDE}/finish").locator("option").all_inner_texts() != finishes


def test_every_declared_field_is_drawn_with_its_label_help_control_and_unit(wall, dist):
    """All kinds that the core declares have a widget, and the parts stand in their order."""
    forms = json.loads((dist / "forms.json").read_text("utf-8"))
    go_to(wall, "joint")
    wall.get_by_test_id("add-cause").click()
    shut = wall.locator(".inputs .disclose[aria-expanded=false]")
    while shut.count() > 0:
        shut.first.click()
    groups = {group["key"]: group for group in forms["groups"]}
    for key, base in (("joint", JOINT), ("side", SIDE), ("cause", f"{JOINT}/causes/0")):
        shown = 0
        for spec in groups[key]["fields"]:
            found = shell.field(wall, f"{base}/{spec['key']}")
            if found.count() == 0:
                assert spec["show_when"], f"{key}.{spec['key']} is not drawn"
                continue
            shown += 1
            expect(found.locator(".field-label")).to_contain_text(spec["label"])
            order = found.evaluate(
                "field => [...field.children].map(child => child.className.split(' ')[0])"
            )
            assert [
                name for name in ("field-label", "help", "control", "message") if name in order
            ] == list(dict.fromkeys(order))
            units = spec["units"]["metric"]
            if units:
                offered = found.locator(".chip, .unit-list option, .unit").all_inner_texts()
                assert [text.strip() for text in offered] == units
        assert shown >= 5, key


def test_an_unknown_kind_of_field_is_a_fault_and_not_a_guess():
    source = (Path(__file__).resolve().parents[2] / "web" / "src" / "ui" / "widgets.ts").read_text(
        "utf-8"
    )
    kinds = set(re.findall(r"^  (\w+): \w+Widget,$", source, re.M))
    from beadwright import desk

    declared = {spec["kind"] for group in desk.forms()["groups"] for spec in group["fields"]}
    assert declared <= kinds
    assert "throw new Error" in source.split("export function widgetFor")[1].split("}")[0] + "}"


def test_the_shell_holds_no_knowledge_of_the_trade():
    """No unit factor, no formula, no trade table: it all comes from the core."""
    web = Path(__file__).resolve().parents[2] / "web" / "src"
    factor = re.compile(r"\b(25\.4|304\.8|0\.3048|459\.67|273\.15|9\s*/\s*5|5\s*/\s*9|1\.8)\b")
    trade = re.compile(
        r"silicone|polyurethane|polysulfide|C920|11600|concrete|aluminium|movement class \d|dew point",
        re.IGNORECASE,
    )
    for path in [*web.glob("app/**/*.ts"), *web.glob("ui/**/*.ts")]:
        text = path.read_text("utf-8")
        assert not factor.search(text), f"{path.name}: {factor.search(text)}"
        assert not trade.search(text), f"{path.name}: {trade.search(text)}"
