"""From the raw take-off to settings, packages, other items and rates; nothing is worked out here."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from fractions import Fraction
from functools import lru_cache
from typing import Any

from attrs import field, frozen

from .. import catalogue, quantity
from ..design.inputs import Project, rows
from ..design.joint import Judgement
from ..fields import EXTRA, PACK, RATE, TAKEOFF, Field, Group, Reads, read_group
from ..job.limits import MAX_JOINTS
from ..quantity import METRIC
from ..working import InputError, Issue
from .money import parse_money

MAX_RUNS = MAX_JOINTS
MAX_OTHER_ROWS = 200


@frozen(cache_hash=True)
class JointSection:
    """What a run takes from the joint that it points to."""

    id: str
    name: str
    kind: str
    sealant: str | None
    width_mm: float | None
    is_drawn: bool
    tolerance_mm: float
    neck_mm: float | None
    tool_sag_mm: float | None
    rod_sag_mm: float | None
    rod_type: str
    is_concave: bool
    reason: str


def joint_section(judged: Judgement, project: Project) -> JointSection:
    """The parts of a judged joint that a take-off needs; without a section, the reason why."""
    values, widths = judged.joint.values, judged.widths
    tolerance = 0.0
    if widths is not None:
        tolerance = widths.tolerance_rss_mm if project.site["tolerance_method"] == "root-sum-square" else widths.tolerance_worst_mm
    return JointSection(
        judged.joint.id, values["name"] or judged.joint.id, values["kind"] or "butt", judged.sealant.id if judged.sealant else None,
        judged.bead.width_mm if judged.bead else None, values["width"] is None or values["width_is"] != "built", tolerance, judged.neck_mm,
        values["tool_sag"], values["rod_sag"], values["rod"] or "closed-cell", values["tooling"] != "flush", "" if judged.bead else judged.reason,
    )  # fmt: skip


@frozen(cache_hash=True)
class Settings:
    """What all runs share."""

    system: str
    waste_fraction: float
    waste_by: str
    width_shift_mm: float
    width_tolerance_mm: float
    colours: tuple[str, ...]
    sealants: tuple[str, ...]
    depth_rule: str
    rod_series: str
    rod_waste_fraction: float
    tape_waste_fraction: float
    primes: bool
    primer_coverage: float
    primer_overlap_mm: float
    cleans: bool
    cleaner_coverage: float
    masked_sides: int
    masking_waste_fraction: float
    packs_per_tip: int
    disposal_bulking_fraction: float
    mix_pace_m_h: float | None
    currency: str
    has_errors: bool


@frozen
class PackInput:
    """One package that may be bought. Volumes in ml, exact; prices exact or None."""

    id: str
    name: str
    sort: str
    volume_ml: Fraction
    residue_ml: Fraction
    sealant: str | None
    colour: str
    per_box: int
    sold: str
    price: Fraction | None
    box_price: Fraction | None
    pot_life_h: float | None
    mixing: str
    is_own: bool = True


@frozen
class ExtraInput:
    """What one other item is sold by, and its price."""

    item: str
    diameter_mm: float | None
    size: float | None
    price: Fraction | None


@frozen
class RateInput:
    """One stage of work, its pace and price."""

    stage: str
    on: str
    access: str
    pace_m_h: float
    hour_price: Fraction | None
    basis: str


@frozen
class TakeoffInput:
    """The take-off as entered, without its runs."""

    settings: Settings
    packs: tuple[PackInput, ...]
    has_own_packs: bool
    extras: tuple[ExtraInput, ...]
    rates: tuple[RateInput, ...]
    reads: Reads = field(repr=False)


@lru_cache(maxsize=16384)
def fold(text: str | None) -> str:
    """A name as it is compared: without outer spaces and the difference of capitals."""
    return " ".join((text or "").split()).casefold()


def read_takeoff(raw: Mapping[str, Any], project: Project) -> TakeoffInput:
    """Settings, packages, other items and rates; findings are collected in `reads`."""
    reads = Reads(project.system)
    settings = _settings(raw, project, reads)
    packs = tuple(_packs(raw.get("packs"), project, settings, reads))
    own = bool(raw.get("packs"))
    if not own:
        packs = tuple(common_packs(project.system))
    extras = tuple(_extras(raw.get("extras"), project, reads))
    rates = tuple(_rates(raw.get("rates"), project, reads))
    return TakeoffInput(settings, packs, own, extras, rates, reads)


def shown_only(spec: Group, raw: Mapping[str, Any]) -> dict[str, Any]:
    """A row without the fields that its form hides: what is not seen must not be counted or refused."""

    def says(key: str) -> str:
        value = raw.get(key)
        return value if isinstance(value, str) and value.strip() else str(spec[key].default_for(METRIC) or "")

    def shows(item: Field) -> bool:
        return item.show_when is None or all(says(key) in allowed for key, allowed in item.show_when.items())

    return {item.key: raw.get(item.key) for item in spec.fields if shows(item)}


def _settings(raw: Mapping[str, Any], project: Project, reads: Reads) -> Settings:
    values = read_group(TAKEOFF, shown_only(TAKEOFF, raw), "/takeoff", reads, project.tables)
    has_errors = any(issue.severity == "error" for issue in reads.issues)
    colours = tuple(part for part in (" ".join(piece.split()) for piece in (values["colours"] or "").split(",")) if part)

    def number(key: str) -> Any:
        """A value, or its default where what stands there was refused (which is told at the field)."""
        value = values[key]
        if value is None:
            item, text = TAKEOFF[key], TAKEOFF[key].default_for(project.system)
            assert text is not None
            value = int(text) if item.kind == "count" else quantity.parse(text, item.kind, item.units_for(project.system)[0]).value
        return value

    return Settings(
        project.system, number("waste"), values["waste_by"] or "times", number("width_shift"), number("width_tolerance"), colours, tuple(project.sealants),
        project.site["depth_rule"] or "", project.site["rod_series"] or METRIC, number("rod_waste"), number("tape_waste"),
        values["primer"] == "all", number("primer_coverage"), number("primer_overlap"), values["cleaner"] == "all", number("cleaner_coverage"),
        {"one": 1, "both": 2}.get(values["masking"] or "", 0), number("masking_waste"), number("packs_per_tip"), number("disposal_bulking"),
        values["mix_pace"], (values["currency"] or "").strip(), has_errors,
    )  # fmt: skip


def _each(spec: Group, raw: object, key: str, noun: str, project: Project, reads: Reads) -> Iterator[tuple[str, Mapping[str, Any], dict[str, Any], Callable[[], bool]]]:
    """Rows of one list as (path, raw row, values, 'is it free of errors'), each labelled by its place."""
    for index, row in rows(raw, f"/takeoff/{key}", noun, reads, limit=MAX_OTHER_ROWS):
        path, before = f"/takeoff/{key}/{index}", len(reads.issues)
        values = read_group(spec, shown_only(spec, row), path, reads, project.tables, label=f"{noun.capitalize()} {index + 1}")
        for item in spec.fields:
            if item.required and values[item.key] is None and f"{path}/{item.key}" not in reads.places:
                reads.add(Issue(f"{path}/{item.key}", "missing", "error", f"{noun.capitalize()} {index + 1}: {item.label.lower()} is not given yet; this row is left out."))

        def good(start: int = before) -> bool:
            return not any(issue.severity == "error" for issue in reads.issues[start:])

        yield path, row, values, good


def _exact(spec: Field, raw: object, system: str) -> Fraction:
    """The exact core value of a quantity that the reader has already accepted."""
    text = str(raw) if raw is not None and str(raw).strip() else spec.default_for(system) or "0"
    return quantity.parse(text, spec.kind, spec.units_for(system)[0], system).exact


def _money(row: Mapping[str, Any], key: str, path: str, label: str, values: Mapping[str, Any], reads: Reads) -> Fraction | None:
    if values[key] is None:
        return None
    try:
        return parse_money(row[key])
    except InputError as error:
        reads.add(Issue(f"{path}/{key}", error.code, "error", f"{label}: {error.message}", value=str(row[key])[:40]))
        return None


def _packs(raw: object, project: Project, settings: Settings, reads: Reads) -> Iterator[PackInput]:
    known = {fold(name) for name in settings.colours}
    taken: set[str] = set()
    for index, (path, row, values, good) in enumerate(_each(PACK, raw, "packs", "package", project, reads)):
        price = _money(row, "price", path, "Price of one package", values, reads)
        box_price = _money(row, "box_price", path, "Price of a box", values, reads)
        volume = residue = Fraction(0)
        if values["volume"] is not None and values["residue"] is not None:
            volume, residue = (_exact(PACK[key], row.get(key), project.system) for key in ("volume", "residue"))
            if residue >= volume:
                reads.add(Issue(f"{path}/residue", "contradiction", "error", "What stays inside must be less than the content."))
        colour = fold(values["colour"])
        if colour and known and colour not in known:
            reads.add(_unknown_colour(f"{path}/colour", "This package", values["colour"], settings.colours))
        if not good():
            continue
        given = row.get("id")
        name = given if isinstance(given, str) and given and given not in taken else f"pack-{index}"
        taken.add(name)
        yield PackInput(
            name, values["name"] or quantity.show(values["volume"], "volume", "ml" if values["volume"] < 1000 else "l"), values["sort"] or "other", volume, residue,
            values["sealant"], colour, values["per_box"] or 1, values["sold"] or "single", price, box_price, values["pot_life"], values["mixing"] or "whole",
        )  # fmt: skip


def common_packs(system: str) -> Iterator[PackInput]:
    """Common sizes without a price, offered while the job names no package of its own."""
    for row in catalogue.packages().values():
        if row.system == system and row.sort in ("cartridge", "sausage"):
            volume, residue = (quantity.parse(text, "volume", "ml").exact for text in (row.volume, row.residue))
            yield PackInput(row.id, row.label, row.sort, volume, residue, None, "", row.per_box, "single", None, None, None, "whole", is_own=False)


def _unknown_colour(path: str, what: str, colour: str, colours: tuple[str, ...]) -> Issue:
    from difflib import get_close_matches

    near = get_close_matches(fold(colour), [fold(name) for name in colours], 1, 0.6)
    hint = f" Did you mean “{next(name for name in colours if fold(name) == near[0])}”?" if near else ""
    return Issue(path, "unknown-colour", "error", f"{what}: “{colour[:40]}” is not a colour of this job ({', '.join(colours)[:200]}).{hint}", value=colour[:40])


unknown_colour = _unknown_colour


def _extras(raw: object, project: Project, reads: Reads) -> Iterator[ExtraInput]:
    for path, row, values, good in _each(EXTRA, raw, "extras", "item", project, reads):
        item = values["item"]
        price = _money(row, "price", path, "Price", values, reads)
        size = {"tip": float(values["count"] or 1)}.get(item, values["length"] if item in ("rod", "tape", "masking") else values["volume"])
        if size is None and item and good():
            key = "length" if item in ("rod", "tape", "masking") else "volume"
            reads.add(Issue(f"{path}/{key}", "missing", "error", f"{EXTRA[key].label} is needed to count whole pieces; this row is left out."))
        if good():
            yield ExtraInput(item, values["diameter"], size, price)


def _rates(raw: object, project: Project, reads: Reads) -> Iterator[RateInput]:
    for path, row, values, good in _each(RATE, raw, "rates", "rate", project, reads):
        price = _money(row, "hour_price", path, "Price of an hour", values, reads)
        if not good():
            continue
        if not values["basis"]:
            reads.add(Issue(f"{path}/basis", "no-basis", "warning", "Say where this pace is from; a rate without its basis is a guess."))
        yield RateInput(" ".join(values["stage"].split()), values["on"] or "all", values["access"] or "any", values["pace"], price, values["basis"] or "")
