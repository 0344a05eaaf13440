"""Bead section: limits, identities, and shapely as an independent measure of area and length."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad
from shapely.geometry import LineString, Point, Polygon, box

from beadwright.physics import section

CHORD = st.floats(1.0, 200.0)
SHALLOW = st.floats(0.001, 0.5)
POINTS = 4001


def arc_points(chord_mm: float, sag_mm: float) -> list[tuple[float, float]]:
    """Points on a circular arc that hangs below its chord from (0, 0) to (chord, 0)."""
    radius = (chord_mm**2 / 4.0 + sag_mm**2) / (2.0 * sag_mm)
    half = math.acos(max(-1.0, min(1.0, (radius - sag_mm) / radius)))
    middle = chord_mm / 2.0, radius - sag_mm
    angles = [-math.pi / 2.0 - half + 2.0 * half * i / (POINTS - 1) for i in range(POINTS)]
    return [(middle[0] + radius * math.cos(a), middle[1] + radius * math.sin(a)) for a in angles]


@pytest.mark.parametrize("chord_mm", [6.0, 20.0])
@pytest.mark.parametrize("share", [0.02, 0.1, 0.25, 0.5, 0.8, 1.5])
def test_segment_against_shapely(chord_mm, share):
    points = arc_points(chord_mm, share * chord_mm)
    assert section.segment_area_mm2(chord_mm, share * chord_mm) == pytest.approx(Polygon(points).area, rel=2e-6)
    assert section.segment_arc_mm(chord_mm, share * chord_mm) == pytest.approx(LineString(points).length, rel=2e-6)


@pytest.mark.parametrize("width_mm, neck_mm, tool_mm, rod_mm", [(20.0, 10.0, 2.0, 4.0), (12.0, 6.0, 1.0, 2.0), (10.0, 6.0, 5.0, 2.5), (8.0, 4.0, 0.5, 4.0)])
def test_hourglass_against_shapely(width_mm, neck_mm, tool_mm, rod_mm):
    bond_mm = section.bond_depth_mm(neck_mm, tool_mm, rod_mm)
    top = [(x, bond_mm + y) for x, y in arc_points(width_mm, tool_mm)]
    back = [(x, -y) for x, y in arc_points(width_mm, rod_mm)]
    outline = Polygon(top + back[::-1])
    assert outline.is_valid
    assert section.hourglass_area_mm2(width_mm, neck_mm, tool_mm, rod_mm) == pytest.approx(outline.area, rel=1e-6)


@pytest.mark.parametrize("leg_a_mm, leg_b_mm, sag_mm", [(6.0, 6.0, 1.0), (10.0, 10.0, 2.0), (12.0, 6.0, 1.2), (5.0, 9.0, 0.4)])
def test_fillet_against_shapely(leg_a_mm, leg_b_mm, sag_mm):
    """The corner at the origin, the face from (a, 0) to (0, b), bowed towards the corner or away from it."""
    chord_mm = math.hypot(leg_a_mm, leg_b_mm)
    along = -leg_a_mm / chord_mm, leg_b_mm / chord_mm
    inwards = -leg_b_mm / chord_mm, -leg_a_mm / chord_mm
    arc = [(x, -y) for x, y in arc_points(chord_mm, sag_mm)]

    def placed(side: float) -> Polygon:
        face = [(leg_a_mm + x * along[0] + side * y * inwards[0], x * along[1] + side * y * inwards[1]) for x, y in arc]
        return Polygon([(0.0, 0.0), *face])

    assert section.fillet_area_mm2(leg_a_mm, leg_b_mm, sag_mm, "concave") == pytest.approx(placed(1.0).area, rel=1e-6)
    assert section.fillet_area_mm2(leg_a_mm, leg_b_mm, sag_mm, "convex") == pytest.approx(placed(-1.0).area, rel=1e-6)
    assert section.fillet_area_mm2(leg_a_mm, leg_b_mm, sag_mm, "flat") == pytest.approx(
        Polygon([(0, 0), (leg_a_mm, 0), (0, leg_b_mm)]).area, rel=1e-12
    )


@pytest.mark.parametrize("width_mm, rod_mm", [(10.0, 12.5), (12.0, 16.0), (20.0, 22.0), (20.0, 40.0)])
def test_rod_crown_against_a_drawn_circle(width_mm, rod_mm):
    """A circle cut by the joint: its top above the height where the joint faces cut it."""
    circle = Point(0.0, 0.0).buffer(rod_mm / 2.0, quad_segs=4096)
    between = circle.intersection(box(-width_mm / 2.0, -rod_mm, width_mm / 2.0, rod_mm))
    at_face = max(y for x, y in between.exterior.coords if abs(abs(x) - width_mm / 2.0) < 1e-9)
    assert section.rod_crown_mm(width_mm, rod_mm) == pytest.approx(rod_mm / 2.0 - at_face, rel=1e-4, abs=1e-6)


@given(CHORD, st.floats(0.001, 3.0))
def test_parabola_arc_against_quadrature(chord_mm, share):
    sag_mm = share * chord_mm
    length_mm, _ = quad(lambda x: math.hypot(1.0, 8.0 * sag_mm * x / chord_mm**2), -0.5 * chord_mm, 0.5 * chord_mm)
    assert section.parabola_arc_mm(chord_mm, sag_mm) == pytest.approx(length_mm, rel=1e-8)


@given(CHORD)
def test_a_straight_face(chord_mm):
    assert section.segment_area_mm2(chord_mm, 0.0) == 0.0
    assert section.parabola_area_mm2(chord_mm, 0.0) == 0.0
    assert section.segment_arc_mm(chord_mm, 0.0) == chord_mm
    assert section.parabola_arc_mm(chord_mm, 0.0) == chord_mm
    assert section.segment_radius_mm(chord_mm, 0.0) == math.inf


@given(CHORD)
def test_half_a_circle(chord_mm):
    assert section.segment_radius_mm(chord_mm, chord_mm / 2.0) == pytest.approx(chord_mm / 2.0)
    assert section.segment_area_mm2(chord_mm, chord_mm / 2.0) == pytest.approx(math.pi * chord_mm**2 / 8.0)
    assert section.segment_arc_mm(chord_mm, chord_mm / 2.0) == pytest.approx(math.pi * chord_mm / 2.0)


@given(CHORD, SHALLOW)
def test_a_circle_holds_a_little_more_than_a_parabola(chord_mm, share):
    circle = section.segment_area_mm2(chord_mm, share * chord_mm)
    parabola = section.parabola_area_mm2(chord_mm, share * chord_mm)
    assert parabola <= circle <= 1.18 * parabola


@given(CHORD, st.floats(1e-7, 0.014))
def test_a_nearly_flat_segment_keeps_its_digits(chord_mm, share):
    """Series 2 c s / 3 + 8 s^3 / (15 c) to its next term, where the plain formula would have lost half of its digits."""
    sag_mm = share * chord_mm
    series = 2.0 * chord_mm * sag_mm / 3.0 + 8.0 * sag_mm**3 / (15.0 * chord_mm)
    assert section.segment_area_mm2(chord_mm, sag_mm) == pytest.approx(series, rel=2.0 * share**4 + 1e-14)


def test_series_and_closed_form_meet():
    chord_mm = 20.0
    edge_mm = 0.5 * chord_mm * 0.03
    below = section.segment_area_mm2(chord_mm, edge_mm * (1.0 - 1e-12))
    above = section.segment_area_mm2(chord_mm, edge_mm * (1.0 + 1e-12))
    assert above == pytest.approx(below, rel=1e-11)


@given(CHORD, st.floats(0.0, 2.0), st.floats(0.001, 0.5))
def test_a_deeper_arc_is_larger_and_longer(chord_mm, share, more):
    sag_mm, deeper_mm = share * chord_mm, (share + more) * chord_mm
    assert section.segment_area_mm2(chord_mm, deeper_mm) > section.segment_area_mm2(chord_mm, sag_mm)
    assert section.segment_arc_mm(chord_mm, deeper_mm) > section.segment_arc_mm(chord_mm, sag_mm)
    assert section.parabola_arc_mm(chord_mm, deeper_mm) > section.parabola_arc_mm(chord_mm, sag_mm)


@given(st.floats(3.0, 60.0), st.floats(2.0, 30.0), st.floats(0.0, 0.5), st.floats(0.0, 0.5))
def test_the_section_lies_between_throat_and_bond_depth(width_mm, neck_mm, tool, rod):
    tool_mm, rod_mm = tool * width_mm, rod * width_mm
    bond_mm = section.bond_depth_mm(neck_mm, tool_mm, rod_mm)
    for arc in ("circle", "parabola"):
        area = section.hourglass_area_mm2(width_mm, neck_mm, tool_mm, rod_mm, arc)
        assert width_mm * neck_mm * (1.0 - 1e-12) <= area <= width_mm * bond_mm * (1.0 + 1e-12)


@given(st.floats(3.0, 60.0), st.floats(2.0, 30.0))
def test_a_flat_section_is_a_rectangle(width_mm, neck_mm):
    assert section.hourglass_area_mm2(width_mm, neck_mm, 0.0, 0.0) == width_mm * neck_mm
    assert section.exposed_perimeter_mm(width_mm, 0.0) == width_mm
    assert section.exposed_perimeter_mm(width_mm, 0.0, "parabola") == width_mm


@given(st.floats(3.0, 60.0), SHALLOW)
def test_the_open_face_is_its_arc(width_mm, share):
    sag_mm = share * width_mm
    assert section.exposed_perimeter_mm(width_mm, sag_mm) == section.segment_arc_mm(width_mm, sag_mm)
    assert section.exposed_perimeter_mm(width_mm, sag_mm, "parabola") == section.parabola_arc_mm(width_mm, sag_mm)


@given(st.floats(3.0, 60.0), st.floats(1.0, 4.0))
def test_the_crown_lies_below_half_the_width_and_falls_with_the_rod(width_mm, over):
    crown_mm = section.rod_crown_mm(width_mm, over * width_mm)
    assert 0.0 < crown_mm <= width_mm / 2.0
    assert section.rod_crown_mm(width_mm, (over + 0.1) * width_mm) < crown_mm


@given(st.floats(3.0, 60.0))
def test_crown_limits(width_mm):
    assert section.rod_crown_mm(width_mm, width_mm) == pytest.approx(width_mm / 2.0)
    assert section.rod_crown_mm(width_mm, 1.25 * width_mm) == pytest.approx(width_mm / 4.0)


@given(st.floats(3.0, 60.0), st.floats(0.2, 3.0))
def test_compression_and_oversize_are_two_things(width_mm, over):
    compression = section.rod_compression_fraction(width_mm, over * width_mm)
    assert (1.0 - compression) * over == pytest.approx(1.0, rel=1e-9)
    assert (compression < 0.0) == (over * width_mm < width_mm)


@given(st.floats(2.0, 40.0), st.floats(2.0, 40.0), st.floats(0.0, 0.2))
def test_concave_and_convex_fillets_make_a_rectangle(leg_a_mm, leg_b_mm, share):
    sag_mm = share * min(leg_a_mm, leg_b_mm) ** 2 / max(leg_a_mm, leg_b_mm)
    both = sum(section.fillet_area_mm2(leg_a_mm, leg_b_mm, sag_mm, face) for face in ("concave", "convex"))
    assert both == pytest.approx(leg_a_mm * leg_b_mm, rel=1e-12)
    assert section.fillet_area_mm2(leg_b_mm, leg_a_mm, sag_mm, "concave") == section.fillet_area_mm2(leg_a_mm, leg_b_mm, sag_mm, "concave")


def test_a_hollow_that_cuts_into_a_leg_is_refused():
    section.fillet_area_mm2(6.0, 6.0, 1.757, "concave")
    with pytest.raises(ValueError, match=r"sagitta_mm is 1\.76"):
        section.fillet_area_mm2(6.0, 6.0, 1.76, "concave")
    with pytest.raises(ValueError, match=r"sagitta_mm is 1\.76"):
        section.fillet_area_mm2(20.0, 6.0, 1.76, "concave")


def test_a_bulge_past_half_a_circle_is_refused():
    section.fillet_area_mm2(6.0, 8.0, 5.0, "convex")
    with pytest.raises(ValueError, match=r"sagitta_mm is 5\.01"):
        section.fillet_area_mm2(6.0, 8.0, 5.01, "convex")


def test_an_unknown_word_is_refused():
    with pytest.raises(ValueError, match=r"face is 'round'.*'flat'"):
        section.fillet_area_mm2(6.0, 6.0, 1.0, "round")
    with pytest.raises(ValueError, match=r"arc is 'oval'.*'circle'"):
        section.hourglass_area_mm2(20.0, 10.0, 2.0, 4.0, "oval")
    with pytest.raises(ValueError, match=r"arc is 'oval'"):
        section.exposed_perimeter_mm(20.0, 2.0, "oval")
