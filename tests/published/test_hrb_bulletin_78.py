# Source: HRB Bulletin 78 (1953), New Jersey, annual change of joint width by slab length (read). Printed to 0.01 in.
# The range of slab temperature is not printed. One range, 48 K, is fitted to all five lengths with the FHWA concrete (9.9e-6/K)
# on granular base (0.80): strain 3.8e-4. So the five values check the proportion to length, with one fitted number.
import pytest
from printed import FOOT_MM, INCH_MM, Case, locator

from beadwright.physics import thermal

CASES = [
    Case(f"{feet} ft slab", {"length_mm": feet * FOOT_MM}, change, 0.01)
    for feet, change in ((15, 0.07), (20, 0.09), (30, 0.14), (50, 0.23), (100, 0.46))
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_annual_change_matches_hrb_bulletin_78(case):
    slab = {"expansion_per_k": 9.9e-6, "delta_temp_k": 48.0, "shrinkage_fraction": 0.0, "friction_fraction": 0.80}
    case.check(thermal.restrained_change_mm(**case.inputs, **slab) / INCH_MM)
