"""From the raw job to the values that decisions need; nothing is decided here."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from attrs import evolve, field, frozen

from .. import catalogue
from ..fields import CAUSE, FACE, JOB, JOINT, SEALANT, SIDE, SITE, Reads, Tables, read_group
from ..job.limits import MAX_JOINTS
from ..quantity import INCH, METRIC, show
from ..working import Issue

OWN_CLASS = "own"
# Site fields that no width rests on, or whose absence is answered where they are needed.
_NOT_DECIDING = ("place", "summer_air", "winter_air", "reference", "dew_margin", "green_limit", "building_year")


@frozen
class Sealant:
    """A sealant of the job: its family and what it may stretch, after the user's data sheet."""

    id: str
    name: str
    family: catalogue.Family | None
    class_id: str | None
    class_label: str
    class_source: str
    extension_fraction: float | None
    compression_fraction: float | None
    total_fraction: float | None
    has_errors: bool
    values: Mapping[str, Any]


@frozen
class JointInput:
    """One joint as entered: the values of its fields, its sides, causes and reading at the face."""

    id: str
    path: str
    values: Mapping[str, Any]
    side_a: Mapping[str, Any]
    side_b: Mapping[str, Any]
    causes: tuple[Mapping[str, Any], ...]
    face: Mapping[str, Any]
    has_face: bool
    has_errors: bool
    typed_width: str
    reads: Reads = field(repr=False)


@frozen
class Project:
    """What all joints share: units, region, site values and sealants."""

    system: str
    region: str
    job: Mapping[str, Any]
    site: Mapping[str, Any]
    site_has_errors: bool
    sealants: Mapping[str, Sealant]
    tables: Tables
    reads: Reads = field(repr=False)


def _tables() -> dict[str, Mapping[str, Any]]:
    return {
        "regions": catalogue.regions(),
        "depth_rules": catalogue.depth_rules(),
        "families": catalogue.families(),
        "classes": {**catalogue.classes(), OWN_CLASS: None},
        "uses": catalogue.uses(),
        "rod_types": catalogue.rod_types(),
        "substrates": catalogue.substrates(),
    }


def read_project(job: object) -> Project:
    """Read what all joints share; findings are collected in `reads`."""
    raw = job if isinstance(job, Mapping) else {}
    system = INCH if raw.get("units") == INCH else METRIC
    reads = Reads(system)
    if not isinstance(job, Mapping):
        reads.add(Issue("", "not-an-object", "error", "This is not a job: a set of named parts was expected."))
    tables: dict[str, Mapping[str, Any]] = _tables()
    head = read_group(JOB, {key: raw.get(key) for key in (item.key for item in JOB.fields)}, "", reads, tables)
    if not head["title"]:
        reads.add(Issue("/title", "missing", "warning", "The job has no title yet."))
    site = read_group(SITE, raw.get("site"), "/site", reads, tables)
    _check_site(site, reads)
    deciding = {"/site", *(f"/site/{item.key}" for item in SITE.fields if item.key not in _NOT_DECIDING)}
    site_has_errors = any(issue.severity == "error" and issue.path in deciding for issue in reads.issues)
    sealants = {item.id: item for item in _read_sealants(raw.get("sealants"), reads, tables)}
    tables["sealants"] = sealants
    return Project(system, head["region"] or "other", head, site, site_has_errors, sealants, tables, reads)


def _error_count(reads: Reads) -> int:
    return sum(issue.severity == "error" for issue in reads.issues)


def _check_site(site: dict[str, Any], reads: Reads) -> None:
    unit = "degF" if reads.system == INCH else "degC"
    for key in ("summer_air", "winter_air"):
        if site[key] is None and not _has_issue(reads, f"/site/{key}"):
            reads.add(Issue(f"/site/{key}", "missing", "warning", f"{SITE[key].label} is not given yet; joints need it unless both surface temperatures are entered."))
    summer, winter = site["summer_air"], site["winter_air"]
    if summer is not None and winter is not None and summer <= winter:
        reads.add(Issue(
            "/site/summer_air", "contradiction", "error",
            f"Summer design air ({show(summer, 'temperature', unit)}) must be warmer than winter design air ({show(winter, 'temperature', unit)}).",
            value=summer, limit=winter, unit="degC",
        ))  # fmt: skip
        site["summer_air"] = site["winter_air"] = None
    check_sealing_range(site, "/site", reads)
    if site["temperature_method"] == "sol-air" and site["irradiance"] is None:
        reads.add(Issue("/site/irradiance", "missing", "error", "The sol-air method needs the sun on the face."))


def check_sealing_range(values: dict[str, Any], path: str, reads: Reads) -> None:
    """Refuse a sealing range that is upside down, and drop it from the values."""
    low, high = values["seal_from"], values["seal_to"]
    if low is not None and high is not None and low > high:
        unit = "degF" if reads.system == INCH else "degC"
        reads.add(Issue(
            f"{path}/seal_from", "contradiction", "error",
            f"Sealing not below ({show(low, 'temperature', unit)}) must not be warmer than sealing not above ({show(high, 'temperature', unit)}).",
            value=low, limit=high, unit="degC",
        ))  # fmt: skip
        values["seal_from"] = values["seal_to"] = None


def rows(raw: object, path: str, noun: str, reads: Reads, limit: int = MAX_JOINTS) -> Iterator[tuple[int, Mapping[str, Any]]]:
    """The usable rows of a list, with a finding for each one that is not."""
    if raw is None:
        return
    if not isinstance(raw, list):
        reads.add(Issue(path, "not-a-list", "error", f"The list of {noun}s is damaged; a list was expected."))
        return
    for index, row in enumerate(raw):
        if index >= limit:
            reads.add(Issue(f"{path}/{index}", "too-many-rows", "error", f"Only the first {limit} {noun}s are read."))
            return
        if isinstance(row, Mapping):
            yield index, row
        else:
            reads.add(Issue(f"{path}/{index}", "not-an-object", "error", f"{noun.capitalize()} {index + 1} is damaged; a set of fields was expected."))


def _row_id(row: Mapping[str, Any], path: str, noun: str, taken: Mapping[str, Any] | set[str], reads: Reads) -> str:
    """The id of a row, or one made from its place, with a finding, when it is missing or taken."""
    given = row.get("id")
    if isinstance(given, str) and 0 < len(given) <= 80 and given not in taken:
        return given
    code, what = ("double-id", "the same id as another") if isinstance(given, str) and given in taken else ("missing-id", "no usable id")
    index = path.rpartition("/")[2]
    made = f"row-{index}"
    while made in taken:
        made += "-x"
    reads.add(Issue(f"{path}/id", code, "error", f"This {noun} has {what}; it is called “{made}” here."))
    return made


def _read_sealants(raw: object, reads: Reads, tables: Tables) -> Iterator[Sealant]:
    taken: set[str] = set()
    for index, row in rows(raw, "/sealants", "sealant", reads):
        path = f"/sealants/{index}"
        name = _row_id(row, path, "sealant", taken, reads)
        taken.add(name)
        before = _error_count(reads)
        values = read_group(SEALANT, row, path, reads, tables)
        for key in ("family", "class"):
            if values[key] is None and not _has_issue(reads, f"{path}/{key}"):
                reads.add(Issue(f"{path}/{key}", "missing", "error", f"{SEALANT[key].label} of the sealant is not chosen yet."))
        sealant = _sealant(name, values, path, reads)
        yield evolve(sealant, has_errors=_error_count(reads) > before)


def apply_range(sealant: Sealant) -> tuple[float | None, float | None]:
    """Temperatures between which the sealant may be applied: its data sheet, else what its family usually allows. [degC]"""
    low, high, family = sealant.values["apply_from"], sealant.values["apply_to"], sealant.family
    if family is not None:
        low = family.apply_low_c if low is None else low
        high = family.apply_high_c if high is None else high
    return low, high


def _has_issue(reads: Reads, path: str) -> bool:
    return path in reads.places


def _sealant(name: str, values: Mapping[str, Any], path: str, reads: Reads) -> Sealant:
    chosen = values["class"]
    if chosen == OWN_CLASS:
        extension, compression, total = values["own_extension"], values["own_compression"], values["own_total"]
        label, source = "Own class", values["data_sheet"] or "entered by the user"
        for key, value in (("own_extension", extension), ("own_compression", compression)):
            if value is None and not _has_issue(reads, f"{path}/{key}"):
                reads.add(Issue(f"{path}/{key}", "missing", "error", f"{SEALANT[key].label} is needed for an own class."))
    else:
        row = catalogue.classes().get(chosen) if chosen else None
        extension = row.extension_fraction if row else None
        compression = row.compression_fraction if row else None
        total = values["own_total"] if values["own_total"] is not None else row.total_fraction if row else None
        label, source = (row.label, row.source) if row else ("No class", "")
    family = catalogue.families().get(values["family"]) if values["family"] else None
    return Sealant(name, values["name"] or name, family, chosen, label, source, extension, compression, total, False, values)


def joint_rows(job: object, reads: Reads) -> Iterator[tuple[str, str, Mapping[str, Any]]]:
    """Every usable joint of the job, in order, as (id, JSON Pointer, raw row)."""
    raw = job.get("joints") if isinstance(job, Mapping) else None
    taken: set[str] = set()
    for index, row in rows(raw, "/joints", "joint", reads):
        path = f"/joints/{index}"
        name = _row_id(row, path, "joint", taken, reads)
        taken.add(name)
        yield name, path, row


def read_joint(name: str, path: str, row: Mapping[str, Any], project: Project) -> JointInput:
    """Read one joint; its findings and readings are kept with it."""
    reads, tables = Reads(project.system), project.tables
    values = read_group(JOINT, row, path, reads, tables)
    sides = [read_group(SIDE, row.get(key), f"{path}/{key}", reads, tables, label=label) for key, label in (("side_a", "Side A"), ("side_b", "Side B"))]
    causes = []
    for index, cause in rows(row.get("causes"), f"{path}/causes", "cause", reads, limit=100):
        causes.append(read_group(CAUSE, cause, f"{path}/causes/{index}", reads, tables, label=f"Cause {index + 1}"))
    _require(values, sides, path, reads, tables)
    check_sealing_range(values, path, reads)
    _check_sags(values, path, reads)
    has_errors = any(issue.severity == "error" for issue in reads.issues)
    face = _read_face(row.get("face"), f"{path}/face", reads, tables)
    has_face = any(face[key] is not None for key in ("width", "width_least", "width_most", "surface", "air", "humidity"))
    typed = row.get("width")
    return JointInput(
        name, path, values, sides[0], sides[1], tuple(causes), face, has_face, has_errors,
        typed.strip() if isinstance(typed, str) else "", reads,
    )  # fmt: skip


def _check_sags(values: Mapping[str, Any], path: str, reads: Reads) -> None:
    """A hollow or crown deeper than half the width is not an arc across the joint."""
    for key in ("tool_sag", "rod_sag"):
        sag, width = values[key], values["width"]
        if sag is not None and width is not None and sag > width / 2:
            reads.add(Issue(f"{path}/{key}", "too-large", "error", f"{JOINT[key].label} must be at most half the width.", value=sag, limit=width / 2, unit="mm"))


def _read_face(raw: object, path: str, reads: Reads, tables: Tables) -> dict[str, Any]:
    face = read_group(FACE, raw, path, reads, tables, label="At the face")
    least, most = face["width_least"], face["width_most"]
    if least is not None and most is not None and least > most:
        reads.add(Issue(f"{path}/width_least", "contradiction", "error", "At the face: the narrowest reading is wider than the widest."))
        face["width_least"] = face["width_most"] = None
    return face


def _require(values: Mapping[str, Any], sides: list[dict[str, Any]], path: str, reads: Reads, tables: Tables) -> None:
    """Name what is still missing before the joint can be judged."""
    if values["sealant"] is None and not _has_issue(reads, f"{path}/sealant"):
        reads.add(Issue(f"{path}/sealant", "missing", "error", "No sealant is chosen for this joint yet."))
    for side, key, label in ((sides[0], "side_a", "Side A"), (sides[1], "side_b", "Side B")):
        for need in ("substrate", "length"):
            place = f"{path}/{key}/{need}"
            if side[need] is None and not _has_issue(reads, place):
                reads.add(Issue(place, "missing", "error", f"{label}, {SIDE[need].label[0].lower()}{SIDE[need].label[1:]} is not given yet."))
        finish = side["finish"]
        substrate = tables["substrates"].get(side["substrate"]) if side["substrate"] else None
        if substrate is not None and finish is not None and finish not in {item.id for item in substrate.finishes}:
            reads.add(Issue(f"{path}/{key}/finish", "not-a-choice", "error", f"{label}: this colour is not one of {substrate.label}; choose again.", value=finish))
            side["finish"] = None
        hot, cold = side["summer_surface"], side["winter_surface"]
        if hot is not None and cold is not None and hot < cold:
            unit = "degF" if reads.system == INCH else "degC"
            reads.add(Issue(f"{path}/{key}/summer_surface", "contradiction", "error",
                            f"{label}: its hottest ({show(hot, 'temperature', unit)}) is colder than its coldest ({show(cold, 'temperature', unit)}).", value=hot, limit=cold, unit="degC"))  # fmt: skip
        if side["fixity"] == "share" and side["moving_share"] is None and not _has_issue(reads, f"{path}/{key}/moving_share"):
            reads.add(Issue(f"{path}/{key}/moving_share", "missing", "error", f"{label}: the share that moves here is not given yet."))
