# Source: a German contractor's page on DIN 18540 (read): spacing to 2, 3.5, 5, 6.5, 8 m -> nominal width 15, 20, 25, 30, 35 mm and
# depth 8, 10, 12, 15, 15 mm. The plausibility of the least widths is derived: 12e-6/K x 80 K x spacing at 25 % in total asks for 7.7,
# 13.4, 19.2, 25.0, 30.7 mm. Known difference: at 25 mm the core's half-width rule gives 12.5 mm where the page prints 12.
import pytest
from printed import DERIVED, READ, Case, locator
from typed import at, evaluated, side

ROWS = [("2 m", 15, 8, 7.7), ("3.5 m", 20, 10, 13.4), ("5 m", 25, 12, 19.2), ("6.5 m", 30, 15, 25.0), ("8 m", 35, 15, 30.7)]
DEPTHS = [Case(f"depth at {width} mm", {"width": f"{width} mm"}, depth, 1.0, READ) for _, width, depth, _ in ROWS]
WIDTHS = [Case(f"least width at {spacing}", {"spacing": spacing}, least, 0.1, DERIVED) for spacing, _, _, least in ROWS]


@pytest.mark.parametrize("case", DEPTHS, ids=locator)
def test_depth_matches_the_page(case):
    case.check(at(evaluated({"width": case.inputs["width"]}, site={"depth_rule": "german-facade"}), "depth.neck_mm"))


@pytest.mark.parametrize("case", WIDTHS, ids=locator)
def test_least_width_at_a_total_of_a_quarter(case):
    half = side("12 e-6/K", case.inputs["spacing"], "-20 degC", "60 degC")
    answer = evaluated({"side_a": half, "side_b": half}, site={"convention": "total-swing"}, sealant={"class": "iso-25"})
    case.check(at(answer, "width.required_mm"))
