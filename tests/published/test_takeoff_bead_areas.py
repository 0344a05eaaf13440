# Source: derived geometry of bead sections (circular segments, hourglass, fillets, round beads), made with shapely 2.2.0 and closed forms that
# agree to 1e-4; nothing here was read in a publication. The second half measures each section with shapely itself, to 1e-6 relative.
import math

import pytest
from printed import DERIVED, LIBRARY, Case, locator
from shapely.geometry import Point, Polygon

from takeoffs import make_takeoff, taken

NECKS = {
    "20 × 10, 2, 4": ((20, 10, 2, 4), 238.118, 1e-3),
    "20 × 10, 0, 4": ((20, 10, 0, 4), 224.997, 1e-3),
    "20 × 10, 2, 0": ((20, 10, 2, 0), 213.121, 1e-3),
    "12 × 6, 1, 2": ((12, 6, 1, 2), 83.606, 1e-3),
    "10 × 6, 1, 1.5": ((10, 6, 1, 1.5), 68.103, 1e-3),
    "10 × 6, 1, 2.5": ((10, 6, 1, 2.5), 70.808, 1e-3),
}
HOURGLASS = [Case(name, {"of": of}, area, step, LIBRARY) for name, (of, area, step) in NECKS.items()]
FILLETS = [
    Case(f"{a} × {b}, {sag}, {face}", {"a": a, "b": b, "sag": sag, "face": face}, area, 1e-5, LIBRARY)
    for (a, b, sag), areas in {(6, 6, 1): (18.0, 12.28078, 23.71922), (6, 6, 1.5): (18.0, 9.30623, 26.69377), (8, 8, 1): (32.0, 24.41060, 39.58940), (10, 10, 2): (50.0, 30.84548, 69.15452)}.items()
    for face, area in zip(("flat", "concave", "convex"), areas, strict=True)
]
METRES = [
    Case("flat 6 × 6", {"face": "flat"}, 16.667, 1e-3, LIBRARY),
    Case("tangent cove 6 × 6", {"face": "concave", "sag": 1.757359}, 38.832, 1e-3, LIBRARY),
    # Its sag is printed to a millionth here, so the area is good to 1e-5 and the metres to the printed step.
    Case("quarter round 6 × 6", {"face": "convex", "sag": 1.757359}, 10.610, 1e-3, LIBRARY),
]


def area_of(row):
    return taken(make_takeoff([{"length": "1 m", **row}]))["runs"][0]["area_mm2"]


def butt_of(width, neck, tool, rod):
    return area_of({"section": "butt", "width": f"{width} mm", "depth": f"{neck} mm", "tool_sag": f"{tool} mm", "rod_sag": f"{rod} mm"})


def fillet_of(a, b, sag, face):
    return area_of({"section": "fillet", "leg_a": f"{a} mm", "leg_b": f"{b} mm", "face": face, "sagitta": f"{sag} mm"})


@pytest.mark.parametrize("case", HOURGLASS, ids=locator)
def test_butt_with_tooling_and_rod(case):
    case.check(butt_of(*case.inputs["of"]))


@pytest.mark.parametrize("case", FILLETS, ids=locator)
def test_fillets(case):
    case.check(fillet_of(case.inputs["a"], case.inputs["b"], case.inputs["sag"], case.inputs["face"]))


@pytest.mark.parametrize("case", METRES, ids=locator)
def test_metres_of_fillet_per_300_ml(case):
    case.check(300.0 / fillet_of(6, 6, case.inputs.get("sag", 0), case.inputs["face"]))


def test_round_bead_of_6_mm():
    Case("Ø 6", {}, 28.274, 1e-3, DERIVED).check(area_of({"section": "round", "width": "6 mm"}))


def test_the_shares_that_an_hourglass_adds_and_saves():
    """Printed: 7 to 23 % more than w × throat over the listed cases."""
    shares = [butt_of(*of) / (of[0] * of[1]) for of, _, _ in NECKS.values()]
    assert [round(share, 4) for share in shares] == [1.1906, 1.1250, 1.0656, 1.1612, 1.1350, 1.1801]


# ---- shapely as the oracle, 1e-6 relative ------------------------------------------------------

POINTS = 8001


def arc(x1, y1, x2, y2, sag):
    """Points of a circular arc whose middle lies `sag` to the right of the way from 1 to 2."""
    if sag == 0:
        return [(x1, y1), (x2, y2)]
    chord = math.hypot(x2 - x1, y2 - y1)
    radius = (chord * chord / 4 + sag * sag) / (2 * sag)
    nx, ny = (y2 - y1) / chord, -(x2 - x1) / chord
    cx, cy = (x1 + x2) / 2 + nx * (sag - radius), (y1 + y2) / 2 + ny * (sag - radius)
    start = math.atan2(y1 - cy, x1 - cx)
    sweep = 4 * math.atan(2 * sag / chord)
    points = [(cx + radius * math.cos(start + turn * sweep * k / (POINTS - 1)), cy + radius * math.sin(start + turn * sweep * k / (POINTS - 1))) for turn in (1,) for k in range(POINTS)]
    if math.hypot(points[-1][0] - x2, points[-1][1] - y2) > 1e-6:
        points = [(cx + radius * math.cos(start - sweep * k / (POINTS - 1)), cy + radius * math.sin(start - sweep * k / (POINTS - 1))) for k in range(POINTS)]
    assert math.hypot(points[-1][0] - x2, points[-1][1] - y2) < 1e-6
    return points


@pytest.mark.parametrize(("width", "neck", "tool", "rod"), [(20, 10, 2, 4), (12.5, 6.3, 1.1, 3), (30, 15, 3, 7.5), (9, 7, 0, 2), (10, 5, 0.4, 5)])
def test_butt_against_shapely(width, neck, tool, rod):
    bond = neck + tool + rod
    # Top edge hollow downwards, bottom edge hollow upwards; walked clockwise from the left top.
    top = arc(0, 0, width, 0, tool)
    bottom = arc(width, -bond, 0, -bond, rod)
    shape = Polygon([*top, *bottom])
    assert shape.is_valid
    assert butt_of(width, neck, tool, rod) == pytest.approx(shape.area, rel=1e-6)


@pytest.mark.parametrize(("a", "b", "sag", "face"), [(6, 6, 1, "concave"), (10, 7, 0.8, "concave"), (12, 5, 2, "convex"), (8, 8, 3, "convex"), (9, 4, 0, "flat"), (15, 6, 1.2, "concave")])
def test_fillet_against_shapely(a, b, sag, face):
    # From the end of leg a to the end of leg b; the corner lies to the left of that way.
    line = arc(a, 0, 0, b, sag if face == "convex" else 0)
    if face == "concave":
        line = arc(0, b, a, 0, sag)[::-1]
    shape = Polygon([(0, 0), *line])
    assert shape.is_valid
    assert fillet_of(a, b, sag, face) == pytest.approx(shape.area, rel=1e-6)


def test_round_bead_against_shapely():
    assert area_of({"section": "round", "width": "9 mm"}) == pytest.approx(Point(0, 0).buffer(4.5, quad_segs=4000).area, rel=1e-6)


@pytest.mark.parametrize("section", ["lap", "bridge", "bed"])
def test_plain_bands_are_rectangles(section):
    assert area_of({"section": section, "width": "17 mm", "depth": "3 mm"}) == pytest.approx(51.0, rel=1e-12)
