# Source: yields of sealant packages by width × depth. The foot-per-gallon figure of 1/4 × 1/4 in (308) is widely printed in trade handbooks
# (value from memory); the table around it is arithmetic on exact unit definitions, made with pint 0.25.3 as exact fractions, not by our code.
# Printed to 0.01; trade rows of PRACTICE to the whole foot.
from fractions import Fraction as F

import pytest
from printed import DERIVED, LIBRARY, MEMORY, Case, locator

from beadwright import quantity
from beadwright.takeoff import volume
from takeoffs import bed, make_takeoff, taken

# Width and depth in inches: feet per US gallon, per 10.1, 10.3, 20, 29 US fl oz, 300 and 600 ml.
INCH = {
    ("1/8", "1/8"): (1232.0, 97.21, 99.14, 192.50, 279.12, 97.64, 195.28),
    ("3/16", "3/16"): (547.56, 43.21, 44.06, 85.56, 124.06, 43.39, 86.79),
    ("1/4", "1/8"): (616.0, 48.61, 49.57, 96.25, 139.56, 48.82, 97.64),
    ("1/4", "1/4"): (308.0, 24.30, 24.78, 48.12, 69.78, 24.41, 48.82),
    ("3/8", "1/4"): (205.33, 16.20, 16.52, 32.08, 46.52, 16.27, 32.55),
    ("3/8", "3/8"): (136.89, 10.80, 11.02, 21.39, 31.01, 10.85, 21.70),
    ("1/2", "1/4"): (154.0, 12.15, 12.39, 24.06, 34.89, 12.20, 24.41),
    ("1/2", "3/8"): (102.67, 8.10, 8.26, 16.04, 23.26, 8.14, 16.27),
    ("1/2", "1/2"): (77.0, 6.08, 6.20, 12.03, 17.45, 6.10, 12.20),
    ("5/8", "1/2"): (61.6, 4.86, 4.96, 9.62, 13.96, 4.88, 9.76),
    ("3/4", "3/8"): (68.44, 5.40, 5.51, 10.69, 15.51, 5.42, 10.85),
    ("3/4", "1/2"): (51.33, 4.05, 4.13, 8.02, 11.63, 4.07, 8.14),
    ("7/8", "1/2"): (44.0, 3.47, 3.54, 6.88, 9.97, 3.49, 6.97),
    ("1", "3/8"): (51.33, 4.05, 4.13, 8.02, 11.63, 4.07, 8.14),
    ("1", "1/2"): (38.5, 3.04, 3.10, 6.02, 8.72, 3.05, 6.10),
}
PACKAGES = ("1 US gal", "10.1 US fl oz", "10.3 US fl oz", "20 US fl oz", "29 US fl oz", "300 ml", "600 ml")
# Width × depth in mm: metres per 300, 310, 400, 600 ml.
METRIC = {
    (5, 5): (12.0, 12.4, 16.0, 24.0), (6, 6): (8.333, 8.611, 11.111, 16.667), (8, 6): (6.25, 6.458, 8.333, 12.5), (8, 8): (4.688, 4.844, 6.25, 9.375),
    (10, 5): (6.0, 6.2, 8.0, 12.0), (10, 6): (5.0, 5.167, 6.667, 10.0), (10, 8): (3.75, 3.875, 5.0, 7.5), (10, 10): (3.0, 3.1, 4.0, 6.0),
    (12, 6): (4.167, 4.306, 5.556, 8.333), (12, 8): (3.125, 3.229, 4.167, 6.25), (15, 8): (2.5, 2.583, 3.333, 5.0), (15, 10): (2.0, 2.067, 2.667, 4.0),
    (20, 10): (1.5, 1.55, 2.0, 3.0), (25, 12): (1.0, 1.033, 1.333, 2.0), (25, 13): (0.923, 0.954, 1.231, 1.846), (30, 15): (0.667, 0.689, 0.889, 1.333), (40, 20): (0.375, 0.388, 0.5, 0.75),
}  # fmt: skip
INCH_CASES = [
    Case(f"{width} × {depth} in, {package}", {"width": width, "depth": depth, "package": package}, expected, 0.01, LIBRARY)
    for (width, depth), row in INCH.items()
    for package, expected in zip(PACKAGES, row, strict=True)
]
METRIC_CASES = [
    Case(f"{width} × {depth} mm, {package} ml", {"width": width, "depth": depth, "package": package}, expected, 0.001, LIBRARY)
    for (width, depth), row in METRIC.items()
    for package, expected in zip((300, 310, 400, 600), row, strict=True)
]
# Rounded as an estimator knows them, feet per gallon.
BY_HEART = [
    Case("1/4 × 1/4, trade handbooks", {"width": "1/4", "depth": "1/4"}, 308, 1, MEMORY),
    Case("1/2 × 1/4", {"width": "1/2", "depth": "1/4"}, 154, 1, DERIVED),
    Case("1/2 × 3/8", {"width": "1/2", "depth": "3/8"}, 103, 1, DERIVED),
    Case("3/4 × 3/8", {"width": "3/4", "depth": "3/8"}, 68, 1, DERIVED),
    Case("1 × 1/2", {"width": "1", "depth": "1/2"}, 38.5, 0.1, DERIVED),
]


def run_of(width: str, depth: str) -> dict[str, object]:
    return taken(make_takeoff([bed(width, depth, "1 m")]))["runs"][0]


@pytest.mark.parametrize("case", INCH_CASES, ids=locator)
def test_feet_per_package(case):
    area = run_of(f"{case.inputs['width']} in", f"{case.inputs['depth']} in")["area_mm2"]
    package = quantity.parse(case.inputs["package"], "volume", "ml").value
    case.check(volume.metres_per_package(package, area) / 0.3048)


@pytest.mark.parametrize("case", METRIC_CASES, ids=locator)
def test_metres_per_package(case):
    area = run_of(f"{case.inputs['width']} mm", f"{case.inputs['depth']} mm")["area_mm2"]
    case.check(volume.metres_per_package(case.inputs["package"], area))


@pytest.mark.parametrize("case", BY_HEART, ids=locator)
def test_feet_per_gallon_as_estimators_know_them(case):
    case.check(volume.feet_per_gallon(run_of(f"{case.inputs['width']} in", f"{case.inputs['depth']} in")["area_mm2"]))


def test_the_yield_table_of_the_answer_shows_the_same():
    found = taken(make_takeoff([bed("1/4 in", "1/4 in", "10 ft")], units="inch"))
    (table,) = (table for table in found["tables"] if table["key"] == "yields")
    assert table["rows"][0]["cells"][-1] == "308 ft" and table["rows"][0]["cells"][2] == "24.3 ft"


# Package contents: in³ and ml, to the printed digit.
CONTENTS = [("10.1 US fl oz", 18.2273, 298.69), ("10.3 US fl oz", 18.5883, 304.61), ("20 US fl oz", 36.0938, 591.47), ("29 US fl oz", 52.3359, 857.63), ("300 ml", 18.3071, 300.0), ("310 ml", 18.9174, 310.0)]


@pytest.mark.parametrize(("typed", "cubic_inches", "ml"), CONTENTS)
def test_package_contents(typed, cubic_inches, ml):
    reading = quantity.parse(typed, "volume", "ml")
    assert float(quantity.from_core("volume", reading.exact, "in3")) == pytest.approx(cubic_inches, abs=5.01e-5)
    assert reading.value == pytest.approx(ml, abs=5.01e-3)


def test_units_by_their_definitions_in_pint():
    """An independent registry, in floats: the exact fractions of the core agree to the last digits."""
    import pint

    ureg = pint.UnitRegistry()
    for label, name in (("US gal", "US_liquid_gallon"), ("US fl oz", "US_fluid_ounce"), ("US qt", "US_liquid_quart"), ("imp gal", "imperial_gallon"), ("imp fl oz", "imperial_fluid_ounce"), ("in3", "inch**3"), ("l", "liter")):
        assert float(quantity.to_core("volume", F(1), label)) == pytest.approx(ureg.Quantity(1.0, name).to("milliliter").magnitude, rel=1e-12), label
    assert float(quantity.to_core("coverage", F(1), "ft2/gal")) == pytest.approx(ureg.Quantity(1.0, "foot**2/US_liquid_gallon").to("meter**2/liter").magnitude, rel=1e-12)
    assert float(quantity.to_core("pace", F(1), "ft/h")) == pytest.approx(0.3048, rel=1e-15)


# A worked job: 1,850 m of 12 × 6 mm. Net 133.2 l; with 7 % it makes 142.5 l: 476 of 300 ml, 238 of 600 ml, 8 of 19 l (worked in our practice notes).
@pytest.mark.parametrize(("content", "count"), [("300 ml", 476), ("600 ml", 238), ("19 l", 8)])
def test_worked_job_of_1850_m(content, count):
    found = taken(make_takeoff([bed("12 mm", "6 mm", "1850 m")], packs=[{"name": "P", "volume": content}], waste="7 %"))
    assert found["net_ml"] == pytest.approx(133_200) and found["gross_ml"] == pytest.approx(142_524)
    assert found["orders"][0]["packs"][0]["count"] == count


def test_two_definitions_of_ten_percent():
    """Printed ×1.1000 against ×1.1111."""
    assert volume.with_waste(1.0, 0.1, "times") == pytest.approx(1.1000, abs=5e-5)
    assert volume.with_waste(1.0, 0.1, "divide") == pytest.approx(1.1111, abs=5e-5)
