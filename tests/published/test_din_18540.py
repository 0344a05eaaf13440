# Source: DIN 18540, guide table of joint spacing and widths; least widths at +10 degC 10/15/20/25/30 mm are values from memory.
# The strain behind them, 12e-6/K x 80 K at 25 % total, is a derived plausibility check, not printed in the standard.
# Tolerance: the table moves in steps of 5 mm, so half a step.
import pytest
from printed import DERIVED, MEMORY, Case, locator

from beadwright.physics import strain, thermal

SPACINGS_M = (2.0, 3.5, 5.0, 6.5, 8.0)
CASES = [Case(f"least width at {m} m", {"length_mm": 1000.0 * m}, w, 5.0, MEMORY) for m, w in zip(SPACINGS_M, (10, 15, 20, 25, 30), strict=True)]
CASES += [
    Case(f"plausible width at {m} m", {"length_mm": 1000.0 * m}, w, 0.1, DERIVED)
    for m, w in zip(SPACINGS_M, (7.7, 13.4, 19.2, 25.0, 30.7), strict=True)
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_width_matches_din_18540(case):
    swing_mm = thermal.length_change_mm(expansion_per_k=12.0e-6, delta_temp_k=80.0, **case.inputs)
    case.check(strain.width_for_swing_mm(opening_mm=swing_mm, closing_mm=0.0, shear_mm=0.0, total_fraction=0.25))
