"""Each argument of each function: not a number, infinite or out of range is refused by name, with the value that came."""

from __future__ import annotations

import inspect
import math

import pytest

from beadwright.physics import cure, humidity, section, strain, thermal

# A good call of each function, and for each argument a value just outside its range (None where any finite number is good).
GOOD = {
    thermal.summer_surface_c: {"air_c": (35.0, -273.15), "absorption_fraction": (0.7, 1.001), "heat_rise_k": (56.0, -0.1)},
    thermal.winter_surface_c: {"air_c": (-20.0, -300.0), "night_sky_k": (5.0, -0.1)},
    thermal.sol_air_c: {
        "air_c": (35.0, -273.15),
        "absorption_fraction": (0.7, -0.001),
        "irradiance_w_m2": (600.0, -1.0),
        "film_w_m2k": (17.0, 0.0),
        "longwave_k": (4.0, -0.1),
    },
    thermal.length_change_mm: {"length_mm": (3000.0, -1.0), "expansion_per_k": (12e-6, -1e-9), "delta_temp_k": (50.0, None)},
    thermal.moisture_change_mm: {"length_mm": (3000.0, -1.0), "strain_fraction": (0.0005, None)},
    thermal.restrained_change_mm: {
        "length_mm": (3000.0, -1.0),
        "expansion_per_k": (12e-6, -1e-9),
        "delta_temp_k": (50.0, None),
        "shrinkage_fraction": (1e-4, -1e-9),
        "friction_fraction": (0.8, 1.001),
    },
    humidity.saturation_pressure_pa: {"temp_c": (20.0, 100.1)},
    humidity.vapour_pressure_pa: {"temp_c": (20.0, -100.1), "humidity_fraction": (0.5, 1.001)},
    humidity.dew_point_c: {"temp_c": (20.0, 100.1), "humidity_fraction": (0.5, 0.0)},
    humidity.surface_humidity_fraction: {"surface_c": (20.0, 100.1), "dew_c": (12.0, -243.12)},
    strain.width_for_opening_mm: {"opening_mm": (3.0, -0.1), "shear_mm": (4.0, None), "extension_fraction": (0.25, 0.0)},
    strain.width_for_closing_mm: {"closing_mm": (3.0, -0.1), "compression_fraction": (0.25, 1.001)},
    strain.width_for_swing_mm: {
        "opening_mm": (3.0, -0.1),
        "closing_mm": (3.0, -0.1),
        "shear_mm": (4.0, None),
        "total_fraction": (0.25, 0.0),
    },
    strain.swing_on_closed_width_mm: {"total_mm": (4.0, -0.1), "total_fraction": (0.25, 0.0)},
    strain.stretch_fraction: {"width_mm": (12.0, 0.0), "opening_mm": (3.0, -12.1), "shear_mm": (4.0, None)},
    strain.allowed_opening_mm: {"width_mm": (12.0, 0.0), "shear_mm": (4.0, None), "extension_fraction": (0.25, 0.0)},
    strain.allowed_shear_mm: {"width_mm": (12.0, 0.0), "opening_mm": (3.0, -12.1), "extension_fraction": (0.25, -0.1)},
    strain.face_sag_mm: {"width_mm": (12.0, 0.0), "depth_mm": (8.0, 0.0), "change_mm": (3.0, -12.0)},
    strain.neck_after_mm: {"width_mm": (12.0, 0.0), "depth_mm": (8.0, 0.0), "change_mm": (3.0, 24.1)},
    strain.face_strain: {"width_mm": (12.0, 0.0), "depth_mm": (8.0, 0.0), "change_mm": (3.0, 24.1)},
    section.segment_radius_mm: {"chord_mm": (20.0, 0.0), "sagitta_mm": (2.0, -0.1)},
    section.segment_area_mm2: {"chord_mm": (20.0, 0.0), "sagitta_mm": (2.0, -0.1)},
    section.segment_arc_mm: {"chord_mm": (20.0, 0.0), "sagitta_mm": (2.0, -0.1)},
    section.parabola_area_mm2: {"chord_mm": (20.0, 0.0), "sagitta_mm": (2.0, -0.1)},
    section.parabola_arc_mm: {"chord_mm": (20.0, 0.0), "sagitta_mm": (2.0, -0.1)},
    section.bond_depth_mm: {"neck_mm": (8.0, 0.0), "tool_sag_mm": (1.0, -0.1), "rod_sag_mm": (2.0, -0.1)},
    section.hourglass_area_mm2: {
        "width_mm": (20.0, 0.0),
        "neck_mm": (10.0, 0.0),
        "tool_sag_mm": (2.0, 10.1),
        "rod_sag_mm": (4.0, 10.1),
    },
    section.exposed_perimeter_mm: {"width_mm": (20.0, 0.0), "tool_sag_mm": (2.0, 10.1)},
    section.rod_crown_mm: {"width_mm": (20.0, 0.0), "rod_mm": (25.0, 19.9)},
    section.rod_compression_fraction: {"width_mm": (20.0, 0.0), "rod_mm": (25.0, 0.0)},
    section.fillet_area_mm2: {"leg_a_mm": (6.0, 0.0), "leg_b_mm": (6.0, 0.0), "sagitta_mm": (1.0, -0.1)},
    cure.front_depth_mm: {"k_mm": (2.5, 0.0), "days": (7.0, -0.1)},
    cure.days_to_depth: {"depth_mm": (10.0, -0.1), "k_mm": (2.5, 0.0)},
    cure.rate_factor: {"temp_c": (10.0, 60.1), "humidity_fraction": (0.5, 1.001), "permeation_j_mol": (-12000.0, None)},
}
WORDS = {section.fillet_area_mm2: {"face": "concave"}}
BAD = [
    pytest.param(function, name, value, id=f"{function.__name__}-{name}-{value}")
    for function, arguments in GOOD.items()
    for name, (_, outside) in arguments.items()
    for value in (math.nan, math.inf, -math.inf, *(() if outside is None else (outside,)))
]


def call(function, **changed):
    """The good call with some arguments changed."""
    arguments = {name: good for name, (good, _) in GOOD[function].items()}
    return function(**{**arguments, **WORDS.get(function, {}), **changed})


@pytest.mark.parametrize("function, name, value", BAD)
def test_a_bad_argument_is_refused_by_name(function, name, value):
    with pytest.raises(ValueError) as caught:
        call(function, **{name: value})
    assert str(caught.value).startswith(f"{name} is {value!r}; expected ")


@pytest.mark.parametrize("function", GOOD, ids=lambda f: f.__name__)
def test_the_good_call_answers_with_a_finite_float(function):
    answer = call(function)
    assert type(answer) is float and math.isfinite(answer)


@pytest.mark.parametrize("value", [math.nan, math.inf, -math.inf])
def test_a_bad_part_of_the_shear_is_refused(value):
    with pytest.raises(ValueError, match="components_mm"):
        strain.combined_shear_mm(3.0, value)


def test_every_function_and_argument_is_in_the_list():
    everything = {
        member
        for module in (cure, humidity, section, strain, thermal)
        for name, member in inspect.getmembers(module, inspect.isfunction)
        if not name.startswith("_") and member.__module__ == module.__name__
    }
    assert everything - set(GOOD) == {strain.combined_shear_mm}
    for function, arguments in GOOD.items():
        numbers = [name for name, kind in inspect.get_annotations(function).items() if kind == "float" and name != "return"]
        assert numbers == list(arguments)
