# Source: Engineering Civil, "What is the purpose of using movement accommodation factor for joint sealant?", web page (read):
# M = 4 mm, MAF = 30 % -> 13.3 mm. Printed to 0.1 mm.
# Known difference: BS 6093 as recalled has M / MAF + M (17.3 mm); see test_bs_6093.py. The caller chooses.
import pytest
from printed import Case, locator

from beadwright.physics import strain

CASES = [
    Case("all of it opening", {"opening_mm": 4.0, "closing_mm": 0.0}, 13.3, 0.1),
    Case("all of it closing", {"opening_mm": 0.0, "closing_mm": 4.0}, 13.3, 0.1),
    Case("half and half", {"opening_mm": 2.0, "closing_mm": 2.0}, 13.3, 0.1),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_width_matches_the_maf_page(case):
    case.check(strain.width_for_swing_mm(shear_mm=0.0, total_fraction=0.30, **case.inputs))
