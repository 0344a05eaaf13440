# Source: derived from the two assumptions of Tons, "A Theoretical Approach to Design of a Road Joint Seal", HRB Bulletin 229
# (1959), pp. 20-53: parabolic faces and constant volume. His own printed table was not read. Table to 0.1 %, tolerance 0.05 %.
import pytest
from printed import DERIVED, Case, locator

from beadwright.physics import strain

EXTENSIONS = (0.10, 0.25, 0.50, 1.00)
TABLE = {
    0.5: (10.3, 26.2, 52.7, 104.6),
    1.0: (11.1, 29.6, 60.5, 117.4),
    2.0: (14.4, 42.2, 86.8, 159.9),
    8.0: (62.0, 181.5, 340.4, 549.8),
}
CASES = [
    Case(f"D/W {ratio:g}, extension {extension:.0%}", {"ratio": ratio, "extension": extension}, expected, 0.1, DERIVED)
    for ratio, row in TABLE.items()
    for extension, expected in zip(EXTENSIONS, row, strict=True)
]
NECKS = [
    Case("neck at +100 % is D/4", {"change_mm": 16.0}, 3.0, 0.001, DERIVED),
    Case("neck at +200 % is nothing", {"change_mm": 32.0}, 0.0, 0.001, DERIVED),
]


@pytest.mark.parametrize("width_mm", [6.0, 20.0])
@pytest.mark.parametrize("case", CASES, ids=locator)
def test_face_strain_matches_the_tons_model(case, width_mm):
    depth_mm, change_mm = case.inputs["ratio"] * width_mm, case.inputs["extension"] * width_mm
    case.check(100.0 * strain.face_strain(width_mm, depth_mm, change_mm))


@pytest.mark.parametrize("case", NECKS, ids=locator)
def test_neck_matches_the_tons_model(case):
    case.check(strain.neck_after_mm(width_mm=16.0, depth_mm=12.0, **case.inputs))
