"""Package sizes against the library's unit definitions; allowances against what we know of them."""

from fractions import Fraction

import pytest

from beadwright import catalogue, quantity


@pytest.mark.parametrize("row", catalogue.packages().values(), ids=lambda row: row.id)
def test_a_package_holds_what_its_text_says(row):
    unit = "ml" if row.system == quantity.METRIC else "US fl oz"
    for typed, number in ((row.volume, row.volume_ml), (row.residue, row.residue_ml)):
        reading = quantity.parse(typed, "volume", unit)
        assert not reading.is_bare
        assert number == pytest.approx(reading.value, rel=1e-12)
    assert 0 <= row.residue_ml < 0.05 * row.volume_ml
    assert row.per_box >= 1


def test_both_systems_offer_each_common_sort():
    for system in (quantity.METRIC, quantity.INCH):
        assert {"cartridge", "sausage", "pail"} <= {row.sort for row in catalogue.packages().values() if row.system == system}


def test_volumes_are_the_definitions_of_the_unit():
    """US gal = 231 in3, US fl oz = gal/128, in3 = 16.387064 ml, imp gal = 4.54609 l, imp fl oz = gal/160: the definitions."""
    inch3 = Fraction("16.387064")
    assert quantity.to_core("volume", Fraction(1), "in3") == inch3
    assert quantity.to_core("volume", Fraction(1), "US gal") == 231 * inch3 == Fraction("3785.411784")
    assert quantity.to_core("volume", Fraction(1), "US fl oz") == Fraction("29.5735295625")
    assert quantity.to_core("volume", Fraction(1), "imp gal") == Fraction("4546.09")
    assert quantity.to_core("volume", Fraction(1), "imp fl oz") == Fraction("28.4130625")


def test_allowances_are_marked_and_of_known_units():
    rows = catalogue.coverage()
    assert {row.unit for row in rows.values()} <= {"fraction", "count", "mm", "m2/l", "h", "m/h", "m/min"}
    assert {row.quantity for row in rows.values()} >= {"waste", "rod", "tape", "masking", "primer", "cleaner", "tip", "disposal", "pot-life", "pace"}
    for row in rows.values():
        assert row.status != catalogue.READ or row.quantity == "pace-crew"
