# Source: Cornell ARCH 262 assignments of 2002 and 2003 (inputs and the textbook formula W = (100/X)[e L dT + M] + t read); the
# results are worked out by hand to the digits given. Tolerance half the last digit.
# X 50, e 3.6e-6/degF, L 240 in, dT 95 degF, M = 0.0002 x 240 + 0.125 in, t 0.125 in.
import pytest
from printed import COMPUTED, INCH_MM, Case, locator

from beadwright.physics import strain, thermal

LENGTH_MM = 240.0 * INCH_MM
OTHER_MM = 0.125 * INCH_MM
CASES = [
    Case("2002 and 2003, W in inches", {"per": INCH_MM}, 0.63516, 0.00001, COMPUTED),
    Case("2002 and 2003, W in mm", {"per": 1.0}, 16.133, 0.001, COMPUTED),
]


def closing_mm() -> float:
    """Movement of the assignment: heat, moisture and the entered eighth."""
    heat_mm = thermal.length_change_mm(LENGTH_MM, 3.6e-6 * 1.8, 95.0 / 1.8)
    return heat_mm + thermal.moisture_change_mm(LENGTH_MM, 0.0002) + OTHER_MM


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_width_matches_cornell(case):
    width_mm = strain.width_for_closing_mm(closing_mm(), 0.5)
    case.check((width_mm + OTHER_MM) / case.inputs["per"])  # t is added to the required width


def test_moisture_and_load_match_cornell():
    found_mm = thermal.moisture_change_mm(LENGTH_MM, 0.0002) + OTHER_MM
    Case("M in inches", {}, 0.173, 0.001, COMPUTED).check(found_mm / INCH_MM)
