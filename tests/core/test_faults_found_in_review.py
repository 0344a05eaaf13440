"""Faults of judgement and wording that were once in the answers, each held by a test of its name."""

import pytest

from beadwright import desk
from jobs import make_job, only_joint

NO_TOLERANCE = {"fabrication_tolerance": None, "erection_tolerance": None, "spacing_tolerance": None}


def band(joint, key):
    return next(item for item in joint["answers"] if item["key"] == key)


@pytest.mark.parametrize("site", [{"fabrication_tolerance": "abc"}, {"closed_gap": "999 mm"}, {"night_sky": "cold"}, {"convention": "other"}, {"depth_rule": "mine"}, {"increment": "fine"}, {"seal_from": "30 degC", "seal_to": "5 degC"}])
def test_an_unreadable_setting_of_the_site_once_counted_as_nothing(site):
    joint = desk.evaluate(make_job({"width": "20 mm"} | NO_TOLERANCE, site=site))["joints"]["j"]
    assert joint["verdict"] == "unknown" and "site" in joint["verdict_text"]


@pytest.mark.parametrize("sealant", [{"width_least": "x"}, {"own_total": "x"}, {"apply_from": "x"}])
def test_an_unreadable_figure_of_the_data_sheet_once_fell_back_to_the_family(sealant):
    joint = desk.evaluate(make_job({"width": "20 mm"}, sealant=sealant))["joints"]["j"]
    assert joint["verdict"] == "unknown" and "sealant" in joint["verdict_text"]


@pytest.mark.parametrize(("site", "check"), [({"dew_margin": "x"}, "dew"), ({"green_limit": "x"}, "green")])
def test_an_unreadable_limit_leaves_its_gate_at_the_face_untold(site, check):
    face = {"width": "20 mm", "surface": "15 degC", "air": "15 degC", "humidity": "50 %", "day_swing": "5 K"}
    answer = desk.evaluate(make_job({"face": face}, site=site))["joints"]["j"]["face"]
    assert next(item for item in answer["checks"] if item["key"] == check)["pass"] is None and answer["verdict"] == "unknown"


def test_inch_answers_once_were_rounded_in_millimetres_first():
    """3/4 in came out as 0.752 in, 1/16 in as 0.0626 in."""
    causes = [{"label": "Load", "opening": "1/16 in", "closing": "1/8 in"}]
    joint = only_joint(make_job({"width": "3/4 in", "width_is": "built", "causes": causes, "side_a": {"fixity": "near-end"}, "side_b": {"fixity": "near-end"}}, units="inch"))
    assert band(joint, "movement")["answer"] == "opens 1/16 in, closes 1/8 in"
    rows = {table["key"]: table["rows"] for table in joint["tables"]}
    assert rows["causes"][-2]["cells"] == ["Load", "0.0625 in", "0.125 in", "–"]
    assert {row["cells"][1] for row in rows["range"]} == {"3/4 in"}


def test_the_greatest_length_is_rounded_down():
    """At 10.001 mm and 50 % the length is 7.14357 m: 7.144 m would be beyond class."""
    joint = only_joint(make_job({"width": "10.001 mm", "width_is": "built"}))
    assert joint["width"]["spacing_mm"] == pytest.approx(7143.571, abs=0.001)
    assert band(joint, "spacing")["answer"].startswith("7.143 m")


def test_a_share_just_beyond_the_class_never_reads_100_per_cent():
    joint = only_joint(make_job({"width": "8.399 mm", "width_is": "built"}))
    assert joint["verdict"] == "beyond" and "100.1 %" in joint["verdict_text"]


def test_with_shear_the_share_is_one_of_width_not_of_class():
    """8 mm for 3 mm of slip at 25 %: half the width is needed, yet the bead stretches by 6.8 of its 25 %."""
    still = {"fixity": "near-end"}
    joint = only_joint(make_job({"kind": "mixed", "side_a": still, "side_b": still, "causes": [{"label": "Slip", "shear": "3 mm"}], "width": "8 mm", "width_is": "built"}, sealant={"class": "c920-25"}))
    assert "50 % of it is needed" in joint["verdict_text"] and "of Class 25 (ASTM C920) is used" not in joint["verdict_text"]


def test_the_tolerance_rule_named_is_the_one_set():
    """Where both rules round to one width the sheet once named the worst case, whatever was set."""
    joint = only_joint(make_job({"width": "20 mm", "fabrication_tolerance": "2 mm"}, site={"tolerance_method": "root-sum-square"}))
    assert joint["width"]["design_worst_mm"] == joint["width"]["design_rss_mm"]
    assert "root of squares is used" in band(joint, "width")["detail"]


def test_scrubber_and_face_agree_for_sides_of_different_ranges():
    """Sealed at one temperature the sides stand at different shares of their ways."""
    joint = {"width": "20 mm", "width_is": "built", "side_b": {"winter_surface": "0 degC", "summer_surface": "25 degC"}, "face": {"width": "20 mm", "surface": "15 degC"}}
    answer = only_joint(make_job(joint))
    curve = answer["strain"]["curve"]
    assert curve[0]["width_mm"] == pytest.approx(answer["face"]["cold_width_mm"])
    assert curve[-1]["width_mm"] == pytest.approx(answer["face"]["hot_width_mm"])
    frames = desk.frames(make_job(joint), "j")["frames"]
    assert frames[0]["lines"][0]["value"] == "21.5 mm" and answer["face"]["cold_width_mm"] == pytest.approx(21.5)


def test_a_result_from_memory_is_marked_so_though_a_part_was_entered():
    side = {"summer_surface": None, "absorption": "75 %"}
    steps = {step["key"]: step for step in only_joint(make_job({"side_a": side, "side_b": side}))["steps"]}
    assert steps["hot-A"]["status"] == "memory"


def test_geometry_is_not_marked_as_read():
    still = {"fixity": "near-end"}
    joint = only_joint(make_job({"kind": "mixed", "side_a": still, "side_b": still, "causes": [{"label": "Load", "opening": "1 mm", "shear": "3 mm"}]}))
    assert next(step for step in joint["steps"] if step["key"] == "width-opening-shear")["status"] == "definition"


def test_a_rod_squeezed_beyond_its_usual_range_says_so():
    """A 17 mm joint takes the 25 mm rod, squeezed by 32 %: nothing was said."""
    assert "20 to 25 %" in band(only_joint(make_job({"width": "17 mm", "width_is": "built"})), "rod")["detail"]
    assert "20 to 25 %" not in band(only_joint(make_job({"width": "20 mm", "width_is": "built"})), "rod")["detail"]


def test_a_lap_at_the_face_gets_no_rod_and_no_depth_rule():
    face = only_joint(make_job({"kind": "lap", "face": {"width": "8 mm", "surface": "12 degC"}}))["face"]
    assert face["rod_mm"] is None and face["depth_mm"] is None
    assert next(item for item in face["answers"] if item["key"] == "extremes")["answer"].startswith("Slips")


def test_working_shows_how_the_window_and_the_depth_come_about():
    steps = {step["key"]: step for step in only_joint(make_job({"width": "20 mm", "width_is": "built"}))["steps"]}
    assert {"opening-allowed", "closing-allowed"} <= set(steps)
    assert steps["depth"]["numbers"].startswith("0.5 × 20 mm, not under 6 mm, not over 13 mm")


def test_failing_the_class_at_the_face_is_not_called_passing_it():
    """`It would pass its class` reads as the opposite of what is meant."""
    face = only_joint(make_job({"face": {"width": "7 mm", "surface": "45 degC"}}))["face"]
    assert next(item for item in face["checks"] if item["key"] == "class")["pass"] is False
    assert "beyond its class" in face["verdict_text"] and "pass" not in face["verdict_text"]


def test_a_side_that_keeps_one_temperature_is_not_refused():
    """Indoors hottest and coldest may be one; such a joint was not judged."""
    still = {"summer_surface": "21 °C", "winter_surface": "21 °C"}
    joint = only_joint(make_job({"width": "10 mm", "side_a": still, "side_b": still}))
    assert joint["movement"]["opening_mm"] == joint["movement"]["closing_mm"] == 0.0
    assert joint["verdict"] == "within" and joint["window"]["from_c"] == joint["window"]["to_c"] == 21.0


def test_a_file_that_reads_but_holds_nonsense_says_so_at_the_door():
    """Its nonsense was offered for putting together with a sound job without a word."""
    job = make_job({"kind": "weird", "face": {"width": "nonsense"}})
    opened = desk.open_file(desk.export(job, "job")[2])
    assert opened["job"] == job
    assert {"/joints/0/kind", "/joints/0/face/width"} <= {issue["path"] for issue in opened["issues"]}


def test_faces_do_not_count_as_dry_unasked():
    joint = only_joint(make_job({"face": {"width": "20 mm", "surface": "15 °C", "air": "15 °C", "humidity": "50 %"}}))
    assert joint["face"]["verdict"] == "unknown" and "dry" in joint["face"]["verdict_text"]
    green = next(check for check in joint["face"]["checks"] if check["key"] == "green")
    assert green["pass"] is None and green["limit"]


def test_the_verdict_names_the_sealing_range_it_rests_on():
    job = make_job({"width": "20 mm", "seal_from": "5 °C", "seal_to": "30 °C"})
    assert "if sealed between 5 °C and 30 °C" in only_joint(job)["verdict_text"]
    assert "if sealed" not in only_joint(make_job({"width": "20 mm"}))["verdict_text"]


def test_a_window_where_the_sealant_may_not_be_applied_is_no_way_out():
    grows = {"moisture_irreversible": "0.05 %"}
    job = make_job({"width": "9 mm", "width_is": "built", "side_a": grows, "side_b": grows}, sealant={"apply_to": "20 °C"})
    joint = only_joint(job)
    assert joint["window"]["from_c"] is not None and joint["window"]["from_c"] > 20
    window = next(band for band in joint["answers"] if band["key"] == "window")
    assert window["answer"] == "At no workable temperature" and "It would hold" not in joint["verdict_text"]


def test_the_printed_face_record_lists_every_gate():
    job = make_job({"face": {"width": "20 mm", "surface": "15 °C", "air": "15 °C", "humidity": "50 %", "wetness": "dry"}})
    page = desk.export(job, "sheet")[2].decode()
    for check in only_joint(job)["face"]["checks"]:
        assert check["label"] in page
