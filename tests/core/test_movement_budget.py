"""Faults once found in the movement budget, each held by a test of its name."""

import math

import pytest

from jobs import make_job, only_joint

# 6 m of concrete at 10e-6/K feed the joint (3 m a side) from -20 to 50 degC: 0.06 mm/K over 70 K.
RANGE_MM = 0.06 * 70
TOTAL = {"convention": "total-swing"}


def width(joint, **more):
    return only_joint(make_job(joint, **more))["width"]


@pytest.mark.parametrize("seal", [{}, {"seal_from": "15 degC", "seal_to": "15 degC"}, {"seal_from": "5 degC", "seal_to": "30 degC"}, {"seal_to": "30 degC"}], ids=["free", "one", "range", "half"])
def test_total_swing_once_counted_the_range_both_ways(seal):
    """A bead is sealed once: what it opens and closes together is the range, not twice the range."""
    assert width(dict(seal), site=TOTAL, sealant={"class": "iso-25"})["required_mm"] == pytest.approx(RANGE_MM / 0.25)


def test_a_bead_sealed_beyond_the_range_swings_from_there():
    assert width({"seal_from": "60 degC", "seal_to": "60 degC"}, site=TOTAL, sealant={"class": "iso-25"})["required_mm"] == pytest.approx(0.06 * 80 / 0.25)


def test_wetting_and_drying_counts_once_in_a_total_swing():
    side = {"moisture_reversible": "0.02 %"}
    assert width({"side_a": side}, site=TOTAL, sealant={"class": "iso-25"})["required_mm"] == pytest.approx((RANGE_MM + 3000 * 0.0002) / 0.25)


def test_total_swing_verdict_once_said_beyond_while_the_window_said_any_temperature():
    joint = only_joint(make_job({"width": "17 mm", "width_is": "built", "face": {"width": "17 mm", "surface": "15 degC"}}, site=TOTAL, sealant={"class": "iso-25"}))
    share = RANGE_MM / 0.25 / 17
    assert joint["verdict"] == "at-limit" and joint["width"]["use_fraction"] == pytest.approx(share)
    assert (joint["window"]["from_c"], joint["window"]["to_c"]) == (-20, 50)
    assert next(check for check in joint["face"]["checks"] if check["key"] == "class")["value"] == f"{math.ceil(1000 * share) / 10:.1f} %"


def test_least_closed_gap_limits_the_window_of_a_total_swing():
    """17 mm may close by 3 mm where 14 mm must stay: 50 K under the hottest."""
    joint = only_joint(make_job({"width": "17 mm", "width_is": "built"}, site=TOTAL | {"closed_gap": "14 mm"}, sealant={"class": "iso-25"}))
    assert joint["window"]["from_c"] == pytest.approx(50 - 3 / 0.06) and joint["window"]["to_c"] == 50


def test_spacing_of_a_total_swing_is_its_inverse():
    spacing = width({"width": "12 mm", "width_is": "built", "causes": [{"label": "Load", "opening": "1 mm"}]}, site=TOTAL, sealant={"class": "iso-25"})["spacing_mm"]
    assert spacing == pytest.approx((12 * 0.25 - 1) / (10e-6 * 70))


def test_the_other_convention_of_a_lap_takes_the_whole_swing():
    """Each way the lap slides 4.2 mm from sealing at the worst; in total it slides the same range once."""
    lap = width({"kind": "lap", "seal_from": "15 degC", "seal_to": "15 degC"}, sealant={"class": "iso-25"})
    root = math.sqrt(2 * 0.25 + 0.25**2)
    assert lap["required_mm"] == pytest.approx(0.06 * 35 / root)
    assert lap["other_convention"]["required_mm"] == pytest.approx(RANGE_MM / root)


def test_rows_of_a_lap_add_up_to_its_slip():
    """Heat and growth close what cold opens: the rows once took the greater of each by itself."""
    side = {"moisture_irreversible": "0.05 %"}
    joint = only_joint(make_job({"kind": "lap", "side_a": side, "seal_from": "-10 degC", "seal_to": "40 degC"}))
    movement = joint["movement"]
    assert sum(row["shear_mm"] for row in movement["causes"]) == pytest.approx(movement["shear_mm"])
    assert movement["shear_mm"] == pytest.approx(0.06 * 60 + 3000 * 0.0005)
    assert any(step["symbol"] == "s_along" for step in joint["steps"])


ALONG = {"length_along": "5 m"}


def test_sides_that_slip_alike_between_their_extremes_still_slip_from_the_sealing():
    """A from 0 to 60, B from -20 to 40 degC: 60 K each, but sealed at 20 both slip by 20 K at either end."""
    sides = {"side_a": ALONG | {"winter_surface": "0 degC", "summer_surface": "60 degC"}, "side_b": ALONG | {"winter_surface": "-20 degC", "summer_surface": "40 degC"}}
    free = only_joint(make_job({"kind": "mixed"} | sides))["movement"]["shear_mm"]
    at_20 = only_joint(make_job({"kind": "mixed", "seal_from": "20 degC", "seal_to": "20 degC"} | sides))["movement"]["shear_mm"]
    assert free == at_20 == pytest.approx(10e-6 * 5000 * 20)


def test_moisture_along_the_joint_is_part_of_the_slip():
    """Brick that grows beside concrete that shrinks slips by both; only temperature was counted once."""
    brick = ALONG | {"moisture_irreversible": "0.05 %"}
    concrete = ALONG | {"moisture_irreversible": "-0.04 %", "moisture_reversible": "0.02 %"}
    joint = only_joint(make_job({"kind": "mixed", "side_a": brick, "side_b": concrete}))
    assert joint["movement"]["shear_mm"] == pytest.approx(5000 * 0.0009 + 5000 * 0.0002)
