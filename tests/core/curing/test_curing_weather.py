"""Weather as a dose: day rows, readings, what stands in, and that splitting changes nothing."""

import itertools
from datetime import datetime

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from iapws import IAPWS97
from scipy.integrate import solve_ivp

from beadwright.curing.clock import Clock, zone_rules
from beadwright.curing.weather import Piece, Row, climate_of, dose_rate, pieces_of, steady_climate

PLAIN = Clock("", None)
CAUTIOUS = lambda air, damp: dose_rate(air, damp, "cautious", -12000.0)  # noqa: E731
airs = st.floats(-40.0, 60.0)
damps = st.floats(0.0, 1.0)


def constant(air, damp, hours=48.0, start=0.0):
    return [Piece(start, start + hours, air, damp, air)]


# Conservative depth of the first day for k = 2.5 (iapws 1.5.5), printed to 0.001 mm; Magnus pressures differ by at most 0.16 %.
CONSERVATIVE = {(5, 50): 1.393, (5, 80): 1.762, (10, 50): 1.653, (15, 60): 2.133, (20, 40): 2.040, (20, 65): 2.600, (23, 80): 3.162, (30, 50): 2.905, (35, 30): 2.492, (40, 20): 2.245, (40, 50): 3.550}


@pytest.mark.parametrize("climate", CONSERVATIVE)
def test_the_cautious_rate_matches_the_table(climate):
    air, percent = climate
    k = 2.5 * CAUTIOUS(float(air), percent / 100.0) ** 0.5
    assert k == pytest.approx(CONSERVATIVE[climate], abs=0.0005 + 0.0016 * CONSERVATIVE[climate])


@pytest.mark.parametrize("air", [1.0, 5.0, 12.0, 23.0, 31.0, 40.0])
def test_vapour_only_follows_steam_tables(air):
    expected = IAPWS97(T=air + 273.15, x=0).P / IAPWS97(T=296.15, x=0).P
    assert dose_rate(air, 0.5, "vapour", 0.0) == pytest.approx(expected, rel=0.0035)


def test_the_front_solved_as_an_equation_in_changing_weather():
    """scipy's solver on dz/dt = k(t)^2 / (2 z) against the dose: the growth k^2 dt of z^2."""
    rows = [Row(datetime(2026, 5, 1), None, 6.0, 18.0, 0.7, None), Row(datetime(2026, 5, 2), None, 10.0, 30.0, 0.4, None)]
    climate = climate_of(pieces_of(rows, PLAIN), "mean", CAUTIOUS)
    start = climate.begins_h

    def rate(t, square):
        piece = climate.at(start + t)
        return [2.5**2 * CAUTIOUS(piece.air_c, piece.humidity_fraction) / 24.0]

    square = solve_ivp(rate, (0.0, 47.0), [0.0], max_step=0.25, rtol=1e-8).y[0][-1]
    assert 2.5**2 * (climate.dose(start + 47.0) - climate.dose(start)) == pytest.approx(square, rel=2e-3)


def test_a_day_swings_between_its_ends_and_keeps_its_vapour():
    (first, *_), = [pieces_of([Row(datetime(2026, 5, 1), None, 6.0, 18.0, 0.6, None)], PLAIN)]
    hours = pieces_of([Row(datetime(2026, 5, 1), None, 6.0, 18.0, 0.6, None)], PLAIN)
    assert first.from_h == hours[0].from_h and len(hours) == 24
    assert min(piece.air_c for piece in hours) == pytest.approx(6.0, abs=0.1)
    assert max(piece.air_c for piece in hours) == pytest.approx(18.0, abs=0.1)
    warmest = max(hours, key=lambda piece: piece.air_c)
    assert warmest.humidity_fraction < 0.6 < min(hours, key=lambda piece: piece.air_c).humidity_fraction


def test_a_dew_point_is_as_good_as_a_humidity():
    by_dew = pieces_of([Row(datetime(2026, 5, 1), None, 10.0, 20.0, None, 5.0)], PLAIN)
    assert all(0.3 < piece.humidity_fraction < 0.8 for piece in by_dew)


def test_readings_hold_until_the_next_and_win_over_days():
    rows = [Row(datetime(2026, 5, 1), None, 6.0, 18.0, 0.6, None), Row(datetime(2026, 5, 1), 10.0, 14.0, 14.0, 0.5, None), Row(datetime(2026, 5, 1), 12.5, 16.0, 16.0, 0.4, None)]
    pieces = pieces_of(rows, PLAIN)
    assert all(one.to_h <= two.from_h + 1e-9 for one, two in itertools.pairwise(pieces))
    start = PLAIN.hours(datetime(2026, 5, 1))
    (held,) = [piece for piece in pieces if piece.from_h <= start + 11.0 < piece.to_h]
    assert (held.air_c, held.humidity_fraction) == (14.0, 0.5)
    assert sum(piece.to_h - piece.from_h for piece in pieces) == pytest.approx(24.0)


@settings(max_examples=60, deadline=None)
@given(air=airs, damp=damps, cuts=st.lists(st.floats(0.01, 47.99), max_size=6), at=st.floats(0.0, 200.0))
def test_splitting_the_weather_changes_nothing(air, damp, cuts, at):
    whole = climate_of(constant(air, damp), "mean", CAUTIOUS)
    edges = [0.0, *sorted(cuts), 48.0]
    parts = [Piece(low, high, air, damp, air) for low, high in itertools.pairwise(edges) if high - low > 1e-6]
    split = climate_of(parts, "mean", CAUTIOUS)
    assert split.dose(at) == pytest.approx(whole.dose(at), rel=1e-6, abs=1e-7)


@settings(max_examples=60, deadline=None)
@given(air=airs, damp=damps, more=damps)
def test_more_humidity_is_never_slower(air, damp, more):
    low, high = sorted((damp, more))
    for model in ("cautious", "vapour", "permeation"):
        assert dose_rate(air, high, model, -12000.0) >= dose_rate(air, low, model, -12000.0)


@settings(max_examples=40, deadline=None)
@given(rows=st.lists(st.tuples(airs, damps), min_size=1, max_size=5), start=st.floats(-100.0, 200.0), wanted=st.floats(0.001, 30.0))
def test_when_is_the_inverse_of_the_dose(rows, start, wanted):
    pieces = [Piece(24.0 * index, 24.0 * index + 24.0, air, damp, air) for index, (air, damp) in enumerate(rows)]
    climate = climate_of(pieces, "mean", CAUTIOUS)
    reached = climate.when(start, wanted)
    if reached is not None:
        assert reached >= start
        assert climate.dose(reached) - climate.dose(start) == pytest.approx(wanted, rel=1e-4, abs=1e-5)
    else:
        assert climate.day_dose * 366 * 3 < 100.0 + wanted


def test_frost_stops_the_clock():
    climate = steady_climate(-40.0, 0.9, CAUTIOUS)
    assert climate.dose(1000.0) == 0.0
    assert climate.when(0.0, 0.001) is None


def test_a_gap_is_filled_with_the_mean_day():
    pieces = [*constant(10.0, 0.5, 24.0), *constant(20.0, 0.5, 24.0, start=72.0)]
    climate = climate_of(pieces, "mean", CAUTIOUS)
    assert climate.at(50.0).air_c == pytest.approx(15.0)
    assert np.all(np.diff(climate.doses) >= 0.0)


def test_after_the_weather_the_last_day_or_the_reference_can_go_on():
    pieces = [*constant(10.0, 0.5, 24.0), *constant(20.0, 0.5, 24.0, start=24.0)]
    assert climate_of(pieces, "last", CAUTIOUS).at(100.0).air_c == 20.0
    assert climate_of(pieces, "reference", CAUTIOUS).at(100.0).air_c == 23.0
    assert climate_of([], "mean", CAUTIOUS).day_dose == pytest.approx(1.0)


def test_a_day_of_the_clock_change_has_23_or_25_hours():
    clock = Clock("Europe/Berlin", zone_rules("Europe/Berlin"))
    for day, count in ((datetime(2026, 3, 29), 23), (datetime(2026, 10, 25), 25), (datetime(2026, 5, 1), 24)):
        assert len(pieces_of([Row(day, None, 5.0, 15.0, 0.6, None)], clock)) == count


@pytest.mark.parametrize(("text", "zone", "utc"), [("2026-07-01 12:00", "Europe/Berlin", "10:00"), ("2026-12-01 12:00", "Europe/Berlin", "11:00"), ("2026-07-01 12:00", "America/New_York", "16:00"), ("2026-07-01 12:00", "Australia/Lord_Howe", "01:30"), ("2026-07-01 12:00", "Asia/Kolkata", "06:30")])
def test_clock_times_turn_to_utc(text, zone, utc):
    clock = Clock(zone, zone_rules(zone))
    hours = clock.hours(datetime.strptime(text, "%Y-%m-%d %H:%M"))
    assert PLAIN.text(hours)[-5:] == utc
    assert clock.text(hours) == text


def test_an_unknown_zone_has_no_rules():
    assert zone_rules("Atlantis/Capital") is None
    assert zone_rules("../../etc/passwd") is None
    assert zone_rules("") is None
