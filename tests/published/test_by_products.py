# Source: grams of by-product in 300 ml, all groups released; molar masses from molmass 2026.1.8, shares of crosslinker and densities are
# values from memory. Printed to 0.001 g. Isocyanate: worked case of 300 ml at 1.2 g/ml with 0.7 % free groups, printed to 0.0001 g.
import pytest
from printed import LIBRARY, Case, locator

from beadwright import catalogue
from beadwright.physics import room_air

ACETIC, OXIME, METHANOL = 60.052, 87.121, 32.042
ROWS = [
    ("methyl acetoxy 3 %", 1.02, 0.03, 220.252, ACETIC, 7.509),
    ("methyl acetoxy 4 %", 1.02, 0.04, 220.252, ACETIC, 10.012),
    ("methyl acetoxy 5 %", 1.02, 0.05, 220.252, ACETIC, 12.515),
    ("methyl acetoxy 6 %", 1.02, 0.06, 220.252, ACETIC, 15.018),
    ("ethyl acetoxy 5 %", 1.02, 0.05, 234.279, ACETIC, 11.765),
    ("methyl oxime 4 %", 1.02, 0.04, 301.458, OXIME, 10.612),
    ("methyl oxime 5 %", 1.02, 0.05, 301.458, OXIME, 13.265),
    ("methyl oxime 6 %", 1.02, 0.06, 301.458, OXIME, 15.918),
    ("methyl oxime 5 %, filled", 1.40, 0.05, 301.458, OXIME, 18.207),
    ("vinyl oxime 5 %", 1.02, 0.05, 313.469, OXIME, 12.757),
    ("methyl methoxy 2 %", 1.02, 0.02, 136.222, METHANOL, 4.319),
    ("methyl methoxy 3 %", 1.02, 0.03, 136.222, METHANOL, 6.478),
    ("vinyl methoxy 2 %, hybrid", 1.45, 0.02, 148.233, METHANOL, 5.642),
]
CASES = [
    Case(name, {"density_g_ml": density, "share_fraction": share, "crosslinker_g_mol": crosslinker, "vapour_g_mol": vapour}, grams, 0.001, LIBRARY)
    for name, density, share, crosslinker, vapour, grams in ROWS
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_grams_from_a_cartridge(case):
    case.check(room_air.released_g(sealant_ml=300.0, released_per_mol=3.0, **case.inputs))


def test_carbon_dioxide_of_polyurethane():
    Case("0.7 % NCO", {}, 1.3198, 0.0001, LIBRARY).check(room_air.released_g(300.0, 1.2, 0.007, 42.017, 0.5, 44.010))


@pytest.mark.parametrize(("family", "share", "grams"), [("acetoxy-silicone", 0.05, 12.515), ("oxime-silicone", 0.05, 13.265), ("alkoxy-silicone", 0.03, 6.478), ("silyl-terminated", 0.02, 5.642), ("polyurethane-1k", 0.007, 1.3198)])
def test_the_table_holds_these_molecules(family, share, grams):
    row = catalogue.byproducts()[family]
    found = room_air.released_g(300.0, row.density_g_ml, share, row.active_g_mol, row.released_per_active, row.agent_g_mol)
    assert found == pytest.approx(grams, abs=0.0006)
