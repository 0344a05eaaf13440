"""Twelve joints worked line by line from the rules, without the core, and compared with it.

Nothing here imports a formula of ours: each number is built from the typed figures. Widths for
shear come from a bisection on the stretched line itself, not from the closed form.
"""

import math

import pytest

from jobs import make_job, only_joint


def bisected(asks_more, low=1e-6, high=1e4):
    """The width at which a condition turns from too narrow to wide enough."""
    for _ in range(200):
        middle = 0.5 * (low + high)
        low, high = (middle, high) if asks_more(middle) else (low, middle)
    return high


def stretched_width(opening, shear, extension):
    return bisected(lambda w: math.hypot(w + opening, shear) > (1 + extension) * w)


def near(value):
    return pytest.approx(value, rel=1e-9, abs=1e-9)


STILL = {"fixity": "near-end"}
DRY = {"moisture_reversible": "0 %", "moisture_irreversible": "0 %"}
FREE = {"summer_surface": None, "winter_surface": None, "expansion": None}


def test_lap_with_a_step_across():
    """4 m each side held at the far end, 12e-6/K, -10 to 40, sealed 10 to 20: the greater of cold 30 K and heat 30 K."""
    side = {"expansion": "12 e-6/K", "length": "4 m", "fixity": "far-end", "winter_surface": "-10 degC", "summer_surface": "40 degC"}
    joint = only_joint(make_job({"kind": "lap", "side_a": side, "side_b": side, "seal_from": "10 degC", "seal_to": "20 degC",
                                 "causes": [{"label": "Wind", "shear": "1 mm", "shear_across": "2 mm", "opening": "0.5 mm"}]}, sealant={"class": "c920-25"}))  # fmt: skip
    along = 12e-6 * 8000 * 30 + 1.0
    shear = math.sqrt(along**2 + 2.0**2)
    assert joint["movement"]["shear_mm"] == near(shear)
    assert joint["width"]["required_mm"] == near(stretched_width(0.5, shear, 0.25))
    assert joint["width"]["design_mm"] == math.ceil(stretched_width(0.5, shear, 0.25))


def test_mixed_with_sides_of_different_ranges():
    """Dark metal 0 to 70 beside shaded concrete -5 to 30, sealed 5 to 25, slipping along 3 m and 5 m."""
    metal = {"expansion": "23 e-6/K", "length": "2.4 m", "length_along": "3 m", "winter_surface": "0 degC", "summer_surface": "70 degC"}
    concrete = {"expansion": "11 e-6/K", "length": "5 m", "length_along": "5 m", "winter_surface": "-5 degC", "summer_surface": "30 degC"}
    joint = only_joint(make_job({"kind": "mixed", "side_a": metal, "side_b": concrete, "seal_from": "5 degC", "seal_to": "25 degC", "width": "14 mm", "width_is": "built"}, sealant={"class": "c920-25"}))
    a, b = 23e-6 * 1200, 11e-6 * 2500
    opening, closing = a * (25 - 0) + b * (25 + 5), a * (70 - 5) + b * (30 - 5)
    a_along, b_along = 23e-6 * 3000, 11e-6 * 5000
    slip = max(abs(a_along * (70 - t) - b_along * (30 - t)) for t in (5, 25))
    slip = max(slip, *(abs(a_along * (t - 0) - b_along * (t + 5)) for t in (5, 25)))
    assert (joint["movement"]["opening_mm"], joint["movement"]["closing_mm"], joint["movement"]["shear_mm"]) == (near(opening), near(closing), near(slip))
    assert joint["width"]["required_mm"] == near(max(stretched_width(opening, slip, 0.25), closing / 0.25))
    # The window: warmer until opening with this slip fills the class, colder until closing does.
    warmest = bisected(lambda t: math.hypot(14 + a * t + b * (t + 5), slip) < 1.25 * 14, -100, 200)
    coldest = bisected(lambda t: a * (70 - t) + b * (30 - t) > 0.25 * 14, -100, 200)
    assert joint["window"]["to_c"] == pytest.approx(min(warmest, 70)) and joint["window"]["from_c"] == pytest.approx(max(coldest, -5))


@pytest.mark.parametrize(("opening", "closing", "governs"), [("9 mm", "4 mm", 9 / 1.0), ("6 mm", "4 mm", 4 / 0.5)], ids=["opening", "closing"])
def test_unequal_class(opening, closing, governs):
    joint = only_joint(make_job({"side_a": STILL, "side_b": STILL, "causes": [{"label": "Load", "opening": opening, "closing": closing}]}, sealant={"class": "c920-100-50"}))
    assert joint["width"]["required_mm"] == near(governs)


def test_brick_beside_concrete():
    """Brick 7.2e-6/K grows 0.05 %, concrete 10e-6/K shrinks 0.04 %, a quarter of it over; each swings 0.02 % by moisture."""
    brick = {"substrate": "brick-clay", "expansion": "7.2 e-6/K", "length": "8 m", "winter_surface": "-15 degC", "summer_surface": "55 degC", "moisture_reversible": "0.02 %", "moisture_irreversible": "0.05 %"}
    concrete = {"length": "6 m", "fixity": "far-end", "winter_surface": "-15 degC", "summer_surface": "40 degC", "moisture_reversible": "0.02 %", "moisture_irreversible": "-0.04 %", "moisture_done": "25 %"}
    joint = only_joint(make_job({"side_a": brick, "side_b": concrete}, sealant={"class": "c920-25"}))
    thermal = 7.2e-6 * 4000 * 70 + 10e-6 * 6000 * 55
    wet = 0.0002 * 4000 + 0.0002 * 6000
    opening, closing = thermal + wet + 0.0004 * 0.75 * 6000, thermal + wet + 0.0005 * 4000
    assert (joint["movement"]["opening_mm"], joint["movement"]["closing_mm"]) == (near(opening), near(closing))
    assert joint["width"]["required_mm"] == near(max(opening, closing) / 0.25)
    assert joint["width"]["governed_by"] == ("opening" if opening > closing else "closing")


def test_night_sky_and_reflected_sun():
    """Light metal, absorption 0.8, 30 degC air with reflected sun: 30 + 0.8 x 72; winter -8 less 6; indoors stays with the air."""
    panel = FREE | DRY | {"substrate": "aluminium", "expansion": "24 e-6/K", "absorption": "80 %", "sun": "reflected", "length": "3 m"}
    inside = FREE | DRY | {"expansion": "10 e-6/K", "sun": "shaded", "length": "4 m"}
    joint = only_joint(make_job({"side_a": panel, "side_b": inside}, site={"summer_air": "30 degC", "winter_air": "-8 degC", "night_sky": "6 K"}))
    assert (joint["movement"]["hot_c"], joint["movement"]["cold_c"]) == (near(30 + 0.8 * 72), near(-14))
    assert joint["movement"]["opening_mm"] == near(24e-6 * 1500 * (30 + 0.8 * 72 + 14) + 10e-6 * 2000 * (30 + 8))


def test_one_side_that_does_not_move():
    joint = only_joint(make_job({"side_a": {"length": "5 m", "fixity": "far-end"}, "side_b": STILL}))
    assert joint["movement"]["opening_mm"] == near(10e-6 * 5000 * 70)
    assert joint["width"]["required_mm"] == near(10e-6 * 5000 * 70 / 0.5)


def test_no_movement_at_all():
    """Nothing to size by: the least practical width, any temperature, no limit of length."""
    joint = only_joint(make_job({"side_a": STILL, "side_b": STILL}))
    assert joint["width"]["required_mm"] == 0 and joint["width"]["design_mm"] == joint["width"]["practical_least_mm"]
    assert (joint["window"]["from_c"], joint["window"]["to_c"]) == (-20, 50) and joint["width"]["spacing_mm"] is None


@pytest.mark.parametrize(("method", "tolerance"), [("worst-case", 3 + 4 + 12), ("root-sum-square", 13.0)])
def test_wide_tolerances(method, tolerance):
    """3, 4 and 12 mm: 19 mm in the worst case, 13 mm by squares; a drawn 20 mm keeps 1 or 7 mm of 8.4 needed."""
    parts = {"fabrication_tolerance": "3 mm", "erection_tolerance": "4 mm", "spacing_tolerance": "12 mm", "width": "20 mm"}
    joint = only_joint(make_job(parts, site={"tolerance_method": method}))
    assert joint["width"]["required_mm"] == near(8.4) and joint["width"]["judged_mm"] == near(20 - tolerance)
    assert joint["width"]["design_mm"] == math.ceil(8.4 + tolerance) and joint["verdict"] == "beyond"
    assert (joint["width"]["design_worst_mm"], joint["width"]["design_rss_mm"]) == (28, 22)


def test_least_closed_gap():
    """4.2 mm of closing and 6 mm to keep ask for 10.2 mm; the class alone for 8.4."""
    joint = only_joint(make_job(site={"closed_gap": "6 mm"}))
    assert joint["width"]["required_mm"] == near(4.2 + 6) and joint["width"]["governed_by"] == "closed-gap"


def test_mixed_under_a_total_swing():
    """35 K sealed anywhere between: the range once, loads both ways, with slip; C = 0.3."""
    joint = only_joint(make_job({"kind": "mixed", "causes": [{"label": "Load", "opening": "1 mm", "closing": "0.5 mm", "shear": "2 mm"}], "seal_from": "0 degC", "seal_to": "35 degC"},
                                site={"convention": "total-swing"}, sealant={"class": "own", "own_extension": "25 %", "own_compression": "25 %", "own_total": "30 %"}))  # fmt: skip
    assert joint["width"]["required_mm"] == near(stretched_width(0.06 * 70 + 1.5, 2.0, 0.30))


def test_inch_joint():
    """20 ft of 6e-6/degF each, held at mid-length: 240 in feed the joint, 0 to 110 degF, sealed 40 to 80."""
    side = {"expansion": "6 e-6/degF", "length": "20 ft", "winter_surface": "0 degF", "summer_surface": "110 degF"}
    joint = only_joint(make_job({"side_a": side, "side_b": side, "seal_from": "40 degF", "seal_to": "80 degF", "width": "5/8 in", "fabrication_tolerance": "1/8 in"}, site={"increment": None}, units="inch"))
    opening, closing = 6e-6 * 240 * 80, 6e-6 * 240 * 70
    assert joint["movement"]["opening_mm"] == near(opening * 25.4) and joint["movement"]["closing_mm"] == near(closing * 25.4)
    assert joint["width"]["design_mm"] == near(math.ceil((opening / 0.5 + 0.125) * 16) / 16 * 25.4)
    assert joint["verdict"] == "within" and joint["width"]["use_fraction"] == near(opening / 0.5 / 0.5)


def test_reading_at_the_face_of_two_unlike_sides():
    """18 mm found with A at 12 and B at 20 degC: each side goes on from its own temperature."""
    a, b = {"length": "6 m", "winter_surface": "-10 degC", "summer_surface": "60 degC"}, {"length": "2 m", "expansion": "24 e-6/K", "winter_surface": "0 degC", "summer_surface": "40 degC"}
    face = only_joint(make_job({"side_a": a, "side_b": b, "face": {"width": "18 mm", "width_least": "16 mm", "surface": "12 degC", "surface_b": "20 degC", "day_swing": "15 K", "air": "14 degC", "humidity": "60 %", "wetness": "dry"}}))["face"]
    ra, rb = 10e-6 * 3000, 24e-6 * 1000
    opening, closing = ra * 22 + rb * 20, ra * 48 + rb * 20
    assert face["cold_width_mm"] == near(18 + opening) and face["hot_width_mm"] == near(18 - closing)
    assert face["reference_width_mm"] == near(18 - ra * (20 - 12) - rb * (20 - 20))
    assert face["green_fraction"] == near((ra + rb) * 15 / 16)
    assert next(check for check in face["checks"] if check["key"] == "class")["pass"] is True
    assert face["verdict"] == "seal"
