# Source: Eden District Council (UK), movement joints in clay brick (read): joints at 12 m, width in mm about 30 % more than the spacing
# in m, so 12 m -> about 16 mm, filler compressible to 50 %. The strain that this hides, 1.3 mm/m x 50 % = 0.65 mm/m, is derived and
# typed as the brick's lasting growth; so the case checks growth, spacing and rounding, not the rule itself.
import pytest
from printed import DERIVED, READ, Case, locator
from typed import at, evaluated, own_class, side

CASES = [
    Case("12 m, exact", {"spacing": "12 m", "place": "width.required_mm"}, 15.6, 0.1, DERIVED),
    Case("12 m, about 16 mm", {"spacing": "12 m", "place": "width.design_mm"}, 16.0, 1.0, READ),
    Case("9 m, exact", {"spacing": "9 m", "place": "width.required_mm"}, 11.7, 0.1, DERIVED),
    Case("9 m, about 12 mm", {"spacing": "9 m", "place": "width.design_mm"}, 12.0, 1.0, DERIVED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_brick_joint_matches_the_thirty_per_cent_rule(case):
    wall = side("0 e-6/K", case.inputs["spacing"], "-10 degC", "40 degC", substrate="brick-clay", moisture_irreversible="0.65 mm/m")
    case.check(at(evaluated({"side_a": wall, "side_b": wall}, sealant=own_class(50, 50)), case.inputs["place"]))
