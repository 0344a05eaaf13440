# Source: TM 5-809-3, eq. 4-1, brick expansion W_x = (0.0003 + 0.000004 dT) L (read); results worked out by hand at dT = 100 degF:
# 20 ft -> 0.168 in, 30 ft -> 0.252 in. Known difference: BIA has 0.0005 for the growth.
import pytest
from printed import COMPUTED, INCH_MM, Case, locator
from typed import STILL, at, evaluated, side

CASES = [
    Case("20 ft", {"length": "20 ft"}, 0.168 * INCH_MM, 0.001 * INCH_MM, COMPUTED),
    Case("30 ft", {"length": "30 ft"}, 0.252 * INCH_MM, 0.001 * INCH_MM, COMPUTED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_expansion_of_brick(case):
    wall = side("4 e-6/degF", case.inputs["length"], "0 degF", "100 degF", fixity="far-end", moisture_irreversible="0.03 %")
    case.check(at(evaluated({"side_a": wall, "side_b": STILL}, units="inch"), "movement.closing_mm"))
