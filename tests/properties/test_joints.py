"""What must hold for every joint, whatever is typed."""

import json
import math

from hypothesis import assume, given, settings
from hypothesis import strategies as st

from beadwright import desk
from jobs import make_job, only_joint

mm = st.floats(0.5, 40).map(lambda value: round(value, 2))
small = st.floats(0, 12).map(lambda value: round(value, 2))
fraction = st.sampled_from([12.5, 25.0, 35.0, 50.0])
kinds = st.sampled_from(["butt", "mixed", "lap"])
# Printed results never matter here; numbers are read from the contract's keys.


def job_of(opening, closing, shear, ext, comp, *, kind="butt", length="4 m", convention="each-way", total=None, tolerance="0 mm", width=None, seal=None):
    side = {"length": length} if length else {"length": "1 m", "fixity": "near-end"}
    joint = {"kind": kind, "causes": [{"id": "c", "label": "Load", "opening": f"{opening} mm", "closing": f"{closing} mm", "shear": f"{shear} mm"}],
             "side_a": side, "side_b": side, "fabrication_tolerance": tolerance}  # fmt: skip
    if width is not None:
        joint["width"] = f"{width} mm"
        joint["width_is"] = "built"
    if seal:
        joint |= {"seal_from": f"{seal[0]} degC", "seal_to": f"{seal[1]} degC"}
    sealant = {"class": "own", "own_extension": f"{ext} %", "own_compression": f"{comp} %"}
    if total:
        sealant["own_total"] = f"{total} %"
    return make_job(joint, site={"convention": convention}, sealant=sealant)


def required(*args, **more):
    return only_joint(job_of(*args, **more))["width"]["required_mm"]


@settings(max_examples=60, deadline=None)
@given(small, small, small, fraction, fraction, small, kinds)
def test_more_movement_never_gives_a_narrower_joint(opening, closing, shear, ext, comp, more, kind):
    base = required(opening, closing, shear, ext, comp, kind=kind)
    for bigger in ((opening + more, closing, shear), (opening, closing + more, shear), (opening, closing, shear + more)):
        assert required(*bigger, ext, comp, kind=kind) >= base - 1e-9


@settings(max_examples=60, deadline=None)
@given(small, small, small, fraction, fraction, st.floats(0.3, 0.99), kinds, st.sampled_from(["each-way", "total-swing"]))
def test_a_smaller_class_never_gives_a_narrower_joint(opening, closing, shear, ext, comp, share, kind, convention):
    def at(scale):
        return required(opening, closing, shear, round(ext * scale, 4), round(comp * scale, 4), kind=kind, convention=convention, total=round(25 * scale, 4))

    assert at(share) >= at(1.0) - 1e-9


@settings(max_examples=60, deadline=None)
@given(small, small, mm, mm)
def test_a_bigger_tolerance_never_gives_a_narrower_design(opening, closing, tolerance, more):
    def design(value):
        return only_joint(job_of(opening, closing, 0, 25, 25, tolerance=f"{value} mm"))["width"]["design_mm"]

    assert design(round(tolerance + more, 2)) >= design(tolerance) - 1e-9


@settings(max_examples=60, deadline=None)
@given(small.filter(lambda value: value > 0.1), fraction)
def test_opening_alone_is_opening_over_extension(opening, ext):
    # With nothing thermal (held at this end) and no closing, the closing case asks for nothing.
    assert math.isclose(required(opening, 0, 0, ext, 50, length=None), opening / (ext / 100), rel_tol=1e-12)


@settings(max_examples=60, deadline=None)
@given(small.filter(lambda value: value > 0.1), fraction)
def test_shear_alone_is_shear_over_root(shear, ext):
    share = ext / 100
    assert math.isclose(required(0, 0, shear, ext, 50, length=None), shear / math.sqrt(2 * share + share**2), rel_tol=1e-12)


@settings(max_examples=60, deadline=None)
@given(small, small, st.floats(10, 100).map(lambda value: round(value, 1)))
def test_total_swing_is_opening_plus_closing_over_the_total(opening, closing, total):
    assert math.isclose(required(opening, closing, 0, 25, 25, length=None, convention="total-swing", total=total), (opening + closing) / (total / 100), rel_tol=1e-12, abs_tol=1e-12)


@settings(max_examples=40, deadline=None)
@given(st.integers(1, 30 * 32), st.integers(0, 200), st.integers(-40, 40), st.integers(41, 160), kinds)
def test_metric_and_inch_entries_of_one_joint_agree(length_32, closing_32, cold_f, hot_f, kind):
    def side(inch):
        exact = length_32 / 32
        return {"length": f"{length_32}/32 in" if inch else f"{exact * 25.4!r} mm",
                "winter_surface": f"{cold_f} degF" if inch else f"{(cold_f - 32) * 5 / 9!r} degC", "summer_surface": f"{hot_f} degF" if inch else f"{(hot_f - 32) * 5 / 9!r} degC"}  # fmt: skip

    def answer(inch):
        closing = f"{closing_32}/32 in" if inch else f"{closing_32 / 32 * 25.4!r} mm"
        joint = {"kind": kind, "side_a": side(inch), "side_b": side(inch), "causes": [{"id": "c", "label": "Load", "closing": closing}], "width": "3/4 in" if inch else "19.05 mm"}
        # Units choose the default rod sizes; the joint is one only with the same sizes.
        return only_joint(make_job(joint, site={"rod_series": "metric"}, units="inch" if inch else "metric"))

    inch, metric = answer(True), answer(False)
    for path in (("movement", "opening_mm"), ("movement", "closing_mm"), ("movement", "shear_mm"), ("width", "required_mm"), ("depth", "neck_mm"), ("section", "area_mm2")):
        one, other = inch[path[0]][path[1]], metric[path[0]][path[1]]
        assert math.isclose(one, other, rel_tol=1e-9, abs_tol=1e-9), path
    assert inch["verdict"] == metric["verdict"]


@settings(max_examples=150, deadline=None)
@given(mm, small, small, small, fraction, fraction, kinds, st.sampled_from(["each-way", "total-swing"]))
def test_window_and_check_agree(width, opening, closing, shear, ext, comp, kind, convention):
    """Sealing at the window's ends is within class; one step outside an end that the class sets is not."""
    more = {"kind": kind, "width": width, "length": "8 m", "convention": convention, "total": 40}
    joint = only_joint(job_of(opening, closing, shear, ext, comp, **more))
    low, high = joint["window"]["from_c"], joint["window"]["to_c"]

    def use_when_sealed_at(at):
        sealed = only_joint(job_of(opening, closing, shear, ext, comp, **more, seal=(repr(at), repr(at))))
        return sealed["width"]["use_fraction"]

    if low is None:
        for at in (-20.0, 15.0, 50.0):
            assert use_when_sealed_at(at) > 1 - 1e-9
        return
    for at in (low, 0.5 * (low + high), high):
        assert use_when_sealed_at(at) <= 1 + 1e-7
    if convention == "each-way":
        if joint["window"]["low_limited_by"] != "element":
            assert use_when_sealed_at(low - 0.5) > 1
        if joint["window"]["high_limited_by"] != "element":
            assert use_when_sealed_at(high + 0.5) > 1


@settings(max_examples=60, deadline=None)
@given(mm, small, small)
def test_spacing_is_the_inverse_of_width(width, opening, closing):
    joint = only_joint(job_of(opening, closing, 0, 50, 50, width=width))
    scale = joint["width"]["length_scale"]
    if scale is None:
        return
    assume(0.001 < scale < 40)
    longer = only_joint(job_of(opening, closing, 0, 50, 50, width=width, length=f"{4 * scale!r} m"))
    assert math.isclose(longer["width"]["use_fraction"], 1.0, rel_tol=1e-6)


@settings(max_examples=60, deadline=None)
@given(mm, small, small)
def test_smallest_width_at_each_class_holds_and_a_little_less_does_not(width, opening, closing):
    for row in only_joint(job_of(opening, closing, 0, 50, 50, width=width))["width"]["by_class"]:
        needed = row["required_mm"]
        if needed < 0.01:
            continue
        for scale, holds in ((1.0 + 1e-6, True), (1.0 - 1e-6, False)):
            again = only_joint(job_of(opening, closing, 0, 50, 50, width=repr(needed * scale)))
            found = next(item for item in again["width"]["by_class"] if item["class"] == row["class"])
            assert found["holds_present"] is holds
        break


# ---- bad input --------------------------------------------------------------------------------

junk = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.text(max_size=30) | st.sampled_from(["900 degC", "0 mm", "-5 mm", "12 kg", "9" * 40, "1,500 mm", "=1+1", "<b>x</b>"]),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.sampled_from(["id", "name", "length", "x", "substrate"]), inner, max_size=4),
    max_leaves=8,
)
PLACES = [
    ("title",), ("units",), ("region",), ("site",), ("site", "summer_air"), ("site", "winter_air"), ("site", "increment"), ("site", "convention"), ("site", "depth_rule"),
    ("site", "green_limit"), ("site", "building_year"), ("sealants",), ("sealants", 0), ("sealants", 0, "class"), ("sealants", 0, "id"), ("joints",), ("joints", 0), ("joints", 0, "id"),
    ("joints", 0, "kind"), ("joints", 0, "width"), ("joints", 0, "sealant"), ("joints", 0, "neck"), ("joints", 0, "tool_sag"), ("joints", 0, "rod"), ("joints", 0, "side_a"), ("joints", 0, "side_a", "length"),
    ("joints", 0, "side_a", "substrate"), ("joints", 0, "side_b", "expansion"), ("joints", 0, "side_b", "summer_surface"), ("joints", 0, "causes"), ("joints", 0, "causes", 0, "opening"),
    ("joints", 0, "face"), ("joints", 0, "face", "width"), ("joints", 0, "face", "surface"), ("joints", 0, "face", "humidity"),
]  # fmt: skip


def put(job, path, value):
    target = job
    for part in path[:-1]:
        target = target[part]
    target[path[-1]] = value


@settings(max_examples=600, deadline=None)
@given(st.lists(st.tuples(st.sampled_from(PLACES), junk), min_size=1, max_size=3))
def test_evaluation_never_raises_on_bad_input_and_names_the_place(changes):
    job = make_job({"causes": [{"id": "c", "label": "x"}], "face": {"width": "15 mm"}})
    for path, value in sorted(changes, key=lambda change: -len(change[0])):
        put(job, path, value)
    answer = desk.evaluate(job)
    desk.to_json(answer)
    for issue in answer["issues"]:
        assert issue["code"] and issue["message"].strip() and issue["severity"] in ("error", "warning", "note")
        assert issue["path"] == "" or issue["path"].startswith("/")


@settings(max_examples=150, deadline=None)
@given(st.sampled_from([path for path in PLACES if len(path) > 1 and path[-1] in ("summer_air", "width", "length", "expansion", "surface", "opening")]),
       st.sampled_from(["abc", "12 kg", "1e999 mm", "--3", "[]", "five"]))  # fmt: skip
def test_an_unreadable_quantity_is_named_at_its_field(path, text):
    job = make_job({"causes": [{"id": "c", "label": "x"}], "face": {"width": "15 mm"}})
    put(job, path, text)
    pointer = "/" + "/".join(str(part) for part in path)
    found = [issue for issue in desk.evaluate(job)["issues"] if issue["path"] == pointer]
    assert found and found[0]["severity"] == "error"


@settings(max_examples=200, deadline=None)
@given(junk)
def test_any_object_at_all_is_answered(job):
    assert json.loads(desk.to_json(desk.evaluate(job)))["issues"]


# ---- good but wild input ----------------------------------------------------------------------

length = st.sampled_from([0, 0.001, 0.5, 3, 10, 30, 100, 499]) | st.floats(0, 499)
reading = st.floats(-89, 129).map(lambda value: f"{value:.1f} degC")


def maybe(strategy):
    return st.none() | strategy


def as_mm(strategy):
    return strategy.map(lambda value: f"{value:.4g} mm")


wild = st.fixed_dictionaries({
    "kind": kinds, "width": maybe(as_mm(length)), "width_is": st.sampled_from(["drawn", "built"]), "neck": maybe(as_mm(st.floats(0.001, 100))), "tool_sag": maybe(as_mm(st.floats(0, 50))),
    "rod_sag": maybe(as_mm(st.floats(0, 50))), "rod": st.sampled_from(["closed-cell", "open-cell", "bicellular", "tape"]), "tooling": st.sampled_from(["concave", "flush"]),
    "fabrication_tolerance": as_mm(st.floats(0, 100)), "seal_from": maybe(reading), "seal_to": maybe(reading),
    "causes": st.lists(st.fixed_dictionaries({"opening": as_mm(length), "closing": as_mm(length), "shear": as_mm(length), "shear_across": as_mm(length)}), max_size=2),
    "face": maybe(st.fixed_dictionaries({"width": as_mm(length), "surface": reading, "surface_b": maybe(reading), "air": st.floats(-89, 59).map(lambda value: f"{value:.1f} degC"),
                                         "humidity": st.floats(0, 100).map(lambda value: f"{value:.1f} %"), "day_swing": maybe(st.just("40 K"))})),
    "side_a": st.fixed_dictionaries({"length": st.floats(0.001, 190).map(lambda value: f"{value:.3f} m"), "fixity": st.sampled_from(["middle", "near-end", "far-end"]),
                                     "length_along": maybe(st.just("5 m")), "summer_surface": reading, "winter_surface": reading}),
})  # fmt: skip
places = st.fixed_dictionaries({
    "convention": st.sampled_from(["each-way", "total-swing"]), "closed_gap": st.sampled_from(["0 mm", "5 mm"]), "rod_series": st.sampled_from(["metric", "inch"]),
    "depth_rule": st.sampled_from(["detailing-half", "german-facade", "tile", "uk-precast-silicone", "us-government"]),
})  # fmt: skip


def filled(value):
    """Without the parts that were left out."""
    return {key: filled(part) if isinstance(part, dict) else part for key, part in value.items() if part is not None}


@settings(max_examples=400, deadline=None)
@given(wild, places, st.sampled_from(["metric", "inch"]))
def test_every_readable_joint_is_answered_with_finite_numbers(joint, site, units):
    """Once a tolerance wider than the joint, and a hollow deeper than half of it, raised instead."""
    job = make_job(filled(joint), site=site, units=units)
    desk.to_json(desk.evaluate(job))
    desk.to_json(desk.frames(job, "j"))
    desk.export(job, "sheet")
    desk.export(job, "schedule")
