# Source: US Army TM 5-822-11 (UFC 3-250-08FA), p. C-3 (read): a 1 in preformed seal works from 0.80 in (20 % compression) to 0.40 in
# (60 %). Percentages printed to 1 %.
# Known difference: FHWA has 20 to 55 % and FP-96 20 to 50 % for the same kind of seal.
import pytest
from printed import INCH_MM, Case, locator

from beadwright.physics import section, strain

CASES = [
    Case("p. C-3, widest 0.80 in", {"gap": 0.80}, 20.0, 1.0),
    Case("p. C-3, narrowest 0.40 in", {"gap": 0.40}, 60.0, 1.0),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_compression_matches_tm_5_822_11(case):
    gap_mm = case.inputs["gap"] * INCH_MM
    case.check(100.0 * section.rod_compression_fraction(width_mm=gap_mm, rod_mm=INCH_MM))
    case.check(-100.0 * strain.stretch_fraction(width_mm=INCH_MM, opening_mm=gap_mm - INCH_MM, shear_mm=0.0))
