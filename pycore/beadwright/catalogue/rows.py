"""Row classes of the catalogue: what one line of each table holds.

Lengths in mm, temperatures in degC, differences in K, expansion in 1/K, strains and shares as
fractions. `source` and `status` speak for the row's main figure; `sources` names the columns that
come from elsewhere, each with its own source and status.
"""

from __future__ import annotations

from collections.abc import Mapping

from attrs import field, frozen

READ = "read"
MEMORY = "memory"
COMMON_PRACTICE = "common practice"
DERIVED = "derived"
STATUSES = frozenset({READ, MEMORY, COMMON_PRACTICE, DERIVED})

Sources = Mapping[str, Mapping[str, str]]


@frozen(kw_only=True)
class Row:
    """What every row has: an id, a label, and where its figures come from."""

    id: str
    label: str
    source: str
    status: str
    sources: Sources = field(factory=dict)
    note: str = ""

    def source_of(self, column: str) -> str:
        """Where a column's figure comes from."""
        part = self.sources.get(column)
        return part["source"] if part else self.source

    def status_of(self, column: str) -> str:
        """How well a column's figure is known: one of `STATUSES`."""
        part = self.sources.get(column)
        return part["status"] if part else self.status


@frozen(kw_only=True)
class Finish(Row):
    """A colour or finish and the share of sun that it takes up."""

    absorption_fraction: float
    absorption_low_fraction: float
    absorption_high_fraction: float

    @property
    def low(self) -> float:
        """Lower end of the source's range."""
        return self.absorption_low_fraction

    @property
    def high(self) -> float:
        """Upper end of the source's range."""
        return self.absorption_high_fraction


@frozen(kw_only=True)
class Substrate(Row):
    """A building material beside a joint.

    A moisture column is 0 where the material does not move with moisture, and None where it may
    but our sources give no figure. The irreversible one carries its sign: plus grows and closes
    the joint, minus shrinks and opens it; its low end is the more negative.
    """

    group: str
    expansion_per_k: float
    expansion_low_per_k: float
    expansion_high_per_k: float
    is_porous: bool
    heat_group: str
    finishes: tuple[Finish, ...]
    default_finish: str
    moisture_reversible_fraction: float | None = None
    moisture_reversible_low_fraction: float | None = None
    moisture_reversible_high_fraction: float | None = None
    moisture_irreversible_fraction: float | None = None
    irreversible_low_fraction: float | None = None
    irreversible_high_fraction: float | None = None
    tags: frozenset[str] = field(converter=frozenset, factory=frozenset)


@frozen(kw_only=True)
class Family(Row):
    """A sealant family with general ranges; a data sheet always wins over it.

    None means that no general figure is given; `k_*` are None too where cure is not limited by
    depth or does not run as a front.
    """

    cure: str
    byproduct: str
    movement_low_fraction: float
    movement_high_fraction: float
    apply_low_c: float
    apply_high_c: float
    service_low_c: float | None = None
    service_high_c: float | None = None
    k_ref_mm: float | None = None
    k_low_mm: float | None = None
    k_high_mm: float | None = None
    width_least_mm: float | None = None
    width_most_mm: float | None = None
    is_paintable: bool
    tags: frozenset[str] = field(converter=frozenset, factory=frozenset)


@frozen(kw_only=True)
class MovementClass(Row):
    """A movement class. `total_fraction` is the same number read as a total swing, never a conversion."""

    standard: str
    extension_fraction: float
    compression_fraction: float
    total_fraction: float | None


@frozen
class Depth:
    """A depth as a share of the width or as fixed millimetres, held between a floor and a cap."""

    ratio: float | None = None
    mm: float | None = None
    floor_mm: float | None = None
    cap_mm: float | None = None


@frozen
class Band:
    """Least, target and greatest depth for widths over `over_mm` up to `to_mm`, for one kind of face."""

    faces: str
    over_mm: float
    to_mm: float | None
    least: Depth
    target: Depth
    most: Depth


@frozen(kw_only=True)
class DepthRule(Row):
    """A published rule set for the depth at mid-width."""

    region: str | None = None
    width_least_mm: float | None = None
    width_most_mm: float | None = None
    bond_least_mm: float
    bands: tuple[Band, ...]


@frozen(kw_only=True)
class RodType(Row):
    """A kind of backing. Oversize is of the joint, compression is of the rod: 25 % over is 20 % squeezed."""

    oversize_low_fraction: float
    oversize_high_fraction: float
    compression_low_fraction: float
    compression_high_fraction: float
    tags: frozenset[str] = field(converter=frozenset, factory=frozenset)
    notes: str = ""


@frozen
class RodSize:
    """One stock diameter."""

    diameter_mm: float
    label: str


@frozen(kw_only=True)
class RodSeries(Row):
    """Stock diameters of one unit system, ascending."""

    sizes: tuple[RodSize, ...]

    @property
    def diameters_mm(self) -> tuple[float, ...]:
        """The diameters alone. [mm]"""
        return tuple(size.diameter_mm for size in self.sizes)


@frozen(kw_only=True)
class HeatConstant(Row):
    """How far a fully absorbing face rises above the summer air."""

    heat_group: str
    has_reflected_sun: bool
    heat_rise_k: float


@frozen(kw_only=True)
class Region(Row):
    """A region with the standards to look up there; it changes no number."""

    standards: tuple[str, ...]


@frozen(kw_only=True)
class Use(Row):
    """What a joint is for; a referred use gets a referral instead of a number."""

    is_referred: bool = False
    referral_text: str = ""


@frozen(kw_only=True)
class Tolerance(Row):
    """A deviation met on site or a precision of an instrument, plus and minus. Defaults to edit, not limits."""

    sort: str
    value: float
    unit: str
    low: float
    high: float


@frozen(kw_only=True)
class Limit(Row):
    """A limit or window met in public specifications; `value` is the one offered, low and high its spread."""

    quantity: str
    unit: str
    value: float
    low: float
    high: float


@frozen(kw_only=True)
class Package(Row):
    """A common size of package: content, what stays inside, packages a box; `volume` and `residue` as people type them."""

    sort: str
    system: str
    volume: str
    volume_ml: float
    residue: str
    residue_ml: float
    per_box: int


@frozen(kw_only=True)
class Metal(Row):
    """What the vapours of curing sealants do to a metal or mineral face.

    `acetic` and `oxime` are `attacks`, `may attack` or `not named`; the ratio is the most that one
    gram of acetic acid can dissolve, by stoichiometry.
    """

    acetic: str
    oxime: str
    dissolved_per_acid_fraction: float | None = None
    substrate_tags: frozenset[str] = field(converter=frozenset, factory=frozenset)


@frozen(kw_only=True)
class Byproduct(Row):
    """What a sealant family gives off: one molecule of `active` frees `released_per_active` of the agent."""

    agent: str
    agent_label: str
    agent_g_mol: float
    active: str
    active_g_mol: float
    released_per_active: float
    share_low_fraction: float
    share_fraction: float
    share_high_fraction: float
    density_g_ml: float


@frozen(kw_only=True)
class ExposureLimit(Row):
    """A workplace limit; `span` is `8h`, `15min` or `ceiling`, `year` None where the edition is not known."""

    agent: str
    authority: str
    year: int | None
    regions: tuple[str, ...]
    span: str
    ppm: float
    mg_m3: float


@frozen(kw_only=True)
class CureStage(Row):
    """A stage of a curing bead; `basis` tells what `value` counts: `time`, `depth`, `neck-share` or `through`."""

    basis: str
    value: float
    low: float
    high: float
    unit: str
    least_d: float
    is_rough: bool


@frozen(kw_only=True)
class Caution:
    """A caution in our own words, with its reason, its source, and when it speaks."""

    id: str
    severity: str
    title: str
    text: str
    source: str
    status: str
    scope: str
    when: Mapping[str, object] = field(factory=dict)

    @property
    def label(self) -> str:
        """The title, under the name that other rows use."""
        return self.title


@frozen(kw_only=True)
class Table:
    """A data file as read: what it is, where it comes from, its raw rows."""

    id: str
    edition: str
    title: str
    source: str
    locator: str
    units: Mapping[str, str]
    transcribed: str
    checked: str
    rows: tuple[Mapping[str, object], ...]
    column_sources: Sources = field(factory=dict)

    @property
    def name(self) -> str:
        """The id with its edition, as results store it."""
        return f"{self.id}@{self.edition}"
