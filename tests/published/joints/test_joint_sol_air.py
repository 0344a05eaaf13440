# Source: sol-air temperature t_o + alpha I / h_o - eps dR / h_o (secondary web page citing ASHRAE, read; alpha / h_o of 0.026 and 0.052
# m2K/W from memory); vectors derived at 35 degC. With h_o = 17 W/m2K these are absorptions of 0.442 and 0.884.
import pytest
from printed import DERIVED, Case, locator
from typed import at, evaluated

CASES = [
    Case("vertical, dark, 600 W/m2", {"absorption": "88.4 %", "irradiance": "600 W/m2", "longwave": "0 K"}, 66.2, 0.1, DERIVED),
    Case("vertical, light, 600 W/m2", {"absorption": "44.2 %", "irradiance": "600 W/m2", "longwave": "0 K"}, 50.6, 0.1, DERIVED),
    Case("horizontal, dark, 900 W/m2", {"absorption": "88.4 %", "irradiance": "900 W/m2", "longwave": "4 K"}, 77.8, 0.1, DERIVED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_hottest_surface_by_sol_air(case):
    site = {"summer_air": "35 degC", "temperature_method": "sol-air", "film": "17 W/m2K", "irradiance": case.inputs["irradiance"], "longwave": case.inputs["longwave"]}
    exposed = {"summer_surface": "", "absorption": case.inputs["absorption"]}
    case.check(at(evaluated({"side_a": exposed, "side_b": exposed}, site=site), "movement.hot_c"))
