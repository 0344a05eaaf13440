# Source: ASTM C1472, surface temperature T_S = T_A + A H and movement, forms and constants H: values from memory. Of the standard only
# scope and first page were read, none of its examples. The vectors below are worked out by hand from the recalled forms.
# Known difference: rise of a dark south wall 50 K here, 42 K in EN 1991-1-5, 31 K by a sol-air balance at 600 W/m2. Different bases.
import pytest
from printed import MEMORY, Case, locator

from beadwright.physics import strain, thermal

SURFACES = [
    Case("light", {"absorption_fraction": 0.75, "heat_rise_k": 56.0}, 77.0, 0.1, MEMORY),
    Case("light, reflected sun", {"absorption_fraction": 0.75, "heat_rise_k": 72.0}, 89.0, 0.1, MEMORY),
    Case("massive", {"absorption_fraction": 0.75, "heat_rise_k": 42.0}, 66.5, 0.1, MEMORY),
    Case("massive, reflected sun", {"absorption_fraction": 0.75, "heat_rise_k": 56.0}, 77.0, 0.1, MEMORY),
    Case("aluminium panel", {"absorption_fraction": 0.60, "heat_rise_k": 56.0}, 68.6, 0.1, MEMORY),
    Case("rise of a dark light wall", {"absorption_fraction": 0.90, "heat_rise_k": 56.0}, 35.0 + 50.0, 1.0, MEMORY),
]
MOVEMENTS = [
    Case("brick, 7.3 m, 86.5 K", {"length_mm": 7300.0, "expansion_per_k": 6.5e-6, "delta_temp_k": 86.5}, 4.104425, 1e-6, MEMORY),
    Case("aluminium, 3 m, 88.6 K", {"length_mm": 3000.0, "expansion_per_k": 23.8e-6, "delta_temp_k": 88.6}, 6.326040, 1e-6, MEMORY),
]
WIDTHS = [
    Case("brick", {"closing_mm": 4.104425}, 8.208850, 1e-6, MEMORY),
    Case("aluminium", {"closing_mm": 6.326040}, 12.652080, 1e-6, MEMORY),
    Case("brick with growth, before tolerance", {"closing_mm": 4.104425 + 3.65}, 18.508850 - 3.0, 1e-6, MEMORY),
]


@pytest.mark.parametrize("case", SURFACES, ids=locator)
def test_summer_surface(case):
    case.check(thermal.summer_surface_c(air_c=35.0, **case.inputs))


@pytest.mark.parametrize("case", MOVEMENTS, ids=locator)
def test_movement(case):
    case.check(thermal.length_change_mm(**case.inputs))


@pytest.mark.parametrize("case", WIDTHS, ids=locator)
def test_width(case):
    case.check(strain.width_for_closing_mm(compression_fraction=0.5, **case.inputs))
    case.check(strain.width_for_opening_mm(case.inputs["closing_mm"], 0.0, 0.5))


def test_growth_of_brick():
    Case("0.0005 x 7300 mm", {}, 3.65, 0.01, MEMORY).check(thermal.moisture_change_mm(7300.0, 0.0005))


def test_chain_from_air_temperatures_to_width():
    hot_c = thermal.summer_surface_c(35.0, 0.75, 42.0)
    cold_c = thermal.winter_surface_c(-20.0, 0.0)
    moved_mm = thermal.length_change_mm(7300.0, 6.5e-6, hot_c - cold_c)
    Case("brick, whole chain", {}, 8.208850, 1e-6, MEMORY).check(strain.width_for_opening_mm(moved_mm, 0.0, 0.5))
