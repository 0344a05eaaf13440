# Source: derived geometry of the stretched bond line, sqrt((w + o)^2 + s^2) = (1 + S) w; the single forms are those of ASTM C1472
# (from memory). Tables to 6 digits (glueline to 3). Nothing here was read in a publication.
import pytest
from printed import DERIVED, Case, locator

from beadwright.physics import strain

WIDTHS = [
    Case("shear alone, S 0.125, W/dL", {"opening_mm": 0.0, "shear_mm": 1.0, "extension_fraction": 0.125}, 1.940285, 1e-6, DERIVED),
    Case("shear alone, S 0.25, W/dL", {"opening_mm": 0.0, "shear_mm": 1.0, "extension_fraction": 0.25}, 1.333333, 1e-6, DERIVED),
    Case("shear alone, S 0.50, W/dL", {"opening_mm": 0.0, "shear_mm": 1.0, "extension_fraction": 0.50}, 0.894427, 1e-6, DERIVED),
    Case("shear alone, S 1.00, W/dL", {"opening_mm": 0.0, "shear_mm": 1.0, "extension_fraction": 1.00}, 0.577350, 1e-6, DERIVED),
    Case("extension alone, S 0.125, W/dL", {"opening_mm": 1.0, "shear_mm": 0.0, "extension_fraction": 0.125}, 8.0, 1e-6, DERIVED),
    Case("extension alone, S 0.25, W/dL", {"opening_mm": 1.0, "shear_mm": 0.0, "extension_fraction": 0.25}, 4.0, 1e-6, DERIVED),
    Case("extension alone, S 0.50, W/dL", {"opening_mm": 1.0, "shear_mm": 0.0, "extension_fraction": 0.50}, 2.0, 1e-6, DERIVED),
    Case("extension alone, S 1.00, W/dL", {"opening_mm": 1.0, "shear_mm": 0.0, "extension_fraction": 1.00}, 1.0, 1e-6, DERIVED),
    Case("dE 3, dS 0, S 0.25", {"opening_mm": 3.0, "shear_mm": 0.0, "extension_fraction": 0.25}, 12.0, 1e-6, DERIVED),
    Case("dE 0, dS 3, S 0.25", {"opening_mm": 0.0, "shear_mm": 3.0, "extension_fraction": 0.25}, 4.0, 1e-6, DERIVED),
    Case("dE 3, dS 4, S 0.25", {"opening_mm": 3.0, "shear_mm": 4.0, "extension_fraction": 0.25}, 13.870832, 1e-6, DERIVED),
    Case("glueline, shear 3, S 0.125", {"opening_mm": 0.0, "shear_mm": 3.0, "extension_fraction": 0.125}, 5.821, 1e-3, DERIVED),
    Case("glueline, shear 3, S 0.25", {"opening_mm": 0.0, "shear_mm": 3.0, "extension_fraction": 0.25}, 4.000, 1e-3, DERIVED),
    Case("glueline, shear 3, S 0.50", {"opening_mm": 0.0, "shear_mm": 3.0, "extension_fraction": 0.50}, 2.683, 1e-3, DERIVED),
]


@pytest.mark.parametrize("case", WIDTHS, ids=locator)
def test_width_matches_the_derived_tables(case):
    case.check(strain.width_for_opening_mm(**case.inputs))


def test_back_check_of_the_combined_case():
    inputs = {"width_mm": 13.870832, "opening_mm": 3.0, "shear_mm": 4.0}
    Case("W 13.870832 back", inputs, 0.25, 1e-6, DERIVED).check(strain.stretch_fraction(**inputs))
