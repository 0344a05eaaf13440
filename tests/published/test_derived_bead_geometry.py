# Source: derived geometry of circular segments, the hourglass section and corner fillets; areas made with shapely 2.2.0 (4001-point
# arcs) and closed forms, which agreed to 1e-4. Printed to 4 to 6 decimals. Nothing here was read in a publication.
import math

import pytest
from printed import DERIVED, LIBRARY, Case, locator

from beadwright.physics import section

# Chord, sag: radius, area.
SEGMENTS = {
    (20.0, 2.0): (26.0, 26.878797),
    (20.0, 3.0): (18.16667, 40.711010),
    (20.0, 5.0): (12.5, 69.889878),
    (12.0, 1.5): (12.75, 12.148688),
    (10.0, 1.0): (13.0, 6.719699),
    (10.0, 2.5): (6.25, 17.472469),
    (10.0, 5.0): (5.0, 39.269908),
    (25.0, 3.0): (27.54167, 50.571349),
}
ANGLES = {(20.0, 2.0): 45.2397, (20.0, 3.0): 66.7970, (20.0, 5.0): 106.2602, (12.0, 1.5): 56.1450, (10.0, 5.0): 180.0, (25.0, 3.0): 53.9829}


def case(place: str, inputs: dict[str, object], expected: float, step: float, status: str = LIBRARY) -> Case:
    return Case(place, inputs, expected, step, status)


RADII = [case(f"c {c}, s {s}", {"chord_mm": c, "sagitta_mm": s}, radius, 1e-5) for (c, s), (radius, _) in SEGMENTS.items()]
AREAS = [case(f"c {c}, s {s}", {"chord_mm": c, "sagitta_mm": s}, area, 1e-6) for (c, s), (_, area) in SEGMENTS.items()]
PARABOLAS = [
    case("c 20, s 2", {"chord_mm": 20.0, "sagitta_mm": 2.0}, 26.6667, 1e-4),
    case("c 20, s 3", {"chord_mm": 20.0, "sagitta_mm": 3.0}, 40.0, 1e-4),
    case("c 20, s 5", {"chord_mm": 20.0, "sagitta_mm": 5.0}, 66.6667, 1e-4),
    case("c 10, s 2.5", {"chord_mm": 10.0, "sagitta_mm": 2.5}, 16.6667, 1e-4),
    case("c 25, s 3", {"chord_mm": 25.0, "sagitta_mm": 3.0}, 50.0, 1e-4),
]

# Width, throat, tooled sag, rod sag: bond depth, area, area over w x throat, area over w x bond depth.
HOURGLASSES = {
    (20.0, 10.0, 2.0, 4.0): (16.0, 238.118, 1.1906, 0.7441),
    (20.0, 10.0, 0.0, 4.0): (14.0, 224.997, 1.1250, 0.8036),
    (20.0, 10.0, 2.0, 0.0): (12.0, 213.121, 1.0656, 0.8880),
    (12.0, 6.0, 1.0, 2.0): (9.0, 83.606, 1.1612, 0.7741),
    (10.0, 6.0, 1.0, 1.5): (8.5, 68.103, 1.1350, 0.8012),
    (10.0, 6.0, 1.0, 2.5): (9.5, 70.808, 1.1801, 0.7453),
}

# Legs a, b, sag: flat, concave, convex.
FILLETS = {
    (6.0, 6.0, 1.0): (18.0, 12.28078, 23.71922),
    (6.0, 6.0, 1.5): (18.0, 9.30623, 26.69377),
    (8.0, 8.0, 1.0): (32.0, 24.41060, 39.58940),
    (10.0, 10.0, 2.0): (50.0, 30.84548, 69.15452),
}
FILLET_CASES = [
    case(f"{a} x {b}, sag {s}, {face}", {"leg_a_mm": a, "leg_b_mm": b, "sagitta_mm": s, "face": face}, area, 1e-5)
    for (a, b, s), row in FILLETS.items()
    for face, area in zip(("flat", "concave", "convex"), row, strict=True)
]


@pytest.mark.parametrize("case", RADII, ids=locator)
def test_radius(case):
    case.check(section.segment_radius_mm(**case.inputs))


@pytest.mark.parametrize("case", AREAS, ids=locator)
def test_segment_area(case):
    case.check(section.segment_area_mm2(**case.inputs))


@pytest.mark.parametrize("chord_mm, sagitta_mm", ANGLES)
def test_arc_is_radius_times_the_printed_angle(chord_mm, sagitta_mm):
    radius_mm, _ = SEGMENTS[chord_mm, sagitta_mm]
    angle = ANGLES[chord_mm, sagitta_mm]
    half_step = radius_mm * math.radians(0.00005) + math.radians(angle) * 0.000005
    reason = "printed angle to 0.0001 degree and radius to 0.00001"
    printed = Case("arc", {}, radius_mm * math.radians(angle), 1e-5, LIBRARY, tolerance=half_step, reason=reason)
    printed.check(section.segment_arc_mm(chord_mm, sagitta_mm))


@pytest.mark.parametrize("case", PARABOLAS, ids=locator)
def test_parabola_area(case):
    case.check(section.parabola_area_mm2(**case.inputs))


@pytest.mark.parametrize("sizes", HOURGLASSES)
def test_hourglass(sizes):
    width_mm, neck_mm, tool_mm, rod_mm = sizes
    bond_mm, area_mm2, over_neck, over_bond = HOURGLASSES[sizes]
    found_mm2 = section.hourglass_area_mm2(width_mm, neck_mm, tool_mm, rod_mm)
    found_bond_mm = section.bond_depth_mm(neck_mm, tool_mm, rod_mm)
    case("bond depth", {}, bond_mm, 0.1, DERIVED).check(found_bond_mm)
    case("area", {}, area_mm2, 0.001).check(found_mm2)
    case("area over w x throat", {}, over_neck, 0.0001).check(found_mm2 / (width_mm * neck_mm))
    case("area over w x bond depth", {}, over_bond, 0.0001).check(found_mm2 / (width_mm * found_bond_mm))


@pytest.mark.parametrize("case", FILLET_CASES, ids=locator)
def test_fillet(case):
    case.check(section.fillet_area_mm2(**case.inputs))


def test_fillet_limits():
    """A hollow tangent to both legs and a quarter round of radius 6 mm."""
    sag_mm = 6.0 * (math.sqrt(2.0) - 1.0) / math.sqrt(2.0)
    case("sag of the tangent cove", {}, 1.757359, 1e-6, DERIVED).check(sag_mm)
    case("tangent cove", {}, 7.725666, 1e-6, DERIVED).check(section.fillet_area_mm2(6.0, 6.0, sag_mm, "concave"))
    case("quarter round", {}, 28.274334, 1e-6, DERIVED).check(section.fillet_area_mm2(6.0, 6.0, sag_mm, "convex"))


def test_half_round_bead():
    case("half of a 6 mm circle", {}, 14.137, 0.001, DERIVED).check(section.segment_area_mm2(6.0, 3.0))
