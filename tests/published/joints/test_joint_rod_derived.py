# Rod of 25 % over the joint, next size of the trade series (series and oversize: value from memory; vectors derived).
# 25 % over the joint is 20 % squeezed, 33 % is 25 %, 50 % is 33 % (derived).
import pytest
from printed import DERIVED, INCH_MM, Case, locator
from typed import at, evaluated

SIZES = [
    Case("12 mm", {"width": "12 mm", "series": "metric"}, 15.0, 0.01, DERIVED),
    Case("20 mm", {"width": "20 mm", "series": "metric"}, 25.0, 0.01, DERIVED),
    Case("16 mm", {"width": "16 mm", "series": "metric"}, 20.0, 0.01, DERIVED),
    Case("10 mm", {"width": "10 mm", "series": "metric"}, 13.0, 0.01, DERIVED),
    Case("3/8 in: 0.469 in", {"width": "3/8 in", "series": "inch"}, 0.5 * INCH_MM, 0.01, DERIVED),
    Case("1/2 in: 0.625 in", {"width": "1/2 in", "series": "inch"}, 0.625 * INCH_MM, 0.01, DERIVED),
    Case("5/8 in: 0.781 in", {"width": "5/8 in", "series": "inch"}, 0.875 * INCH_MM, 0.01, DERIVED),
    Case("3/4 in: 0.938 in", {"width": "3/4 in", "series": "inch"}, 1.0 * INCH_MM, 0.01, DERIVED),
    Case("1 in: 1.25 in", {"width": "1 in", "series": "inch"}, 1.25 * INCH_MM, 0.01, DERIVED),
]


@pytest.mark.parametrize("case", SIZES, ids=locator)
def test_rod_for_a_width(case):
    answer = evaluated({"width": case.inputs["width"], "width_is": "built"}, site={"rod_series": case.inputs["series"]})
    case.check(at(answer, "backing.diameter_mm"))


SQUEEZE = [
    Case("20 mm with 25 mm", {"width": "20 mm", "rod": "closed-cell"}, 0.20, 0.01, DERIVED),
    Case("15 mm with 20 mm", {"width": "15 mm", "rod": "closed-cell"}, 0.25, 0.01, DERIVED),
    Case("20 mm with 30 mm", {"width": "20 mm", "rod": "open-cell"}, 1 / 3, 0.01, DERIVED),
]


@pytest.mark.parametrize("case", SQUEEZE, ids=locator)
def test_oversize_is_not_compression(case):
    answer = evaluated({"width": case.inputs["width"], "width_is": "built", "rod": case.inputs["rod"]}, site={"rod_series": "metric"})
    case.check(at(answer, "backing.compression_least_fraction"))
