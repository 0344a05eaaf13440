# Source: BIA Technical Notes 18 and 18A (2006), clay brick: thermal 4e-6/degF, moisture 5e-4, range 100 degF (read); spacing
# S_e = w e / 0.09 (value from memory); 23 ft 2 in = 7.06 m printed in TN18A p. 4, its inputs 1/2 in and 50 % inferred. Second reader:
# Conspectus (2011): 3/8 in, 50 %, 0.0009 -> 208 in (read). Here the spacing is asked of a finished joint: panels held at mid-length,
# any length typed, the answer being the length that may feed the joint.
import pytest
from printed import COMPUTED, FOOT_MM, INCH_MM, MEMORY, READ, Case, locator
from typed import at, evaluated, side


def case(place, width, percent, spacing_mm, step_mm, status):
    return Case(place, {"width": width, "percent": percent}, spacing_mm, step_mm, status)


CASES = [
    case("TN18A p. 4, 23 ft 2 in", "1/2 in", 50, 278 * INCH_MM, INCH_MM, READ),
    case("TN18A p. 4, exact", "1/2 in", 50, 277.8 * INCH_MM, 0.1 * INCH_MM, COMPUTED),
    case("TN18A p. 4, 7.06 m", "1/2 in", 50, 7060.0, 10.0, READ),
    case("Conspectus, 208 in", "3/8 in", 50, 208 * INCH_MM, INCH_MM, READ),
    case("Conspectus, exact", "3/8 in", 50, 208.33 * INCH_MM, 0.01 * INCH_MM, COMPUTED),
    case("3/8 in, 25 %, ft", "3/8 in", 25, 8.68 * FOOT_MM, 0.01 * FOOT_MM, MEMORY),
    case("3/8 in, 25 %, m", "3/8 in", 25, 2650.0, 10.0, MEMORY),
    case("3/8 in, 50 %, ft", "3/8 in", 50, 17.36 * FOOT_MM, 0.01 * FOOT_MM, MEMORY),
    case("1/2 in, 25 %, ft", "1/2 in", 25, 11.57 * FOOT_MM, 0.01 * FOOT_MM, MEMORY),
    case("1/2 in, 25 %, m", "1/2 in", 25, 3530.0, 10.0, MEMORY),
    case("1/2 in, 50 %, ft", "1/2 in", 50, 23.15 * FOOT_MM, 0.01 * FOOT_MM, MEMORY),
    case("5/8 in, 25 %, ft", "5/8 in", 25, 14.47 * FOOT_MM, 0.01 * FOOT_MM, MEMORY),
    case("5/8 in, 50 %, ft, before the cap", "5/8 in", 50, 28.94 * FOOT_MM, 0.01 * FOOT_MM, MEMORY),
    case("5/8 in, 50 %, m, before the cap", "5/8 in", 50, 8820.0, 10.0, MEMORY),
    case("3/4 in, 25 %, ft", "3/4 in", 25, 17.36 * FOOT_MM, 0.01 * FOOT_MM, MEMORY),
    case("3/4 in, 50 %, ft, before the cap", "3/4 in", 50, 34.72 * FOOT_MM, 0.01 * FOOT_MM, MEMORY),
    case("3/4 in, 50 %, m, before the cap", "3/4 in", 50, 10580.0, 10.0, MEMORY),
]


@pytest.mark.parametrize("typed_length", ["10 ft", "25 ft"])
@pytest.mark.parametrize("case", CASES, ids=locator)
def test_spacing_for_a_width_matches_bia(case, typed_length):
    wythe = side("4 e-6/degF", typed_length, "0 degF", "100 degF", substrate="brick-clay", moisture_irreversible="0.05 %")
    answer = evaluated({"side_a": wythe, "side_b": wythe, "width": case.inputs["width"], "width_is": "built"}, sealant={"class": f"c920-{case.inputs['percent']}"}, units="inch")
    case.check(at(answer, "width.spacing_mm"))
