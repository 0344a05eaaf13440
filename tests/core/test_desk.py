"""The door: its contract, what users get told, and that nothing they typed is refused silently."""

import csv
import io
import json
import re
import subprocess
import sys
import xml.etree.ElementTree as ET
from pathlib import Path

import jsonschema
import pytest

from beadwright import desk
from beadwright.job import schema
from jobs import issues_at, make_job, only_joint

ROOT = Path(__file__).parents[2]
DEMO = ROOT / "demo" / "harbour-hall.beadwright.json"
SVG = "{http://www.w3.org/2000/svg}"


@pytest.fixture(scope="module")
def demo():
    return desk.open_file(DEMO.read_bytes())["job"]


@pytest.fixture(scope="module")
def answer(demo):
    return desk.evaluate(demo)


# ---- contract ---------------------------------------------------------------------------------


def test_the_answer_has_every_part_of_the_contract(answer):
    assert {"issues", "joints", "takeoff", "cure", "surveys", "cautions"} <= set(answer)
    for joint in answer["joints"].values():
        assert joint["verdict"] in ("within", "at-limit", "beyond", "unknown", "referred")
        assert {"movement", "width", "depth", "backing", "section", "strain", "window", "steps", "notes", "drawing"} <= set(joint)
        if joint["verdict"] == "referred":
            assert joint["width"] is None and joint["movement"] is None
            continue
        assert {"opening_mm", "closing_mm", "shear_mm", "causes"} <= set(joint["movement"])
        assert {"required_mm", "design_mm", "governed_by", "by_class"} <= set(joint["width"])
        assert {"neck_mm", "bond_mm", "rule"} <= set(joint["depth"])
        assert joint["section"]["area_mm2"] > 0 and {"from_c", "to_c"} <= set(joint["window"])
        for step in joint["steps"]:
            assert step["title"] and step["symbol"] and step["result"] and step["source"], step
            assert "{" not in step["numbers"], step


def test_every_number_is_plain_and_finite(answer):
    assert json.loads(desk.to_json(answer)) == json.loads(json.dumps(answer, allow_nan=False))


def test_same_input_gives_the_same_output(demo):
    assert desk.to_json(desk.evaluate(demo)) == desk.to_json(desk.evaluate(json.loads(json.dumps(demo))))


def test_evaluation_leaves_the_job_alone(demo):
    before = json.dumps(demo)
    desk.evaluate(demo)
    desk.export(demo, "sheet")
    assert json.dumps(demo) == before


def test_short_form_gives_the_same_verdicts(demo, answer):
    short = desk.evaluate(demo, only=["panel"])
    assert {key: row["verdict"] for key, row in short["joints"].items()} == {key: row["verdict"] for key, row in answer["joints"].items()}
    assert short["joints"]["panel"] == answer["joints"]["panel"] and short["joints"]["metal"]["short"]


def test_forms_describe_each_field_once(demo):
    forms = json.loads(desk.to_json(desk.forms()))
    for group in forms["groups"]:
        keys = [field["key"] for field in group["fields"]]
        assert len(keys) == len(set(keys))
        for field in group["fields"]:
            assert field["label"] and field["section"]
            if field["kind"] == "choice" and not field["choices_from"]:
                assert field["choices"], field["key"]
            for units in field["units"].values():
                assert len(units) == len(set(units))


def test_every_key_of_the_demo_is_a_declared_field(demo):
    forms = {group["key"]: {field["key"] for field in group["fields"]} for group in desk.forms()["groups"]}
    for joint in demo["joints"]:
        assert set(joint) - {"id", "side_a", "side_b", "causes", "face"} <= forms["joint"]
        for side in ("side_a", "side_b"):
            assert set(joint[side]) <= forms["side"]
        assert set(joint["face"]) <= forms["face"]
    assert set(demo["site"]) <= forms["site"]


def test_the_published_schema_is_built_from_the_fields_and_holds_the_demo(demo):
    assert schema.PATH.read_text(encoding="utf-8") == schema.to_text()
    jsonschema.validate(demo, schema.build())
    with pytest.raises(jsonschema.ValidationError):
        jsonschema.validate(demo | {"version": "one"}, schema.build())


def test_the_demo_is_what_it_says(demo, answer):
    verdicts = [joint["verdict"] for joint in answer["joints"].values()]
    assert len(verdicts) >= 8 and "beyond" in verdicts and "referred" in verdicts and "within" in verdicts
    assert {joint["kind"] for joint in demo["joints"]} == {"butt", "lap", "mixed"}
    assert "invented" in demo["title"].lower()
    assert not [issue for issue in answer["issues"] if issue["severity"] == "error"]


# ---- drawings ---------------------------------------------------------------------------------

ALLOWED = {"svg", "title", "g", "path", "line", "rect", "text"}


def test_drawings_are_clean_svg(answer):
    for joint in answer["joints"].values():
        if joint["drawing"] is None:
            continue
        for node in ET.fromstring(joint["drawing"]).iter():
            assert node.tag.removeprefix(SVG) in ALLOWED
            assert not {name for name in node.attrib if name.startswith("on") or name in ("style", "href")}


def test_a_name_full_of_markup_stays_text(demo):
    nasty = '<script>alert(1)</script>"&\'<img src=x onerror=1>'
    job = make_job({"name": nasty, "place": nasty}) | {"title": nasty, "reference": nasty}
    page = desk.export(job, "sheet")[2].decode()
    assert "<script" not in page and "<img" not in page and "&lt;script&gt;" in page
    drawing = desk.evaluate(job)["joints"]["j"]["drawing"]
    assert "<script" not in drawing
    ET.fromstring(drawing)


def test_the_drawing_keeps_its_proportion():
    """Width and depth in the drawing are in the ratio of the numbers; the fault of a free scale once hid this."""
    for width in ("10 mm", "20 mm", "35 mm"):
        joint = only_joint(make_job({"width": width, "neck": "10 mm", "tooling": "flush", "rod": "tape"}))
        bead = next(node for node in ET.fromstring(joint["drawing"]).iter(f"{SVG}path") if node.get("class") == "bw-bead")
        numbers = [float(value) for value in re.findall(r"-?\d+\.?\d*", bead.get("d"))]
        xs, ys = numbers[0::2], numbers[1::2]
        drawn = (max(xs) - min(xs)) / (max(ys) - min(ys))
        assert drawn == pytest.approx(float(width.split()[0]) / 10, rel=0.01)


def test_frames_run_from_coldest_to_hottest_and_narrow(demo):
    frames = desk.frames(demo, "panel")
    widths = [float(frame["lines"][0]["value"].split()[0]) for frame in frames["frames"]]
    assert widths == sorted(widths, reverse=True) and widths[0] > widths[-1]
    assert 0 <= frames["start"] < len(frames["frames"]) and frames["frames"][0]["fraction"] == 0.0
    assert abs(widths[frames["start"]] - 20.0) < 0.3
    assert desk.frames(demo, "nowhere")["frames"] == []


# ---- exports ----------------------------------------------------------------------------------


def test_export_of_the_job_reads_back_the_same(demo):
    name, media, data = desk.export(demo, "job")
    assert name == "ex-01.beadwright.json" and media == "application/json"
    assert desk.open_file(data)["job"] == demo


def test_schedule_neutralises_formulas():
    job = make_job({"name": "=HYPERLINK(\"x\")", "place": "@sum"})
    rows = list(csv.reader(io.StringIO(desk.export(job, "schedule")[2].decode("utf-8-sig"))))
    assert rows[1][0].startswith("'=") and rows[1][1].startswith("'@")
    assert float(rows[1][rows[0].index("Opening [mm]")]) > 0


def test_unknown_export_is_a_fault_of_the_caller(demo):
    with pytest.raises(ValueError, match="kind"):
        desk.export(demo, "dance")


# ---- messages ---------------------------------------------------------------------------------

BAD = [
    ({"site": {"winter_air": "-900 degC"}}, "/site/winter_air", "too-small", "−90 °C"),
    ({"site": {"winter_air": "900 degC"}}, "/site/winter_air", "too-large", "60 °C"),
    ({"site": {"summer_air": "5 degC", "winter_air": "20 degC"}}, "/site/summer_air", "contradiction", "warmer"),
    ({"site": {"seal_from": "30 degC", "seal_to": "5 degC"}}, "/site/seal_from", "contradiction", "not be warmer"),
    ({"joint": {"side_a": {"length": "0 mm"}}}, "/joints/0/side_a/length", "too-small", "more than 0"),
    ({"joint": {"side_a": {"length": "-3 m"}}}, "/joints/0/side_a/length", "too-small", "more than 0"),
    ({"joint": {"side_a": {"length": "wide"}}}, "/joints/0/side_a/length", "not-a-number", "such as"),
    ({"joint": {"side_a": {"length": "3 kg"}}}, "/joints/0/side_a/length", "unknown-unit", "kg"),
    ({"joint": {"side_a": {"length": "20 degC"}}}, "/joints/0/side_a/length", "wrong-kind", "temperature"),
    ({"joint": {"side_a": {"substrate": "cheese"}}}, "/joints/0/side_a/substrate", "not-a-choice", "cheese"),
    ({"joint": {"sealant": "gone"}}, "/joints/0/sealant", "not-a-choice", "sealant of this job"),
    ({"joint": {"sealant": None}}, "/joints/0/sealant", "missing", "No sealant"),
    ({"joint": {"width": "1,500 mm"}}, "/joints/0/width", "ambiguous-comma", "1500"),
    ({"joint": {"width": True}}, "/joints/0/width", "not-a-number", "such as"),
    ({"joint": {"face": {"humidity": "140 %"}}}, "/joints/0/face/humidity", "too-large", "100 %"),
    ({"sealant": {"class": "own"}}, "/sealants/0/own_extension", "missing", "needed"),
    ({"joint": {"old_sealant": "perhaps"}}, "/joints/0/old_sealant", "not-a-flag", "yes or no"),
]  # fmt: skip


@pytest.mark.parametrize(("change", "path", "code", "words"), BAD, ids=[f"{row[1].rpartition('/')[2]}-{row[2]}-{index}" for index, row in enumerate(BAD)])
def test_bad_input_is_answered_at_its_field(change, path, code, words):
    job = make_job(change.get("joint"), site=change.get("site"), sealant=change.get("sealant"))
    found = issues_at(job, path)
    assert [issue["code"] for issue in found if issue["severity"] == "error"] == [code]
    assert words in found[0]["message"]


def test_limits_are_told_in_the_unit_that_was_typed():
    assert "°F" in issues_at(make_job(site={"winter_air": "-500 degF"}, units="inch"), "/site/winter_air")[0]["message"]


def test_an_unusual_value_asks_and_is_kept():
    job = make_job({"width": "90 mm"})
    assert issues_at(job, "/joints/0/width")[0]["severity"] == "warning"
    assert desk.evaluate(job)["joints"]["j"]["width"]["present_mm"] == 90


def test_a_bare_number_is_read_in_the_units_of_the_job_and_told():
    job = make_job({"width": "5/8"}, units="inch")
    assert issues_at(job, "/joints/0/width")[0]["code"] == "unit-missing"
    answer = desk.evaluate(job)
    assert answer["joints"]["j"]["width"]["present_mm"] == pytest.approx(15.875)
    assert answer["readings"]["/joints/0/width"]["reads"] == "= 15.9 mm"


def test_double_ids_are_named_and_both_joints_are_judged():
    job = make_job()
    job["joints"] = [job["joints"][0], dict(job["joints"][0])]
    answer = desk.evaluate(job)
    assert len(answer["joints"]) == 2 and any(issue["code"] == "double-id" for issue in answer["issues"])


def test_total_swing_does_not_borrow_a_total_for_an_unequal_class():
    job = make_job(site={"convention": "total-swing"}, sealant={"class": "c920-100-50"})
    joint = desk.evaluate(job)["joints"]["j"]
    assert joint["verdict"] == "unknown" and "total" in joint["verdict_text"]


@pytest.mark.parametrize("use", ["fire", "structural-glazing", "immersed", "potable-water", "floor-foot", "floor-vehicle"])
def test_referred_uses_stop_without_a_number(use):
    joint = desk.evaluate(make_job({"use": use, "width": "20 mm", "face": {"width": "20 mm"}}))["joints"]["j"]
    assert joint["verdict"] == "referred" and joint["width"] is None and joint["face"]["verdict"] == "referred"
    assert joint["verdict_text"] and not joint["steps"]


def test_acetoxy_on_concrete_is_warned_of():
    answer = desk.evaluate(make_job(sealant={"family": "acetoxy-silicone"}))
    assert any("j" in item["joints"] and item["severity"] != "note" for item in answer["cautions"])


# ---- at the face ------------------------------------------------------------------------------

READY = {"width": "20 mm", "surface": "15 degC", "air": "15 degC", "humidity": "50 %", "wetness": "dry", "day_swing": "5 K"}
FACES = [
    ({}, "seal"),
    ({"surface": "-2 degC", "air": "-5 degC"}, "stop"),
    ({"wetness": "frost"}, "stop"),
    ({"wetness": "wet"}, "stop"),
    ({"wetness": "damp"}, "wait"),
    ({"humidity": "99 %"}, "wait"),
    ({"surface": "2 degC"}, "stop"),
    ({"width": "4 mm"}, "stop"),
    ({"day_swing": "100 K"}, "wait"),
    ({"wetness": None}, "unknown"),
    ({"day_swing": None}, "seal"),
    ({"surface": None}, "unknown"),
    ({"humidity": None}, "unknown"),
    ({"width": None}, "unknown"),
]  # fmt: skip


@pytest.mark.parametrize(("change", "verdict"), FACES, ids=[f"{'-'.join(row[0]) or 'ready'}-{row[1]}" for row in FACES])
def test_face_verdicts(change, verdict):
    job = make_job({"face": {key: value for key, value in (READY | change).items() if value is not None}})
    face = desk.evaluate(job)["joints"]["j"]["face"]
    assert face["verdict"] == verdict, face["checks"]
    assert face["verdict_text"]


def test_normalised_width_there_and_back():
    def reference(width, surface):
        return desk.evaluate(make_job({"face": READY | {"width": width, "surface": surface}}))["joints"]["j"]["face"]["reference_width_mm"]

    # 6 m of concrete at 10e-6/K feed the joint (3 m a side): 0.06 mm per kelvin.
    assert reference("20 mm", "20 degC") == pytest.approx(20.0)
    assert reference("16 mm", "5 degC") == pytest.approx(16.0 - 0.06 * 15)
    assert reference(f"{reference('16 mm', '5 degC')!r} mm", "20 degC") == pytest.approx(16.0 - 0.06 * 15)


# ---- terminal ---------------------------------------------------------------------------------


def run(*arguments, data=None):
    env = {"PYTHONPATH": str(ROOT / "pycore"), "PATH": "/usr/bin:/bin", "PYTHONUTF8": "1"}
    return subprocess.run([sys.executable, "-m", "beadwright", *arguments], input=data, capture_output=True, env=env, timeout=60)


def test_terminal_prints_the_same_answer(answer):
    done = run("evaluate", str(DEMO))
    assert done.returncode == 0 and json.loads(done.stdout) == json.loads(desk.to_json(answer))


def test_terminal_prints_a_sheet_for_reading():
    text = run("evaluate", str(DEMO), "--text").stdout.decode()
    assert "BEYOND CLASS" in text and "Working" in text and "Cautions" in text


def test_terminal_refuses_a_foreign_file_with_a_sentence(tmp_path):
    wrong = tmp_path / "wrong.json"
    wrong.write_bytes(b"{}")
    done = run("evaluate", str(wrong))
    assert done.returncode == 1 and b"not a Beadwright job file" in done.stderr
    assert json.loads(done.stdout)["issues"][0]["code"] == "foreign-file"
    assert run("evaluate", str(tmp_path / "none.json")).returncode == 2


def test_terminal_exports(tmp_path):
    out = tmp_path / "out.csv"
    assert run("export", "schedule", str(DEMO), "-o", str(out)).returncode == 0
    assert out.read_bytes().startswith(b"\xef\xbb\xbfJoint,")
