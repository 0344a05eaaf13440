# Source: ASTM C920 classes, each way about the width except 100/50 (value from memory); widths derived: extension 10 and
# compression 6 mm at 100/50 ask for max(10 / 1.0, 6 / 0.5) = 12 mm; a 20 mm joint at 100/50 runs from 10 to 40 mm.
import pytest
from printed import DERIVED, Case, locator
from typed import STILL, at, evaluated, loaded, side

CASES = [
    Case("10 opening and 6 closing", {"load": ("10 mm", "6 mm")}, 12.0, 1e-6, DERIVED),
    Case("20 mm opens to 40", {"load": ("20 mm", "")}, 20.0, 1e-6, DERIVED),
    Case("20 mm closes to 10", {"load": ("", "10 mm")}, 20.0, 1e-6, DERIVED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_width_at_the_unequal_class(case):
    case.check(at(evaluated(loaded(case.inputs["load"]), sealant={"class": "c920-100-50"}), "width.required_mm"))


WINDOW = [
    # 100 m at 10e-6/K moves 1 mm per kelvin: 20 mm to open and 10 mm to close are 20 K and 10 K.
    Case("coldest sealing, 10 K under the hottest", {"place": "window.from_c"}, 0.0, 0.001, DERIVED),
    Case("warmest sealing, 20 K over the coldest", {"place": "window.to_c"}, 10.0, 0.001, DERIVED),
]


@pytest.mark.parametrize("case", WINDOW, ids=locator)
def test_sealing_window_of_a_20_mm_joint(case):
    long = side("10 e-6/K", "100 m", "-10 degC", "10 degC", fixity="far-end")
    answer = evaluated({"side_a": long, "side_b": STILL | {"summer_surface": "10 degC", "winter_surface": "-10 degC"}, "width": "20 mm", "width_is": "built"}, sealant={"class": "c920-100-50"})
    case.check(at(answer, case.inputs["place"]))
