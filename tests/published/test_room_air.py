# Source: (1) "Pollution Concentration in Rooms", generic table for a unit source and room (read), printed to four decimals; (2) worked cases
# of a bead that cures in a room, derived and made with scipy 1.17.1 (dawsn, solve_ivp), printed as shown; (3) turns between ppm and mg/m3
# with 24.45 l/mol, printed limits of NIOSH, OSHA and ACGIH. Crosslinker shares behind the grams are values from memory.
import pytest
from printed import COMPUTED, LIBRARY, READ, Case, locator
from scipy.integrate import solve_ivp
from scipy.special import dawsn

from beadwright.physics import room_air

GRAMS, THROUGH_H = 12.5147, 138.24
STEADY = [Case(f"{minutes} min", {"time_h": minutes / 60.0}, value, 0.0001, READ) for minutes, value in ((10, 0.1599), (20, 0.3070), (40, 0.5669), (80, 0.9732))]
ROOM = {(0.5, 138.24): (16.33, 25.72, 27.00, 22.71, 15.12), (5.0, 138.24): (8.30, 4.11, 2.66, 1.82, 1.27), (0.5, 384.0): (9.80, 15.43, 16.20, 13.62, 9.07)}
CURING = [
    Case(f"n {n}, {hours} h, through in {through} h", {"time_h": hours, "changes_per_h": n, "through_h": through}, value, 0.01, LIBRARY)
    for (n, through), row in ROOM.items()
    for hours, value in zip((0.25, 1.0, 2.0, 4.0, 8.0), row, strict=True)
]
MEANS = [(0.5, 138.24, 21.308), (5.0, 138.24, 2.477), (0.5, 384.0, 12.785)]
PEAKS = [(0.5, 138.24, 27.148, 1.708), (5.0, 138.24, 8.585, 0.171), (0.5, 384.0, 16.289, 1.708)]
TURNED = [
    Case("acetic 10 ppm", {"share_ppm": 10.0, "molar_g_mol": 60.052}, 24.56, 0.01, COMPUTED),
    Case("acetic 15 ppm", {"share_ppm": 15.0, "molar_g_mol": 60.052}, 37.0, 1.0, READ),
    Case("methanol 200 ppm", {"share_ppm": 200.0, "molar_g_mol": 32.042}, 262.0, 1.0, READ),
    Case("methanol 250 ppm", {"share_ppm": 250.0, "molar_g_mol": 32.042}, 328.0, 1.0, READ),
    Case("oxime 10 ppm", {"share_ppm": 10.0, "molar_g_mol": 87.121}, 35.63, 0.01, COMPUTED),
    Case("isocyanate 0.005 ppm", {"share_ppm": 0.005, "molar_g_mol": 250.253}, 0.051, 0.001, READ),
]


@pytest.mark.parametrize("case", STEADY, ids=locator)
def test_steady_source_matches_the_generic_table(case):
    case.check(room_air.constant_source_mg_m3(case.inputs["time_h"], 1.0, 0.5, 1.0, 0.0))


def test_decay_of_industrial_hygiene():
    """30 m3 with 60 m3/h from 50 to 10: 48.283 min (worked from the published equation)."""
    assert room_air.constant_source_mg_m3(48.283 / 60.0, 30.0, 2.0, 0.0, 50.0) == pytest.approx(10.0, abs=0.001)


def test_steady_state_of_one_gram_an_hour():
    assert room_air.constant_source_mg_m3(500.0, 30.0, 0.5, 1000.0, 0.0) == pytest.approx(66.67, abs=0.005)
    assert room_air.constant_source_mg_m3(1.0, 30.0, 0.5, 1000.0, 0.0) == pytest.approx(26.23, abs=0.005)


@pytest.mark.parametrize("case", CURING, ids=locator)
def test_bead_curing_in_a_room(case):
    case.check(room_air.curing_source_mg_m3(room_m3=30.0, mass_g=GRAMS, **case.inputs))


@pytest.mark.parametrize(("n", "through", "expected"), MEANS)
def test_eight_hour_average(n, through, expected):
    assert room_air.mean_mg_m3(0.0, 8.0, 30.0, n, GRAMS, through) == pytest.approx(expected, abs=0.0006)


@pytest.mark.parametrize(("n", "through", "expected", "at_h"), PEAKS)
def test_peak(n, through, expected, at_h):
    time = room_air.PEAK_ARGUMENT**2 / n
    assert time == pytest.approx(at_h, abs=0.0005)
    found = room_air.curing_source_mg_m3(time, 30.0, n, GRAMS, through)
    assert found == pytest.approx(expected, abs=0.0006)
    assert found == pytest.approx(room_air.PEAK_VALUE * 1000.0 * GRAMS / (30.0 * (n * through) ** 0.5), rel=1e-9)


@pytest.mark.parametrize("argument", [0.0, 0.01, 0.1, 0.199, 0.2, 0.5, 0.924, 1.5, 3.0, 6.0, 11.9, 12.1, 40.0])
def test_dawson_matches_scipy(argument):
    assert room_air.dawson(argument) == pytest.approx(float(dawsn(argument)), rel=1e-8, abs=1e-15)


@pytest.mark.parametrize("n", [0.3, 2.0, 8.0])
def test_the_balance_solved_as_an_equation_gives_the_same(n):
    """scipy's solver on V dC/dt = dM/dt - n V C, with s = sqrt(t) so that the start is smooth."""
    grams, through, room = 8.0, 60.0, 22.0

    def rate(s, c):
        return [1000.0 * grams / (room * through**0.5) - n * 2.0 * s * c[0]]

    found = solve_ivp(rate, (0.0, 7.0**0.5), [0.0], rtol=1e-10, atol=1e-12).y[0][-1]
    assert room_air.curing_source_mg_m3(7.0, room, n, grams, through) == pytest.approx(found, rel=1e-6)


def test_shares_released():
    for hours, share in ((1.0, 0.0851), (8.0, 0.2406), (24.0, 0.4167), (THROUGH_H / 4, 0.5)):
        assert room_air.released_share_fraction(hours, THROUGH_H) == pytest.approx(share, abs=0.00005)


def test_all_of_it_in_a_sealed_room():
    assert room_air.curing_source_mg_m3(1e4, 30.0, 0.0, GRAMS, THROUGH_H) == pytest.approx(417.2, abs=0.05)
    assert room_air.ppm_from_mg(417.2, 60.052) == pytest.approx(169.8, abs=0.1)


@pytest.mark.parametrize("case", TURNED, ids=locator)
def test_ppm_and_mass(case):
    case.check(room_air.mg_from_ppm(**case.inputs))
    assert room_air.ppm_from_mg(room_air.mg_from_ppm(**case.inputs), case.inputs["molar_g_mol"]) == pytest.approx(case.inputs["share_ppm"])
