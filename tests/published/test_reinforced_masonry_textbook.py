# Source: Design of Reinforced Masonry Structures, Ex 3.1 (24 ft wall, 70 to 120 degF) and Ex 3.3 (creep): inputs read, the printed
# solutions are cut off, so the results are worked out by hand; k_t 4.5e-6/degF and the creep coefficient are values from memory.
# Known difference: TEK 10-3 (Masonry Magazine 2003) has 4e-6/degF for the same wall: 0.0576 in.
import pytest
from printed import COMPUTED, FOOT_MM, INCH_MM, Case, locator

from beadwright.physics import thermal

CASES = [
    Case("Ex 3.1, TMS 402 coefficient", {"expansion_per_k": 4.5e-6 * 1.8}, 0.0648, 0.0001, COMPUTED),
    Case("Ex 3.1, TEK 10-3 coefficient", {"expansion_per_k": 4.0e-6 * 1.8}, 0.0576, 0.0001, COMPUTED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_wall_growth(case):
    grown_mm = thermal.length_change_mm(length_mm=24.0 * FOOT_MM, delta_temp_k=50.0 / 1.8, **case.inputs)
    case.check(grown_mm / INCH_MM)


def test_wall_growth_in_mm():
    Case("Ex 3.1 in mm", {}, 1.646, 0.001, COMPUTED).check(thermal.length_change_mm(24.0 * FOOT_MM, 4.5e-6 * 1.8, 50.0 / 1.8))


def test_creep_of_a_12_ft_wall():
    """Any strain takes the same road: 18.230 psi at 2.5e-7 for each psi."""
    crept_mm = thermal.moisture_change_mm(12.0 * FOOT_MM, 18.230 * 2.5e-7)
    Case("Ex 3.3 in inches", {}, 0.000656, 0.000001, COMPUTED).check(crept_mm / INCH_MM)
    Case("Ex 3.3 in mm", {}, 0.0167, 0.0001, COMPUTED).check(crept_mm)
