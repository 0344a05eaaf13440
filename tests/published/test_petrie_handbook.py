# Source: Petrie, Handbook of Adhesives and Sealants, 1st ed., Fig. 3.24, p. 119 (percentages read). Printed to 10 %.
# Known difference: the width is not printed in the text read. 550 % needs D/W = 8, so W = 1/4 in for the 2 in seal; 160 % then
# needs a depth of 1/2 in, while the caption reads 1/4 in (D/W = 1 would give 117 %). The caption or its reading looks wrong.
# Two unknowns fitted to two numbers: a consistency check of the model, not an independent proof.
import pytest
from printed import INCH_MM, Case, locator

from beadwright.physics import strain

CASES = [
    Case("Fig. 3.24, deep seal (2 in), extension 100 %", {"depth_mm": 2.0 * INCH_MM}, expected=550.0, printed_step=10.0),
    Case("Fig. 3.24, shallow seal (1/2 in inferred), extension 100 %", {"depth_mm": 0.5 * INCH_MM}, expected=160.0, printed_step=10.0),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_face_strain_matches_petrie(case):
    width_mm = 0.25 * INCH_MM
    case.check(100.0 * strain.face_strain(width_mm=width_mm, change_mm=width_mm, **case.inputs))


def test_the_depth_in_the_caption_does_not_match_petrie():
    """Written down as found: the caption's 1/4 in depth is far from its own 160 %."""
    width_mm = 0.25 * INCH_MM
    Case("Fig. 3.24, caption depth, our reading", {}, expected=117.4, printed_step=0.1).check(
        100.0 * strain.face_strain(width_mm, 0.25 * INCH_MM, width_mm)
    )
