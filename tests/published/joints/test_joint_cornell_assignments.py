# Source: Cornell ARCH 262 assignments 2002 and 2003, courses.cit.cornell.edu/arch262: W = (100 / X)(e L dT + M) + t with
# X = 50, e = 3.6e-6/degF, L = 240 in, dT = 95 degF, M = 0.0002 x 240 + 0.125 in, t = 0.125 in (inputs and formula read; the
# results were worked out by hand from them). M is a growth of the brick and an entered movement, both closing.
import pytest
from printed import COMPUTED, INCH_MM, Case, locator
from typed import STILL, at, evaluated, side

CASES = [
    Case("closing in all", {"place": "movement.closing_mm"}, 0.25508 * INCH_MM, 0.00001 * INCH_MM, COMPUTED),
    Case("before the tolerance", {"place": "width.required_mm"}, 0.51016 * INCH_MM, 0.00001 * INCH_MM, COMPUTED),
    Case("W with the tolerance, in", {"place": None}, 0.63516 * INCH_MM, 0.00001 * INCH_MM, COMPUTED),
    Case("W with the tolerance, mm", {"place": None}, 16.133, 0.001, COMPUTED),
    Case("up to the next 1/8 in", {"place": "width.design_mm"}, 0.75 * INCH_MM, 0.01, COMPUTED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_panel_joint_matches_cornell(case):
    panel = side("3.6 e-6/degF", "20'", "0 degF", "95 degF", moisture_irreversible="0.02 %")
    joint = {"side_a": panel | {"fixity": "far-end"}, "side_b": STILL, "loads": [("", "1/8 in")], "fabrication_tolerance": "1/8 in"}
    answer = evaluated(joint, site={"increment": "1/8 in"}, units="inch")
    case.check(at(answer, case.inputs["place"]) if case.inputs["place"] else at(answer, "width.required_mm") + at(answer, "width.tolerance_worst_mm"))
    assert answer["width"]["governed_by"] == "closing"
