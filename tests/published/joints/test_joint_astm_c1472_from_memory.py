# Source: ASTM C1472 as recalled (value from memory; the standard's own examples were not read): summer surface T_A + A H with
# H = 56, 72, 42, 56 K; width dL / S for extension and compression, dL / sqrt(2S + S^2) for shear, tolerance added arithmetically.
# The vectors are self-made in that form and derived by hand, as is the combined case, (W + dE)^2 + dS^2 = (1 + S)^2 W^2.
import pytest
from printed import DERIVED, MEMORY, Case, locator
from typed import STILL, at, evaluated, loaded, own_class, side

SURFACES = [
    Case("light, open", {"mass": "low", "sun": "open"}, 77.0, 0.1, MEMORY),
    Case("light, reflected sun", {"mass": "low", "sun": "reflected"}, 89.0, 0.1, MEMORY),
    Case("massive, open", {"mass": "high", "sun": "open"}, 66.5, 0.1, MEMORY),
    Case("massive, reflected sun", {"mass": "high", "sun": "reflected"}, 77.0, 0.1, MEMORY),
]


@pytest.mark.parametrize("case", SURFACES, ids=locator)
def test_summer_surface_at_35_degrees_and_absorption_of_three_quarters(case):
    exposed = {"summer_surface": "", "absorption": "75 %"} | case.inputs
    answer = evaluated({"side_a": exposed, "side_b": exposed}, site={"summer_air": "35 degC"})
    case.check(at(answer, "movement.hot_c"))


# The printed factors W/dL, taken at a movement of 3 mm.
FACTORS = [
    Case("shear, S = 0.125", {"load": ("", "", "3 mm"), "percent": 12.5}, 1.940285, 1e-6, DERIVED),
    Case("shear, S = 0.25", {"load": ("", "", "3 mm"), "percent": 25}, 1.333333, 1e-6, DERIVED),
    Case("shear, S = 0.50", {"load": ("", "", "3 mm"), "percent": 50}, 0.894427, 1e-6, DERIVED),
    Case("shear, S = 1.00", {"load": ("", "", "3 mm"), "percent": 100}, 0.577350, 1e-6, DERIVED),
    Case("extension, S = 0.125", {"load": ("3 mm",), "percent": 12.5}, 8.0, 1e-6, MEMORY),
    Case("extension, S = 0.25", {"load": ("3 mm",), "percent": 25}, 4.0, 1e-6, MEMORY),
    Case("extension, S = 0.50", {"load": ("3 mm",), "percent": 50}, 2.0, 1e-6, MEMORY),
    Case("extension, S = 1.00", {"load": ("3 mm",), "percent": 100}, 1.0, 1e-6, MEMORY),
]


@pytest.mark.parametrize("kind", ["mixed", "lap"])
@pytest.mark.parametrize("case", FACTORS, ids=locator)
def test_width_over_movement(case, kind):
    answer = evaluated(loaded(case.inputs["load"], kind=kind), sealant=own_class(case.inputs["percent"], 50))
    case.check(at(answer, "width.required_mm") / 3.0)


COMBINED = [
    Case("opening 3, slip 0", {"load": ("3 mm", "", "")}, 12.0, 1e-6, DERIVED),
    Case("opening 0, slip 3", {"load": ("", "", "3 mm")}, 4.0, 1e-6, DERIVED),
    Case("opening 3, slip 4", {"load": ("3 mm", "", "4 mm")}, 13.870832, 1e-6, DERIVED),
    Case("opening 3, slip 4 across the first", {"load": ("3 mm", "", "", "4 mm")}, 13.870832, 1e-6, DERIVED),
]


@pytest.mark.parametrize("kind", ["butt", "mixed", "lap"])
@pytest.mark.parametrize("case", COMBINED, ids=locator)
def test_opening_with_shear_at_a_quarter(case, kind):
    answer = evaluated(loaded(case.inputs["load"], kind=kind), sealant=own_class(25, 25))
    case.check(at(answer, "width.required_mm"))


def test_back_check_of_the_combined_width():
    case = Case("stretch at 13.870832 mm", {}, 0.25, 1e-6, DERIVED)
    answer = evaluated(loaded(("3 mm", "", "4 mm"), kind="mixed", width="13.870832 mm", width_is="built"), sealant=own_class(25, 25))
    case.check(at(answer, "strain.cold_average_fraction"))


BRICK = {"side_a": side("6.5 e-6/K", "7300 mm", "", "", fixity="far-end", absorption="75 %", mass="high", substrate="brick-clay"), "side_b": STILL | {"moisture_irreversible": "0 %"}}
GROWING = BRICK | {"side_a": BRICK["side_a"] | {"moisture_irreversible": "0.05 %"}}
METAL = {"side_a": side("23.8 e-6/K", "3 m", "", "", fixity="far-end", absorption="60 %", substrate="aluminium"), "side_b": STILL}
VECTORS = [
    Case("brick, surface", {"joint": BRICK, "place": "movement.hot_c"}, 66.5, 0.1, DERIVED),
    Case("brick, movement", {"joint": BRICK, "place": "movement.closing_mm"}, 4.104425, 1e-6, DERIVED),
    Case("brick, width at 50 %", {"joint": BRICK, "place": "width.required_mm"}, 8.208850, 1e-6, DERIVED),
    Case("brick, width with 3 mm tolerance", {"joint": BRICK, "place": None}, 11.208850, 1e-6, DERIVED),
    Case("brick with growth, with 3 mm tolerance", {"joint": GROWING, "place": None}, 18.508850, 1e-6, DERIVED),
    Case("brick with growth, drawn", {"joint": GROWING, "place": "width.design_mm"}, 19.0, 0.001, DERIVED),
    Case("aluminium, surface", {"joint": METAL, "place": "movement.hot_c"}, 68.6, 0.1, DERIVED),
    Case("aluminium, movement", {"joint": METAL, "place": "movement.opening_mm"}, 6.326040, 1e-6, DERIVED),
    Case("aluminium, width at 50 %", {"joint": METAL, "place": "width.required_mm"}, 12.652080, 1e-6, DERIVED),
]


@pytest.mark.parametrize("case", VECTORS, ids=locator)
def test_self_made_vectors(case):
    answer = evaluated(dict(case.inputs["joint"]) | {"fabrication_tolerance": "3 mm"}, site={"summer_air": "35 degC", "winter_air": "-20 degC"})
    case.check(at(answer, case.inputs["place"]) if case.inputs["place"] else at(answer, "width.required_mm") + at(answer, "width.tolerance_worst_mm"))
