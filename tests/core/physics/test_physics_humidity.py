"""Vapour and dew point: round trip, sign, monotonic, and psychrolib as an independent library."""

from __future__ import annotations

import psychrolib
import pytest
from hypothesis import given
from hypothesis import strategies as st

from beadwright.physics import humidity

psychrolib.SetUnitSystem(psychrolib.SI)

TEMPERATURE = st.floats(-45.0, 60.0)
# psychrolib turns to ice below its triple point, so the comparison starts above it
ABOVE_ICE = st.floats(0.1, 50.0)
SHARE = st.floats(0.01, 1.0)


@given(TEMPERATURE, SHARE)
def test_dew_point_undoes_the_vapour_pressure(air_c, share):
    dew_c = humidity.dew_point_c(air_c, share)
    assert humidity.saturation_pressure_pa(dew_c) == pytest.approx(humidity.vapour_pressure_pa(air_c, share), rel=1e-10)


@given(TEMPERATURE, SHARE)
def test_dew_point_is_never_above_the_air(air_c, share):
    assert humidity.dew_point_c(air_c, share) <= air_c + 1e-9


@given(TEMPERATURE)
def test_saturated_air_is_at_its_dew_point(air_c):
    assert humidity.dew_point_c(air_c, 1.0) == air_c


@given(TEMPERATURE, st.floats(0.01, 0.99), st.floats(0.001, 0.5))
def test_damper_air_has_a_higher_dew_point(air_c, share, more):
    damper = min(1.0, share + more)
    assert humidity.dew_point_c(air_c, damper) > humidity.dew_point_c(air_c, share)


@given(st.floats(-45.0, 59.0), st.floats(0.001, 1.0))
def test_warmer_air_holds_more(temp_c, more_k):
    assert humidity.saturation_pressure_pa(temp_c + more_k) > humidity.saturation_pressure_pa(temp_c)


@given(TEMPERATURE, SHARE)
def test_a_surface_at_the_dew_point_is_wet(air_c, share):
    dew_c = humidity.dew_point_c(air_c, share)
    assert humidity.surface_humidity_fraction(dew_c, dew_c) == pytest.approx(1.0, rel=1e-12)
    assert humidity.surface_humidity_fraction(dew_c + 3.0, dew_c) < 1.0
    assert humidity.surface_humidity_fraction(dew_c - 1.0, dew_c) > 1.0


@given(TEMPERATURE, SHARE)
def test_a_surface_at_air_temperature_has_the_humidity_of_the_air(air_c, share):
    assert humidity.surface_humidity_fraction(air_c, humidity.dew_point_c(air_c, share)) == pytest.approx(share, rel=1e-9)


@given(ABOVE_ICE)
def test_saturation_pressure_against_psychrolib(temp_c):
    """Stated accuracy of the Magnus formula: 0.6 %; what it shows above ice is 0.31 %."""
    assert humidity.saturation_pressure_pa(temp_c) == pytest.approx(psychrolib.GetSatVapPres(temp_c), rel=0.0031)


@given(ABOVE_ICE, SHARE)
def test_dew_point_against_psychrolib(air_c, share):
    """Stated accuracy of the formula: 0.35 K; compared where psychrolib's own answer lies above ice."""
    other_c = psychrolib.GetTDewPointFromRelHum(air_c, share)
    if other_c > 0.1:
        assert humidity.dew_point_c(air_c, share) == pytest.approx(other_c, abs=0.05)


def test_dry_air_has_no_vapour_and_no_dew_point():
    assert humidity.vapour_pressure_pa(20.0, 0.0) == 0.0
    with pytest.raises(ValueError, match="humidity_fraction"):
        humidity.dew_point_c(20.0, 0.0)


def test_a_very_low_dew_point_is_no_trouble():
    assert humidity.surface_humidity_fraction(20.0, -243.0) == 0.0
    assert humidity.dew_point_c(20.0, 1e-300) > -243.12
