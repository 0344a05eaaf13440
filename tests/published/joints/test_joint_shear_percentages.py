# Stretch of the line across a sheared bead, sqrt(w^2 + s^2) / w - 1, worked by hand (computed): a 12 mm joint sheared by 6 mm
# stretches by 12 %, by 9 mm by 25 %.
import pytest
from printed import COMPUTED, Case, locator
from typed import at, evaluated, loaded

CASES = [
    Case("12 mm, 6 mm of slip", {"slip": "6 mm"}, 0.12, 0.01, COMPUTED),
    Case("12 mm, 9 mm of slip", {"slip": "9 mm"}, 0.25, 0.01, COMPUTED),
]


@pytest.mark.parametrize("kind", ["mixed", "lap"])
@pytest.mark.parametrize("case", CASES, ids=locator)
def test_stretch_of_a_sheared_bead(case, kind):
    case.check(at(evaluated(loaded(("", "", case.inputs["slip"]), kind=kind, width="12 mm", width_is="built")), "strain.cold_average_fraction"))
