"""Depth of cure: round trip, limits, and the front's own equation solved by scipy."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from beadwright.physics import cure

RATE = st.floats(0.2, 6.0)
DAYS = st.floats(0.0, 400.0)


@given(RATE, DAYS)
def test_depth_and_days_undo_each_other(k_mm, days):
    assert cure.days_to_depth(cure.front_depth_mm(k_mm, days), k_mm) == pytest.approx(days, rel=1e-9, abs=1e-12)


@given(RATE)
def test_the_first_day_is_k(k_mm):
    assert cure.front_depth_mm(k_mm, 1.0) == k_mm
    assert cure.front_depth_mm(k_mm, 0.0) == 0.0


@given(RATE, st.floats(0.01, 50.0))
def test_twice_the_depth_takes_four_times_as_long(k_mm, depth_mm):
    assert cure.days_to_depth(2.0 * depth_mm, k_mm) == pytest.approx(4.0 * cure.days_to_depth(depth_mm, k_mm), rel=1e-12)


@pytest.mark.parametrize("k_mm", [1.0, 2.5, 4.0])
def test_front_equation_solved_step_by_step(k_mm):
    """dz/dt = k^2 / (2 z): the vapour flux falls as the cured layer thickens."""
    start_mm = 1e-3
    solved = solve_ivp(lambda _t, z: k_mm**2 / (2.0 * z), (0.0, 14.0), [start_mm], rtol=1e-10, atol=1e-12, t_eval=[1.0, 7.0, 14.0])
    for days, depth_mm in zip(solved.t, solved.y[0], strict=True):
        assert cure.front_depth_mm(k_mm, days) == pytest.approx(depth_mm, rel=1e-5)


@given(st.floats(-20000.0, 20000.0))
def test_the_reference_climate_has_factor_one(permeation):
    assert cure.rate_factor(23.0, 0.5, permeation) == 1.0


@given(st.floats(0.0, 60.0), st.floats(0.01, 0.99), st.floats(-20000.0, 20000.0), st.floats(0.001, 0.5))
def test_damper_air_cures_faster(temp_c, share, permeation, more):
    damper = min(1.0, share + more)
    assert cure.rate_factor(temp_c, damper, permeation) > cure.rate_factor(temp_c, share, permeation)


@given(st.floats(0.0, 55.0), st.floats(0.1, 5.0), st.floats(0.01, 1.0), st.floats(-20000.0, 0.0))
def test_warmer_air_of_the_same_humidity_cures_faster(temp_c, more_k, share, permeation):
    assert cure.rate_factor(temp_c + more_k, share, permeation) > cure.rate_factor(temp_c, share, permeation)


@given(st.floats(0.0, 60.0), st.floats(0.01, 1.0), st.floats(100.0, 20000.0))
def test_a_negative_heat_of_permeation_evens_out_the_seasons(temp_c, share, size):
    """It raises the rate below 23 degC and lowers it above."""
    plain = cure.rate_factor(temp_c, share, 0.0)
    found = cure.rate_factor(temp_c, share, -size)
    if abs(temp_c - 23.0) > 0.01:
        assert (found > plain) == (temp_c < 23.0)


@given(st.floats(0.01, 0.25))
def test_four_times_the_vapour_doubles_the_depth(share):
    """Permeability does not depend on humidity, so the front goes with the root of the vapour pressure."""
    four = cure.rate_factor(23.0, 4.0 * share, -12000.0)
    assert four == pytest.approx(2.0 * cure.rate_factor(23.0, share, -12000.0), rel=1e-12)


def test_dry_air_does_not_cure():
    assert cure.rate_factor(20.0, 0.0, -12000.0) == 0.0


@pytest.mark.parametrize("temp_c", [-0.1, 60.1])
def test_ice_and_great_heat_are_refused(temp_c):
    with pytest.raises(ValueError, match="temp_c"):
        cure.rate_factor(temp_c, 0.5, 0.0)
