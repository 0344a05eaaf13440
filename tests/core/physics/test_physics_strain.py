"""Width and strain: limits, inverses, sign, monotonic, and scipy as an independent solver."""

from __future__ import annotations

import math

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.optimize import brentq

from beadwright.physics import strain

MOVEMENT = st.floats(0.0, 200.0)
SOME_MOVEMENT = st.floats(0.01, 200.0)
SHEAR = st.floats(-200.0, 200.0)
CLASS = st.floats(0.05, 1.5)
WIDTH = st.floats(1.0, 200.0)
DEPTH = st.floats(1.0, 60.0)
MORE = st.floats(0.0, 50.0)
A_LITTLE = 1e-9


def not_less(first: float, second: float) -> bool:
    """At least as much, with room for the last binary digits."""
    return first >= second - A_LITTLE * max(abs(first), abs(second), 1e-6)


@given(SOME_MOVEMENT, CLASS)
def test_opening_alone_is_o_over_s(opening_mm, share):
    assert strain.width_for_opening_mm(opening_mm, 0.0, share) == pytest.approx(opening_mm / share, rel=1e-12)


@given(SOME_MOVEMENT, CLASS)
def test_shear_alone_is_s_over_the_root(shear_mm, share):
    expected = shear_mm / math.sqrt(2.0 * share + share**2)
    assert strain.width_for_opening_mm(0.0, shear_mm, share) == pytest.approx(expected, rel=1e-12)


@given(MOVEMENT, SHEAR, CLASS)
def test_shear_has_no_side(opening_mm, shear_mm, share):
    assert strain.width_for_opening_mm(opening_mm, shear_mm, share) == strain.width_for_opening_mm(opening_mm, -shear_mm, share)


@given(MOVEMENT, SHEAR, CLASS, MORE)
def test_more_opening_is_never_narrower(opening_mm, shear_mm, share, more_mm):
    less = strain.width_for_opening_mm(opening_mm, shear_mm, share)
    assert not_less(strain.width_for_opening_mm(opening_mm + more_mm, shear_mm, share), less)


@given(MOVEMENT, MOVEMENT, CLASS, MORE)
def test_more_shear_is_never_narrower(opening_mm, shear_mm, share, more_mm):
    less = strain.width_for_opening_mm(opening_mm, shear_mm, share)
    assert not_less(strain.width_for_opening_mm(opening_mm, shear_mm + more_mm, share), less)


@given(MOVEMENT, SHEAR, CLASS, st.floats(0.1, 1.0))
def test_a_smaller_class_is_never_narrower(opening_mm, shear_mm, share, part):
    larger = strain.width_for_opening_mm(opening_mm, shear_mm, share)
    assert not_less(strain.width_for_opening_mm(opening_mm, shear_mm, share * part), larger)


@given(MOVEMENT, st.floats(0.05, 1.0), st.floats(0.1, 1.0), MORE)
def test_closing_is_monotonic(closing_mm, share, part, more_mm):
    width_mm = strain.width_for_closing_mm(closing_mm, share)
    assert not_less(strain.width_for_closing_mm(closing_mm, share * part), width_mm)
    assert not_less(strain.width_for_closing_mm(closing_mm + more_mm, share), width_mm)


@given(st.floats(0.01, 200.0), st.floats(0.01, 1.0))
def test_at_the_width_for_closing_the_gap_has_lost_its_share(closing_mm, share):
    width_mm = strain.width_for_closing_mm(closing_mm, share)
    assert strain.stretch_fraction(width_mm, -closing_mm * (1.0 - 1e-12), 0.0) == pytest.approx(-share, rel=1e-9)


@given(SOME_MOVEMENT, SOME_MOVEMENT, CLASS)
def test_swing_without_shear_is_the_whole_movement_over_the_total(opening_mm, closing_mm, share):
    found_mm = strain.width_for_swing_mm(opening_mm, closing_mm, 0.0, share)
    assert found_mm == pytest.approx((opening_mm + closing_mm) / share, rel=1e-12)


@given(MOVEMENT, MOVEMENT, SHEAR, CLASS, MORE)
def test_swing_is_monotonic_and_symmetric(opening_mm, closing_mm, shear_mm, share, more_mm):
    width_mm = strain.width_for_swing_mm(opening_mm, closing_mm, shear_mm, share)
    assert not_less(strain.width_for_swing_mm(opening_mm + more_mm, closing_mm, shear_mm, share), width_mm)
    assert not_less(strain.width_for_swing_mm(opening_mm, closing_mm + more_mm, shear_mm, share), width_mm)
    assert strain.width_for_swing_mm(closing_mm, opening_mm, shear_mm, share) == width_mm


@given(MOVEMENT, CLASS)
def test_the_width_after_closing_takes_the_total(total_mm, share):
    width_mm = strain.swing_on_closed_width_mm(total_mm, share)
    assert (width_mm - total_mm) * share == pytest.approx(total_mm, rel=1e-9, abs=1e-12)
    assert not_less(width_mm, strain.width_for_swing_mm(total_mm, 0.0, 0.0, share))


# Below 1e-150 mm the square of a movement is less than the smallest float; nothing built moves so little.
TINY = st.just(0.0) | st.floats(1e-150, 200.0)


@given(TINY, TINY, CLASS)
def test_no_movement_needs_no_width_and_any_movement_some(opening_mm, shear_mm, share):
    width_mm = strain.width_for_opening_mm(opening_mm, shear_mm, share)
    assert (width_mm == 0.0) == (opening_mm == 0.0 and shear_mm == 0.0)


@given(st.floats(0.01, 50.0), st.floats(-50.0, 50.0), CLASS)
def test_at_the_width_the_stretch_is_the_class(opening_mm, shear_mm, share):
    width_mm = strain.width_for_opening_mm(opening_mm, shear_mm, share)
    assert strain.stretch_fraction(width_mm, opening_mm, shear_mm) == pytest.approx(share, rel=1e-9)


@given(st.floats(0.01, 50.0), st.floats(0.0, 50.0), CLASS)
def test_width_and_allowed_opening_undo_each_other(opening_mm, shear_mm, share):
    width_mm = strain.width_for_opening_mm(opening_mm, shear_mm, share)
    assert strain.allowed_opening_mm(width_mm, shear_mm, share) == pytest.approx(opening_mm, rel=1e-7, abs=1e-9 * width_mm)


@given(st.floats(0.0, 50.0), st.floats(0.05, 50.0), CLASS)
def test_width_and_allowed_shear_undo_each_other(opening_mm, shear_mm, share):
    width_mm = strain.width_for_opening_mm(opening_mm, shear_mm, share)
    assume(shear_mm > 1e-3 * width_mm)
    assert strain.allowed_shear_mm(width_mm, opening_mm, share) == pytest.approx(shear_mm, rel=1e-6)


@given(WIDTH, SHEAR, CLASS)
def test_allowed_opening_lies_between_its_limits(width_mm, shear_mm, share):
    allowed_mm = strain.allowed_opening_mm(width_mm, shear_mm, share)
    assert -width_mm <= allowed_mm <= share * width_mm * (1.0 + A_LITTLE)
    if allowed_mm > -width_mm:
        assert strain.stretch_fraction(width_mm, allowed_mm, shear_mm) == pytest.approx(share, rel=1e-9, abs=1e-9)
    else:
        assert strain.stretch_fraction(width_mm, -width_mm, shear_mm) >= share * (1.0 - A_LITTLE)


@given(WIDTH, CLASS, st.floats(0.0, 3.0))
def test_allowed_shear_is_negative_just_when_the_opening_is_too_much(width_mm, share, part):
    assume(abs(part - 1.0) > 1e-6)
    opening_mm = part * share * width_mm
    assert (strain.allowed_shear_mm(width_mm, opening_mm, share) < 0.0) == (part > 1.0)


@given(st.floats(0.1, 50.0), st.floats(0.0, 50.0), CLASS)
def test_scipy_finds_the_same_width(opening_mm, shear_mm, share):
    """The condition itself, solved by bracketing; no use of our closed form."""

    def beyond(width_mm: float) -> float:
        return math.sqrt((width_mm + opening_mm) ** 2 + shear_mm**2) - (1.0 + share) * width_mm

    far_mm = 2.0 * (opening_mm + shear_mm) / min(share, 1.0) + 1.0
    solved_mm = brentq(beyond, 1e-9, far_mm, xtol=1e-12, rtol=1e-14, maxiter=500)
    assert strain.width_for_opening_mm(opening_mm, shear_mm, share) == pytest.approx(solved_mm, rel=1e-8)


@given(st.lists(st.floats(-100.0, 100.0), max_size=4))
def test_shear_parts_combine_as_a_vector(parts):
    assert strain.combined_shear_mm(*parts) == pytest.approx(math.sqrt(sum(part * part for part in parts)), rel=1e-12, abs=1e-12)


def test_no_shear_parts_give_nothing():
    assert strain.combined_shear_mm() == 0.0


@given(WIDTH, st.floats(-0.99, 5.0))
def test_stretch_without_shear_is_the_plain_strain(width_mm, share):
    assert strain.stretch_fraction(width_mm, share * width_mm, 0.0) == pytest.approx(share, rel=1e-9, abs=1e-12)


def test_a_closed_gap_has_lost_all_of_itself():
    assert strain.stretch_fraction(12.0, -12.0, 0.0) == -1.0


# Strain at the free face.


@given(WIDTH, DEPTH)
def test_nothing_moves_nothing_strains(width_mm, depth_mm):
    assert strain.face_strain(width_mm, depth_mm, 0.0) == 0.0
    assert strain.neck_after_mm(width_mm, depth_mm, 0.0) == depth_mm
    assert strain.face_sag_mm(width_mm, depth_mm, 0.0) == 0.0


@given(WIDTH, DEPTH, st.floats(-0.9, 2.0))
def test_neck_and_two_sags_make_the_depth(width_mm, depth_mm, share):
    change_mm = share * width_mm
    sag_mm = strain.face_sag_mm(width_mm, depth_mm, change_mm)
    assert strain.neck_after_mm(width_mm, depth_mm, change_mm) + 2.0 * sag_mm == pytest.approx(depth_mm, rel=1e-9, abs=1e-12)
    assert (sag_mm > 0.0) == (change_mm > 0.0)


@given(WIDTH, DEPTH, st.floats(-0.9, 2.0))
def test_the_volume_stays(width_mm, depth_mm, share):
    """Area between the two parabolas by numerical integration against the area when sealed."""
    gap_mm = width_mm * (1.0 + share)
    sag_mm = strain.face_sag_mm(width_mm, depth_mm, share * width_mm)
    area, _ = quad(lambda x: depth_mm - 2.0 * sag_mm * (1.0 - (2.0 * x / gap_mm - 1.0) ** 2), 0.0, gap_mm)
    assert area == pytest.approx(width_mm * depth_mm, rel=1e-9)


@given(WIDTH, st.floats(0.1, 4.0), st.floats(-0.8, 2.0))
def test_face_strain_against_an_integrated_arc(width_mm, ratio, share):
    gap_mm = width_mm * (1.0 + share)
    sag_mm = strain.face_sag_mm(width_mm, ratio * width_mm, share * width_mm)
    length_mm, _ = quad(lambda x: math.hypot(1.0, 8.0 * sag_mm * x / gap_mm**2), -0.5 * gap_mm, 0.5 * gap_mm)
    found = strain.face_strain(width_mm, ratio * width_mm, share * width_mm)
    assert found == pytest.approx(length_mm / width_mm - 1.0, rel=1e-7, abs=1e-9)


@given(WIDTH, DEPTH, st.floats(-0.9, 2.0))
def test_the_face_never_strains_less_than_the_gap(width_mm, depth_mm, share):
    assert strain.face_strain(width_mm, depth_mm, share * width_mm) >= share - 1e-12


@given(WIDTH, DEPTH, st.floats(0.0, 1.9), st.floats(0.0, 0.1), st.floats(1.0, 3.0))
def test_face_strain_grows_with_opening_and_depth(width_mm, depth_mm, share, more, deeper):
    found = strain.face_strain(width_mm, depth_mm, share * width_mm)
    assert not_less(strain.face_strain(width_mm, depth_mm, (share + more) * width_mm), found)
    assert not_less(strain.face_strain(width_mm, deeper * depth_mm, share * width_mm), found)


@given(WIDTH, DEPTH, st.floats(-0.9, 2.0), st.floats(0.1, 10.0))
def test_face_strain_depends_on_shape_not_size(width_mm, depth_mm, share, scale):
    first = strain.face_strain(width_mm, depth_mm, share * width_mm)
    assert strain.face_strain(scale * width_mm, scale * depth_mm, scale * share * width_mm) == pytest.approx(first, rel=1e-9, abs=1e-12)


def test_the_faces_meet_at_twice_the_width_and_no_further():
    assert strain.neck_after_mm(7.0, 9.0, 7.0 * strain.FACES_MEET_FRACTION) == 0.0
    with pytest.raises(ValueError, match="change_mm"):
        strain.neck_after_mm(7.0, 9.0, 14.1)


def test_inch_and_millimetre_entries_agree():
    """The relations are homogeneous: the same joint in inches gives the same width over 25.4."""
    in_mm = strain.width_for_opening_mm(0.12 * 25.4, 0.05 * 25.4, 0.25)
    assert in_mm == pytest.approx(25.4 * strain.width_for_opening_mm(0.12, 0.05, 0.25), rel=1e-12)
