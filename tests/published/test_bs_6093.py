# Source: BS 6093:1993 clause 5.2, W = M / MAF + M: value from memory, not verified. Tolerance half of 0.1 mm.
# Known difference: contradicts the plain W = M / MAF of test_engineering_civil_maf.py.
import pytest
from printed import MEMORY, Case, locator

from beadwright.physics import strain

CASES = [
    Case("M 4 mm, MAF 30 %", {"total_mm": 4.0, "total_fraction": 0.30}, 17.3, 0.1, MEMORY),
    Case("M 4 mm, MAF 25 %", {"total_mm": 4.0, "total_fraction": 0.25}, 20.0, 0.1, MEMORY),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_width_matches_bs_6093(case):
    case.check(strain.swing_on_closed_width_mm(**case.inputs))


def test_an_each_way_class_agrees_with_maf_at_twice_its_number():
    """Value from memory: W = M_total / MAF equals W = M_half / S only when MAF = 2 S."""
    each_way_mm = max(strain.width_for_opening_mm(3.0, 0.0, 0.25), strain.width_for_closing_mm(3.0, 0.25))
    assert each_way_mm == pytest.approx(strain.width_for_swing_mm(3.0, 3.0, 0.0, 0.50), rel=1e-12)
    assert each_way_mm != pytest.approx(strain.width_for_swing_mm(3.0, 3.0, 0.0, 0.25), rel=0.1)
