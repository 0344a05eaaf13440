# Source: Design of Reinforced Masonry Structures, example 3.1 (inputs read, its solution cut off): a 24 ft wall, 70 to 120 degF.
# With k_t = 4.5e-6/degF (value from memory) it grows by 0.0648 in = 1.646 mm (worked by hand).
import pytest
from printed import COMPUTED, INCH_MM, Case, locator
from typed import STILL, at, evaluated, side

CASES = [Case("in inches", {}, 0.0648 * INCH_MM, 0.0001 * INCH_MM, COMPUTED), Case("in millimetres", {}, 1.646, 0.001, COMPUTED)]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_growth_of_the_wall(case):
    wall = side("4.5 e-6/degF", "24 ft", "70 degF", "120 degF", fixity="far-end")
    case.check(at(evaluated({"side_a": wall, "side_b": STILL}, units="inch"), "movement.closing_mm"))
