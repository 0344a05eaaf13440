"""The cure part through the door: what users get told, bad input, and the promises between answers."""

import copy
import json
import math
from datetime import datetime

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from beadwright import desk
from beadwright.physics import section_solve
from jobs import issues_at, make_job


def days(count=5, least="8 degC", most="16 degC", humidity="65 %", first=1, **more):
    return [{"id": f"w{index}", "day": f"2026-05-{first + index:02d}", "least": least, "most": most, "humidity": humidity} | more for index in range(count)]


def cure_job(run=None, weather=None, cure=None, joint=None, sealant=None, **more):
    job = make_job({"width": "20 mm", "neck": "10 mm"} | (joint or {}), sealant=sealant, **more)
    job["cure"] = {"zone": "Europe/Berlin", "sealed": [{"id": "r", "name": "Run", "joint": "j", "when": "2026-05-01 10:00"} | (run or {})], "weather": days() if weather is None else weather} | (cure or {})
    return job


def the_run(job):
    answer = desk.evaluate(copy.deepcopy(job))
    json.dumps(answer, allow_nan=False)
    return answer["cure"]["runs"]["r"]


def texts(value):
    """Every text of an answer."""
    if isinstance(value, str):
        yield value
    elif isinstance(value, dict):
        for part in value.values():
            yield from texts(part)
    elif isinstance(value, list):
        for part in value:
            yield from texts(part)


def test_nothing_is_done_for_an_empty_part():
    job = make_job()
    for empty in ({}, None):
        job["cure"] = empty
        assert desk.evaluate(job)["cure"] == {}
    assert b"VEVENT" not in desk.export(job, "calendar")[2]
    assert b"Nothing is entered" in desk.export(job, "cure-sheet")[2]


def test_it_is_short_unless_asked_for():
    job = cure_job()
    assert desk.evaluate(job, only=["j"])["cure"] == {"short": True}
    assert desk.evaluate(job, only=["cure"])["cure"]["runs"]["r"]["through_h"] > 0


def test_a_run_at_reference_climate_takes_the_published_days():
    """The worked hourglass: 24.66 d for k = 2.5, w 20, throat 10, hollow 2, crown 4."""
    job = cure_job(joint={"tool_sag": "2 mm", "rod_sag": "4 mm"}, weather=[], cure={"after": "reference"}, sealant={"cure_depth": "2.5 mm"})
    run = the_run(job)
    assert run["through_h"] / 24.0 == pytest.approx(24.66, rel=0.003)
    assert run["throat_h"] / 24.0 == pytest.approx(16.0, rel=1e-6)
    assert run["section"]["method"] == "section"
    assert abs(run["section"]["last_x_mm"]) == pytest.approx(10.0)
    assert {issue["code"] for issue in issues_at(job, "/cure/weather")} == {"no-weather"}


def test_stages_come_in_order_with_their_band():
    run = the_run(cure_job())
    hours = {stage["key"]: stage["hours"] for stage in run["stages"]}
    assert 0 < hours["skin"] < hours["tack"] < hours["wash"] <= hours["movement"] < hours["through"]
    assert hours["adhesion"] >= 14 * 24 and hours["immersion"] >= 7 * 24
    for stage in run["stages"]:
        assert stage["early_h"] <= stage["hours"] <= stage["late_h"]
        assert stage["source"] and stage["status"]
        datetime.strptime(stage["at"], "%Y-%m-%d %H:%M")


def test_a_silicone_is_not_painted():
    stages = {stage["key"]: stage for stage in the_run(cure_job())["stages"]}
    assert not stages["paint"]["applies"]
    assert "does not take paint" in stages["paint"]["text"]
    hybrid = {stage["key"]: stage for stage in the_run(cure_job(sealant={"family": "silyl-terminated", "class": "iso-25"}))["stages"]}
    assert hybrid["paint"]["applies"]


def test_without_numpy_the_throat_is_given_and_said(monkeypatch):
    def gone(*_):
        raise ImportError("numpy")

    for name in ("hourglass_reach", "hourglass_picture"):
        monkeypatch.setattr(section_solve, name, gone)
    job = cure_job(run={"name": "No numpy"})
    run = the_run(job)
    assert run["section"]["method"] == "throat"
    assert run["through_h"] == pytest.approx(run["throat_h"])
    assert any(note["key"] == "no-numpy" for note in run["notes"])
    assert any("numpy" in band["detail"] for band in run["answers"])
    assert not any(drawing["key"] == "section" for drawing in run["drawings"])


# ---- cut tests, data sheet, family ----


def test_a_cut_test_gives_back_the_rate_it_was_made_with():
    """3 mm after 48 h at 23 C and 50 %: k = 3 / sqrt 2, by hand."""
    cut = {"id": "c", "sealant": "s", "depth": "3 mm", "error": "0.3 mm", "time": "48 h", "air": "23 degC", "humidity": "50 %"}
    rate = the_run(cure_job(cure={"cuts": [cut]}, sealant={"cure_depth": "9 mm"}))["rate"]
    assert rate["k_mm"] == pytest.approx(3.0 / math.sqrt(2.0))
    assert 0.1 < rate["uncertainty_fraction"] < 0.2
    assert "cut test" in rate["source"]


def test_two_cut_tests_that_disagree_are_less_certain():
    cuts = [{"id": f"c{depth}", "sealant": "s", "depth": f"{depth} mm", "error": "0.1 mm", "time": "48 h", "air": "23 degC", "humidity": "50 %"} for depth in (3.0, 4.5)]
    one = the_run(cure_job(cure={"cuts": cuts[:1]}))["rate"]["uncertainty_fraction"]
    assert the_run(cure_job(cure={"cuts": cuts}))["rate"]["uncertainty_fraction"] > 2 * one


def test_the_data_sheet_wins_over_the_family():
    assert the_run(cure_job(sealant={"cure_depth": "3.3 mm"}))["rate"]["k_mm"] == pytest.approx(3.3)
    assert the_run(cure_job())["rate"]["k_mm"] == 2.2


# ---- faces ----


def test_a_second_face_is_never_slower_and_a_covered_one_never_cures():
    one = the_run(cure_job())["through_h"]
    for back in ("back", "sides", "both"):
        assert the_run(cure_job({"back": back}))["through_h"] <= one
    job = cure_job({"front": "covered"})
    run = the_run(job)
    assert run["through_h"] is None and run["stages"] == []
    (issue,) = issues_at(job, "/cure/sealed/0/front")
    assert issue["code"] == "no-path" and "moisture path" in issue["message"]
    assert the_run(cure_job({"front": "covered", "back": "back"}))["through_h"] > 0


def test_rod_and_materials_may_help_but_do_not_count():
    plain = the_run(cure_job(joint={"side_a": {"substrate": "aluminium"}, "side_b": {"substrate": "aluminium"}}))
    assert not any(band["key"] == "bonus" for band in plain["answers"])
    breathing = the_run(cure_job(joint={"rod": "open-cell"}))
    assert any(band["key"] == "bonus" and "back" in band["detail"] for band in breathing["answers"])


def test_a_fillet_is_its_own_section():
    """6 x 6 flat: 1.697 d at k 2.5 (scikit-fem)."""
    run = the_run(cure_job({"shape": "fillet", "leg_a": "6 mm", "leg_b": "6 mm"}, weather=[], sealant={"cure_depth": "2.5 mm"}))
    assert run["through_h"] / 24.0 == pytest.approx(1.697, rel=0.003)
    missing = cure_job({"shape": "fillet", "leg_a": "6 mm"})
    assert the_run(missing)["trouble"]["code"] == "no-legs"


@pytest.mark.parametrize("shape", [{}, {"shape": "fillet", "leg_a": "8 mm", "leg_b": "6 mm", "bulge": "1 mm"}, {"shape": "fillet", "leg_a": "8 mm", "leg_b": "8 mm"}, {"back": "sides"}, {"back": "both"}])
def test_every_drawing_is_plain_svg(shape):
    import xml.etree.ElementTree as ET

    answer = desk.evaluate(cure_job(shape))["cure"]
    svgs = [drawing["svg"] for drawing in answer["drawings"] + answer["runs"]["r"]["drawings"]]
    assert len(svgs) >= 2
    for svg in svgs:
        root = ET.fromstring(svg)
        names = {key for item in root.iter() for key in item.attrib}
        assert not names & {"style", "href", "onload"}
        assert {item.tag.rpartition("}")[2] for item in root.iter()} <= {"svg", "title", "path", "line", "text", "circle", "rect"}
        assert "nan" not in svg.lower() and "inf" not in svg.lower()


# ---- green movement and best hour ----


def test_green_movement_is_rate_times_swing():
    """Sealed at 15 h, the warmest: the joint opens by its rate times the day's swing, 10e-6 x 3 m x 2 sides x 8 K = 0.48 mm of 20."""
    run = the_run(cure_job({"when": "2026-05-01 15:00"}))
    assert run["green"]["opening_mm"] == pytest.approx(0.06 * 8.0, rel=0.03)
    assert run["green"]["share_fraction"] == pytest.approx(0.48 / 20.0, rel=0.03)
    assert run["green"]["pass"]


def test_a_wide_swing_on_a_narrow_joint_is_refused():
    hot = days(least="5 degC", most="25 degC", surface_most="60 degC", surface_least="5 degC")
    run = the_run(cure_job({"when": "2026-05-01 06:00"}, joint={"width": "8 mm", "neck": "6 mm"}, weather=hot))
    assert not run["green"]["pass"]
    assert next(band for band in run["answers"] if band["key"] == "green")["tone"] == "bad"
    best = run["best"]
    assert best is not None
    assert best["share_fraction"] <= min(hour["share_fraction"] for hour in run["hours"] if not hour["refused"]) + 1e-4


def test_the_best_hour_lies_in_working_time_and_in_no_rain():
    weather = [*days(2, rain=True), *days(2, first=3)]
    run = the_run(cure_job(weather=weather, cure={"work_from": "08:00", "work_to": "12:00"}))
    when = datetime.strptime(run["best"]["at"], "%Y-%m-%d %H:%M")
    assert when.day >= 3 and 8 <= when.hour < 12
    assert {hour["refused"] for hour in run["hours"] if hour["at"] < "2026-05-03"} == {"rain"}


def test_a_planned_run_takes_the_best_hour():
    run = the_run(cure_job({"when": ""}))
    assert run["is_planned"] and run["start"] == run["best"]["at"]
    assert b"VEVENT" not in desk.export(cure_job({"when": ""}), "calendar")[2]


def test_frost_and_cold_refuse_every_hour():
    run = the_run(cure_job(weather=days(least="-6 degC", most="-1 degC")))
    assert run["best"] is None
    assert {hour["refused"] for hour in run["hours"]} == {"frost"}
    assert any(note["key"] == "frost" for note in run["notes"])


# ---- two-part ----

TWO = {"id": "t", "sealant": "s", "warm": "23 degC", "warm_pot": "2 h", "warm_cure": "48 h", "cool": "10 degC", "cool_pot": "5 h", "cool_cure": "120 h"}


def two_part(figures=TWO, **more):
    return cure_job(sealant={"family": "polyurethane-2k", "class": "iso-25"}, cure={"two_part": [] if figures is None else [figures], **more.pop("cure", {})}, **more)


def test_two_part_goes_through_both_figures():
    for air, pot, through in (("23 degC", 2.0, 48.0), ("10 degC", 5.0, 120.0)):
        run = the_run(two_part(weather=days(least=air, most=air)))
        assert run["pot_h"] == pytest.approx(pot, rel=1e-6)
        assert run["through_h"] == pytest.approx(through, rel=1e-6)
        assert run["section"] is None


def test_two_part_does_not_mind_depth():
    assert the_run(two_part(joint={"neck": "30 mm", "width": "40 mm"}))["through_h"] == pytest.approx(the_run(two_part())["through_h"])


def test_one_figure_uses_the_rule_of_thumb_and_says_so():
    run = the_run(two_part({"id": "t", "sealant": "s", "warm": "23 degC", "warm_cure": "48 h"}, weather=days(least="13 degC", most="13 degC")))
    assert run["through_h"] == pytest.approx(96.0, rel=1e-6)
    assert any(note["key"] == "rule-of-thumb" for note in run["notes"])


def test_two_part_without_figures_asks_for_them():
    assert the_run(two_part(None))["trouble"]["code"] == "no-figures"
    job = two_part(TWO | {"cool_cure": "10 h"})
    assert {issue["code"] for issue in issues_at(job, "/cure/two_part/0/cool_cure")} == {"contradiction"}


# ---- bad input ----


def test_bad_figures_are_named_and_nothing_breaks():
    job = cure_job(weather=[{"id": "a", "day": "2026-05-01", "least": "8 degC", "most": "16 degC", "humidity": "130 %"}, {"id": "b", "day": "2026-05-02", "least": "20 degC", "most": "16 degC", "humidity": "50 %"}, {"id": "c", "day": "32 May", "least": "8 degC", "most": "16 degC", "humidity": "50 %"}, {"id": "d", "day": "2026-05-03", "least": "-40 degC", "most": "-30 degC", "humidity": "80 %"}])
    assert {issue["code"] for issue in issues_at(job, "/cure/weather/0/humidity")} == {"too-large"}
    assert {issue["code"] for issue in issues_at(job, "/cure/weather/1/least")} == {"contradiction"}
    assert {issue["code"] for issue in issues_at(job, "/cure/weather/2/day")} == {"not-a-day"}
    run = the_run(job)
    assert run["through_h"] is None
    assert any(note["key"] == "never" for note in run["notes"])
    assert next(band for band in run["answers"] if band["key"] == "through")["answer"] == "not within three years"


@pytest.mark.parametrize("when", ["yesterday", "2026-02-30 10:00", "2026-05-01", "1200-05-01 10:00", "2026-05-01 25:00"])
def test_a_bad_time_is_named(when):
    job = cure_job({"when": when})
    (issue,) = [issue for issue in issues_at(job, "/cure/sealed/0/when") if issue["severity"] == "error"]
    assert "2026-11-24 10:40" in issue["message"] or "calendar" in issue["message"] or "year" in issue["message"]


def test_the_skipped_and_the_doubled_hour_are_told():
    assert {issue["code"] for issue in issues_at(cure_job({"when": "2026-03-29 02:30"}), "/cure/sealed/0/when")} == {"skipped-time"}
    assert {issue["code"] for issue in issues_at(cure_job({"when": "2026-10-25 02:30"}), "/cure/sealed/0/when")} == {"doubled-time"}
    assert not issues_at(cure_job({"when": "2026-10-25 03:30"}), "/cure/sealed/0/when")


def test_an_unknown_zone_is_named():
    job = cure_job(cure={"zone": "Berlin"})
    assert {issue["code"] for issue in issues_at(job, "/cure/zone")} == {"not-a-zone"}
    assert the_run(job)["through_h"] > 0


def test_pasted_weather_is_read_line_by_line():
    pasted = "# day, low, high, humidity\n2026-05-01, 8, 16, 65\n2026-05-02; 8,5; 16; 65 %\n2026-05-03 10:40 12.5 60\nrubbish\n"
    job = cure_job(weather=[], cure={"pasted": pasted})
    answer = desk.evaluate(job)
    assert answer["cure"]["weather"]["rows"] == 3
    (issue,) = issues_at(job, "/cure/pasted")
    assert issue["code"] == "unread-line" and "line 5" in issue["message"]
    inch = cure_job(weather=[], cure={"pasted": "2026-05-01, 46.4, 60.8, 65"}, units="inch", site={"rod_series": "metric"})
    metric = cure_job(weather=[], cure={"pasted": "2026-05-01, 8, 16, 65"})
    assert the_run(inch)["through_h"] == pytest.approx(the_run(metric)["through_h"], rel=1e-9)


def test_pasted_and_typed_weather_agree():
    typed = cure_job(weather=days(3))
    pasted = cure_job(weather=[], cure={"pasted": "".join(f"2026-05-0{day}, 8, 16, 65\n" for day in (1, 2, 3))})
    assert the_run(pasted)["through_h"] == pytest.approx(the_run(typed)["through_h"], rel=1e-9)


junk = st.recursive(st.none() | st.booleans() | st.floats(allow_nan=False) | st.text(max_size=12) | st.sampled_from(["2026-05-01", "8 degC", "j", "s", "-40 degC", "130 %", "0 m"]), lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.sampled_from(["joint", "when", "day", "least", "most", "humidity", "sealant", "length", "width", "height", "air", "id", "packages"]), inner, max_size=6), max_leaves=12)


@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(cure=st.dictionaries(st.sampled_from(["sealed", "weather", "room", "cuts", "two_part", "zone", "model", "pasted", "uncertainty", "after", "work_from"]), junk, max_size=6))
def test_no_rubbish_raises(cure):
    job = cure_job()
    job["cure"] = cure
    answer = desk.evaluate(job)
    json.dumps(answer, allow_nan=False)
    desk.export(job, "calendar")
    desk.export(job, "cure-sheet")


@settings(max_examples=40, deadline=None)
@given(least=st.integers(-40, 40), swing=st.integers(0, 20), humidity=st.integers(0, 100), width=st.integers(6, 40), back=st.sampled_from(["none", "back", "sides", "both"]))
def test_no_text_ever_shows_nan(least, swing, humidity, width, back):
    job = cure_job({"back": back}, joint={"width": f"{width} mm"}, weather=days(2, least=f"{least} degC", most=f"{least + swing} degC", humidity=f"{humidity} %"))
    answer = desk.evaluate(job)
    json.dumps(answer, allow_nan=False)
    for text in texts(answer["cure"]):
        assert not any(word in text.split() for word in ("nan", "inf", "NaN", "None"))


@settings(max_examples=25, deadline=None)
@given(humidity=st.integers(10, 90), more=st.integers(1, 10), neck=st.integers(6, 14), deeper=st.integers(1, 6))
def test_more_humidity_or_a_shallower_bead_is_never_slower(humidity, more, neck, deeper):
    def hours(percent, depth):
        return the_run(cure_job(joint={"neck": f"{depth} mm"}, weather=days(2, humidity=f"{percent} %")))["through_h"]

    assert hours(humidity + more, neck) <= hours(humidity, neck) + 1e-6
    assert hours(humidity, neck) <= hours(humidity, neck + deeper) + 1e-6


def test_inch_job_answers_in_inches():
    shown = " ".join(texts(desk.evaluate(cure_job(units="inch"))["cure"]["runs"]["r"]["tables"]))
    assert " in" in shown and "°F" in shown


def test_the_record_keeps_what_was_written_and_warns():
    run = the_run(cure_job({"lot": "B-1", "crew": "Two", "expiry": "2026-04-30", "primer_at": "2026-05-01 09:50", "primer_least": "30 min", "surface": "12 degC", "air": "14 degC", "humidity": "85 %", "photos": "3, 4"}))
    record = {line["label"]: line["value"] for line in run["record"]}
    assert record["Lot"] == "B-1" and record["Sealed"].startswith("2026-05-01 10:00 CEST") and record["Photos"] == "3, 4"
    assert record["Primer waited"] == "10 min"
    # dew point of 14 C and 85 % by the Magnus formula, by hand: 11.5 C
    assert record["Dew point"] == "11.5 °C"
    assert {"expiry", "primer", "dew"} <= {note["key"] for note in run["notes"]}
    html = desk.export(cure_job({"lot": "<b>B</b>"}), "cure-sheet")[2].decode()
    assert "&lt;b&gt;B&lt;/b&gt;" in html and "<b>B</b>" not in html


def test_a_referred_joint_has_no_clock():
    job = cure_job(joint={"use": "fire"})
    assert the_run(job)["trouble"]["code"] == "referred"


def test_an_unchanged_part_is_not_reckoned_again(monkeypatch):
    from beadwright.sheet import cure_sheet

    job = cure_job({"name": "Kept"})
    desk.evaluate(job)
    monkeypatch.setattr(cure_sheet, "cure_part", lambda *_: pytest.fail("reckoned again"))
    desk.evaluate(job)


def test_the_demo_has_no_error_in_its_cure():
    from pathlib import Path

    job = json.loads((Path(__file__).parents[3] / "demo" / "harbour-hall.beadwright.json").read_text(encoding="utf-8"))
    answer = desk.evaluate(job)
    assert not [issue for issue in answer["issues"] if issue["path"].startswith("/cure")]
    assert len(answer["cure"]["runs"]) == 2 and answer["cure"]["room"]["trouble"] is None
