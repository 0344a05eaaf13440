# Source: FHWA pavement notebook ch. 3, compression-seal sample pp. 3.3.7-3.3.8 (read): dL = C L (alpha dT + eps), C = 0.8, L = 60 ft,
# alpha = 5.5e-6/degF, 14 to 90 degF, eps = 1.0e-4: 0.298 (0.3) in = 7.58 mm; W >= dL / (0.55 - 0.20) = 0.86 in.
# The base's restraint is typed as the share that moves: 0.8 of each half, 40 % of a slab. The seal works between 20 and 55 % of its
# width, a total of 35 %, so the width stands under the total-swing convention. Only the movement part of the source is checked: the
# app does not size preformed seals.
import pytest
from printed import COMPUTED, INCH_MM, READ, Case, locator
from typed import at, evaluated, own_class, side

CASES = [
    Case("dL, exact", {"place": "movement.opening_mm"}, 0.298368 * INCH_MM, 1e-6 * INCH_MM, COMPUTED),
    Case("dL, 0.298 in", {"place": "movement.opening_mm"}, 0.298 * INCH_MM, 0.001 * INCH_MM, READ),
    Case("dL, 7.58 mm", {"place": "movement.opening_mm"}, 7.58, 0.01, READ),
    Case("W, 0.86 in", {"place": "width.required_mm"}, 0.86 * INCH_MM, 0.01 * INCH_MM, READ, tolerance=0.01 * INCH_MM, reason="the source divides the rounded 0.3 in; unrounded it is 0.8525 in"),
    Case("W, unrounded", {"place": "width.required_mm"}, 0.298368 / 0.35 * INCH_MM, 1e-4, COMPUTED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_slab_joint_matches_fhwa(case):
    slab = side("5.5 e-6/degF", "60 ft", "14 degF", "90 degF", fixity="share", moving_share="40 %", moisture_irreversible="-0.01 %")
    answer = evaluated({"side_a": slab, "side_b": slab}, site={"convention": "total-swing"}, sealant=own_class(25, 25, 35), units="inch")
    case.check(at(answer, case.inputs["place"]))
