# Source: ISO 11600 Table 1, amplitude = class number: value from memory. The 12 mm specimen's widths are derived. To 0.1 mm.
import pytest
from printed import DERIVED, Case, locator

from beadwright.physics import strain

ROWS = ((0.25, 9.0, 15.0), (0.20, 9.6, 14.4), (0.125, 10.5, 13.5), (0.075, 11.1, 12.9))
WIDEST = [Case(f"class {100 * share:g}, widest", {"extension_fraction": share}, wide, 0.1, DERIVED) for share, _, wide in ROWS]
NARROWEST = [Case(f"class {100 * share:g}, narrowest", {"narrow_mm": narrow}, -share, 0.001, DERIVED) for share, narrow, _ in ROWS]


@pytest.mark.parametrize("case", WIDEST, ids=locator)
def test_widest_gap_of_the_specimen(case):
    case.check(12.0 + strain.allowed_opening_mm(width_mm=12.0, shear_mm=0.0, **case.inputs))


@pytest.mark.parametrize("case", NARROWEST, ids=locator)
def test_narrowest_gap_of_the_specimen(case):
    case.check(strain.stretch_fraction(12.0, case.inputs["narrow_mm"] - 12.0, 0.0))


@pytest.mark.parametrize("share, narrow_mm", [(share, narrow) for share, narrow, _ in ROWS])
def test_the_amplitude_asks_for_just_the_specimen(share, narrow_mm):
    Case("12 mm", {}, 12.0, 0.001, DERIVED).check(strain.width_for_closing_mm(12.0 - narrow_mm, share))
