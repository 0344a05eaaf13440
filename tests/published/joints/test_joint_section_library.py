# Areas of the tooled section made with shapely 2.2.0, 4001-point arcs, and the closed form, which agree to 1e-4 (library); bond depth
# and ratios by arithmetic (derived). Crown of a round rod D = 1.25 w: exactly w / 4 (derived).
import pytest
from printed import DERIVED, LIBRARY, Case, locator
from typed import at, evaluated

ROWS = [  # width, throat, tooling hollow, rod crown, bond, area, area over width x throat
    (20, 10, 2, 4, 16, 238.118, 1.1906),
    (20, 10, 0, 4, 14, 224.997, 1.1250),
    (20, 10, 2, 0, 12, 213.121, 1.0656),
    (12, 6, 1, 2, 9, 83.606, 1.1612),
    (10, 6, 1, 1.5, 8.5, 68.103, 1.1350),
    (10, 6, 1, 2.5, 9.5, 70.808, 1.1801),
]
CASES = [
    Case(f"{w} x {d}, hollow {t}, crown {r}: {name}", {"row": (w, d, t, r), "part": name}, value, step, status)
    for w, d, t, r, bond, area, ratio in ROWS
    for name, value, step, status in (("bond", bond, 0.001, DERIVED), ("area", area, 0.001, LIBRARY), ("ratio", ratio, 0.0001, LIBRARY))
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_section_of_a_tooled_bead(case):
    width, neck, hollow, crown = case.inputs["row"]
    answer = evaluated({"width": f"{width} mm", "neck": f"{neck} mm", "tool_sag": f"{hollow} mm", "rod_sag": f"{crown} mm"})
    found = {"bond": at(answer, "depth.bond_mm"), "area": at(answer, "section.area_mm2"), "ratio": at(answer, "section.area_mm2") / at(answer, "section.rectangle_mm2")}
    case.check(found[case.inputs["part"]])


CROWNS = [
    Case("12 mm, rod 15", {"width": "12 mm"}, 3.0, 0.0001, DERIVED),
    Case("20 mm, rod 25", {"width": "20 mm"}, 5.0, 0.0001, DERIVED),
    Case("16 mm, rod 20", {"width": "16 mm"}, 4.0, 0.0001, DERIVED),
]


@pytest.mark.parametrize("case", CROWNS, ids=locator)
def test_crown_of_the_rod_chosen(case):
    case.check(at(evaluated({"width": case.inputs["width"], "width_is": "built"}), "section.rod_sag_mm"))
