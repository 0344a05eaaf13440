"""Limits, by-products and stages: what must hold between them, and spot values from their sources."""

import pytest

from beadwright import catalogue

# Source: NIOSH documentation and OSHA tables as read; EU, UK, German and other numbers are values from memory, marked so in the rows.
# Printed mg/m3 are rounded by the authorities, to whole numbers or coarser, so 10 % is allowed (isocyanate 0.2 for 0.205; CO2 9000).
PRINTED = {"acetic-osha-8h": (10, 25), "acetic-niosh-15": (15, 37), "methanol-osha-8h": (200, 260), "methanol-acgih-15": (250, 328), "mdi-osha-ceiling": (0.02, 0.2), "mdi-acgih-8h": (0.005, 0.051)}
MOLAR = {"acetic-acid": 60.052, "methanol": 32.042, "meko": 87.121, "carbon-dioxide": 44.010, "mdi": 250.253}


@pytest.mark.parametrize("row_id", PRINTED)
def test_limits_as_printed(row_id):
    row = catalogue.exposure_limits()[row_id]
    assert (row.ppm, row.mg_m3) == PRINTED[row_id]
    assert row.status == "read"


@pytest.mark.parametrize("row_id", catalogue.exposure_limits())
def test_both_units_of_a_limit_agree(row_id):
    row = catalogue.exposure_limits()[row_id]
    assert row.mg_m3 == pytest.approx(row.ppm * MOLAR[row.agent] / 24.45, rel=0.10)
    assert row.span in {"8h", "15min", "ceiling"}
    assert row.authority
    assert row.year is None or 1970 <= row.year <= 2026
    assert set(row.regions) <= set(catalogue.regions())


def test_every_region_has_a_limit_for_every_agent():
    for agent in {row.agent for row in catalogue.byproducts().values()}:
        for region in catalogue.regions():
            assert any(row.agent == agent and region in row.regions for row in catalogue.exposure_limits().values()), (agent, region)


def test_a_limit_without_a_year_is_not_marked_as_read():
    assert all(row.status != "read" for row in catalogue.exposure_limits().values() if row.year is None)


def test_every_moisture_family_that_gives_off_something_is_there():
    moist = {key for key, row in catalogue.families().items() if row.cure == "moisture"}
    assert set(catalogue.byproducts()) == moist - {"polysulfide-1k"}


def test_agents_agree_with_the_families():
    for key, row in catalogue.byproducts().items():
        word = {"acetic-acid": "acetic acid", "meko": "MEKO", "methanol": "methanol", "carbon-dioxide": "carbon dioxide"}[row.agent]
        assert word in catalogue.families()[key].byproduct
        assert row.agent_g_mol == MOLAR[row.agent]


def test_stages_are_of_known_kinds_and_come_in_order():
    stages = catalogue.cure_stages()
    assert list(stages)[:3] == ["skin", "tack", "rain"]
    assert {row.basis for row in stages.values()} == {"time", "depth", "neck-share", "through"}
    assert {"wash", "movement", "through", "paint", "adhesion", "immersion"} <= set(stages)
    assert all(row.note for row in stages.values())
