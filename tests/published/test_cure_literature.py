# Source: depth of cure z = k sqrt(t). Form of the law: Comyn (1998), abstract read, form from memory and derived again. One measured-like
# figure: a tubular-joint study (Int. J. Adhesion & Adhesives 2021, citing excerpt read) has 7.5 mm after 7 days; it quotes a data sheet.
# Tables of depth, time and climate: worked out with general-purpose libraries (Python math, iapws 1.5.5), printed to 0.01 mm, 0.01 d
# and four decimals. The climate table uses steam-table pressures, ours the Magnus formula: they differ by at most 0.16 % of the factor.
# Known difference: real plots bend up later (De Buyl, Comyn et al., abstract read), so the depths here are on the slow side.
import pytest
from printed import COMPUTED, INCH_MM, LIBRARY, READ, Case, locator

from beadwright.physics import cure

# Depth in mm by first day's depth k; times in days.
TIMES = (1 / 24, 6 / 24, 1.0, 2.0, 3.0, 7.0, 14.0, 21.0, 28.0)
DEPTHS = {
    2.0: (0.41, 1.00, 2.00, 2.83, 3.46, 5.29, 7.48, 9.17, 10.58),
    2.5: (0.51, 1.25, 2.50, 3.54, 4.33, 6.61, 9.35, 11.46, 13.23),
    3.0: (0.61, 1.50, 3.00, 4.24, 5.20, 7.94, 11.22, 13.75, 15.87),
    2.835: (0.58, 1.42, 2.83, 4.01, 4.91, 7.50, 10.61, 12.99, 15.00),
}
DEPTH_CASES = [
    Case(f"k {k} at {24 * days:g} h", {"k_mm": k, "days": days}, depth, 0.01, LIBRARY)
    for k, row in DEPTHS.items()
    for days, depth in zip(TIMES, row, strict=True)
]

# Days to a depth, one face, k 2.0 / 2.5 / 3.0.
DAYS = {
    3.0: (2.25, 1.44, 1.00),
    5.0: (6.25, 4.00, 2.78),
    6.0: (9.00, 5.76, 4.00),
    6.35: (10.08, 6.45, 4.48),
    8.0: (16.0, 10.24, 7.11),
    10.0: (25.0, 16.0, 11.11),
    12.0: (36.0, 23.04, 16.0),
    12.7: (40.32, 25.81, 17.92),
    15.0: (56.25, 36.0, 25.0),
    20.0: (100.0, 64.0, 44.44),
    25.0: (156.25, 100.0, 69.44),
}
DAY_CASES = [
    Case(f"{depth} mm at k {k}", {"depth_mm": depth, "k_mm": k}, days, 0.01, LIBRARY)
    for depth, row in DAYS.items()
    for k, days in zip((2.0, 2.5, 3.0), row, strict=True)
]

# Factor on k for heat of permeation 0, -12 and -20 kJ/mol.
CLIMATES = {
    (5, 50): (0.5572, 0.6523, 0.7246),
    (5, 80): (0.7048, 0.8251, 0.9166),
    (10, 50): (0.6610, 0.7393, 0.7965),
    (15, 60): (0.8533, 0.9131, 0.9552),
    (20, 40): (0.8159, 0.8365, 0.8506),
    (20, 65): (1.0401, 1.0664, 1.0843),
    (23, 50): (1.0, 1.0, 1.0),
    (23, 30): (0.7746, 0.7746, 0.7746),
    (23, 80): (1.2649, 1.2649, 1.2649),
    (30, 50): (1.2291, 1.1619, 1.1191),
    (35, 30): (1.0961, 0.9969, 0.9358),
    (40, 20): (1.0251, 0.8981, 0.8223),
    (40, 50): (1.6208, 1.4200, 1.3001),
}
CLIMATE_CASES = [
    Case(
        f"{temp} C, {percent} %, {permeation / 1000:g} kJ/mol",
        {"temp_c": float(temp), "humidity_fraction": percent / 100.0, "permeation_j_mol": permeation},
        factor,
        0.0001,
        LIBRARY,
        tolerance=0.00005 + 0.0016 * factor,
        reason="Magnus against steam tables: at most 0.16 % of the factor",
    )
    for (temp, percent), row in CLIMATES.items()
    for permeation, factor in zip((0.0, -12000.0, -20000.0), row, strict=True)
]


def test_depth_after_a_week_matches_the_tubular_joint_study():
    Case("7 days", {}, 7.5, 0.1, READ).check(cure.front_depth_mm(2.835, 7.0))


def test_first_day_of_the_tubular_joint_study():
    Case("k", {}, 2.835, 0.001, COMPUTED).check(cure.front_depth_mm(7.5, 1.0 / 7.0))


@pytest.mark.parametrize("case", DEPTH_CASES, ids=locator)
def test_depth_of_the_front(case):
    case.check(cure.front_depth_mm(**case.inputs))


@pytest.mark.parametrize("case", DAY_CASES, ids=locator)
def test_days_to_depth(case):
    case.check(cure.days_to_depth(**case.inputs))


@pytest.mark.parametrize("minutes, depth_mm", [(10, 0.208), (20, 0.295), (30, 0.361)])
def test_skin(minutes, depth_mm):
    Case(f"{minutes} min", {}, depth_mm, 0.001, LIBRARY).check(cure.front_depth_mm(2.5, minutes / 1440.0))


def test_a_one_inch_lap_takes_weeks():
    """The handbook (Petrie p. 401, read) limits bond lines to 1 in; fed from both edges, 1/2 in each."""
    Case("12.7 mm, k 2.5", {}, 25.8, 0.1, LIBRARY).check(cure.days_to_depth(0.5 * INCH_MM, 2.5))


@pytest.mark.parametrize("case", CLIMATE_CASES, ids=locator)
def test_climate_factor(case):
    case.check(cure.rate_factor(**case.inputs))


@pytest.mark.parametrize("percent, factor", [(100, 1.4142), (25, 0.7071)])
def test_humidity_alone_goes_with_its_root(percent, factor):
    Case(f"50 to {percent} %", {}, factor, 0.0001, LIBRARY).check(cure.rate_factor(23.0, percent / 100.0, -12000.0))


def test_warmth_speeds_silicone_less_than_vapour_pressure_alone():
    """Sign of the heat of permeation of silicone, negative: read in the abstract of De Buyl et al.; its size is a value from memory."""
    assert 1.0 < cure.rate_factor(35.0, 0.5, -12000.0) < cure.rate_factor(35.0, 0.5, 0.0)
    assert cure.rate_factor(8.0, 0.5, 0.0) < cure.rate_factor(8.0, 0.5, -12000.0) < 1.0
