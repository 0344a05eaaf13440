"""Every table is whole: header, columns, ids, sources, order of its ranges, plain text."""

import re
from datetime import date

import attrs
import pytest

from beadwright import catalogue

READERS = {
    "substrates": catalogue.substrates,
    "finishes": catalogue.finishes,
    "families": catalogue.families,
    "classes": catalogue.classes,
    "depth-rules": catalogue.depth_rules,
    "rod-types": catalogue.rod_types,
    "rod-series": catalogue.rod_series_table,
    "heat-constants": catalogue.heat_constants,
    "cautions": catalogue.cautions,
    "regions": catalogue.regions,
    "uses": catalogue.uses,
    "tolerances": catalogue.typical_tolerances,
    "sealing-limits": catalogue.sealing_limits,
    "green-movement": catalogue.green_movement,
    "metals": catalogue.metals,
    "byproducts": catalogue.byproducts,
    "exposure-limits": catalogue.exposure_limits,
    "cure-stages": catalogue.cure_stages,
    "packages": catalogue.packages,
    "coverage": catalogue.coverage,
}
LEAST_ROWS = {"substrates": 35, "depth-rules": 8, "cautions": 60, "families": 10, "classes": 9, "finishes": 20}
# Groups of three columns that must stand in order.
RANGES = {
    "substrates": (
        ("expansion_low_per_k", "expansion_per_k", "expansion_high_per_k"),
        ("moisture_reversible_low_fraction", "moisture_reversible_fraction", "moisture_reversible_high_fraction"),
        ("irreversible_low_fraction", "moisture_irreversible_fraction", "irreversible_high_fraction"),
    ),
    "finishes": (("absorption_low_fraction", "absorption_fraction", "absorption_high_fraction"),),
    "families": (
        ("movement_low_fraction", "movement_high_fraction"),
        ("apply_low_c", "apply_high_c"),
        ("service_low_c", "service_high_c"),
        ("k_low_mm", "k_ref_mm", "k_high_mm"),
        ("width_least_mm", "width_most_mm"),
    ),
    "rod-types": (
        ("oversize_low_fraction", "oversize_high_fraction"),
        ("compression_low_fraction", "compression_high_fraction"),
    ),
    "sealing-limits": (("low", "value", "high"),),
    "green-movement": (("low", "value", "high"),),
    "tolerances": (("low", "value", "high"),),
    "coverage": (("low", "value", "high"),),
    "packages": (("residue_ml", "volume_ml"),),
}
ALL_ROWS = [(name, row_id) for name, reader in READERS.items() for row_id in reader()]


def test_every_table_in_force_has_a_reader():
    assert set(READERS) == set(catalogue.EDITIONS)
    assert catalogue.table_ids() == tuple(f"{name}@{catalogue.EDITIONS[name]}" for name in catalogue.EDITIONS)


@pytest.mark.parametrize("name", READERS)
def test_header_is_complete(name):
    table = catalogue.table(name)
    assert table.name == f"{name}@{catalogue.EDITIONS[name]}"
    assert table.title and table.source and table.locator
    assert date.fromisoformat(table.transcribed) <= date.fromisoformat(table.checked)
    assert len(table.rows) >= LEAST_ROWS.get(name, 2)


@pytest.mark.parametrize("name", READERS)
def test_no_id_stands_twice_and_order_is_kept(name):
    ids = [row["id"] for row in catalogue.table(name).rows]
    assert list(READERS[name]()) == ids
    assert len(set(ids)) == len(ids)
    assert all(re.fullmatch(r"[a-z0-9][a-z0-9.-]*", row_id) for row_id in ids)


def test_a_doubled_id_is_refused(monkeypatch):
    table = catalogue.table("classes")
    doubled = attrs.evolve(table, rows=(*table.rows, table.rows[0]))
    monkeypatch.setattr(catalogue, "table", lambda name: doubled)
    with pytest.raises(ValueError, match="twice"):
        catalogue.classes.__wrapped__()


def test_an_unknown_column_is_refused(monkeypatch):
    table = catalogue.table("classes")
    odd = attrs.evolve(table, rows=({**table.rows[0], "colour": "red"},))
    monkeypatch.setattr(catalogue, "table", lambda name: odd)
    with pytest.raises(TypeError, match="colour"):
        catalogue.classes.__wrapped__()


@pytest.mark.parametrize(("name", "row_id"), ALL_ROWS)
def test_every_row_has_label_source_and_status(name, row_id):
    row = READERS[name]()[row_id]
    parts = [{"source": row.source, "status": row.status}]
    parts += list(getattr(row, "sources", {}).values())
    assert row.label.strip()
    for part in parts:
        assert set(part) == {"source", "status"}
        assert len(part["source"]) >= 5
        assert part["status"] in catalogue.STATUSES
        assert not re.search(r"https?:|www\.|\.(com|org|gov|eu)\b", part["source"]), "a citation, not an address"


@pytest.mark.parametrize(("name", "row_id"), ALL_ROWS)
def test_a_remembered_figure_says_so(name, row_id):
    """Words and status agree, so that a reader of the source alone is not misled."""
    row = READERS[name]()[row_id]
    parts = [(row.source, row.status)]
    parts += [(part["source"], part["status"]) for part in getattr(row, "sources", {}).values()]
    for source, status in parts:
        if source.startswith("from memory"):
            assert status == catalogue.MEMORY
        if source.startswith("common practice") and status != catalogue.COMMON_PRACTICE:
            pytest.fail(f"{row_id}: {source!r} is marked {status}")


def test_columns_with_their_own_source_exist():
    for name in ("substrates", "families", "rod-types", "metals", "packages"):
        for row in READERS[name]().values():
            known = {item.name for item in attrs.fields(type(row))}
            assert set(row.sources) <= known, row.id


@pytest.mark.parametrize("name", RANGES)
def test_ranges_are_ordered(name):
    for row in READERS[name]().values():
        for columns in RANGES[name]:
            values = [getattr(row, column) for column in columns]
            present = [value for value in values if value is not None]
            assert present == sorted(present), f"{row.id}: {columns}"


def test_substrates_are_well_formed():
    for row in catalogue.substrates().values():
        assert 1e-6 < row.expansion_per_k < 120e-6
        assert row.heat_group in {"low", "high"}
        assert row.default_finish in {finish.id for finish in row.finishes}
        assert row.tags
        reversible = row.moisture_reversible_fraction
        assert reversible is None or 0 <= reversible <= 0.002
        irreversible = row.moisture_irreversible_fraction
        assert irreversible is None or abs(irreversible) <= 0.002
        if irreversible is not None and row.irreversible_low_fraction is not None:
            assert row.irreversible_low_fraction * row.irreversible_high_fraction > 0, "one sign through the range"


def test_materials_that_the_app_promises_are_there():
    have = catalogue.substrates()
    for tag in (
        "aluminium", "steel", "stainless", "copper", "zinc", "galvanised", "lead", "glass", "mirror", "coated", "concrete",
        "masonry", "clay", "calcium-silicate", "calcareous", "alkaline", "stone", "plastic", "polycarbonate", "acrylic", "timber",
        "across-grain", "along-grain", "render", "tile", "eifs", "plaster", "grp", "primer-usual", "weak-face",
    ):  # fmt: skip
        assert any(tag in row.tags for row in have.values()), tag
    assert {"aac", "grc", "stucco"} <= have.keys()


def test_absorptions_are_shares_and_take_the_hotter_end():
    for row in catalogue.finishes().values():
        assert 0 < row.absorption_fraction <= 1
        assert row.absorption_fraction == row.absorption_high_fraction


def test_families_are_generic_and_cover_the_kinds_of_cure():
    rows = catalogue.families()
    assert {row.cure for row in rows.values()} == {"moisture", "two-part", "drying"}
    for row in rows.values():
        assert (row.k_ref_mm is None) is (row.cure != "moisture"), row.id
        assert ("moisture-front" in row.tags) is (row.cure == "moisture"), row.id


def test_referred_uses_have_their_referral():
    rows = catalogue.uses()
    referred = {row.id for row in rows.values() if row.is_referred}
    assert referred == {"fire", "structural-glazing", "immersed", "potable-water", "floor-foot", "floor-vehicle"}
    assert all(bool(row.referral_text) is row.is_referred for row in rows.values())


def test_rod_series_ascend():
    for row in catalogue.rod_series_table().values():
        assert list(row.diameters_mm) == sorted(set(row.diameters_mm))
        assert all(size.label for size in row.sizes)


def test_tables_are_read_only():
    with pytest.raises(TypeError):
        catalogue.classes()["c920-25"] = None
    with pytest.raises(attrs.exceptions.FrozenInstanceError):
        catalogue.classes()["c920-25"].extension_fraction = 0.5


def test_an_unknown_table_or_series_is_a_key_error():
    with pytest.raises(KeyError):
        catalogue.table("colours")
    with pytest.raises(KeyError):
        catalogue.rod_series("cubit")
