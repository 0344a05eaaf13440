# Source: US TM 5-809-3 (masonry), eq. 4-1 W_x = [0.0003 + 0.000004 dT] L (read); the values at dT = 100 degF are worked out by hand.
# Tolerance half of 0.001 in.
import pytest
from printed import COMPUTED, FOOT_MM, INCH_MM, Case, locator

from beadwright.physics import thermal

CASES = [
    Case("eq. 4-1, 20 ft", {"length_mm": 20.0 * FOOT_MM}, 0.168, 0.001, COMPUTED),
    Case("eq. 4-1, 30 ft", {"length_mm": 30.0 * FOOT_MM}, 0.252, 0.001, COMPUTED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_expansion_matches_tm_5_809_3(case):
    grown_mm = thermal.length_change_mm(expansion_per_k=4.0e-6 * 1.8, delta_temp_k=100.0 / 1.8, **case.inputs)
    grown_mm += thermal.moisture_change_mm(strain_fraction=3.0e-4, **case.inputs)
    case.check(grown_mm / INCH_MM)
