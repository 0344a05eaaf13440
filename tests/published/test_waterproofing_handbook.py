# Source: Kubal, Construction Waterproofing Handbook, p. 5.6 (joint four times the movement), p. 12.20 (field measurement of a 1/2 in
# joint), p. 5.29 (polysulfide moves 16 to 20 %, design six times the movement), all read. Percentages printed to 1 %, multiples whole.
import pytest
from printed import INCH_MM, Case, locator

from beadwright.physics import strain

CHANGES = [
    Case("p. 12.20, closing 3/8 in", {"opening_mm": -0.375 * INCH_MM}, -75.0, 1.0),
    Case("p. 12.20, opening 1/4 in", {"opening_mm": 0.25 * INCH_MM}, 50.0, 1.0),
]


@pytest.mark.parametrize("case", CHANGES, ids=locator)
def test_strain_matches_kubal(case):
    case.check(100.0 * strain.stretch_fraction(width_mm=0.5 * INCH_MM, shear_mm=0.0, **case.inputs))


def test_total_swing_matches_kubal():
    """p. 12.20: total 125 %; so at that total share the joint needs just its 1/2 in."""
    least = strain.width_for_swing_mm(0.25 * INCH_MM, 0.375 * INCH_MM, 0.0, 1.255)
    most = strain.width_for_swing_mm(0.25 * INCH_MM, 0.375 * INCH_MM, 0.0, 1.245)
    assert least <= 0.5 * INCH_MM <= most


@pytest.mark.parametrize("width_for", [lambda m: strain.width_for_opening_mm(m, 0.0, 0.25), lambda m: strain.width_for_closing_mm(m, 0.25)])
def test_four_times_the_movement_matches_kubal(width_for):
    Case("p. 5.6, multiple of the movement", {}, 4.0, 1.0, tolerance=1e-9).check(width_for(2.5) / 2.5)


def test_six_times_the_movement_lies_in_the_polysulfide_range_of_kubal():
    """p. 5.29: 16 to 20 % and six times the movement; 16 % alone would ask for 6.25, 20 % for 5."""
    assert strain.width_for_opening_mm(1.0, 0.0, 0.20) < 6.0 < strain.width_for_opening_mm(1.0, 0.0, 0.16)
