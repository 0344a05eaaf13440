"""Tables of the trade: materials, sealants, rules and cautions, each row with its source.

Data files lie in `data/`, one a table and edition; a correction is a new edition, never an edit.
Each table is read once, on first use, and handed out read-only.
"""

from __future__ import annotations

import json
from collections.abc import Callable, Mapping
from functools import cache, lru_cache
from importlib import resources
from types import MappingProxyType
from typing import Any, TypeVar

from ._match import compile_when, matches
from .rows import (
    COMMON_PRACTICE,
    DERIVED,
    MEMORY,
    READ,
    STATUSES,
    Band,
    Byproduct,
    Caution,
    CureStage,
    Depth,
    DepthRule,
    ExposureLimit,
    Family,
    Finish,
    HeatConstant,
    Limit,
    Metal,
    MovementClass,
    Package,
    Region,
    RodSeries,
    RodSize,
    RodType,
    Row,
    Substrate,
    Table,
    Tolerance,
    Use,
)

__all__ = [
    "COMMON_PRACTICE",
    "DERIVED",
    "EDITIONS",
    "MEMORY",
    "READ",
    "STATUSES",
    "Band",
    "Byproduct",
    "Caution",
    "CureStage",
    "Depth",
    "DepthRule",
    "ExposureLimit",
    "Family",
    "Finish",
    "HeatConstant",
    "Limit",
    "Metal",
    "MovementClass",
    "Package",
    "Region",
    "RodSeries",
    "RodSize",
    "RodType",
    "Row",
    "Substrate",
    "Table",
    "Tolerance",
    "Use",
    "byproducts",
    "cautions",
    "classes",
    "coverage",
    "depth_rules",
    "families",
    "finishes",
    "green_movement",
    "heat_constants",
    "matching",
    "metals",
    "packages",
    "regions",
    "rod_series",
    "rod_series_table",
    "rod_types",
    "sealing_limits",
    "substrates",
    "table",
    "table_ids",
    "typical_tolerances",
    "uses",
]

EDITIONS: Mapping[str, str] = MappingProxyType({
    "substrates": "2026-1",
    "finishes": "2026-1",
    "families": "2026-1",
    "classes": "2026-1",
    "depth-rules": "2026-1",
    "rod-types": "2026-1",
    "rod-series": "2026-1",
    "heat-constants": "2026-1",
    "cautions": "2026-1",
    "regions": "2026-1",
    "uses": "2026-1",
    "tolerances": "2026-1",
    "sealing-limits": "2026-1",
    "green-movement": "2026-1",
    "metals": "2026-1",
    "packages": "2026-1",
    "coverage": "2026-1",
    "byproducts": "2026-1",
    "exposure-limits": "2026-1",
    "cure-stages": "2026-1",
})  # fmt: skip

R = TypeVar("R", bound=Row | Caution)


def table_ids() -> tuple[str, ...]:
    """Every table in force with its edition, such as `substrates@2026-1`."""
    return tuple(f"{name}@{edition}" for name, edition in EDITIONS.items())


@cache
def table(name: str) -> Table:
    """A data file as it stands, by table name (KeyError for an unknown one)."""
    file_name = f"{name}-{EDITIONS[name]}.json"
    raw = resources.files(__package__).joinpath("data", file_name).read_text(encoding="utf-8")
    head = json.loads(raw)
    head["rows"] = tuple(head["rows"])
    return Table(**head)


def _read(name: str, make: Callable[[dict[str, Any]], R]) -> Mapping[str, R]:
    """Rows of a table by id, in the file's order."""
    found: dict[str, R] = {}
    whole = table(name)
    for raw in whole.rows:
        columns: dict[str, Any] = dict(raw)
        if whole.column_sources:
            columns["sources"] = {**whole.column_sources, **columns.get("sources", {})}
        row = make(columns)
        if row.id in found:
            raise ValueError(f"table {name}: id {row.id!r} stands twice")
        found[row.id] = row
    return MappingProxyType(found)


@cache
def finishes() -> Mapping[str, Finish]:
    """Colours and finishes with their solar absorption."""
    return _read("finishes", lambda raw: Finish(**raw))


@cache
def substrates() -> Mapping[str, Substrate]:
    """Building materials, grouped as the file orders them."""
    known = finishes()

    def make(raw: dict[str, Any]) -> Substrate:
        raw["finishes"] = tuple(known[name] for name in raw["finishes"])
        raw.setdefault("default_finish", raw["finishes"][0].id)
        return Substrate(**raw)

    return _read("substrates", make)


@cache
def families() -> Mapping[str, Family]:
    """Sealant families with general ranges."""
    return _read("families", lambda raw: Family(**raw))


@cache
def classes() -> Mapping[str, MovementClass]:
    """Movement classes of ASTM C920 and ISO 11600."""
    return _read("classes", lambda raw: MovementClass(**raw))


def _depth(raw: float | Mapping[str, float]) -> Depth:
    """A bare number is a fixed depth in mm."""
    return Depth(**raw) if isinstance(raw, Mapping) else Depth(mm=raw)


def _band(raw: Mapping[str, Any]) -> Band:
    least, target, most = (_depth(raw[key]) for key in ("least", "target", "most"))
    return Band(raw["faces"], raw["over_mm"], raw["to_mm"], least, target, most)


@cache
def depth_rules() -> Mapping[str, DepthRule]:
    """Published rule sets for the depth of a bead; they disagree."""
    return _read(
        "depth-rules",
        lambda raw: DepthRule(**{**raw, "bands": tuple(map(_band, raw["bands"]))}),
    )


@cache
def rod_types() -> Mapping[str, RodType]:
    """Kinds of backing."""
    return _read("rod-types", lambda raw: RodType(**raw))


@cache
def rod_series_table() -> Mapping[str, RodSeries]:
    """Series of stock rod sizes, `metric` and `inch`."""
    return _read(
        "rod-series",
        lambda raw: RodSeries(**{**raw, "sizes": tuple(RodSize(*size) for size in raw["sizes"])}),
    )


def rod_series(name: str) -> tuple[RodSize, ...]:
    """Stock sizes of one series, ascending (KeyError for an unknown one)."""
    return rod_series_table()[name].sizes


@cache
def heat_constants() -> Mapping[str, HeatConstant]:
    """Heat constants by mass and sun: `low-open`, `low-reflected`, `high-open`, `high-reflected`."""
    return _read("heat-constants", lambda raw: HeatConstant(**raw))


@cache
def regions() -> Mapping[str, Region]:
    """Regions with the standards named there."""
    return _read("regions", lambda raw: Region(**{**raw, "standards": tuple(raw["standards"])}))


@cache
def uses() -> Mapping[str, Use]:
    """What a joint may be for."""
    return _read("uses", lambda raw: Use(**raw))


@cache
def typical_tolerances() -> Mapping[str, Tolerance]:
    """Deviations met on site and the precision of instruments."""
    return _read("tolerances", lambda raw: Tolerance(**raw))


@cache
def sealing_limits() -> Mapping[str, Limit]:
    """Limits on weather and surfaces when sealing."""
    return _read("sealing-limits", lambda raw: Limit(**raw))


@cache
def green_movement() -> Mapping[str, Limit]:
    """How far a bead may move while it cures, as a share of the width."""
    return _read("green-movement", lambda raw: Limit(**raw))


@cache
def packages() -> Mapping[str, Package]:
    """Common sizes of sealant packages, metric and inch."""
    return _read("packages", lambda raw: Package(**raw))


@cache
def coverage() -> Mapping[str, Limit]:
    """Waste, coverage and pace of work: defaults to edit."""
    return _read("coverage", lambda raw: Limit(**raw))


@cache
def metals() -> Mapping[str, Metal]:
    """What curing vapours do to metals and minerals."""
    return _read("metals", lambda raw: Metal(**raw))


@cache
def byproducts() -> Mapping[str, Byproduct]:
    """What a family gives off while it cures, by family id; families that give off nothing are absent."""
    return _read("byproducts", lambda raw: Byproduct(**raw))


@cache
def exposure_limits() -> Mapping[str, ExposureLimit]:
    """Workplace limits by agent, authority and span of time."""
    return _read("exposure-limits", lambda raw: ExposureLimit(**{**raw, "regions": tuple(raw["regions"])}))


@cache
def cure_stages() -> Mapping[str, CureStage]:
    """Stages of a curing bead, in the order in which they usually come."""
    return _read("cure-stages", lambda raw: CureStage(**raw))


@cache
def cautions() -> Mapping[str, Caution]:
    """Every caution, in the file's order."""
    return _read("cautions", lambda raw: Caution(**raw))


@cache
def _compiled() -> tuple[tuple[Caution, Any], ...]:
    return tuple((item, compile_when(item.id, item.when)) for item in cautions().values())


_SETS = ("family_tags", "substrate_tags", "flags")


@lru_cache(maxsize=1024)
def _matching(signature: tuple[Any, ...]) -> tuple[Caution, ...]:
    context = dict(signature)
    return tuple(item for item, tests in _compiled() if matches(tests, context))


def matching(context: Mapping[str, Any]) -> list[Caution]:
    """Cautions that speak in a context, in the table's order.

    Parameters
    ----------
    context : Mapping
        `region`, `use`, `kind`, `family` (ids), `family_tags`, `substrate_tags`, `flags` (sets),
        `year` of the building; what is absent or None matches no rule that asks for it. Other keys
        are ignored.

    Returns
    -------
    list of Caution
        Both scopes; the caller keeps the one that it wants.
    """
    signature: list[tuple[str, Any]] = [
        (key, context.get(key)) for key in ("region", "use", "kind", "family", "year")
    ]
    signature += [(key, frozenset(context.get(key) or ())) for key in _SETS]
    return list(_matching(tuple(signature)))
