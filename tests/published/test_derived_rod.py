# Source: derived geometry of a round rod of diameter D in a joint of width w. Oversize is not compression: 25 % over is 20 % compressed.
# Formula of the crown for an undeformed rod; foam deforms, so it is an estimate in practice. Percent whole, crown to 4 decimals.
import pytest
from printed import DERIVED, Case, locator

from beadwright.physics import section

COMPRESSIONS = [
    Case("25 % over", {"rod_mm": 12.5}, 20.0, 1.0, DERIVED),
    Case("33 % over", {"rod_mm": 13.3}, 25.0, 1.0, DERIVED),
    Case("50 % over", {"rod_mm": 15.0}, 33.0, 1.0, DERIVED),
]
CROWNS = [
    Case("10, rod 12.5", {"width_mm": 10.0, "rod_mm": 12.5}, 2.5, 0.0001, DERIVED),
    Case("12, rod 15", {"width_mm": 12.0, "rod_mm": 15.0}, 3.0, 0.0001, DERIVED),
    Case("20, rod 25", {"width_mm": 20.0, "rod_mm": 25.0}, 5.0, 0.0001, DERIVED),
    Case("12, rod 16", {"width_mm": 12.0, "rod_mm": 16.0}, 2.7085, 0.0001, DERIVED),
    Case("12, rod 13", {"width_mm": 12.0, "rod_mm": 13.0}, 4.0, 0.0001, DERIVED),
    Case("20, rod 22", {"width_mm": 20.0, "rod_mm": 22.0}, 6.4174, 0.0001, DERIVED),
]


@pytest.mark.parametrize("case", COMPRESSIONS, ids=locator)
def test_compression(case):
    case.check(100.0 * section.rod_compression_fraction(width_mm=10.0, **case.inputs))


@pytest.mark.parametrize("case", CROWNS, ids=locator)
def test_crown(case):
    case.check(section.rod_crown_mm(**case.inputs))
