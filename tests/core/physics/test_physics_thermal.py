"""Surface temperatures and movement: limits, sign, linearity."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from beadwright.physics import thermal

AIR = st.floats(-50.0, 60.0)
ABSORPTION = st.floats(0.0, 1.0)
LENGTH = st.floats(0.0, 100_000.0)
EXPANSION = st.floats(0.0, 1.0e-4)
DIFFERENCE = st.floats(-150.0, 150.0)


@given(AIR, st.floats(0.0, 80.0))
def test_a_white_surface_stays_at_air_and_a_black_one_takes_the_whole_rise(air_c, rise_k):
    assert thermal.summer_surface_c(air_c, 0.0, rise_k) == air_c
    assert thermal.summer_surface_c(air_c, 1.0, rise_k) == air_c + rise_k


@given(AIR, ABSORPTION, st.floats(0.0, 80.0), st.floats(0.0, 0.5))
def test_darker_is_never_cooler(air_c, share, rise_k, more):
    darker = min(1.0, share + more)
    assert thermal.summer_surface_c(air_c, darker, rise_k) >= thermal.summer_surface_c(air_c, share, rise_k)
    assert thermal.sol_air_c(air_c, darker, 800.0, 17.0, 0.0) >= thermal.sol_air_c(air_c, share, 800.0, 17.0, 0.0)


@given(AIR, ABSORPTION, st.floats(2.0, 40.0), st.floats(0.0, 10.0))
def test_without_sun_the_sol_air_temperature_is_the_air_less_the_sky(air_c, share, film, sky_k):
    assert thermal.sol_air_c(air_c, share, 0.0, film, sky_k) == air_c - sky_k
    assert thermal.winter_surface_c(air_c, sky_k) == air_c - sky_k


@given(AIR, st.floats(0.05, 1.0), st.floats(10.0, 1200.0), st.floats(2.0, 40.0))
def test_more_wind_cools_a_sunlit_wall(air_c, share, sun, film):
    assert thermal.sol_air_c(air_c, share, sun, 2.0 * film, 0.0) < thermal.sol_air_c(air_c, share, sun, film, 0.0)


@given(AIR, ABSORPTION, st.floats(0.0, 1200.0), st.floats(2.0, 40.0))
def test_heat_balance_of_the_sol_air_temperature(air_c, share, sun, film):
    """Heat from air at the sol-air temperature is the sun taken up by a wall at air temperature."""
    assert film * (thermal.sol_air_c(air_c, share, sun, film, 0.0) - air_c) == pytest.approx(share * sun, rel=1e-9, abs=1e-9)


@given(LENGTH, EXPANSION, DIFFERENCE)
def test_warming_grows_and_cooling_takes_it_back(length_mm, expansion, difference):
    grown_mm = thermal.length_change_mm(length_mm, expansion, difference)
    assert grown_mm == -thermal.length_change_mm(length_mm, expansion, -difference)
    if length_mm * expansion > 1e-200 and abs(difference) > 1e-100:
        assert (grown_mm > 0.0) == (difference > 0.0)


@given(LENGTH, EXPANSION, DIFFERENCE)
def test_movement_is_in_proportion_to_each_factor(length_mm, expansion, difference):
    once = thermal.length_change_mm(length_mm, expansion, difference)
    assert thermal.length_change_mm(3.0 * length_mm, expansion, difference) == pytest.approx(3.0 * once, rel=1e-12)
    assert thermal.length_change_mm(length_mm, 3.0 * expansion, difference) == pytest.approx(3.0 * once, rel=1e-12)
    assert thermal.length_change_mm(length_mm, expansion, 3.0 * difference) == pytest.approx(3.0 * once, rel=1e-12)


@given(LENGTH, st.floats(-0.01, 0.01))
def test_growth_closes_and_shrinkage_opens(length_mm, strain_fraction):
    change_mm = thermal.moisture_change_mm(length_mm, strain_fraction)
    assert change_mm == -thermal.moisture_change_mm(length_mm, -strain_fraction)
    assert change_mm * strain_fraction >= 0.0


@given(LENGTH, EXPANSION, DIFFERENCE)
def test_a_free_slab_that_does_not_shrink_moves_as_any_element(length_mm, expansion, fall_k):
    opening_mm = thermal.restrained_change_mm(length_mm, expansion, fall_k, 0.0, 1.0)
    assert opening_mm == pytest.approx(thermal.length_change_mm(length_mm, expansion, fall_k), rel=1e-12)
    assert opening_mm == pytest.approx(-thermal.length_change_mm(length_mm, expansion, -fall_k), rel=1e-12)


@given(LENGTH, EXPANSION, st.floats(0.0, 100.0), st.floats(0.0, 1.0e-3), ABSORPTION)
def test_the_ground_only_ever_holds_back(length_mm, expansion, fall_k, shrinkage, friction):
    free_mm = thermal.restrained_change_mm(length_mm, expansion, fall_k, shrinkage, 1.0)
    assert 0.0 <= thermal.restrained_change_mm(length_mm, expansion, fall_k, shrinkage, friction) <= free_mm


def test_fahrenheit_and_celsius_entries_agree():
    celsius = thermal.length_change_mm(7315.2, 7.2e-6, 50.0)
    assert celsius == pytest.approx(25.4 * thermal.length_change_mm(24.0 * 12.0, 4.0e-6, 90.0), rel=1e-12)
